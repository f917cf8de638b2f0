"""Inputs that repeat: proved as they are, and refuted with one fault in them."""

from __future__ import annotations

import sys
from dataclasses import replace
from fractions import Fraction
from typing import Any

import pytest
from flint import arb, ctx

from closedform.notation.expression import Call, Number, Sum
from closedform.notation.reader import read_formula
from closedform.notation.shown import FormulaColumn
from closedform.response.driven.response import respond_driven
from closedform.verification.driven.periods import (
    blow_check,
    period_formula_check,
    period_settings,
)
from closedform.verification.driven.stepping import Steps
from closedform.verification.driven.verify import verify_driven
from tests.verification.driven.made import refuted, setting_to, stated, with_solution
from tests.verification.tampering import numbers_of, slips, with_number

KINDS: dict[str, dict[str, Any]] = {
    "doses": {
        "equations": ["V*c' = -k*V*c + d"],
        "parameters": dict.fromkeys(("V", "k", "D", "T"), "positive"),
        "inputs": {"d": {"is": "D*delta(t)", "period": "T"}},
        "initial": {"c": 0},
    },
    "square wave": {
        "equations": ["x'' + 2*x' + 5*x = F + G", "z = x' - F"],
        "inputs": {
            "F": {"pieces": [{"from": "0", "to": "1", "is": "3"}], "period": "4"},
            "G": "sin(2*t)",
        },
        "initial": {"x": 2, "x'": 1},
    },
    "some blows": {
        "equations": ["x'' + 4*x = F"],
        "inputs": {"F": {"is": "3*delta(t - 1)", "period": "5/2", "count": 3}},
        "initial": {"x": 0, "x'": 0},
    },
}
each_kind = pytest.mark.parametrize("kind", KINDS)


@each_kind
def test_what_is_right_is_proved(kind: str) -> None:
    record = verify_driven(respond_driven(stated(KINDS[kind])))
    assert record.holds
    assert not record.left_open


@each_kind
def test_slips_in_the_formulas_of_a_period_are_refuted(kind: str) -> None:
    response = respond_driven(stated(KINDS[kind]))
    ((setting, _, written),) = period_settings(response, response.solutions[0])
    assert period_formula_check(setting, written).outcome == "enclosed"
    first, *others = written.stretches
    seen = count = 0
    found = list(slips(first.rows[0], written.local))
    for _, wrong in found[:: max(1, len(found) // 12)]:
        stretches = (replace(first, rows=(wrong, *first.rows[1:])), *others)
        spoiled = replace(written, stretches=stretches)
        seen += period_formula_check(setting, spoiled).outcome == "refuted"
        count += 1
    assert seen >= 0.7 * count > 0


def test_formulas_after_the_last_period_are_checked() -> None:
    response = respond_driven(stated(KINDS["some blows"]))
    ((setting, _, written),) = period_settings(response, response.solutions[0])
    assert written.after is not None
    after = tuple(Sum((formula, Number(Fraction(1)))) for formula in written.after)
    spoiled = replace(written, after=after)
    assert period_formula_check(setting, spoiled).outcome == "refuted"


def test_the_formula_for_all_times_is_checked_in_every_period() -> None:
    response = respond_driven(stated(KINDS["some blows"]))
    ((setting, _, written),) = period_settings(response, response.solutions[0])
    assert written.for_all_times is not None
    first, *others = written.for_all_times
    for k in range(3):
        gone = Call("step", read_formula(f"t - {5 * k}/2 - 1", names=frozenset("t")))
        spoiled = replace(written, for_all_times=(Sum((first, gone)), *others))
        assert period_formula_check(setting, spoiled).outcome == "refuted"


def test_one_formula_for_all_times_is_the_sum_of_its_parts() -> None:
    mapping = {
        "equations": ["x' = -x + p", "y' = x - 2*y + q"],
        "inputs": {
            "p": {"is": "3*delta(t)", "period": "2", "count": 2},
            "q": {"pieces": [{"from": "1", "to": "2", "is": "5"}], "period": "3", "count": 2},
        },
        "initial": {"x": 1, "y": 2},
    }
    response = respond_driven(stated(mapping))
    assert verify_driven(response).holds
    whole = response.solutions[0].solution
    for k in range(7):
        spoiled = with_solution(response)
        late = Call("step", read_formula(f"t - {k}", names=frozenset("t")))
        first = Sum((whole[0], late))
        spoiled.solutions[0].__dict__["solution"] = FormulaColumn((first, *whole[1:]))
        assert set(refuted(spoiled)) == {"one formula for all times"}


@each_kind
def test_a_number_of_periods_that_is_off_by_one_is_refuted(kind: str) -> None:
    response = respond_driven(stated(KINDS[kind]))
    ((setting, _, written),) = period_settings(response, response.solutions[0])
    other = replace(written, number=written.local, local=written.number)
    assert period_formula_check(setting, other).outcome == "refuted"


@each_kind
def test_functions_that_are_summed_are_the_free_responses(kind: str) -> None:
    response = respond_driven(stated(KINDS[kind]))
    ((setting, functions, _),) = period_settings(response, response.solutions[0])
    assert blow_check(setting, functions).outcome == "proved"
    for place, element in numbers_of(functions.parted):
        if element:
            wrong = replace(functions, parted=with_number(functions.parted, place, -element))
            assert blow_check(setting, wrong).outcome == "refuted"
    for place in range(len(functions.blows)):
        blows = functions.blows[:place] + functions.blows[place + 1 :]
        assert blow_check(setting, replace(functions, blows=blows)).outcome == "refuted"


@each_kind
def test_one_period_is_proved_like_any_solution(kind: str) -> None:
    response = respond_driven(stated(KINDS[kind]))
    (functions,) = response.solutions[0].periods
    *others, last = functions.single.intervals
    single = replace(functions.single, intervals=(*others, replace(last, summands=())))
    wrong = replace(functions, single=single)
    found = refuted(with_solution(response, periods=(wrong,)))
    assert {item for item in found if item.startswith("one period: ")}


@pytest.mark.parametrize("equations", [["x' + x = u - y", "y' = q"], ["x' = u + q", "y' = x"]])
@pytest.mark.parametrize("count", [None, 2])
def test_exponents_of_an_input_beside_those_that_repeat_are_proved(
    equations: list[str], count: int | None
) -> None:
    repeated = {"pieces": [{"from": "0", "to": "1", "is": "2*t"}], "period": "3"}
    mapping = {
        "equations": equations,
        "inputs": {
            "u": "exp(-t)",
            "q": repeated if count is None else {**repeated, "count": count},
        },
        "initial": {"x": 1, "y": 1},
    }
    assert refuted(respond_driven(stated(mapping))) == {}


def test_a_million_periods_are_carried_on_by_powers() -> None:
    pump = {"pieces": [{"from": "0", "to": "1", "is": "2"}], "period": "2", "count": 1000000}
    mapping = {"equations": ["x' = -x + q"], "inputs": {"q": pump}, "initial": {"x": 1}}
    response = respond_driven(stated(mapping))
    assert verify_driven(response).holds
    ((setting, _, written),) = period_settings(response, response.solutions[0])
    (after,) = written.after or ()
    spoiled = replace(written, after=(Sum((after, Number(Fraction(1)))),))
    assert period_formula_check(setting, spoiled).outcome == "refuted"


def test_more_instants_than_calls_may_be_nested_are_carried_on() -> None:
    mapping = {"equations": ["x' = -x + q"], "inputs": {"q": "0"}, "initial": {"x": 1}}
    setting = setting_to(respond_driven(stated(mapping)))
    count = sys.getrecursionlimit() + 100
    timeline = tuple(setting.field.scalar(Fraction(k, count)) for k in range(1, count))
    later = replace(setting, model=replace(setting.model, timeline=timeline))
    steps, enclose = Steps(later, setting.grounds[0]), setting.grounds[0].enclose()
    with ctx.workprec(256):
        (value,) = steps.rows(count - 1, arb(1), enclose)
        assert value.overlaps(arb(-1).exp())
        assert value.rad() < arb("1e-40")
