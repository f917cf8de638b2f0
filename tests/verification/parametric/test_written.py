"""Formulas as written are held against the exponential of the model's own matrix."""

from __future__ import annotations

from dataclasses import replace

import pytest

from closedform.algebra.domain import Comparison, ParameterDomain
from closedform.notation import read_formula
from closedform.notation.expression import Name
from closedform.response.parametric.case import Case
from closedform.response.parametric.response import ParametricResponse
from closedform.verification.parametric.written import POINTS, formula_check
from tests.verification.parametric.spoiling import KINDS, response_to, with_case, with_formula


@pytest.mark.parametrize("kind", KINDS)
def test_the_formulas_of_a_right_response_agree(kind: str) -> None:
    response = response_to(kind)
    for case in response.cases:
        check = formula_check(response, case)
        assert check.outcome == "enclosed"
        n, m = len(response.model.states), len(response.model.outputs)
        assert check.how.startswith(f"{2 * n * n + n + m} formulas")
        assert f"at {POINTS} points of the case (" in check.how


@pytest.mark.parametrize(
    ("where", "named"),
    [
        (("solution", 1), "state x2"),
        (("outputs", 0), "output both"),
        (("transition", 1, 0), "entry (2, 1) of e^(At)"),
        (("fronted", 1, 1), "entry (2, 2) of e^(At), factor in front"),
    ],
)
def test_the_formula_that_is_wrong_is_named_with_the_point(
    where: tuple[object, ...], named: str
) -> None:
    response = response_to("rates")
    wrong = read_formula("p*exp(-a*t) + 1", names=frozenset("pat"))
    spoiled = with_formula(response, 0, where, wrong)
    check = formula_check(spoiled, spoiled.cases[0])
    assert check.outcome == "refuted"
    assert check.how.startswith(f"{named} differs at a = ")
    assert " and time " in check.how


def test_a_formula_without_a_real_value_is_refuted() -> None:
    response = response_to("rates")
    wrong = read_formula("p*exp(-a*t) + sqrt(-a)", names=frozenset("pat"))
    spoiled = with_formula(response, 0, ("solution", 0), wrong)
    check = formula_check(spoiled, spoiled.cases[0])
    assert check.outcome == "refuted"
    assert "has no value" in check.how


def test_the_formulas_of_a_case_without_known_points_are_tried_beside_it() -> None:
    response = response_to("rates")
    field = response.model.field
    empty = ParameterDomain(field, (Comparison(-(field.symbol("a") ** 2), ">"),))
    check = formula_check(*_in_domain(response, empty))
    assert check.outcome == "enclosed"
    assert "no values were found that belong to the case" in check.how
    wrong = with_formula(response, 0, ("solution", 0), Name("a"))
    assert formula_check(*_in_domain(wrong, empty)).outcome == "refuted"


def _in_domain(
    response: ParametricResponse, domain: ParameterDomain
) -> tuple[ParametricResponse, Case]:
    changed = with_case(response, 0, domain=domain)
    return changed, changed.cases[0]


def test_borders_where_a_parameter_is_zero_are_tried_too() -> None:
    response = response_to("pair")
    check = formula_check(response, response.cases[0])
    assert " more with a zero" in check.how  # x0 may be zero


def test_outputs_are_those_that_the_model_states() -> None:
    response = response_to("rates")
    (output,) = response.model.outputs
    doubled = replace(output, weights=tuple(2 * w for w in output.weights))
    other = replace(response, model=replace(response.model, outputs=(doubled,)))
    check = formula_check(other, other.cases[0])
    assert check.outcome == "refuted"
    assert check.how.startswith("output both differs")
