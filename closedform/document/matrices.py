"""Matrices of formulas as LaTeX, with the factor that all entries share set in front."""

from __future__ import annotations

from fractions import Fraction
from math import lcm

from closedform.derivation.proof.rewriting import require_equal
from closedform.derivation.step import Matrix
from closedform.notation.expression import (
    ONE,
    ZERO,
    Call,
    Expression,
    Negation,
    Number,
    Product,
    Quotient,
    Sum,
    number,
)
from closedform.notation.latex.box import Box, Style, bracketed
from closedform.notation.latex.formula import factors_of, formula, signed

__all__ = ["ZERO", "front_box", "matrix_box", "matrix_height", "with_front"]

LARGEST_COMMON_DENOMINATOR = 9999
COLUMN_GAP = 0.95
TIGHT_GAP = 0.5
BRACKETS = 1.4


def front_box(front: Expression | None) -> Box:
    """Return what is printed before the brackets."""
    if front is None:
        return Box("", 0.0)
    box = formula(front)
    return bracketed(box) if isinstance(front, Sum) else box


def matrix_box(matrix: Matrix, *, tight: bool = False) -> Box:
    """Return the matrix in square brackets; `tight` puts its columns nearer together."""
    cells = [[_cell(entry) for entry in row] for row in matrix.rows]
    tall = any(cell.height for row in cells for cell in row)
    taller = any(cell.height > 1 or r"\left" in cell.latex for row in cells for cell in row)
    inside = (r" \\[9pt] " if taller else r" \\[3pt] " if tall else r" \\ ").join(
        " & ".join(cell.latex for cell in row) for row in cells
    )
    widths = [max(cell.width for cell in column) for column in zip(*cells, strict=True)]
    gaps = (TIGHT_GAP if tight else COLUMN_GAP) * (len(widths) - 1)
    latex = rf"\begin{{bmatrix}} {inside} \end{{bmatrix}}"
    if tight:
        latex = rf"{{\setlength{{\arraycolsep}}{{2.5pt}}{latex}}}"
    front = front_box(matrix.front)
    return Box(front.latex + latex, front.width + sum(widths) + gaps + BRACKETS, 3)


def _cell(entry: Expression) -> Box:
    """A fraction of numbers is set small; one of functions would be too small to read."""
    if not _has_function_fraction(entry):
        return formula(entry, Style.TEXT)
    box = formula(entry, Style.DISPLAY)
    return Box(rf"\displaystyle {box.latex}", box.width, box.height)


def _has_function_fraction(expression: Expression) -> bool:
    match expression:
        case Quotient(above, _):
            return not isinstance(above, Number)
        case Negation(operand):
            return _has_function_fraction(operand)
        case Sum(parts) | Product(parts):
            return any(map(_has_function_fraction, parts))
    return False


def matrix_height(matrix: Matrix) -> float:
    """Return how much of a page's height the matrix takes, in em."""
    heights = (max(_cell(entry).height for entry in row) for row in matrix.rows)
    return sum(3.3 if height > 1 else 2.5 if height else 1.6 for height in heights)


def with_front(matrix: Matrix) -> Matrix:
    r"""Return the matrix with what all its entries share as a factor printed in front.

    A common exponential, root or fraction is taken out of every entry that is not zero;
    of a matrix of rational numbers, the common denominator is.  A matrix that has a
    front already, or whose entries share nothing, comes back as it is.

    Raises:  StatementRefutedError if front times what is left is not the entry it was.
    """
    if matrix.front is not None:
        return matrix
    found = _by_denominator(matrix) or _by_factor(matrix)
    if found is not matrix:
        require_equal(found, matrix)
    return found


def _by_denominator(matrix: Matrix) -> Matrix | None:
    values: list[list[Fraction]] = []
    for row in matrix.rows:
        values.append([])
        for entry in row:
            negative, size = signed(entry)
            if not isinstance(size, Number):
                return None
            values[-1].append(-size.value if negative else size.value)
    denominators = [value.denominator for row in values for value in row if value.denominator > 1]
    common = lcm(*denominators)
    if len(denominators) < 2 or common > LARGEST_COMMON_DENOMINATOR:
        return None
    if common > max(denominators):
        return None
    rows = tuple(tuple(number(value * common) for value in row) for row in values)
    return Matrix(rows, Number(Fraction(1, common)))


def _by_factor(matrix: Matrix) -> Matrix:
    entries = [signed(entry)[1] for row in matrix.rows for entry in row if entry != ZERO]
    if len(entries) < 2:
        return matrix
    shared = [
        factor
        for factor in dict.fromkeys(factors_of(entries[0]))
        if _worth_taking(factor) and all(factor in factors_of(entry) for entry in entries)
    ]
    if not shared:
        return matrix
    rows = tuple(tuple(_without(entry, shared) for entry in row) for row in matrix.rows)
    return Matrix(rows, shared[0] if len(shared) == 1 else Product(tuple(shared)))


def _worth_taking(factor: Expression) -> bool:
    match factor:
        case Number(value):
            return value.denominator > 1
        case Call() | Quotient():
            return True
    return False


def _without(entry: Expression, shared: list[Expression]) -> Expression:
    if entry == ZERO:
        return entry
    negative, size = signed(entry)
    left = list(factors_of(size))
    for factor in shared:
        left.remove(factor)
    rest = ONE if not left else left[0] if len(left) == 1 else Product(tuple(left))
    return Negation(rest) if negative else rest
