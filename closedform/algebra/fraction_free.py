"""Linear equations with parameters, solved without fractions on the way.

Rows are made polynomial, and every step divides by the pivot before, which it does exactly:
entries stay minors of the matrix, and no common factor is ever looked for (E. H. Bareiss,
Sylvester's identity and multistep integer-preserving Gaussian elimination, 1968).
"""

from __future__ import annotations

from collections.abc import Mapping, Sequence
from functools import reduce
from operator import mul

from closedform.algebra.field import Scalar
from closedform.algebra.parameter_field import ParameterField, ParameterPolynomial
from closedform.errors import InputError

__all__ = ["MOST_TERMS", "EliminationSizeError", "fraction_free"]

MOST_TERMS = 400
"""Terms of a minor.  A symmetric 5 x 5 matrix of 15 parameters has a determinant of 73."""

PolynomialRow = dict[int, ParameterPolynomial]


class EliminationSizeError(InputError):
    """Equations whose solution has more terms than can be worked with."""

    def __init__(self, limit: int) -> None:
        super().__init__(limit)
        self.limit = limit

    def __str__(self) -> str:
        return (
            "solving the equations for the highest derivatives leads to formulas of more than "
            f"{self.limit} terms in the parameters; give numbers to some of these, or solve the "
            "equations by hand as far as they fall apart"
        )


def fraction_free(
    field: ParameterField, rows: Sequence[Mapping[int, Scalar]], columns: Sequence[int]
) -> tuple[dict[int, dict[int, Scalar]], Scalar] | None:
    """Return as many rows solved for as many columns, and their determinant, up to its sign.

    A row solved for a column has 1 there and none of the others.  None says that the columns
    are not independent.

    Raises EliminationSizeError.
    """
    ring = field.domain.field.ring
    scales = [reduce(lambda a, e: a.lcm(e.denom), row.values(), ring.one) for row in rows]
    work: list[PolynomialRow] = [
        {c: e.numer * scale.exquo(e.denom) for c, e in row.items()}
        for row, scale in zip(rows, scales, strict=True)
    ]
    before, places = ring.one, dict[int, int]()
    for _ in columns:
        found = _pivot(work, [c for c in columns if c not in places], places)
        if found is None:
            return None
        place, column = found
        pivot, own = work[place][column], work[place]
        for other, row in enumerate(work):
            if other != place:
                work[other] = _reduced(row, own, column, before)
        places[column], before = place, pivot
    determinant = field.of_polynomial(before) / reduce(
        mul, map(field.of_polynomial, scales), field.domain.one
    )
    below = field.of_polynomial(before)
    solved = {
        column: {c: field.of_polynomial(e) / below for c, e in work[place].items()}
        for column, place in places.items()
    }
    return solved, determinant


def _pivot(
    work: Sequence[PolynomialRow], columns: Sequence[int], places: Mapping[int, int]
) -> tuple[int, int] | None:
    """The row and the column of the shortest entry in rows and columns that are left."""
    taken = set(places.values())
    candidates = [
        (len(row[column]), place, column)
        for place, row in enumerate(work)
        if place not in taken
        for column in columns
        if column in row
    ]
    return min(candidates)[1:] if candidates else None


def _reduced(
    row: PolynomialRow, own: PolynomialRow, column: int, before: ParameterPolynomial
) -> PolynomialRow:
    """(pivot · row - entry · pivot's row) / pivot before."""
    pivot, entry = own[column], row.get(column)
    found = {}
    for c in sorted({*row, *(own if entry is not None else ())} - {column}):
        total = pivot * row[c] if c in row else None
        if entry is not None and c in own:
            part = entry * own[c]
            total = -part if total is None else total - part
        if total:
            found[c] = total.exquo(before)
            if len(found[c]) > MOST_TERMS:
                raise EliminationSizeError(MOST_TERMS)
    return found
