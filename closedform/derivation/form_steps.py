"""The steps that give P, J and P^(-1): the Jordan form, and the real form of pairs."""

from __future__ import annotations

from collections.abc import Callable, Sequence
from fractions import Fraction
from math import lcm

from closedform.algebra.surds import SurdSum
from closedform.derivation.chain_steps import Block, entry_formula, vector_formulas
from closedform.derivation.formulas import ONE, ZERO, eigenvalue_formula, frequency_formula
from closedform.derivation.step import Depth, Matrix, Statement, Step, Symbol
from closedform.notation.expression import Expression, Negation, Number, number
from closedform.notation.terms import negated, surd_formula
from closedform.response.modes import Mode

__all__ = ["Cell", "Rows", "block_diagonal", "expanded", "jordan_step", "real_form_step"]

_UNIT = SurdSum.rational(1)
Rows = tuple[tuple[Expression, ...], ...]
Cell = tuple[tuple[Expression, Expression], tuple[Expression, Expression]]


def jordan_step(blocks: Sequence[Block], *, is_complex: bool) -> Step:
    """P and J over the complex numbers, and P^(-1) where they are real."""
    columns: list[list[Expression]] = []
    diagonal: list[Rows] = []
    for block in blocks:
        for sign in block.signs:
            columns += [vector_formulas(block, place, sign) for place in range(block.size)]
            diagonal.append(
                _jordan_rows(eigenvalue_formula(block.eigenvalue.mode, sign), block.size)
            )
    statements = [
        Statement("P", (Symbol("matrix", letter="P"), _from_columns(columns))),
        Statement("J", (Symbol("matrix", letter="J"), Matrix(block_diagonal(diagonal)))),
    ]
    if not is_complex:
        rows = [row for block in blocks for row in _left_rows(block)]
        statements.append(Statement("P inverse", (Symbol("inverse", letter="P"), _gathered(rows))))
    facts = {
        "complex": is_complex,
        "diagonal": all(block.size == 1 for block in blocks),
        "n": len(columns),
    }
    depth: Depth = "full" if is_complex else "working"
    return Step("jordan_form", tuple(statements), facts, ("eigenvectors",), depth)


def _jordan_rows(value: Expression, size: int) -> Rows:
    return tuple(
        tuple(value if k == i else ONE if k == i + 1 else ZERO for k in range(size))
        for i in range(size)
    )


def _left_rows(block: Block) -> list[list[Expression]]:
    return [
        [entry_formula(block, entry, sign) for entry in row]
        for sign in block.signs
        for row in block.left
    ]


def real_form_step(blocks: Sequence[Block]) -> Step:
    """P, J and P^(-1) with Re v and Im v in place of conjugate eigenvectors."""
    columns: list[list[Expression]] = []
    rows: list[list[Expression]] = []
    form: list[Rows] = []
    for block in blocks:
        if block.is_circular:
            columns += _real_columns(block)
            rows += _real_rows(block)
            form.append(_real_form_rows(block))
            continue
        for sign in block.signs:
            columns += [vector_formulas(block, place, sign) for place in range(block.size)]
            form.append(_jordan_rows(eigenvalue_formula(block.eigenvalue.mode, sign), block.size))
        rows += _left_rows(block)
    p = Symbol("matrix", letter="P", indices=("R",))
    inverse = Symbol("inverse", letter="P", indices=("R",))
    statements = (
        Statement("P", (p, _from_columns(columns))),
        Statement(
            "real form",
            (Symbol("matrix", letter="J", indices=("R",)), Matrix(block_diagonal(form))),
        ),
        Statement("P inverse", (inverse, _gathered(rows))),
    )
    chained = any(b.size > 1 and b.is_circular for b in blocks)
    return Step("real_form", statements, {"chained": chained}, rests_on=("eigenvectors",))


def _real_columns(block: Block) -> list[list[Expression]]:
    """Re v and Im v of every vector of the chain."""
    mode = block.eigenvalue.mode
    columns = []
    for vector in block.vectors:
        columns.append([surd_formula(x) for x, _ in vector])
        columns.append([_turned(y, mode) for _, y in vector])
    return columns


def _turned(value: SurdSum, mode: Mode) -> Expression:
    return ZERO if value.is_zero else frequency_formula(value, mode)


def _real_rows(block: Block) -> list[list[Expression]]:
    """2 Re w and -2 Im w of every left vector: x = sum of Re v (2 Re w x) + Im v (-2 Im w x).

    With w = x + y sqrt(D) over L, the imaginary part of a left vector is y times omega.
    """
    mode = block.eigenvalue.mode
    rows = []
    for row in block.left:
        rows.append([surd_formula(x + x) for x, _ in row])
        rows.append([_turned(-(y + y), mode) for _, y in row])
    return rows


def _real_form_rows(block: Block) -> Rows:
    mode = block.eigenvalue.mode
    if mode.frequency is None or isinstance(mode.rate, str):
        raise TypeError("a pair of degree two has a rate and a frequency")
    rate = surd_formula(mode.rate)
    turn = frequency_formula(_UNIT, mode)
    cell = ((rate, turn), (negated(turn), rate))
    cells = {0: cell, 1: ((ONE, ZERO), (ZERO, ONE))}
    return expanded(block.size, cells.get)


def expanded(size: int, cell_at: Callable[[int], Cell | None]) -> Rows:
    """Return a block upper triangular matrix of 2 x 2 cells that depend on the distance only."""
    rows: list[tuple[Expression, ...]] = []
    for i in range(size):
        for half in range(2):
            row: list[Expression] = []
            for k in range(size):
                cell = cell_at(k - i) if k >= i else None
                row += [ZERO, ZERO] if cell is None else list(cell[half])
            rows.append(tuple(row))
    return tuple(rows)


def block_diagonal(blocks: Sequence[Rows]) -> Rows:
    """Return the square matrix with these blocks along its diagonal."""
    n = sum(len(block) for block in blocks)
    rows: list[tuple[Expression, ...]] = []
    offset = 0
    for block in blocks:
        after = n - offset - len(block)
        rows += [(*[ZERO] * offset, *row, *[ZERO] * after) for row in block]
        offset += len(block)
    return tuple(rows)


def _from_columns(columns: Sequence[Sequence[Expression]]) -> Matrix:
    return Matrix(tuple(zip(*columns, strict=True)))


def _gathered(rows: Sequence[Sequence[Expression]]) -> Matrix:
    """A matrix of rational numbers gets its common denominator in front."""
    values = [[_rational(entry) for entry in row] for row in rows]
    known = [value for row in values for value in row if value is not None]
    common = lcm(*(value.denominator for value in known))
    if common == 1 or len(known) < sum(map(len, rows)):
        return Matrix(tuple(map(tuple, rows)))
    scaled = tuple(
        tuple(number(value * common) for value in row if value is not None) for row in values
    )
    return Matrix(scaled, front=number(Fraction(1, common)))


def _rational(entry: Expression) -> Fraction | None:
    match entry:
        case Number(value):
            return value
        case Negation(Number(value)):
            return -value
    return None
