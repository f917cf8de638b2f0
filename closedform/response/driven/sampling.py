"""Certified values of a driven solution at instants; at a switching, those just after it."""

from __future__ import annotations

from collections.abc import Sequence
from fractions import Fraction

from flint import arb, arb_mat

from closedform.algebra.enclosure import ball_of, certified_decimals, enclosed_to
from closedform.algebra.field import BaseField, Scalar
from closedform.algebra.surds import SurdSum
from closedform.algebra.waves import Constant
from closedform.response.driven.exact_sum import exact_value
from closedform.response.driven.functions import DrivenFunctions
from closedform.response.driven.in_field import InField, Spot, in_field
from closedform.response.driven.instants import suitable_instants
from closedform.response.driven.periodic import PeriodFunctions
from closedform.response.sampling import surd_decimal

__all__ = ["default_instants", "enclosed_at", "sampled_rows", "spot_balls"]

Parts = Sequence[DrivenFunctions | PeriodFunctions]
"""The functions of a solution, then what inputs that repeat add."""


def sampled_rows(
    field: BaseField,
    functions: DrivenFunctions,
    times: Sequence[SurdSum],
    digits: int,
    *,
    periods: Sequence[PeriodFunctions] = (),
) -> list[list[str]]:
    """Return a decimal for each row of a solution without parameters, at each instant.

    `periods` are what inputs that repeat add.  Decimals are correctly rounded to `digits`
    significant digits; a value that is an algebraic number is found exactly.
    Raises UnsettledError where the digits cannot be settled.
    """
    exact = in_field(field, functions, periods, times=times)
    return [_row(field, (functions, *periods), exact, t, digits) for t in times]


def default_instants(
    field: BaseField, functions: DrivenFunctions, periods: Sequence[PeriodFunctions] = ()
) -> tuple[SurdSum, ...]:
    """Return instants that suit a solution without parameters: some in each interval."""
    return suitable_instants(in_field(field, functions, periods))


def enclosed_at(
    field: BaseField,
    functions: DrivenFunctions,
    t: SurdSum | Fraction,
    digits: int,
    *,
    periods: Sequence[PeriodFunctions] = (),
) -> list[arb]:
    """Return balls for the rows of a solution without parameters at an instant.

    Each has a radius below 10^-digits times the larger of 1 and its modulus.
    """
    at = t if isinstance(t, SurdSum) else SurdSum.rational(t)
    spots = in_field(field, functions, periods, times=(at,)).spots_at(at)
    parts: Parts = (functions, *periods)
    balls = enclosed_to(lambda: arb_mat([spot_balls(field, parts, spots, at)]), digits)
    return [balls[0, row] for row in range(balls.ncols())]


def spot_balls(
    field: BaseField,
    parts: Parts,
    spots: Sequence[Spot],
    t: SurdSum,
) -> list[arb]:
    """Return balls for the rows, as spots add them up, at FLINT's current precision."""
    totals: list[arb] = []
    for spot in spots:
        part = parts[spot.part]
        functions, at = _functions(part), ball_of(t)
        if isinstance(part, PeriodFunctions):
            at -= spot.shift * field.enclose(part.repeat.period)
        held = _interval_balls(field, functions, spot.interval, at)
        totals = [a + b for a, b in zip(totals, held, strict=True)] if totals else held
    return totals


def _functions(part: DrivenFunctions | PeriodFunctions) -> DrivenFunctions:
    return part.single if isinstance(part, PeriodFunctions) else part


def _interval_balls(field: BaseField, functions: DrivenFunctions, place: int, t: arb) -> list[arb]:
    columns = functions.columns
    rows = range(columns.shape[0])
    totals = [arb(0) for _ in rows]
    shifted: dict[Scalar, arb_mat] = {}
    for summand in functions.intervals[place].summands:
        if summand.origin not in shifted:
            shifted[summand.origin] = columns.enclosure(t - field.enclose(summand.origin))
        held, weight = shifted[summand.origin], _ball(field, summand.constant)
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


def _row(
    field: BaseField,
    parts: Parts,
    solution: InField,
    t: SurdSum,
    digits: int,
) -> list[str]:
    spots = solution.spots_at(t)
    rows = range(_functions(parts[0]).columns.shape[0])
    exact = [exact_value(solution, row, spots, t) for row in rows]

    def balls() -> list[arb]:
        held = spot_balls(field, parts, spots, t)
        return [held[row] for row in rows if exact[row] is None]

    texts = iter(certified_decimals(balls, digits))
    return [next(texts) if value is None else surd_decimal(value, digits) for value in exact]
