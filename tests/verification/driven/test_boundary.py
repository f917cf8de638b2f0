"""Conditions at points as exact identities: proved, and refuted with one fault in them."""

from __future__ import annotations

from dataclasses import replace

import pytest

from closedform.response.driven.response import respond_driven
from closedform.verification.driven.boundary import conditions_check
from tests.verification.driven.made import setting_to, stated, with_model, with_solution
from tests.verification.driven.test_points import KINDS

each_kind = pytest.mark.parametrize("kind", KINDS)


@each_kind
def test_conditions_are_proved(kind: str) -> None:
    check = conditions_check(setting_to(respond_driven(stated(KINDS[kind]))))
    assert check.outcome == "proved"


@each_kind
def test_another_value_is_refuted(kind: str) -> None:
    response = respond_driven(stated(KINDS[kind]))
    one = response.model.field.domain.one
    for place, condition in enumerate(response.model.conditions):
        conditions = list(response.model.conditions)
        conditions[place] = replace(condition, value=condition.value + one)
        setting = setting_to(with_model(response, conditions=tuple(conditions)))
        assert conditions_check(setting).outcome == "refuted"


@pytest.mark.parametrize("kind", ["rod", "string", "switched"])
def test_another_constant_is_refuted(kind: str) -> None:
    response = respond_driven(stated(KINDS[kind]))
    points = response.solutions[0].points
    assert points is not None
    for place, constant in enumerate(points.constants):
        constants = list(points.constants)
        constants[place] = replace(constant, element=2 * constant.element)
        spoiled = with_solution(response, points=replace(points, constants=tuple(constants)))
        assert conditions_check(setting_to(spoiled)).outcome == "refuted"


def test_numbers_that_mean_something_else_are_refuted() -> None:
    response = respond_driven(stated(KINDS["string"]))
    points = response.solutions[0].points
    assert points is not None
    old = points.found.numbers
    moved = tuple(n if n.amount is None else replace(n, amount=2 * n.amount) for n in old.numbers)
    spoiled = replace(points.found, numbers=replace(old, numbers=moved))
    response = with_solution(response, points=replace(points, found=spoiled))
    assert conditions_check(setting_to(response)).outcome == "refuted"
