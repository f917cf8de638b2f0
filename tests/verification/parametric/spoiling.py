"""Models with parameters to prove, and ways to spoil their responses in one known place."""

from __future__ import annotations

from collections.abc import Iterator
from dataclasses import replace
from fractions import Fraction
from functools import cache
from typing import Any

from flint import arb

import closedform
from closedform.algebra.branches import Exceptional
from closedform.notation.expression import Expression, Number, Product, Sum
from closedform.notation.shown import FormulaColumn, FormulaMatrix
from closedform.response.parametric.conditions import WrittenComparison
from closedform.response.parametric.points import case_points
from closedform.response.parametric.response import ParametricResponse, respond_in_cases
from closedform.verification.parametric.values import NamesAt

__all__ = [
    "KINDS",
    "equal_values",
    "formulas_of",
    "other_conditions",
    "response_to",
    "with_branch",
    "with_case",
    "with_exceptional",
    "with_formula",
    "with_quantity",
]

KINDS: dict[str, dict[str, Any]] = {
    "pair": {
        "states": ["x", "v"],
        "matrix": [[0, 1], ["-k/m", "-c/m"]],
        "initial": ["x0", 0],
        "parameters": {**dict.fromkeys("mck", "positive"), "x0": "real"},
        "abbreviations": {"delta": "c/(2*m)"},
        "outputs": {"force": "k*x"},
    },
    "rates": {
        "matrix": [["-a", 0], ["a", "-b"]],
        "initial": ["p", 0],
        "parameters": dict.fromkeys("abp", "positive"),
        "outputs": {"both": "x1 + x2"},
    },
    "exchange": {
        "matrix": [["-(k10+k12)", "k21"], ["k12", "-k21"]],
        "initial": ["D", 0],
        "parameters": dict.fromkeys(("k10", "k12", "k21", "D"), "positive"),
    },
    "star": {
        "matrix": [["-(a+b+1)", "c", 1], ["b", "-c", 0], [1, 0, -1]],
        "initial": [1, 0, 0],
        "parameters": dict.fromkeys("abc", "positive"),
    },
    "cubic": {
        "matrix": [[0, 1, 0], [0, 0, 1], ["-c", -1, -2]],
        "initial": [1, 0, 0],
        "parameters": {"c": "positive"},
        "conditions": ["c > 3"],
    },
    "depot": {
        "matrix": [["-ka", 0, 0], ["ka", "-(k10+k12)", "k21"], [0, "k12", "-k21"]],
        "initial": [1, 0, 0],
        "parameters": dict.fromkeys(("ka", "k10", "k12", "k21"), "positive"),
    },
}
"""One model for each way to be in cases: three regimes of a pair; equal rates; named rates
with a formula; rates that are roots of a cubic; a root beside a pair; rates that may meet a
named one."""


@cache
def response_to(kind: str) -> ParametricResponse:
    model = closedform.system(**KINDS[kind])
    assert isinstance(model, closedform.ParametricModel)
    return respond_in_cases(model)


# --- parts put in the place of others ------------------------------------------------------


def with_case(response: ParametricResponse, number: int, **fields: Any) -> ParametricResponse:
    cases = list(response.cases)
    cases[number] = replace(cases[number], **fields)
    return replace(response, cases=tuple(cases))


def with_branch(response: ParametricResponse, number: int, **fields: Any) -> ParametricResponse:
    """Change a branch, also where its cases hold it."""
    branches = list(response.branches)
    branches[number] = replace(branches[number], **fields)
    cases = tuple(
        replace(case, branch=branches[number]) if case.branch.number == number else case
        for case in response.cases
    )
    return replace(response, branches=tuple(branches), cases=cases)


def with_exceptional(
    response: ParametricResponse, number: int, place: int, *others: Exceptional
) -> ParametricResponse:
    """Put others in the place of one item of a branch's exceptional set, or none."""
    items = response.branches[number].exceptional
    return with_branch(response, number, exceptional=(*items[:place], *others, *items[place + 1 :]))


def with_quantity(
    response: ParametricResponse, number: int, place: int, **fields: Any
) -> ParametricResponse:
    quantities = list(response.cases[number].quantities)
    quantities[place] = replace(quantities[place], **fields)
    return with_case(response, number, quantities=tuple(quantities))


Where = tuple[Any, ...]
"""("solution" or "outputs", place), ("transition" or "fronted", row, column), or ("front",)."""


def formulas_of(response: ParametricResponse, number: int) -> Iterator[tuple[Where, Expression]]:
    """Yield the formulas of functions in a case that are not zero, and where they stand."""
    case = response.cases[number]
    columns = [(part, getattr(case, part)) for part in ("solution", "outputs")]
    found = [((part, i), f) for part, column in columns for i, f in enumerate(column)]
    for part, rows in (("transition", case.transition), ("fronted", case.fronted[1])):
        found += [((part, i, k), f) for i, row in enumerate(rows) for k, f in enumerate(row)]
    if case.fronted[0] is not None:
        found.append((("front",), case.fronted[0]))
    yield from ((where, f) for where, f in found if f != Number(Fraction(0)))


def with_formula(
    response: ParametricResponse, number: int, where: Where, formula: Expression
) -> ParametricResponse:
    case = response.cases[number]
    match where:
        case ("front",):
            return with_case(response, number, fronted=(formula, case.fronted[1]))
        case ("transition", i, k):
            rows = FormulaMatrix(_with_entry(tuple(case.transition), i, k, formula))
            return with_case(response, number, transition=rows)
        case ("fronted", i, k):
            entries = _with_entry(case.fronted[1], i, k, formula)
            return with_case(response, number, fronted=(case.fronted[0], entries))
        case (part, i):
            column = list(getattr(case, part))
            column[i] = formula
            return with_case(response, number, **{part: FormulaColumn(column)})
    raise ValueError(where)


def _with_entry(rows: Any, i: int, k: int, formula: Expression) -> Any:
    changed = [list(row) for row in rows]
    changed[i][k] = formula
    return tuple(map(tuple, changed))


# --- slips ---------------------------------------------------------------------------------


def other_conditions(
    written: WrittenComparison,
) -> Iterator[WrittenComparison]:
    """Yield the comparison with every other sign, and with other sides."""
    for sign in ("<", ">", "<=", ">=", "!=", "=="):
        if sign != written.sign:
            yield replace(written, sign=sign)
    yield replace(written, right=Sum((written.right, Number(Fraction(1, 1000)))))
    if written.right != Number(Fraction(0)):
        yield replace(written, right=Product((Number(Fraction(2)), written.right)))


def equal_values(spoiled: ParametricResponse, response: ParametricResponse, number: int) -> bool:
    """Whether the names of a case have the same values as before, at points of it."""
    model, case = response.model, response.cases[number]
    for point in case_points(model.field, case, 2):
        before = NamesAt(model, case, point).balls()
        after = NamesAt(model, spoiled.cases[number], point).balls()
        if not all(_meet(after[name], value) for name, value in before.items()):
            return False
    return True


def _meet(found: arb, value: arb) -> bool:
    return found.is_finite() and found.overlaps(value)
