"""Matrices put together from numbers and blocks."""

from __future__ import annotations

from collections.abc import Sequence

from closedform.algebra.elementary import Element, ElementaryField
from closedform.checking.errors import NotJudgedError, SizeError
from closedform.checking.values.matrices import ExactMatrix, diagonal
from closedform.checking.values.scope import Value

__all__ = ["block_diagonal", "block_matrix", "jordan_matrix"]


def block_diagonal(values: Sequence[Value], field: ElementaryField) -> ExactMatrix:
    """Return the matrix with numbers and blocks along its diagonal."""
    blocks = [v if isinstance(v, ExactMatrix) else diagonal(field, [v]) for v in values]
    width = sum(block.shape[1] for block in blocks)
    rows, before = [], 0
    zero = field.zero
    for block in blocks:
        after = width - before - block.shape[1]
        rows += [(zero,) * before + row + (zero,) * after for row in block.rows]
        before += block.shape[1]
    return ExactMatrix(field, tuple(rows))


def block_matrix(rows: Sequence[Sequence[Value]], field: ElementaryField) -> ExactMatrix:
    """Return a matrix whose entries may be blocks; a number 0 beside a block is a zero block."""
    if len({len(row) for row in rows}) != 1:
        raise NotJudgedError("the rows of a matrix have different lengths")
    if not any(isinstance(entry, ExactMatrix) for row in rows for entry in row):
        return ExactMatrix(
            field, tuple(tuple(e for e in row if isinstance(e, Element)) for row in rows)
        )
    heights = [max(_extent(entry, 0) for entry in row) for row in rows]
    widths = [max(_extent(row[j], 1) for row in rows) for j in range(len(rows[0]))]
    whole: list[tuple[Element, ...]] = []
    for row, height in zip(rows, heights, strict=True):
        blocks = [_block(e, height, width, field) for e, width in zip(row, widths, strict=True)]
        whole += [tuple(e for block in blocks for e in block.rows[i]) for i in range(height)]
    return ExactMatrix(field, tuple(whole))


def jordan_matrix(field: ElementaryField, blocks: Sequence[tuple[Element, int]]) -> ExactMatrix:
    """Return the matrix with a Jordan block for each eigenvalue and length, ones above these."""
    size = sum(length for _, length in blocks)
    zero, one = field.zero, field.one
    rows = [[zero] * size for _ in range(size)]
    at = 0
    for value, length in blocks:
        for k in range(at, at + length):
            rows[k][k] = value
            if k + 1 < at + length:
                rows[k][k + 1] = one
        at += length
    return ExactMatrix(field, tuple(map(tuple, rows)))


def _extent(value: Value, axis: int) -> int:
    return value.shape[axis] if isinstance(value, ExactMatrix) else 1


def _block(value: Value, height: int, width: int, field: ElementaryField) -> ExactMatrix:
    if isinstance(value, Element):
        if (height, width) == (1, 1):
            return diagonal(field, [value])
        if not value.is_zero:
            raise NotJudgedError("a number stands where a block of a matrix is wanted")
        return ExactMatrix(field, ((field.zero,) * width,) * height)
    if value.shape != (height, width):
        raise SizeError("blocks", value.shape, (height, width))
    return value
