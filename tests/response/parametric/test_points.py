"""Points of a case are admissible, of its branch, and the same each time."""

from __future__ import annotations

from fractions import Fraction

import pytest
from flint import arb, ctx, fmpq

import closedform
from closedform.algebra.parameter_field import ParameterField
from closedform.response.parametric.points import Point, border_points, case_points
from closedform.response.parametric.response import respond_in_cases
from tests.response.parametric.solved import MODELS, response_to


@pytest.mark.parametrize("name", MODELS)
def test_points_of_a_case_satisfy_all_that_it_says(name: str) -> None:
    response = response_to(name)
    field = response.model.field
    for case in response.cases:
        points = case_points(field, case, 3)
        assert 1 <= len(points) <= 3
        assert points == case_points(field, case, 3)
        for point in (*points, *border_points(field, case)):
            balls = point.balls()
            assert set(balls) == set(field.parameters)
            for condition in case.domain.conditions:
                value = field.enclose_at(condition.element, balls)
                match condition.relation:
                    case ">":
                        assert value > 0
                    case ">=":
                        assert not value < 0
                    case "!=":
                        assert not value.contains(0)
                    case "=":
                        assert value.contains(0)
            for name_, element in case.branch.values.items():
                assert balls[name_].overlaps(field.enclose_at(element, balls))


def test_points_on_a_border_have_one_parameter_of_zero() -> None:
    response = response_to("damped")
    case = response.cases[0]
    (base,) = case_points(response.model.field, case, 1, seed=5)
    found = border_points(response.model.field, case)
    zeros = [[n for n, v in point.values if v == 0] for point in found]
    assert ["c"] in zeros
    assert ["m"] not in zeros
    assert all(len(names) == 1 for names in zeros)
    assert all(v != 0 for _, v in base.values)


def test_a_curve_without_known_rational_points_has_points_that_are_roots() -> None:
    model = closedform.system(
        [[0, 1], ["-k^3 - 2", "-2*c"]],
        initial=[1, 0],
        parameters={"c": "positive", "k": "positive"},
        conditions=["c^2 = k^3 + 2"],
    )
    assert isinstance(model, closedform.ParametricModel)
    response = respond_in_cases(model)
    (case,) = response.cases
    for point in case_points(model.field, case, 2):
        balls = point.balls()
        assert (balls["c"] ** 2).overlaps(balls["k"] ** 3 + 2)


def test_a_root_is_as_sharp_as_the_precision_asks() -> None:
    field = ParameterField(parameters=("a", "b"))
    coefficients = tuple(map(field.scalar, (1, 0, -2)))
    point = Point((("a", Fraction(1, 3)),), ("b", coefficients, 1), field=field)
    for bits in (64, 640):
        with ctx.workprec(bits):
            balls = point.balls()
            assert balls["a"].overlaps(arb(fmpq(1, 3)))
            assert balls["b"].overlaps(arb(2).sqrt())
            assert balls["b"].rad() < arb(2) ** (8 - bits)
    assert str(point) == "a = 1/3, b a root of its equation"
