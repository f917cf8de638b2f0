"""Values of a driven solution from its formulas as they are written."""

from __future__ import annotations

from collections.abc import Mapping, Sequence

from flint import arb

from closedform.algebra.enclosure import ball_of
from closedform.algebra.surds import SurdSum
from closedform.notation.evaluation import enclose
from closedform.notation.expression import Expression
from closedform.response.driven.in_field import InField, Spot
from closedform.response.driven.period_formulas import PeriodicSolution
from closedform.response.parametric.known import Known

__all__ = ["written_balls"]

Rows = Sequence[Expression]


def written_balls(
    exact: InField,
    pieces: Sequence[Rows],
    periodic: Sequence[PeriodicSolution],
    known: Known,
    at: tuple[str, SurdSum],
    rows: Sequence[int],
) -> list[arb]:
    """Return balls for some rows at FLINT's current precision.

    `pieces` are the formulas in each interval, `periodic` what inputs that repeat add, `known`
    the names in both; `at` is the name of the time and the instant.
    """
    time, t = at
    spots = exact.spots_at(t)
    names = {**known.balls(), time: ball_of(t)}
    own = pieces[spots[0].interval]
    totals = [enclose(own[row], names) for row in rows]
    for place, more in enumerate(periodic, start=1):
        formulas, here = _in_period(more, exact, place, spots, t)
        if formulas:
            added = [enclose(formulas[row], {**names, **here}) for row in rows]
            totals = [a + b for a, b in zip(totals, added, strict=True)]
    return totals


def _in_period(
    periodic: PeriodicSolution, exact: InField, place: int, spots: Sequence[Spot], t: SurdSum
) -> tuple[Rows, Mapping[str, arb]]:
    """The formulas that hold at t, none before the first period, and the names in them."""
    own = [spot for spot in spots if spot.part == place]
    if not own:
        return (), {}
    last = own[-1]
    if last.interval >= len(periodic.stretches):
        return periodic.after or (), {}
    field, part = exact.field, exact.parts[place]
    begun = field.enclose(part.intervals[0].start + (part.period or 0) * field.scalar(last.shift))
    names = {periodic.number: arb(last.shift + 1), periodic.local: ball_of(t) - begun}
    return periodic.stretches[last.interval].rows, names
