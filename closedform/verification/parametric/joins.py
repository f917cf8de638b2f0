"""Where cases join: the formulas of a neighbour tend to those of a case.

e^(At) is an entire function of the entries of A, so it is continuous wherever they are.  That
the formulas of two cases, which look nothing like each other, agree at their border is
shown in certified numbers: at points of the neighbour ever nearer to one of the case.
"""

from __future__ import annotations

from collections.abc import Iterator
from fractions import Fraction

from flint import arb, ctx

from closedform.algebra.enclosure import ball_of
from closedform.notation import enclose
from closedform.response.parametric.case import Case
from closedform.response.parametric.points import Point, case_points, point_of
from closedform.response.parametric.response import ParametricResponse
from closedform.verification.parametric.cover import applying_cases
from closedform.verification.parametric.defined import undefined_name
from closedform.verification.parametric.values import (
    NamesAt,
    enclosed_matrix,
    read_back,
    trial_times,
)
from closedform.verification.record import Check

__all__ = ["join_check"]

STEPS = (20, 40, 60)
"""The distances are 2 to the power of minus these."""
_BITS = 512
_ITEM = "limit of the neighbouring case"


def join_check(response: ParametricResponse, case: Case) -> Iterator[Check]:
    """Yield the check that the formulas of a neighbour tend to those of a case on a border.

    A case has a border where an equation holds in it: the parameter that the equation gives
    is moved a little, which leads into a neighbouring case.
    """
    moved = _parameter_to_move(response, case)
    points = case_points(response.model.field, case, 1) if moved is not None else []
    if moved is None or not points or points[0].root is not None:
        return
    point = points[0]
    field = response.model.field
    base = {n: field.scalar(v) for n, v in point.values} | dict(point.derived)
    previous: arb | None = None
    neighbour: Case | None = None
    for step in STEPS:
        small = field.scalar(Fraction(1, 2**step))
        values = base | {moved: base[moved] * (1 + small) if base[moved] else small}
        near = point_of(field, values)
        found = applying_cases(response, values)
        if len(found) != 1 or found[0].number == case.number:
            return  # not covered, or no border in this direction
        neighbour = found[0]
        if any(undefined_name(response, c) is not None for c in (case, neighbour)):
            return  # what their own checks say
        distance = _distance(response, case, point, neighbour, near)
        if not distance.is_finite() or (
            previous is not None
            and not bool(distance < previous * arb(2) ** -15)
            and not bool(distance < arb(2) ** -100)
        ):
            how = (
                f"case {neighbour.number + 1} does not tend to it as {moved} tends to {base[moved]}"
            )
            yield Check(_ITEM, "refuted", how)
            return
        previous = distance
    if neighbour is not None:
        yield Check(
            _ITEM,
            "enclosed",
            f"at {point}, with {moved} moved by 2^-{STEPS[0]}, 2^-{STEPS[1]}, 2^-{STEPS[2]}"
            f"{' of itself' if base[moved] else ''}, the formulas of case {neighbour.number + 1} "
            "differ in proportion",
        )


def _parameter_to_move(response: ParametricResponse, case: Case) -> str | None:
    """A parameter that an equation of the case gives."""
    if case.branch.equations:
        return case.branch.equations[-1].parameter
    field = response.model.field
    for condition in case.domain.conditions:
        if condition.relation == "=":
            return next(n for n in reversed(field.free) if n in field.names_in(condition.element))
    return None


def _distance(
    response: ParametricResponse, case: Case, point: Point, neighbour: Case, near: Point
) -> arb:
    """The largest difference between the entries of e^(At) of two cases at two points."""
    model = response.model
    with ctx.workprec(_BITS):
        matrix = enclosed_matrix(model.field, response.matrix, point.balls())
        time = trial_times(matrix)[-1]
        here = _entries(response, case, point, time)
        there = _entries(response, neighbour, near, time)
        largest = arb(0)
        for a, b in zip(here, there, strict=True):
            difference = abs(a - b)
            largest = difference if not bool(difference < largest) else largest
        return largest


def _entries(response: ParametricResponse, case: Case, point: Point, time: Fraction) -> list[arb]:
    model = response.model
    known = {**NamesAt(model, case, point).balls(), model.time: ball_of(time)}
    return [
        enclose(read_back(model, case, formula), known)
        for row in case.transition
        for formula in row
    ]
