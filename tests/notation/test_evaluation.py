"""An enclosure holds the true value."""

from __future__ import annotations

from fractions import Fraction

import pytest
from flint import arb, ctx
from hypothesis import given

from closedform.notation.equation import read_signal_formula
from closedform.notation.evaluation import enclose
from closedform.notation.expression import Call, Expression, Name, Number, Power
from tests.notation.formulas import rational_formulas, rational_value, read

CONSTANTS = [  # NIST Digital Library of Mathematical Functions, chapter 4; 30 digits
    ("exp(1)", "2.71828182845904523536028747135"),
    ("sin(1)", "0.841470984807896506652502321630"),
    ("cos(1)", "0.540302305868139717400936607443"),
    ("sinh(1)", "1.17520119364380145688238185060"),
    ("cosh(1)", "1.54308063481524377847790562076"),
    ("sqrt(2)", "1.41421356237309504880168872421"),
    ("2^(1/2)", "1.41421356237309504880168872421"),
]


@pytest.mark.parametrize(("text", "digits"), CONSTANTS)
def test_functions_have_their_tabulated_values(text: str, digits: str) -> None:
    ctx.prec = 160
    ball = enclose(read(text), {})
    assert abs(ball - arb(digits)) < arb("1e-28")
    assert ball.rad() < arb("1e-40")


@given(rational_formulas())
def test_the_rational_value_lies_in_the_ball(expression: Expression) -> None:
    try:
        value = rational_value(expression)
    except ZeroDivisionError:
        assert not enclose(expression, {}).is_finite()
        return
    ball = enclose(expression, {})
    if ball.is_finite():
        assert (ball * value.denominator).contains(value.numerator)


def test_names_take_their_balls() -> None:
    ball = enclose(read("t^2 - x1"), {"t": arb(3, 0.01), "x1": arb(1)})
    assert ball.contains(8)
    assert ball.contains(arb("8.05"))
    assert not ball.contains(arb("8.1"))


def test_a_negative_base_has_integer_powers() -> None:
    assert enclose(read("(-2)^3"), {}) == -8
    assert enclose(read("(-2)^(-2)"), {}) == arb("0.25")


@pytest.mark.parametrize("text", ["1/0", "sqrt(-1)", "(-1)^(1/2)", "0^(-1)", "9^9^9^9"])
def test_without_a_real_value_in_reach_the_ball_is_not_finite(text: str) -> None:
    assert not enclose(read(text), {}).is_finite()


def test_a_name_without_a_value_is_an_error_of_the_caller() -> None:
    with pytest.raises(KeyError, match="t"):
        enclose(Name("t"), {})


def test_an_unknown_function_is_an_error_of_the_caller() -> None:
    with pytest.raises(ValueError, match="no function tan"):
        enclose(Call("tan", read("1")), {})


def test_the_power_of_a_ball_around_zero_is_finite() -> None:
    squared = enclose(Power(Name("x"), Number(Fraction(2))), {"x": arb("0 +/- 1e-10")})
    assert squared.is_finite()
    assert squared.contains(0)


STEPS = [("0", 1, 1), ("1e-9", 1, 1), ("-1e-9", 0, 0), ("0 +/- 1", 0, 1), ("1 +/- 0.5", 1, 1)]


@pytest.mark.parametrize(("ball", "least", "most"), STEPS)
def test_a_unit_step_is_certain_where_the_sign_is(ball: str, least: int, most: int) -> None:
    step = enclose(Call("step", Name("t")), {"t": arb(ball)})
    assert step.contains(least)
    assert step.contains(most)
    assert (step.rad() > 0) is (least != most)
    assert step < 2
    assert step > -1


def test_a_step_of_nothing_is_not_finite() -> None:
    assert not enclose(Call("step", Name("t")), {"t": arb.nan()}).is_finite()


def test_a_signal_is_switched_by_its_step() -> None:
    signal = read_signal_formula("2*step(t - 1)*t", time="t", constants=frozenset())
    assert enclose(signal, {"t": arb("0.5")}) == 0
    assert enclose(signal, {"t": arb(1)}) == 2
    assert enclose(signal, {"t": arb(3)}) == 6
