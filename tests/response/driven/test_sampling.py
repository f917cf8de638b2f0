"""Decimals of driven solutions: against steps in time, exact values, instants that suit."""

from __future__ import annotations

from fractions import Fraction

import pytest
from flint import arb, ctx

from closedform.algebra.surds import SurdSum
from closedform.response.driven.exact_sum import exact_value
from closedform.response.driven.put_in import put_in
from closedform.response.driven.response import DrivenResponse, respond_driven
from closedform.response.driven.sampling import default_instants, enclosed_at, sampled_rows
from tests.response.driven.stated import blow, numeric, pulse, sine, steady
from tests.response.driven.test_driven_response import MODELS, _by_steps


def whole(number: int | str | Fraction) -> SurdSum:
    return SurdSum.rational(Fraction(number))


def rows_at(response: DrivenResponse, *times: int | str, digits: int = 8) -> list[list[str]]:
    return sampled_rows(response.solutions[0], [whole(t) for t in times], digits)


@pytest.mark.parametrize("name", MODELS)
def test_every_decimal_is_that_found_step_by_step(name: str) -> None:
    model = MODELS[name]
    own = respond_driven(model).solutions[0]
    times = default_instants(own)
    rows = sampled_rows(own, times, 12)
    with ctx.workprec(300):
        for t, row in zip(times, rows, strict=True):
            for value, decimal in zip(_by_steps(model, t.as_fraction()), row, strict=True):
                gap = abs(value - arb(decimal))
                assert gap <= arb("0.51e-11") * abs(arb(decimal)) + arb("1e-60")


@pytest.mark.parametrize("name", MODELS)
def test_instants_begin_at_the_start_and_lie_in_every_interval(name: str) -> None:
    model = MODELS[name]
    own = respond_driven(model).solutions[0]
    solution, times = put_in(own), default_instants(own)
    assert times[0] == model.field.surds(model.start)
    assert {solution.interval_at(t) for t in times} == set(range(len(solution.parts[0].intervals)))
    fractions = [t.as_fraction() for t in times]
    assert fractions == sorted(set(fractions))
    last = model.field.surds((model.start, *model.timeline)[-1]).as_fraction()
    assert sum(t > last for t in fractions) >= 3


def test_many_switchings_are_shown_without_what_lies_between() -> None:
    model = numeric(
        [[-1]],
        [[1]],
        lambda e: [pulse(e, 1, k, k + 1) for k in range(1, 12, 2)][:1],
        initial=[0],
        timeline=range(1, 12),
    )
    times = default_instants(respond_driven(model).solutions[0])
    assert [t.as_fraction() for t in times[:12]] == list(range(12))


def test_at_a_switching_the_value_is_that_just_after_it() -> None:
    model = numeric([[-1]], [[1]], lambda e: [blow(e, 3, 4)], initial=[0], timeline=[4])
    assert rows_at(respond_driven(model), "399/100", 4) == [["0"], ["3"]]


def test_values_that_are_algebraic_are_found_exactly() -> None:
    ramp = numeric(
        [[0, 1], [0, 0]], [[0], [1]], lambda e: [pulse(e, 1, 1, 3)], initial=[0, 0], timeline=[1, 3]
    )
    assert rows_at(respond_driven(ramp), 1, 2, 3, "10/3") == [
        ["0", "0"],
        ["0.5", "1"],
        ["2", "2"],
        ["2.6666667", "2"],
    ]
    started = numeric(
        [[0, 1], [-9, 0]], [[0], [1]], lambda e: [sine(e, 6, 3, "cos")], initial=["1/3", 0]
    )
    assert rows_at(respond_driven(started), 0) == [["0.33333333", "0"]]


def test_exponents_tell_what_is_algebraic_beside_constants_that_are_not() -> None:
    """x' = -x + u, u = 1 until 2, x(0) = 1: x is 1 up to 2, then e^2 e^(-t)."""
    model = numeric([[-1]], [[1]], lambda e: [pulse(e, 1, None, 2)], initial=[1], timeline=[2])
    solution = put_in(respond_driven(model).solutions[0], times=[whole(3)])
    assert exact_value(solution, 0, solution.spots_at(whole(1)), whole(1)) == whole(1)
    assert exact_value(solution, 0, solution.spots_at(whole(2)), whole(2)) == whole(1)
    assert exact_value(solution, 0, solution.spots_at(whole(3)), whole(3)) is None


def test_an_instant_with_a_square_root_is_taken() -> None:
    model = numeric([[0, 1], [0, 0]], [[0], [1]], lambda e: [steady(e, 2)], initial=[0, 0])
    own = respond_driven(model).solutions[0]
    root = SurdSum.of({2: Fraction(1)})
    assert sampled_rows(own, [root], 6) == [["2", "2.82843"]]


def test_balls_are_as_narrow_as_asked_for() -> None:
    model = MODELS["sine cut off"]
    own = respond_driven(model).solutions[0]
    for digits in (10, 50):
        for ball in enclosed_at(own, Fraction(5, 2), digits):
            assert ball.rad() < arb(10) ** -digits
    with ctx.workprec(300):
        expected = _by_steps(model, Fraction(5, 2))
        found = enclosed_at(own, Fraction(5, 2), 30)
        assert all(a.overlaps(b) for a, b in zip(expected, found, strict=True))
