"""Linear equations over a field with adjoined numbers."""

from __future__ import annotations

from collections.abc import Callable, Sequence
from dataclasses import dataclass

from closedform.algebra.adjoined import Adjoined
from closedform.algebra.field import Scalar

__all__ = ["Eliminated", "determinant", "eliminated", "solved_by_cramer"]


def determinant(numbers: Adjoined, rows: Sequence[Sequence[Scalar]]) -> Scalar:
    """Return the determinant by minors of the first rows, each worked out once, undivided."""
    one, zero = numbers.field.domain.one, numbers.field.domain.zero
    minors: dict[tuple[int, ...], Scalar] = {(): one}
    for row in rows:
        longer: dict[tuple[int, ...], Scalar] = {}
        for columns, minor in minors.items():
            if not minor:
                continue
            for k, entry in enumerate(row):
                if k in columns or not entry:
                    continue
                sign = (-1) ** sum(c > k for c in columns)
                key = tuple(sorted((*columns, k)))
                longer[key] = longer.get(key, zero) + sign * minor * entry
        minors = {key: numbers.normal(value) for key, value in longer.items()}
    return minors.get(tuple(range(len(rows))), zero)


def solved_by_cramer(
    numbers: Adjoined,
    matrix: Sequence[Sequence[Scalar]],
    right: Sequence[Scalar],
    below: Scalar,
) -> list[Scalar]:
    """Return the unknowns: right sides in place of a column, over the determinant `below`."""
    found = []
    for k in range(len(right)):
        rows = [(*row[:k], value, *row[k + 1 :]) for row, value in zip(matrix, right, strict=True)]
        found.append(numbers.normal(determinant(numbers, rows) / below))
    return found


@dataclass(frozen=True)
class Eliminated:
    """Equations after elimination: what combination of them each row is, and what is left free.

    `contradiction` is (weights of the equations, right side) of one that has nothing on the
    left; None where there is none.  `motion` solves them with zero on the right, unless the
    solution is the only one.
    """

    free: int
    contradiction: tuple[tuple[Scalar, ...], Scalar] | None
    motion: tuple[Scalar, ...] | None


def eliminated(
    numbers: Adjoined,
    matrix: Sequence[Sequence[Scalar]],
    right: Sequence[Scalar],
    vanishes: Callable[[Scalar], bool],
) -> Eliminated:
    """Return what n equations for n unknowns leave open, by Gauss's elimination."""
    n = len(right)
    one, zero = numbers.field.domain.one, numbers.field.domain.zero
    rows = [
        [*row, *(one if i == k else zero for k in range(n)), right[i]]
        for i, row in enumerate(matrix)
    ]
    pivots: list[int] = []
    for column in range(n):
        rank = len(pivots)
        place = next((i for i in range(rank, n) if not vanishes(rows[i][column])), None)
        if place is None:
            continue
        rows[rank], rows[place] = rows[place], rows[rank]
        pivot = rows[rank][column]
        rows[rank] = [numbers.normal(e / pivot) for e in rows[rank]]
        for i in range(n):
            factor = rows[i][column]
            if i != rank and factor:
                rows[i] = [
                    numbers.normal(a - factor * b) for a, b in zip(rows[i], rows[rank], strict=True)
                ]
        pivots.append(column)
    free = n - len(pivots)
    for row in rows[len(pivots) :]:
        if not vanishes(row[-1]):
            return Eliminated(free, (tuple(row[n : 2 * n]), row[-1]), None)
    if not free:
        return Eliminated(0, None, None)
    open_one = next(k for k in range(n) if k not in pivots)
    motion = [zero] * n
    motion[open_one] = one
    for row, pivot_column in zip(rows, pivots, strict=False):
        motion[pivot_column] = -row[open_one]
    return Eliminated(free, None, tuple(motion))
