"""Conditions at points: proved as they are, and refuted with one fault in them."""

from __future__ import annotations

from dataclasses import replace
from fractions import Fraction
from typing import Any

import pytest

from closedform.notation.expression import Number, Product
from closedform.response.driven.response import respond_driven
from closedform.verification.driven.defined import defined_checks
from closedform.verification.driven.points import point_check
from closedform.verification.driven.verify import verify_driven
from closedform.verification.driven.written import formula_check
from tests.verification.driven.made import setting_to, stated, with_model, with_solution

TWO = Number(Fraction(2))
KINDS: dict[str, dict[str, Any]] = {
    "beam": {
        "equations": ["E*w'''' = q"],
        "parameters": {"E": "positive", "q": "real", "L": "positive"},
        "time": "x",
        "at_points": ["w(0) = 0", "w'(0) = 0", "w(L) = 0", "w''(L) = 0"],
    },
    "rod": {
        "equations": ["T'' - m^2*T = 0"],
        "parameters": {"m": "positive", "L": "positive", "T0": "real"},
        "time": "x",
        "at_points": ["T(0) = T0", "T'(L) = 0"],
    },
    "string": {
        "equations": ["y'' + k^2*y = 0"],
        "parameters": {"k": "positive", "L": "positive", "y1": "real"},
        "time": "x",
        "at_points": ["y(0) = 0", "y(L) = y1"],
    },
    "switched": {
        "equations": ["x'' + x' = u"],
        "inputs": {"u": "step(t - 1) + delta(t - 2)"},
        "at_points": ["x(0) = 0", "x(3) = 1"],
    },
}
each_kind = pytest.mark.parametrize("kind", KINDS)


@each_kind
def test_what_is_right_is_proved(kind: str) -> None:
    record = verify_driven(respond_driven(stated(KINDS[kind])))
    assert not record.refuted
    assert not record.left_open
    assert record.holds


@each_kind
def test_another_value_is_refuted(kind: str) -> None:
    response = respond_driven(stated(KINDS[kind]))
    one = response.model.field.domain.one
    for place, condition in enumerate(response.model.conditions):
        conditions = list(response.model.conditions)
        conditions[place] = replace(condition, value=condition.value + one)
        setting = setting_to(with_model(response, conditions=tuple(conditions)))
        (check,) = point_check(setting)
        assert check.outcome == "refuted"


@pytest.mark.parametrize("kind", ["rod", "string", "switched"])
def test_another_constant_is_refuted(kind: str) -> None:
    response = respond_driven(stated(KINDS[kind]))
    points = response.solutions[0].points
    assert points is not None
    assert points.constants
    for place, constant in enumerate(points.constants):
        constants = list(points.constants)
        constants[place] = replace(constant, formula=Product((TWO, constant.formula)))
        spoiled = with_solution(response, points=replace(points, constants=tuple(constants)))
        (check,) = point_check(setting_to(spoiled))
        assert check.outcome == "refuted"


@each_kind
def test_another_formula_is_refuted(kind: str) -> None:
    response = respond_driven(stated(KINDS[kind]))
    solution = response.solutions[0]
    for place in range(len(response.model.names)):
        rows = list(solution.pieces[-1])
        rows[place] = Product((TWO, rows[place]))
        copy = replace(solution)
        copy.__dict__["pieces"] = (*solution.pieces[:-1], tuple(rows))
        setting = replace(setting_to(response), solution=copy)
        assert formula_check(setting).outcome == "refuted"


def test_a_divisor_that_may_vanish_has_to_be_told() -> None:
    response = respond_driven(stated(KINDS["string"]))
    points = response.solutions[0].points
    assert points is not None
    assert points.provided
    outcomes = [c.outcome for c in defined_checks(response.stacked, setting_to(response))]
    assert outcomes == ["proved", "proved"]
    spoiled = setting_to(with_solution(response, points=replace(points, provided=())))
    outcomes = [c.outcome for c in defined_checks(response.stacked, spoiled)]
    assert outcomes == ["proved", "not attempted"]


def test_a_condition_that_is_missing_is_refuted() -> None:
    response = respond_driven(stated(KINDS["switched"]))
    spoiled = with_model(response, conditions=response.model.conditions[1:])
    (check,) = point_check(setting_to(spoiled))
    assert check.outcome == "refuted"
