"""The steps that tabulate the solution, and that put the values of the model into it."""

from __future__ import annotations

from collections.abc import Iterator, Sequence

from closedform.algebra.surds import SurdSum
from closedform.derivation.driven.indices import base_indices, moves_apart, repeated_indices
from closedform.derivation.driven.writing import Writing, interval
from closedform.derivation.parametric.case_steps import case_conditions_of
from closedform.derivation.parametric.numbers_step import APPROXIMATELY, value_shown
from closedform.derivation.result_steps import exact_number
from closedform.derivation.step import Side, Statement, Step, Symbol
from closedform.notation.expression import ZERO, Expression, Name
from closedform.response.driven.numbers import DrivenNumbersAt
from closedform.response.driven.response import DrivenResponse, DrivenSolution
from closedform.response.driven.sampling import default_instants, sampled_rows
from closedform.response.parametric.in_numbers import decimal_formula
from closedform.response.parametric.response import ParametricResponse
from closedform.response.response import LARGEST_WRITTEN_OUT

__all__ = ["driven_numbers_step", "driven_values_step"]


def driven_values_step(
    writing: Writing, solution: DrivenSolution, facts: dict[str, object], digits: int
) -> Step:
    """Tabulate certified values at the instants asked for, or at some that suit."""
    model, functions = writing.model, solution.functions
    times = model.times or default_instants(solution)
    decimals = sampled_rows(solution, times, digits)
    shown = range(len(model.rows))
    told = {
        **facts,
        "header": [writing.t, *(writing.function(model.rows[k]) for k in shown)],
        "rows": [
            [exact_number(time), *(row[k] for k in shown)]
            for time, row in zip(times, decimals, strict=True)
        ],
        "digits": digits,
        "chosen": not model.times,
        "instants": any(switch.jump for switch in functions.switches)
        or any(i.at == model.start for g in model.inputs for i in g.signal.impulses),
    }
    return Step("driven_values", (), told, ("driven_solution",), "summary")


def driven_numbers_step(
    response: DrivenResponse, numbers: Sequence[DrivenNumbersAt], digits: int
) -> Step | None:
    """Give each set of values, its case, named quantities, solution and table; None for none."""
    kept = [n for k, n in enumerate(numbers) if n.label or not _again(n, numbers[k + 1 :])]
    if not kept:
        return None
    writing = Writing(response.model)
    header: list[Side] = [writing.t, *(writing.function(name) for name in response.model.rows)]
    facts = {
        "cases": (),
        "sets": [_set(response, n, kept[0]) for n in kept],
        "header": header,
        "digits": digits,
        "only": len(response.solutions) == 1,
    }
    return Step("driven_numbers", (), facts, ("driven_solution",), "summary")


def _again(numbers: DrivenNumbersAt, others: Sequence[DrivenNumbersAt]) -> bool:
    return any(other.values == numbers.values for other in others)


def _set(
    response: DrivenResponse, numbers: DrivenNumbersAt, first: DrivenNumbersAt
) -> dict[str, object]:
    stacked = response.stacked
    if not isinstance(stacked, ParametricResponse):
        raise TypeError("a model without parameters has no values to put in")
    writing, rows = Writing(response.model), response.model.rows
    case, solution = stacked.cases[numbers.case], response.solutions[numbers.case]
    base = base_indices(solution)
    shown = rows[:LARGEST_WRITTEN_OUT]
    return {
        "label": numbers.label,
        "case": numbers.case,
        "values": numbers.values,
        "conditions": case_conditions_of(case),
        "given": [
            Statement("given value", (Name(name), _value_formula(value)))
            for (name, value), (_, before) in zip(numbers.values, first.values, strict=True)
            if numbers is first or value != before
        ],
        "quantities": [
            {"name": Name(q.name), "decimal": q.decimal, "exact": q.exact is not None}
            for q in numbers.quantities
        ],
        "formulas": [_in_numbers(writing, numbers, k, name, base) for k, name in enumerate(shown)]
        if moves_apart(solution) or not solution.periodic
        else [],
        "periods": [
            {"place": k, "number": Name(own.number), "parts": parts}
            for k, own in enumerate(solution.periodic)
            for parts in [list(_periods_in_numbers(writing, solution, numbers, k))]
        ],
        "rows": [
            [exact_number(time), *row]
            for time, row in zip(numbers.times, numbers.rows, strict=True)
        ],
    }


def _periods_in_numbers(
    writing: Writing, solution: DrivenSolution, numbers: DrivenNumbersAt, place: int
) -> Iterator[dict[str, object]]:
    """The n-th period, part by part, with its numbers in place."""
    local = Name(solution.periodic[place].local)
    indices = repeated_indices(solution, place)
    for part in numbers.periods[place]:
        bounds = (part.start.formula, part.end.formula)
        rounded = any(row.rounded for row in (*part.rows, part.start, part.end))
        yield {
            "when": Symbol("interval", ("both",), local, parts=bounds),
            "statements": [
                Statement(
                    "period in numbers",
                    (Symbol("scalar", indices, writing.t, name), row.formula),
                    APPROXIMATELY if rounded else "=",
                )
                for name, row in zip(writing.model.rows, part.rows, strict=True)
            ][:LARGEST_WRITTEN_OUT],
        }


def _value_formula(value: SurdSum) -> Expression:
    shown = value_shown(value)
    return decimal_formula(shown) if isinstance(shown, str) else shown


def _in_numbers(
    writing: Writing, numbers: DrivenNumbersAt, row: int, name: str, indices: tuple[str, ...]
) -> dict[str, object]:
    """A row as a whole, and interval by interval where there are several."""
    symbol = Symbol("scalar", indices, writing.t, name)
    pieces = [piece[row] for piece in numbers.pieces]
    rounded = any(p.rounded for p in pieces) or any(at.rounded for at in numbers.instants)
    relation = APPROXIMATELY if rounded else "="
    if len(pieces) == 1:
        whole = Statement("in numbers", (symbol, pieces[0].formula), relation)
        return {"whole": whole, "lines": []}
    parts: list[Side] = []
    lines: list[dict[str, object]] = []
    for place, piece in enumerate(pieces):
        last = place + 1 == len(pieces)
        end: Expression | None = None if last else numbers.instants[place + 1].formula
        when = interval(writing.t, numbers.instants[place].formula, end)
        parts += [piece.formula, when]
        line = Statement("in numbers", (symbol, piece.formula), relation)
        zero = piece.formula == ZERO
        lines.append({"place": place, "when": when, "zero": zero, "statement": line})
    whole = Statement("in numbers", (symbol, Symbol("cases", parts=tuple(parts))), relation)
    return {"whole": whole, "lines": lines}
