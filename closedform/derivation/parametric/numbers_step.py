"""The step that puts the values of the model into the results."""

from __future__ import annotations

from collections.abc import Sequence

from closedform.algebra.surds import SurdSum
from closedform.derivation.parametric.case_steps import case_conditions_of
from closedform.derivation.result_steps import exact_number
from closedform.derivation.step import Side, Statement, Step, Symbol
from closedform.notation.expression import Expression, Name
from closedform.notation.terms import surd_formula
from closedform.response.parametric.in_numbers import decimal_formula
from closedform.response.parametric.numbers import NumbersAt
from closedform.response.parametric.response import ParametricResponse
from closedform.response.response import LARGEST_WRITTEN_OUT

__all__ = ["numbers_step", "value_shown"]

APPROXIMATELY = "~~"
"""The relation of a formula with rounded numbers in it."""


def numbers_step(
    response: ParametricResponse, numbers: Sequence[NumbersAt], digits: int
) -> Step | None:
    """Give each set of values, its case, named quantities, solution and table; None for none."""
    kept = [n for k, n in enumerate(numbers) if n.label or not _again(n, numbers[k + 1 :])]
    if not kept:
        return None
    model = response.model
    few = len(model.states) <= LARGEST_WRITTEN_OUT or not model.outputs
    t = Name(model.time)
    shown = (*(model.states if few else ()), *(o.name for o in model.outputs))
    header: list[Side] = [t, *(_function(name, t) for name in shown)]
    skipped = 0 if few else len(model.states)
    facts = {
        "cases": (),
        "sets": [_set(response, n, kept[0], skipped) for n in kept],
        "header": header,
        "digits": digits,
        "rounded": any(f.rounded for n in kept for f in (*n.solution, *n.outputs)),
        "only": len(response.cases) == 1,
    }
    return Step("numbers", (), facts, ("cases",))


def _again(numbers: NumbersAt, others: Sequence[NumbersAt]) -> bool:
    """Whether the same values come once more under a name of their own."""
    return any(other.values == numbers.values for other in others)


def _set(
    response: ParametricResponse, numbers: NumbersAt, first: NumbersAt, skipped: int
) -> dict[str, object]:
    model = response.model
    t = Name(model.time)
    names = [*model.states, *(o.name for o in model.outputs)][skipped:]
    formulas = [*numbers.solution, *numbers.outputs][skipped:]
    known = {
        name
        for mode in response.cases[numbers.case].modes
        if mode.regime.kind == "known roots"
        for name in mode.written_names
    }
    return {
        "label": numbers.label,
        "case": numbers.case,
        "values": numbers.values,
        "conditions": case_conditions_of(response.cases[numbers.case]),
        "given": [
            Statement("given value", (Name(name), _value_formula(value)))
            for (name, value), (_, before) in zip(numbers.values, first.values, strict=True)
            if name in model.occurring and (numbers is first or value != before)
        ],
        "quantities": [
            {"name": Name(q.name), "decimal": q.decimal, "exact": q.exact is not None}
            for q in numbers.quantities
            if q.name not in known
        ],
        "formulas": [
            Statement(
                "in numbers",
                (_function(name, t), f.formula),
                APPROXIMATELY if f.rounded else "=",
            )
            for name, f in zip(names, formulas, strict=True)
        ],
        "rows": [
            [exact_number(time), *row[skipped:]]
            for time, row in zip(numbers.times, numbers.rows, strict=True)
        ],
    }


def _value_formula(value: SurdSum) -> Expression:
    shown = value_shown(value)
    return decimal_formula(shown) if isinstance(shown, str) else shown


def _function(name: str, t: Expression) -> Symbol:
    return Symbol("scalar", letter=name, argument=t)


def value_shown(value: SurdSum) -> str | Expression:
    """Return a decimal that ends as text, and any other number as a formula."""
    text = exact_number(value)
    return text if not text.strip("-0123456789.") else surd_formula(value)
