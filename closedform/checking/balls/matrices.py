"""Matrices of complex balls, with unit matrices whose size only the context fixes."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass

from flint import acb, acb_mat, arb

from closedform.checking.balls.functions import NoValueError, SizeMismatchError, apply_function

__all__ = [
    "Grid",
    "Scaled",
    "Value",
    "apply_to_matrix",
    "block_matrix",
    "diagonal",
    "matrix_power",
    "plus",
    "times",
]

Grid = list[list[acb]]
"""The entries of a matrix by rows."""


@dataclass(frozen=True, slots=True)
class Scaled:
    """A number times the unit matrix of a size that is not known yet."""

    factor: acb


Value = acb | Grid | Scaled


def plus(left: Value, right: Value) -> Value:
    """Return a sum.  Raises SizeMismatchError where the sizes differ."""
    if isinstance(left, acb) and isinstance(right, acb):
        return left + right
    if isinstance(left, Scaled) and isinstance(right, Scaled):
        return Scaled(left.factor + right.factor)
    if isinstance(left, list):
        other = _fitted(right, left)
        if _size(other) != _size(left):
            raise SizeMismatchError("a sum of matrices", _size(left), _size(other))
        return [
            [a + b for a, b in zip(*rows, strict=True)] for rows in zip(left, other, strict=True)
        ]
    if isinstance(right, list):
        return plus(right, left)
    raise NoValueError("a sum", "a number is added to a unit matrix")


def times(left: Value, right: Value) -> Value:
    """Return a product in this order.  A matrix of one entry counts as a number if it must.

    Raises SizeMismatchError where the sizes do not fit.
    """
    if isinstance(left, acb) and isinstance(right, acb):
        return left * right
    if isinstance(left, list) and isinstance(right, list):
        if len(left[0]) == len(right):
            return _grid(acb_mat(left) * acb_mat(right))
        if _size(left) == (1, 1):
            return times(left[0][0], right)
        if _size(right) == (1, 1):
            return times(left, right[0][0])
        raise SizeMismatchError("a product of matrices", _size(left), _size(right))
    if isinstance(left, list):
        return times(right, left)
    factor = left.factor if isinstance(left, Scaled) else left
    if isinstance(right, list):
        return [[factor * entry for entry in row] for row in right]
    return Scaled(factor * (right.factor if isinstance(right, Scaled) else right))


def matrix_power(base: Value, exponent: acb) -> Value:
    """Return a matrix to a whole power; a negative one is a power of the inverse."""
    whole = exponent.unique_fmpz() if exponent.is_exact() else None
    if whole is None or abs(whole) > 1000:
        raise NoValueError("a power of a matrix", "its exponent is not a small whole number")
    if whole < 0:
        base = apply_to_matrix("inverse", base)
    result: Value = Scaled(acb(1))
    for _ in range(abs(int(whole))):
        result = times(result, base)
    if isinstance(result, Scaled) and isinstance(base, list):
        return _fitted(result, base)
    return result


def apply_to_matrix(function: str, argument: Value) -> Value:
    """Return a function of a matrix: a number for det, trace and norm, a matrix for others.

    The inverse of a singular matrix is one of balls that are not finite.  `norm` is that of
    Frobenius, for a column its length.  Raises NoValueError for others, or no square matrix.
    """
    if isinstance(argument, Scaled):
        if function in ("exp", "inverse", "transpose", "conj", "re", "im"):
            return Scaled(apply_function(function, [argument.factor]))
        raise NoValueError(f"{function} of a unit matrix", "its size is not known")
    if isinstance(argument, acb):
        return apply_function(function, [argument])
    match function:
        case "transpose":
            return [list(column) for column in zip(*argument, strict=True)]
        case "conj" | "re" | "im":
            return [[apply_function(function, [entry]) for entry in row] for row in argument]
        case "norm" | "abs" if function == "norm" or 1 in _size(argument):
            squares = (abs(entry) ** 2 for row in argument for entry in row)
            return acb(sum(squares, arb(0)).sqrt())
    if len(argument) != len(argument[0]):
        what = f"{function} of a {len(argument)}×{len(argument[0])} matrix"
        raise NoValueError(what, "the matrix is not square")
    matrix = acb_mat(argument)
    match function:
        case "det" | "abs":
            return matrix.det()
        case "trace":
            return matrix.trace()
        case "exp":
            return _grid(matrix.exp())
        case "inverse":
            return _grid(matrix.inv(nonstop=True))
        case "adj":
            return _adjugate(argument)
    raise NoValueError(f"{function} of a matrix", "it is not worked out")


def block_matrix(rows: Sequence[Sequence[Value]]) -> Grid:
    """Return the matrix of numbers and blocks; a number 0 and a unit matrix fill their block.

    Raises SizeMismatchError where blocks side by side have not the same height, or blocks one
    below the other not the same width.
    """
    widest = max(len(row) for row in rows)
    if any(len(row) != widest for row in rows):
        shorter = next(len(row) for row in rows if len(row) != widest)
        raise SizeMismatchError("a matrix with rows of unequal length", (1, widest), (1, shorter))
    heights = [max((len(e) for e in row if isinstance(e, list)), default=1) for row in rows]
    widths = [
        max((len(e[0]) for e in column if isinstance(e, list)), default=1)
        for column in zip(*rows, strict=True)
    ]
    grid: Grid = []
    for height, row in zip(heights, rows, strict=True):
        lines: Grid = [[] for _ in range(height)]
        for width, entry in zip(widths, row, strict=True):
            block = _block(entry, (height, width))
            lines = [line + part for line, part in zip(lines, block, strict=True)]
        grid += lines
    return grid


def diagonal(blocks: Sequence[Value]) -> Grid:
    """Return the matrix with these numbers and square blocks along its diagonal."""
    squares = [_square(block) for block in blocks]
    size = sum(map(len, squares))
    grid: Grid = []
    for square in squares:
        before = len(grid)
        for row in square:
            after = size - before - len(row)
            grid.append([acb(0)] * before + row + [acb(0)] * after)
    return grid


def _square(block: Value) -> Grid:
    if isinstance(block, acb):
        return [[block]]
    if isinstance(block, Scaled):
        raise NoValueError("a unit matrix within diag", "its size is not known")
    if len(block) != len(block[0]):
        raise SizeMismatchError("a block within diag", _size(block), (len(block),) * 2)
    return block


def _block(entry: Value, size: tuple[int, int]) -> Grid:
    height, width = size
    if isinstance(entry, Scaled):
        if height != width:
            raise SizeMismatchError("a unit matrix as a block", size, (width, width))
        return diagonal([entry.factor] * height)
    if isinstance(entry, list):
        if _size(entry) != size:
            raise SizeMismatchError("blocks of a matrix", size, _size(entry))
        return entry
    if size == (1, 1):
        return [[entry]]
    if entry == 0:
        return [[acb(0)] * width for _ in range(height)]
    raise SizeMismatchError("a number among blocks", size, (1, 1))


def _fitted(value: Value, model: Grid) -> Grid:
    """A value as a matrix that can stand beside another one."""
    if isinstance(value, Scaled):
        if len(model) != len(model[0]):
            square = (len(model),) * 2
            raise SizeMismatchError("a unit matrix in a sum", square, _size(model))
        return diagonal([value.factor] * len(model))
    return [[value]] if isinstance(value, acb) else value


def _adjugate(grid: Grid) -> Grid:
    """The transposed matrix of cofactors."""
    n = len(grid)
    if n == 1:
        return [[acb(1)]]
    minors = [[_without(grid, j, i) for j in range(n)] for i in range(n)]
    return [[(-1) ** (i + j) * acb_mat(minors[i][j]).det() for j in range(n)] for i in range(n)]


def _without(grid: Grid, row: int, column: int) -> Grid:
    return [line[:column] + line[column + 1 :] for i, line in enumerate(grid) if i != row]


def _size(grid: Grid) -> tuple[int, int]:
    return len(grid), len(grid[0])


def _grid(matrix: acb_mat) -> Grid:
    return matrix.tolist()
