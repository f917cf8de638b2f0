"""The formulas of a case as they are written, against ball arithmetic at points of the case."""

from __future__ import annotations

from collections.abc import Iterator, Sequence
from fractions import Fraction

from flint import arb, arb_mat

from closedform.algebra.enclosure import ball_of
from closedform.notation import enclose
from closedform.notation.expression import Expression, Product
from closedform.response.parametric.case import Case
from closedform.response.parametric.points import Point, border_points, case_points
from closedform.response.parametric.response import ParametricResponse
from closedform.verification.comparison import AGREED, Finding, Pair, check_of, compared
from closedform.verification.parametric.values import (
    NamesAt,
    enclosed_matrix,
    exponential_at,
    read_back,
    trial_times,
)
from closedform.verification.record import Check

__all__ = ["formula_check"]

POINTS = 3
_ITEM = "formulas as written"


def formula_check(response: ParametricResponse, case: Case) -> Check:
    """Every formula of a case, read back from its text, at random points of the case.

    The numbers it is held against are the exponential of the model's own matrix there.
    """
    model = response.model
    points = case_points(model.field, case, POINTS)
    if not points:
        return Check(_ITEM, "not attempted", "no point of this case was found to put in")
    parsed = {name: read_back(model, case, formula) for name, formula in _written(response, case)}
    border = border_points(model.field, case)
    findings = (_finding(response, case, parsed, point) for point in (*points, *border))
    where = "; ".join(map(str, points))
    also = f", and at {len(border)} more where one parameter is zero" if border else ""
    return check_of(
        _ITEM,
        findings,
        f"{len(parsed)} formulas and the definitions of their names were read back from their "
        f"text; they agree with the exponential of A by ball arithmetic {AGREED} at "
        f"{len(points)} points of the case ({where}){also}, at two instants each",
    )


def _finding(
    response: ParametricResponse, case: Case, parsed: dict[str, Expression], point: Point
) -> Finding:
    model, field = response.model, response.model.field
    names_at = NamesAt(model, case, point)
    times = trial_times(enclosed_matrix(field, response.matrix, point.balls()))
    for t in times:

        def evaluate(names: Sequence[str], t: Fraction = t) -> Iterator[Pair]:
            known = {**names_at.balls(), model.time: ball_of(t)}
            expected = _expected(response, point, t)
            return ((enclose(parsed[name], known), expected[name]) for name in names)

        found = compared(parsed, evaluate, where=f" at {point} and time {t}")
        if found.outcome != "enclosed":
            return found
    return Finding("enclosed")


def _written(response: ParametricResponse, case: Case) -> Iterator[tuple[str, Expression]]:
    model = response.model
    for i, row in enumerate(case.transition, start=1):
        for k, formula in enumerate(row, start=1):
            yield f"entry ({i}, {k}) of e^(At)", formula
    front, rows = case.fronted
    for i, row in enumerate(rows, start=1):
        for k, formula in enumerate(row, start=1):
            whole = formula if front is None else Product((front, formula))
            yield f"entry ({i}, {k}) of e^(At), factor in front", whole
    for state, formula in zip(model.states, case.solution, strict=True):
        yield f"state {state}", formula
    for output, formula in zip(model.outputs, case.outputs, strict=True):
        yield f"output {output.name}", formula


def _expected(response: ParametricResponse, point: Point, t: Fraction) -> dict[str, arb]:
    """The same from the model's own matrix, initial state and outputs, as stated."""
    model, field, known = response.model, response.model.field, point.balls()
    n = len(model.states)
    matrix = field.matrix([list(row) for row in model.matrix])
    transition = exponential_at(enclosed_matrix(field, matrix, known), t)
    initial = arb_mat(n, 1, [field.enclose_at(x, known) for x in model.initial])
    state = transition * initial
    found = {
        f"entry ({i + 1}, {k + 1}) of e^(At){written}": transition[i, k]
        for i in range(n)
        for k in range(n)
        for written in ("", ", factor in front")
    }
    found |= {f"state {name}": state[i, 0] for i, name in enumerate(model.states)}
    for output in model.outputs:
        weights = [field.enclose_at(w, known) for w in output.weights]
        total = sum((w * state[i, 0] for i, w in enumerate(weights)), arb(0))
        found[f"output {output.name}"] = total
    return found
