"""The steps from e^(At) to the driven solution: particular response, jumps, solution."""

from __future__ import annotations

from collections.abc import Iterator, Sequence
from typing import Any

from closedform.algebra.field import Scalar
from closedform.algebra.parameter_field import ParameterField
from closedform.algebra.waves import ONE as UNIT
from closedform.algebra.waves import ConstantColumns, gathered_columns
from closedform.derivation.driven.indices import base_indices
from closedform.derivation.driven.writing import A_HAT, Writing, interval, unboxed
from closedform.derivation.parametric.case_steps import case_conditions_of
from closedform.derivation.step import Depth, Matrix, Side, Statement, Step, Symbol
from closedform.notation.expression import ONE, ZERO, Expression, operations
from closedform.notation.terms import negated, opened, sum_of
from closedform.response.driven.composition import constant_formula, step_formula
from closedform.response.driven.response import DrivenSolution

__all__ = [
    "blow_at",
    "case_facts",
    "driven_solution_step",
    "driven_transition_step",
    "jumps_step",
    "particular_step",
    "split_step",
]

Rows = tuple[tuple[Expression, ...], ...]
SMALL = 70
"""Operations in the upper rows of the exponential up to which they are printed at working."""


def case_facts(solution: DrivenSolution, count: int, *, alone: bool = True) -> dict[str, object]:
    """Return which case a step is about, and what is said of it.

    `count` is the number of all cases; `alone` says that its branch has no other.
    """
    case = solution.case
    if case is None:
        return {
            "cases": (0,),
            "only": True,
            "number": 1,
            "numbers": (1,),
            "conditions": (),
            "generic": True,
            "whole": True,
        }
    return {
        "cases": (case.number,),
        "only": count == 1,
        "number": case.number + 1,
        "conditions": case_conditions_of(case),
        "numbers": (case.number + 1,),
        "generic": case.branch.number == 0,
        "whole": alone,
    }


def driven_transition_step(
    writing: Writing, rows: Rows, facts: dict[str, object], route: str
) -> Step:
    """State the upper rows of the exponential of the stacked matrix: e^(At) and Phi(t)."""
    model, t = writing.model, writing.t
    n, size = len(model.names), len(rows)
    upper = unboxed(Matrix(tuple(row[:n] for row in rows[:n])))
    statements = []
    if size > n:
        a, w = Symbol("transition", argument=t, letter="A"), Symbol("transition", (), t, "S")
        phi = Symbol("matrix", letter="Phi", argument=t)
        blocks = Symbol("blocks", ("2",), parts=(a, phi, Symbol("zero"), w))
        hat = Symbol("transition", argument=t, letter=A_HAT.letter)
        statements.append(Statement("blocks", (hat, blocks)))
        statements.append(Statement("upper left", (a, upper)))
        right = unboxed(Matrix(tuple(row[n:] for row in rows[:n])))
        statements.append(Statement("upper right", (phi, right)))
        lower = unboxed(Matrix(tuple(row[n:] for row in rows[n:])))
        statements.append(Statement("lower right", (w, lower)))
    else:
        a = Symbol("transition", argument=t, letter="A")
        statements.append(Statement("upper left", (a, upper)))
    amount = sum(operations(entry) for row in rows[:n] for entry in row)
    depth: Depth = "working" if amount <= SMALL else "full"
    told = {**facts, "route": route, "stacked": size > n}
    return Step("driven_transition", tuple(statements), told, ("input_system",), depth)


def particular_step(writing: Writing, solution: DrivenSolution, facts: dict[str, object]) -> Step:
    """State what the inputs sustain, in each interval in which one is on."""
    n = len(writing.model.names)
    instants = writing.instants()
    rows: list[dict[str, object]] = []
    quiet = []
    for first, last, part in _alike(solution):
        end = instants[last + 1] if last + 1 < len(instants) else None
        whole = first == 0 and end is None
        when = None if whole else interval(writing.t, instants[first], end)
        if not any(entry != ZERO for entry in part):
            quiet.append(when)
            continue
        column = writing.column(part[:n])
        statement = Statement("particular", (writing.response("p"), column))
        rows.append({"when": when, "place": first, "last": last, "statement": statement})
    told = {**facts, "rows": rows, "quiet": quiet if rows else []}
    return Step("particular", (), told, ("driven_transition",))


def _sustained(solution: DrivenSolution) -> list[tuple[Expression, ...]]:
    """What the inputs sustain in each interval, one formula for each row."""
    return [solution.in_interval(part) for part in solution.functions.sustained]


def _alike(solution: DrivenSolution) -> list[tuple[int, int, tuple[Expression, ...]]]:
    """Runs of intervals that sustain the same: first, last, and what."""
    found: list[tuple[int, int, tuple[Expression, ...]]] = []
    for place, part in enumerate(_sustained(solution)):
        if found and found[-1][2] == part:
            found[-1] = (found[-1][0], place, part)
        else:
            found.append((place, place, part))
    return found


def jumps_step(writing: Writing, solution: DrivenSolution, facts: dict[str, object]) -> Step | None:
    """State h_j at the start and at each switching, and why.

    Where conditions at points stand for initial values, the start is told of only if an impulse
    strikes there; None if nothing is left to tell then.
    """
    model, functions = writing.model, solution.functions
    instants, sustained = writing.instants(), _sustained(solution)
    rows: list[dict[str, Any]] = []
    for k, jump in enumerate(functions.jumps):
        if k == 0 and model.initial is not None:
            given = [[_put(solution, value)] for value in model.initial]
            first = (UNIT(model.field), model.field.matrix(given))
            jump = gathered_columns([first, *jump])  # noqa: PLW2901  the start has more parts
        blow = blow_at(writing, solution, k)
        if k == 0 and model.initial is None and blow is None:
            continue
        column = list(_column(writing, jump))
        changes = k == 0 or sustained[k] != sustained[k - 1]
        vector = writing.column(column)
        if k == 0 and model.initial is None and blow is not None:
            vector = blow.sides[1]
        rows.append(
            {
                "place": k,
                "at": instants[k],
                "changes": changes,
                "blow": blow,
                "zero": all(entry == ZERO for entry in column) and blow is None,
                "statement": Statement("jump", (writing.jump("h", k), vector)),
            }
        )
    if not rows:
        return None
    told = {
        **facts,
        "rows": rows,
        "points": model.initial is None,
        "driven": any(p.summands for p in functions.sustained),
        "apart": bool(solution.periodic),
        "scalar": writing.is_scalar,
    }
    shape = _shape(writing, solution, rows)
    return Step("jumps", (shape,), told, ("particular",))


def _put(solution: DrivenSolution, element: Scalar) -> Scalar:
    """An element with the equations of the case put in."""
    case, field = solution.case, solution.model.field
    if case is None or not isinstance(field, ParameterField):
        return element
    return field.substituted(element, case.branch.values)


def _column(writing: Writing, parts: ConstantColumns) -> Iterator[Expression]:
    """The entries of a sum of constants times columns."""
    n, field = len(writing.model.names), writing.model.field
    for i in range(n):
        terms = []
        for constant, column in parts:
            element = column.to_list()[i][0]
            if element:
                factor = constant_formula(field, constant)
                terms.append(writing.term(element, [] if factor is None else [factor]))
        yield opened(sum_of(terms)) if terms else ZERO


def blow_at(writing: Writing, solution: DrivenSolution, place: int) -> Statement | None:
    """Return what the impulses at an instant add to the state; None where none strikes."""
    model = writing.model
    matrix = model.reduction.input_matrix
    at = (model.start, *model.timeline)[place]
    if matrix is None:
        return None
    n = len(model.names)
    totals = [model.field.domain.zero] * n
    struck = False
    for column, given in enumerate(model.inputs):
        if given.signal.repeat is not None:
            continue
        for impulse in given.signal.impulses:
            if impulse.at == at:
                struck = True
                weights = [row[column] for row in matrix.to_list()]
                totals = [a + b * impulse.amount for a, b in zip(totals, weights, strict=True)]
    if not struck:
        return None
    entries = [writing.element(_put(solution, total)) for total in totals]
    return Statement("blow", (writing.jump("b", place), writing.column(entries)))


def _shape(writing: Writing, solution: DrivenSolution, rows: Sequence[dict[str, Any]]) -> Statement:
    """x(t) = x_p(t) + e^(A (t - a_0)) h_0 + …, as many terms as are on by the end."""
    parts: list[Side] = []
    if any(part.summands for part in solution.functions.sustained):
        parts.append(writing.response("p"))
    if writing.model.initial is None:
        parts.append(writing.response("h"))
    for row in rows:
        if not row["zero"]:
            at, place = writing.instants()[row["place"]], row["place"]
            later = writing.t if at == ZERO else opened(sum_of([writing.t, negated(at)]))
            exponential = writing.exponential(later)
            h: tuple[Side, ...] = (writing.jump("h", place),)
            h = h if exponential == ONE else (exponential, *h)
            parts.append((Symbol("step", argument=later), *h) if place else h)
    right: Side = Symbol("zero") if not parts else parts[0]
    if len(parts) > 1:
        right = Symbol("sum", parts=tuple(parts))
    return Statement("shape", (writing.response(*base_indices(solution)), right))


def driven_solution_step(
    writing: Writing, solution: DrivenSolution, facts: dict[str, object]
) -> Step:
    """State every row for all times: interval by interval, and with unit steps."""
    model, functions = writing.model, solution.functions
    several = len(functions.intervals) > 1
    shown, indices = _shown(writing), base_indices(solution)
    rows: list[dict[str, object]] = []
    for row in shown:
        symbol = Symbol("scalar", indices, writing.t, model.rows[row])
        if not several:
            statement = Statement("driven solution", (symbol, solution.pieces[0][row]))
            rows.append({"whole": None, "steps": statement, "lines": ()})
            continue
        parts: list[Side] = []
        lines = []
        for place, piece in enumerate(solution.pieces):
            parts += [piece[row], writing.within(place)]
            lines.append(
                {
                    "place": place,
                    "when": writing.within(place),
                    "zero": piece[row] == ZERO,
                    "statement": Statement("in interval", (symbol, piece[row])),
                }
            )
        pieces = Statement("driven solution", (symbol, Symbol("cases", parts=tuple(parts))))
        steps = Statement("with unit steps", (symbol, solution.base[row]))
        rows.append({"whole": pieces, "lines": lines, "steps": steps})
    told = {
        **facts,
        "rows": rows,
        "several": several,
        "indices": indices,
        "apart": bool(indices),
        "shown": len(shown),
        "all": len(model.rows),
        "jumps": any(switch.jump for switch in functions.switches),
        "whens": [writing.within(place) for place in range(len(functions.intervals))],
    }
    return Step("driven_solution", (), told, ("jumps",), depth="summary")


def _shown(writing: Writing) -> list[int]:
    return list(range(len(writing.model.rows)))


def split_step(writing: Writing, solution: DrivenSolution, facts: dict[str, object]) -> Step | None:
    """State the free and the forced response; None where one of them is all."""
    functions, model = solution.functions, writing.model
    driven = any(part.summands for part in functions.forced)
    if not functions.free or not driven:
        return None
    free = solution.of(functions.free)
    rows = []
    for place, name in enumerate(model.rows):
        forced = step_formula(
            model.field,
            solution.columns,
            place,
            functions.forced[0],
            functions.switches,
            model.time,
        )
        rows.append(
            {
                "free": Statement(
                    "free", (Symbol("scalar", ("free",), writing.t, name), free[place])
                ),
                "forced": Statement(
                    "forced", (Symbol("scalar", ("forced",), writing.t, name), forced)
                ),
            }
        )
    several = len(functions.intervals) > 1
    told = {**facts, "rows": rows, "several": several}
    depth: Depth = "working" if facts["only"] else "full"
    return Step("split", (), told, ("driven_solution",), depth)
