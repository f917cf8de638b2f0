"""Certified values of a driven solution at instants; at a switching, those just after it."""

from __future__ import annotations

from collections.abc import Mapping, Sequence
from fractions import Fraction

from flint import arb, arb_mat

from closedform.algebra.enclosure import ball_of, certified_decimals, enclosed_to
from closedform.algebra.field import BaseField, Scalar
from closedform.algebra.surds import SurdSum
from closedform.algebra.waves import Constant
from closedform.response.driven.exact_between import exact_between
from closedform.response.driven.exact_sum import exact_value
from closedform.response.driven.functions import DrivenFunctions
from closedform.response.driven.in_field import InField, Spot
from closedform.response.driven.instants import suitable_instants
from closedform.response.driven.put_in import put_in
from closedform.response.driven.solution import DrivenSolution
from closedform.response.sampling import surd_decimal

__all__ = ["default_instants", "enclosed_at", "point_balls", "sampled_rows", "spot_balls"]


def sampled_rows(
    solution: DrivenSolution, times: Sequence[SurdSum], digits: int
) -> list[list[str]]:
    """Return a decimal for each row of a solution without parameters, at each instant.

    Decimals are correctly rounded to `digits` significant digits; a value that is an
    algebraic number is found exactly.
    Raises UnsettledError where the digits cannot be settled.
    """
    exact = put_in(solution, times=times)
    return [_row(solution, exact, t, digits) for t in times]


def default_instants(solution: DrivenSolution) -> tuple[SurdSum, ...]:
    """Return instants that suit a solution without parameters: some in each interval."""
    return suitable_instants(put_in(solution))


def enclosed_at(solution: DrivenSolution, t: SurdSum | Fraction, digits: int) -> list[arb]:
    """Return balls for the rows of a solution without parameters at an instant.

    Each has a radius below 10^-digits times the larger of 1 and its modulus.
    """
    at = t if isinstance(t, SurdSum) else SurdSum.rational(t)
    spots = put_in(solution, times=(at,)).spots_at(at)
    balls = enclosed_to(lambda: arb_mat([spot_balls(solution, spots, at)]), digits)
    return [balls[0, row] for row in range(balls.ncols())]


def spot_balls(solution: DrivenSolution, spots: Sequence[Spot], t: SurdSum) -> list[arb]:
    """Return balls for the rows, as spots add them up, at FLINT's current precision."""
    field, constants = solution.model.field, point_balls(solution)
    totals: list[arb] = []
    for spot in spots:
        functions, at = solution.functions, ball_of(t)
        if spot.part:
            own = solution.periods[spot.part - 1]
            functions, at = own.single, at - spot.shift * field.enclose(own.repeat.period)
        held = _interval_balls(field, functions, spot.interval, at, constants)
        totals = [a + b for a, b in zip(totals, held, strict=True)] if totals else held
    return totals


def point_balls(solution: DrivenSolution) -> dict[str, arb]:
    """Return balls for the constants that conditions at points determine, by name."""
    if solution.points is None:
        return {}
    numbers = solution.points.found.numbers
    balls = numbers.balls(numbers.base.enclose)
    return {c.name: numbers.field.enclose_at(c.element, balls) for c in solution.points.constants}


def _interval_balls(
    field: BaseField,
    functions: DrivenFunctions,
    place: int,
    t: arb,
    constants: Mapping[str, arb],
) -> list[arb]:
    columns = functions.columns
    rows = range(columns.shape[0])
    totals = [arb(0) for _ in rows]
    shifted: dict[Scalar, arb_mat] = {}
    for summand in functions.intervals[place].summands:
        if summand.origin not in shifted:
            shifted[summand.origin] = columns.enclosure(t - field.enclose(summand.origin))
        held, weight = shifted[summand.origin], _ball(field, summand.constant)
        weight *= constants.get(summand.constant.named, arb(1))
        for row in rows:
            totals[row] += weight * held[row, summand.place]
    return totals


def _ball(field: BaseField, constant: Constant) -> arb:
    size = field.enclose(constant.growth).exp()
    angle = field.enclose(constant.angle)
    match constant.kernel:
        case "cos":
            return size * angle.cos()
        case "sin":
            return size * angle.sin()
        case "one":
            return size


def _row(solution: DrivenSolution, exact: InField, t: SurdSum, digits: int) -> list[str]:
    spots = exact.spots_at(t)
    rows = range(len(solution.model.rows))
    found = [exact_value(exact, row, spots, t) for row in rows]
    if solution.points is not None:
        found = [
            exact_between(solution, row, spots[0], t) if value is None else value
            for row, value in enumerate(found)
        ]

    def balls() -> list[arb]:
        held = spot_balls(solution, spots, t)
        return [held[row] for row in rows if found[row] is None]

    texts = iter(certified_decimals(balls, digits))
    return [next(texts) if value is None else surd_decimal(value, digits) for value in found]
