"""Values of parameters from the cells that conditions leave, however small these are."""

from __future__ import annotations

import random
from collections.abc import Iterator, Mapping, Sequence
from fractions import Fraction

from closedform.algebra.field import Scalar
from closedform.algebra.parameter_field import PI, ParameterField
from closedform.algebra.sign_argument import Comparison, relation_values
from closedform.algebra.univariate import Cell, admissible_cells, simplest_between

__all__ = ["only_name", "points_in_cells"]

TRIES = 60
NEAR_PI = Fraction(245850922, 78256779)
"""A convergent of the continued fraction of pi."""
WIDTHS = (6, 9, 20, 40, 100, 3000)
"""How much of an infinite interval is looked at."""


def only_name(field: ParameterField, comparison: Comparison) -> frozenset[str]:
    """Return the parameter of a comparison in one alone, in a set; the empty set for others.

    One with the number pi in it is none in one parameter alone.
    """
    names = field.symbols_in(comparison.element)
    return names if len(names) == 1 else frozenset()


def points_in_cells(
    field: ParameterField,
    conditions: Sequence[Comparison],
    solved: Mapping[str, Scalar],
    seed: int,
) -> Iterator[dict[str, Fraction]]:
    """Yield values of the parameters that are not solved, the last one chosen by the others.

    `solved` are parameters with their values by the others, each by those that are not solved
    before it.  Conditions in which several of the others are left may not hold.
    """
    free = [n for n in field.free if n not in solved]
    turned = _turned(field, conditions, solved)
    if turned is None:
        return
    cells = {
        name: admissible_cells(field, [c for c in turned if only_name(field, c) == {name}])
        for name in free
    }
    draw = random.Random(seed)  # noqa: S311  (points to look at, no secret)
    for attempt in range(TRIES if all(map(_rational, cells.values())) else 0):
        point: dict[str, Fraction] = {}
        last = free[attempt % len(free)] if free else None
        for name in free:
            if name != last:
                point[name] = _chosen(_rational(cells[name]), draw)
        if last is not None:
            put = {n: field.scalar(v) for n, v in point.items()}
            left = _rational(_cells_left(field, turned, put))
            if not left:
                continue
            point[last] = _chosen(left, draw)
        yield point


def _turned(
    field: ParameterField, conditions: Sequence[Comparison], solved: Mapping[str, Scalar]
) -> list[Comparison] | None:
    """The conditions with the values of solved parameters; None where one is not defined."""
    turned = []
    for condition in conditions:
        element = condition.element
        for name, value in solved.items():
            try:
                element = field.substituted(element, {name: value})
            except ZeroDivisionError:
                return None
        turned.append(Comparison(_near(field, element), condition.relation))
    return turned


def _near(field: ParameterField, element: Scalar) -> Scalar:
    """An element with a rational number in the place of pi: only points are found by it."""
    if not field.holds_pi(element):
        return element
    above, below = (
        field.substituted(field.of_polynomial(q), {PI: field.scalar(NEAR_PI)})
        for q in (element.numer, element.denom)
    )
    return above / below if below else element


def _cells_left(
    field: ParameterField, conditions: Sequence[Comparison], values: Mapping[str, Scalar]
) -> tuple[Cell, ...]:
    """The cells that conditions leave to the one parameter that has no value."""
    turned = _turned(field, conditions, values)
    if turned is None:
        return ()
    asked = []
    for comparison in turned:
        sign = field.number_sign(comparison.element)
        if sign is not None and sign not in relation_values(comparison.relation):
            return ()
        if only_name(field, comparison):
            asked.append(comparison)
    return admissible_cells(field, asked)


def _rational(cells: Sequence[Cell]) -> list[Cell]:
    """The cells that hold a rational point."""
    return [c for c in cells if c.kind == "interval" or c.low == c.high]


def _chosen(cells: Sequence[Cell], draw: random.Random) -> Fraction:
    """A short rational value in one of the cells."""
    cell = draw.choice(cells)
    if cell.kind == "root" and cell.low is not None:
        return cell.low
    width = draw.choice(WIDTHS)
    low, high = cell.low, cell.high
    if low is None:
        low = -Fraction(width) if high is None else high - width
    if high is None:
        high = low + width if cell.low is not None else Fraction(width)
    parts = draw.choice((1, 2, 4, 8, 16))
    place = draw.randrange(parts)
    step = (high - low) / parts
    return simplest_between(low + place * step, low + (place + 1) * step)
