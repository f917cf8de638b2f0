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
from closedform.algebra.parameter_field import ParameterField

__all__ = ["Elimination", "SparseRow", "eliminated"]

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
    taken = set(work.places.values())
    return Elimination(
        field,
        {column: work.rows[place] for column, place in work.places.items()},
        tuple(row for place, row in enumerate(work.rows) if place not in taken),
        tuple(work.pivots),
    )


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

    def pivot(self, order: Sequence[int]) -> tuple[int, int] | None:
        """Return the row and the column of the next pivot."""
        candidates = []
        for rank, column in enumerate(order):
            within = self.holders.get(column, set()) & self.open
            for place in within:
                fill = (len(self.rows[place]) - 1) * (len(within) - 1)
                doubt = not self._is_number(self.rows[place][column])
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
        for column, element in row.items():
            left = target.get(column, self.field.domain.zero) - factor * element
            if left:
                target[column] = left
                self.holders.setdefault(column, set()).add(place)
            else:
                target.pop(column, None)
                self.holders[column].discard(place)

    def _is_number(self, element: Scalar) -> bool:
        if isinstance(self.field, ParameterField):
            return not self.field.names_in(element)
        return True
