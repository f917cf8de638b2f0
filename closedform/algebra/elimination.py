"""Gaussian elimination of sparse rows over a field, with a say in which numbers divide.

Rows are mappings from columns to elements that are not zero.  Over a field of rational
functions it matters by what is divided: a pivot that is a number, or vanishes nowhere, adds
no condition on the parameters.  Among equals the one that fills least is taken (H. M.
Markowitz, The elimination form of the inverse and its application to linear programming,
1957).
"""

from __future__ import annotations

from collections.abc import Callable, Iterable, Mapping, Sequence
from dataclasses import dataclass
from functools import reduce
from operator import mul

from closedform.algebra.field import BaseField, Scalar
from closedform.algebra.fraction_free import EliminationSizeError, fraction_free
from closedform.algebra.parameter_field import ParameterField

__all__ = ["Elimination", "SparseRow", "eliminated", "solved_for"]

MOST_TERMS_OF_FRACTION = 60
"""Terms above and below together: common factors of longer fractions take seconds to find."""

SparseRow = Mapping[int, Scalar]
"""The elements of a row that are not zero, by their column."""


@dataclass(frozen=True)
class Elimination:
    """Rows solved for columns: `solved[c]` is the row whose entry in the column c is 1.

    No other row has an entry in a column that is solved for.  `rest` are the rows that are
    left, `pivots` what was divided by; up to its sign their product is the minor of the rows
    and columns concerned.
    """

    field: BaseField
    solved: Mapping[int, SparseRow]
    rest: tuple[SparseRow, ...]
    pivots: tuple[Scalar, ...]

    @property
    def minor(self) -> Scalar:
        """The product of the pivots: the determinant, up to its sign, where all is solved."""
        return reduce(mul, self.pivots, self.field.domain.one)


def eliminated(
    field: BaseField,
    rows: Iterable[SparseRow],
    classes: Sequence[Iterable[int]],
    never_zero: Callable[[Scalar], bool] = bool,
) -> Elimination:
    """Return the rows solved for as many of the columns as can be.

    `classes` are columns in classes: those of the first are solved for before the next are
    tried.  Within a class a pivot for which `never_zero` holds is preferred, then the column
    that is given first.  Each column is reduced in all rows (Gauss-Jordan).
    """
    work = _Work(field, [dict(row) for row in rows], never_zero)
    for columns in classes:
        order = list(dict.fromkeys(columns))
        while order:
            found = work.pivot(order)
            if found is None:
                break
            work.divide(*found)
            order.remove(found[1])
    return work.result


def solved_for(
    field: ParameterField, rows: Sequence[SparseRow], columns: Sequence[int]
) -> Elimination | None:
    """Return as many rows solved for as many columns, None if these are not independent.

    Divided is by numbers and single terms as long as there are any, and what is left is
    solved without fractions; the minor alone tells where the solution is not defined.

    Raises EliminationSizeError.
    """
    work = _Work(field, [dict(row) for row in rows], bool)
    left = list(columns)
    while left:
        found = work.pivot(left, simple=True)
        if found is None:
            break
        work.divide(*found)
        left.remove(found[1])
    result = work.result
    if not left:
        return result
    dense = fraction_free(field, result.rest, left)
    if dense is None:
        return None
    solved, determinant = dense
    for column, row in result.solved.items():
        within = dict(row)
        for other in left:
            if other in within:
                factor = within[other]
                _subtract(field, within, solved[other], factor)
        solved[column] = within
    return Elimination(field, solved, (), (*result.pivots, determinant))


def _subtract(field: BaseField, target: dict[int, Scalar], row: SparseRow, factor: Scalar) -> None:
    """Take a multiple of a row off another."""
    for column, element in row.items():
        left = target.get(column, field.domain.zero) - factor * element
        if left:
            target[column] = left
        else:
            target.pop(column, None)


class _Work:
    """The rows while they are worked on, and which row was solved for which column."""

    def __init__(
        self,
        field: BaseField,
        rows: list[dict[int, Scalar]],
        never_zero: Callable[[Scalar], bool],
    ) -> None:
        self.field, self.rows, self.never_zero = field, rows, never_zero
        self.open = set(range(len(rows)))
        self.places: dict[int, int] = {}
        self.pivots: list[Scalar] = []
        self.holders: dict[int, set[int]] = {}
        for place, row in enumerate(rows):
            for column in row:
                self.holders.setdefault(column, set()).add(place)

    @property
    def result(self) -> Elimination:
        """The rows as they are."""
        taken = set(self.places.values())
        return Elimination(
            self.field,
            {column: self.rows[place] for column, place in self.places.items()},
            tuple(row for place, row in enumerate(self.rows) if place not in taken),
            tuple(self.pivots),
        )

    def pivot(self, order: Sequence[int], *, simple: bool = False) -> tuple[int, int] | None:
        """Return the row and the column of the next pivot; a number or a term if `simple`."""
        candidates = []
        for rank, column in enumerate(order):
            within = self.holders.get(column, set()) & self.open
            for place in within:
                element = self.rows[place][column]
                doubt = not self._is_number(element)
                if simple and doubt and len(element.numer) + len(element.denom) > 2:
                    continue
                fill = (len(self.rows[place]) - 1) * (len(within) - 1)
                candidates.append((doubt, fill, rank, place, column))
        candidates.sort()
        for doubt, _, _, place, column in candidates:
            if not doubt or self.never_zero(self.rows[place][column]):
                return place, column
        return candidates[0][3:] if candidates else None

    def divide(self, place: int, column: int) -> None:
        """Solve a row for a column, and take the column out of all other rows."""
        pivot = self.rows[place][column]
        row = self.rows[place] = {c: e / pivot for c, e in self.rows[place].items()}
        self.pivots.append(pivot)
        self.places[column] = place
        self.open.discard(place)
        for other in sorted(self.holders[column] - {place}):
            self._subtract(other, row, self.rows[other][column])

    def _subtract(self, place: int, row: Mapping[int, Scalar], factor: Scalar) -> None:
        target = self.rows[place]
        before = set(target)
        _subtract(self.field, target, row, factor)
        for column in target.keys() - before:
            self.holders.setdefault(column, set()).add(place)
        for column in before - target.keys():
            self.holders[column].discard(place)
        if isinstance(self.field, ParameterField):
            for column in row:
                element = target.get(column)
                if element and len(element.numer) + len(element.denom) > MOST_TERMS_OF_FRACTION:
                    raise EliminationSizeError(MOST_TERMS_OF_FRACTION)

    def _is_number(self, element: Scalar) -> bool:
        if isinstance(self.field, ParameterField):
            return not self.field.names_in(element)
        return True
