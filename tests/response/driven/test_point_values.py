"""Values of solutions that conditions at points determine."""

from __future__ import annotations

from fractions import Fraction

import pytest
from flint import arb

from closedform.algebra.surds import SurdSum
from closedform.model.building import model_from
from closedform.model.driven.model import DrivenModel
from closedform.response.driven.numbers import driven_numbers_of
from closedform.response.driven.response import DrivenResponse, respond_driven
from closedform.response.driven.sampling import enclosed_at, sampled_rows


def stated(**keys: object) -> DrivenResponse:
    model = model_from({"title": "A rod", **keys}, name="rod")
    assert isinstance(model, DrivenModel)
    return respond_driven(model)


@pytest.fixture(scope="module")
def rod() -> DrivenResponse:
    """T'' = 4 T - 3 t between 1 and 0: T = 3 t/4 + a e^(2t) + b e^(-2t)."""
    return stated(
        equations=["T'' = 4*T - q"], at_points=["T(0) = 1", "T(2) = 0"], inputs={"q": "3*t"}
    )


def test_what_a_condition_states_is_told_exactly(rod: DrivenResponse) -> None:
    times = [SurdSum.rational(Fraction(t)) for t in ("0", "1", "2")]
    first, middle, last = sampled_rows(rod.solutions[0], times, 8)
    assert (first[0], last[0]) == ("1", "0")
    # a + b = 1 and a e^4 + b e^-4 = -3/2, so that T(1) = 3/4 + a e^2 + b e^-2
    e = arb(4).exp()
    a = (arb(-3) / 2 - 1 / e) / (e - 1 / e)
    expected = arb(3) / 4 + a * arb(2).exp() + (1 - a) * arb(-2).exp()
    assert abs(expected - arb(middle[0])) < arb("1e-7")


def test_what_symmetry_makes_zero_is_zero_exactly() -> None:
    """T'' = T with equal ends: T'(1) = 0, though the constants are transcendental."""
    even = stated(equations=["T'' = T"], at_points=["T(0) = 1", "T(2) = 1"])
    ((value, slope),) = sampled_rows(even.solutions[0], [SurdSum.rational(1)], 8)
    assert abs(1 / arb(1).cosh() - arb(value)) < arb("1e-8")
    assert slope == "0"
    turning = stated(equations=["x'' = -x"], at_points=["x(0) = 1", "x(1) = 1"])
    rows = sampled_rows(turning.solutions[0], [SurdSum.rational(Fraction(1, 2))], 8)
    assert rows[0][1] == "0"


def test_balls_hold_the_conditions(rod: DrivenResponse) -> None:
    for t, value in ((0, 1), (2, 0)):
        ball = enclosed_at(rod.solutions[0], Fraction(t), 30)[0]
        assert ball.contains(value)
        assert ball.rad() < arb("1e-30")


def test_values_put_in_give_the_same() -> None:
    keys = {"at_points": ["T(0) = 1", "T(2) = 0"], "inputs": {"q": "3*t"}}
    plain = stated(equations=["T'' = 4*T - q"], **keys)
    open_one = stated(
        equations=["T'' = a^2*T - q"],
        parameters={"a": {"assume": "positive", "value": 2}},
        **keys,
    )
    (numbers,) = driven_numbers_of(open_one, digits=10)
    assert [list(row) for row in numbers.rows] == sampled_rows(
        plain.solutions[0], numbers.times, 10
    )
    assert numbers.rows[0][0] == "1"
