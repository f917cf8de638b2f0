"""Responses with the number pi in them, and their values."""

from __future__ import annotations

from dataclasses import replace
from fractions import Fraction

import pytest
from flint import arb, ctx

from closedform.algebra.parameter_field import PI
from closedform.algebra.surds import SurdSum
from closedform.notation.plain import plain
from closedform.response.parametric.exact_at import functions_at
from closedform.response.parametric.numbers import case_at, numbers_of
from closedform.response.parametric.points import border_points, case_points
from closedform.response.parametric.response import respond_in_cases
from tests.parametric.with_pi import MODELS, model_with_pi, response_with_pi

each_model = pytest.mark.parametrize("name", MODELS)


def solution(name: str) -> list[list[str]]:
    return [[plain(f) for f in case.solution] for case in response_with_pi(name).cases]


def test_a_driven_spring_in_numbers_is_short() -> None:
    assert solution("numbers") == [
        [
            "20*(cos(4*t) - cos(pi*t))/(pi^2 - 16)",
            "20*(pi*sin(pi*t) - 4*sin(4*t))/(pi^2 - 16)",
            "20*cos(pi*t)",
            "-20*pi*sin(pi*t)",
        ]
    ]


def test_resonance_is_a_case_and_pi_has_none() -> None:
    response = response_with_pi("spring")
    assert [c.condition for c in response.cases] == ["k != 4*pi^2*m*f^2", "k == 4*pi^2*m*f^2"]
    assert plain(response.cases[1].solution[0]) == "F*t*sin(2*pi*f*t)/(4*pi*m*f)"
    assert [c.condition for c in response_with_pi("pulse").cases] == ["w*T != pi", "T == pi/w"]
    assert [c.condition for c in response_with_pi("lag").cases] == ["true"]
    assert [c.condition for c in response_with_pi("stiff").cases] == ["true"]


def test_regimes_part_at_a_multiple_of_pi() -> None:
    found = [c.condition for c in response_with_pi("damping").cases]
    assert found == ["c < 2*pi", "c == 2*pi", "c > 2*pi"]


@each_model
def test_no_point_has_another_value_of_pi(name: str) -> None:
    response = response_with_pi(name)
    field = response.model.field
    for case in response.cases:
        points = case_points(field, case, 3)
        assert points
        for point in (*points, *border_points(field, case)):
            given = [n for n, _ in (*point.values, *point.derived)]
            assert sorted(given) == sorted(field.free)
            balls = point.balls()
            assert balls[PI].overlaps(arb.pi())
            for condition in case.domain.conditions:
                value = field.enclose_at(condition.element, balls)
                assert (
                    value.contains(0)
                    if condition.relation == "="
                    else not value <= 0 or (condition.relation == "!=" and not value.contains(0))
                )


def test_a_point_says_which_multiple_of_pi_it_has() -> None:
    response = response_with_pi("damping")
    (point,) = case_points(response.model.field, response.cases[1], 3)
    assert str(point) == "c = 2*pi"


# --- values ------------------------------------------------------------------------------------


def test_a_model_without_parameters_has_a_table_at_its_times() -> None:
    (numbers,) = numbers_of(response_with_pi("numbers"), digits=6)
    assert numbers.values == ()
    assert [row[2:] for row in numbers.rows] == [
        ("20", "0"),
        ("0", "-62.8319"),
        ("-20", "0"),
        ("20", "0"),
    ]
    with ctx.workprec(100):
        x = 20 * (arb(4).cos() + 1) / (arb.pi() ** 2 - 16)
    assert numbers.rows[2][0] == x.str(6, radius=False)


def test_times_are_chosen_where_none_are_given() -> None:
    response = respond_in_cases(model_with_pi(**MODELS["numbers"] | {"times": ()}))
    (numbers,) = numbers_of(response, digits=6)
    assert len(numbers.times) == 6


def test_values_choose_the_case_by_exact_signs() -> None:
    response = response_with_pi("damping")
    model = response.model
    assert model.values is not None
    for text, number in (("6283185/1000000", 0), ("6283186/1000000", 2)):
        given = replace(model.values, values=(("c", SurdSum.rational(Fraction(text))),))
        assert case_at(response, given).number == number


def test_square_roots_and_pi_stand_side_by_side_in_values() -> None:
    (numbers,) = numbers_of(response_with_pi("spring"), digits=6)
    assert dict(numbers.values)["F"] == SurdSum.of({2: Fraction(1)})
    assert numbers.rows[0] == ("0", "0", "1.41421", "0", "0")


@pytest.mark.parametrize(
    ("time", "expected"),
    [
        ("0", SurdSum.rational(20)),
        ("1/2", SurdSum(())),
        ("1/3", SurdSum.rational(10)),
        ("7/4", SurdSum.of({2: Fraction(10)})),
        ("7/6", SurdSum.of({3: Fraction(-10)})),
        ("1/7", None),
    ],
)
def test_cosines_of_parts_of_pi_are_exact_where_they_are_short(
    time: str, expected: SurdSum | None
) -> None:
    response = response_with_pi("numbers")
    state, t = response.cases[0].state, SurdSum.rational(Fraction(time))
    others = [SurdSum.of({2: Fraction(1), 3: Fraction(1)})]
    assert functions_at(response.model.field, (state,), {}, others).exact(2, t) == expected
