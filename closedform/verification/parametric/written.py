"""The formulas of a case as they are written, against ball arithmetic at points of the case."""

from __future__ import annotations

from collections.abc import Iterator, Sequence
from fractions import Fraction

from flint import arb, arb_mat, ctx

from closedform.algebra.enclosure import ball_of
from closedform.algebra.parameter_field import ParameterField
from closedform.notation import enclose
from closedform.notation.errors import FormulaError
from closedform.notation.expression import Expression, Product
from closedform.response.parametric.case import Case
from closedform.response.parametric.points import (
    Point,
    border_points,
    case_points,
    points_beside,
)
from closedform.response.parametric.response import ParametricResponse
from closedform.verification.comparison import (
    AGREED,
    LIMIT_BITS,
    START_BITS,
    Finding,
    Pair,
    check_of,
    compared,
)
from closedform.verification.parametric.defined import facts_of_names, undefined_name
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
    missing = undefined_name(response, case)
    if missing is not None:
        return Check(_ITEM, "refuted", f"{missing} has no definition")
    points = case_points(model.field, case, POINTS)
    where = "of the case"
    if not points:
        beside = points_beside(model.field, case, 10 * POINTS)
        points = [p for p in beside if _has_values(response, case, p)][:POINTS]
        where = "of its equations, as no values were found that belong to the case: it may be empty"
    if not points:
        return Check(_ITEM, "not attempted", "no point of this case was found to put in")
    try:
        parsed = {name: read_back(model, case, f) for name, f in _written(response, case)}
    except FormulaError as error:  # its text is longer or deeper than what is read
        return Check(_ITEM, "not attempted", f"a formula was not read back: {error}")
    border = border_points(model.field, case)
    findings = (
        finding
        for point in (*points, *border)
        for finding in (
            _names_finding(response, case, point),
            _finding(response, case, parsed, point),
        )
    )
    listed = "; ".join(map(str, points))
    also = f" and {len(border)} more with a zero" if border else ""
    at = f"at {len(points)} points {where} ({listed}){also}, " if model.field.free else ""
    return check_of(
        _ITEM,
        findings,
        f"{len(parsed)} formulas and the definitions of their names, read back from their text, "
        f"agree with the exponential of A by ball arithmetic {AGREED} {at}at two instants"
        f"{' each' if at else ''}",
    )


def _has_values(response: ParametricResponse, case: Case, point: Point) -> bool:
    """Whether every name of a case has a real value at a point."""
    with ctx.workprec(START_BITS):
        names = NamesAt(response.model, case, point).balls()
    return all(ball.is_finite() for ball in names.values())


def _names_finding(response: ParametricResponse, case: Case, point: Point) -> Finding:
    """The names have the signs and the order that are said of them."""
    names = (q.name for q in case.quantities)
    field = ParameterField(parameters=(*response.model.field.parameters, *names))
    facts = [fact for mode in case.modes for fact in facts_of_names(field, mode)]
    names_at = NamesAt(response.model, case, point)
    bits = START_BITS
    while True:
        with ctx.workprec(bits):
            known = names_at.balls()
            values = [field.enclose_at(fact.element, known) for fact in facts]
            for fact, value in zip(facts, values, strict=True):
                if value <= 0:
                    return Finding("refuted", f"{fact.element} is not positive at {point}")
            if all(value > 0 for value in values):
                return Finding("enclosed")
        if bits >= LIMIT_BITS:
            return Finding("not attempted", f"the signs of names are not settled at {point}")
        bits *= 2


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
