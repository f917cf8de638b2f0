"""Signals delayed, differentiated, added, scaled and compared."""

from __future__ import annotations

from fractions import Fraction

import pytest
from flint import arb, arb_series
from hypothesis import given
from hypothesis import strategies as st

from closedform.algebra.enclosure import ball_of
from closedform.algebra.field import BaseField
from closedform.algebra.parameter_field import ParameterField
from closedform.algebra.surds import SurdSum
from closedform.algebra.waves import Wave
from closedform.errors import Place
from closedform.model.driven.arrangement import cut
from closedform.model.driven.instants import order_of_numbers
from closedform.model.driven.signal import Burst, Impulse, Repeat, Signal
from closedform.model.driven.signal_algebra import (
    added,
    delayed,
    derived,
    is_multiple_of,
    mapped,
    numbers_of,
    scaled,
    unrolled,
)
from closedform.model.driven.signal_errors import EdgeValueError, ImpulseDerivativeError
from closedform.model.driven.signal_reading import signal_of
from closedform.model.driven.wave_sums import re_expanded, shortest
from closedform.notation.equation import read_signal_formula
from closedform.notation.exact import NUMBERS
from closedform.notation.expression import Expression, Name
from closedform.notation.rational import _Functions
from tests.model.driven.signal_values import INSTANTS, SMALL, ball, formulas, signal_value

FIELD = ParameterField(parameters=("F0", "T", "a", "pi", "w"))
PARAMETRIC = _Functions(FIELD, {})
F0, T, A, PI, W = FIELD.domain.gens
SHAPES = formulas(st.just(Fraction(1)))
WEIGHTS = SMALL.map(SurdSum.rational)


def of(tree: Expression) -> Signal:
    return signal_of(tree, "t", NUMBERS, Place())


def signal(text: str) -> Signal:
    return of(read_signal_formula(text, time="t", constants=frozenset()))


def parametric(text: str) -> Signal:
    names = frozenset(FIELD.parameters)
    return signal_of(read_signal_formula(text, time="t", constants=names), "t", PARAMETRIC, Place())


def slope(given: Signal, order: int = 1) -> Signal:
    return derived(given, order, NUMBERS, formula=Name("u'"), time="t", place=Place())


def parametric_slope(text: str) -> Signal:
    given = parametric(text)
    return derived(given, 1, PARAMETRIC, formula=Name("u'"), time="t", place=Place())


def number(value: Fraction | int) -> SurdSum:
    return SurdSum.rational(value)


@given(SHAPES, SHAPES, WEIGHTS, SMALL, INSTANTS)
def test_sums_multiples_and_delays_have_the_values_they_should(
    one: Expression, other: Expression, weight: SurdSum, delay: Fraction, at: Fraction
) -> None:
    delay = Fraction(round(delay))  # so that no switching falls on the instant
    a, b = of(one), of(other)
    combined = delayed(added([a, scaled(b, weight)]), number(delay))
    there = ball(at - delay)
    expected = signal_value(a, there, ball_of) + ball_of(weight) * signal_value(b, there, ball_of)
    assert signal_value(combined, ball(at), ball_of).overlaps(expected)


@given(SHAPES)
def test_a_signal_less_itself_is_nothing(tree: Expression) -> None:
    given = of(tree)
    assert added([given, scaled(given, number(-1))]) == Signal()


@given(formulas(st.just(Fraction(0))), INSTANTS)
def test_the_slope_between_switchings_is_that_of_the_series(tree: Expression, at: Fraction) -> None:
    smooth = of(tree)
    bursts = tuple(burst for burst in smooth.bursts if burst.start is None and burst.end is None)
    found = signal_value(slope(Signal(bursts)), ball(at), ball_of)
    total = arb_series([0], prec=2)
    for wave in (wave for burst in bursts for wave in burst.waves):
        s = arb_series([ball(at) - ball_of(wave.origin), 1], prec=2)
        value = (s * ball_of(wave.rate)).exp() * ball_of(wave.amount)
        for _ in range(wave.power):
            value = value * s
        if wave.kernel != "one":
            angle = s * ball_of(wave.frequency)
            value = value * (angle.cos() if wave.kernel == "cos" else angle.sin())
        total = total + value
    assert found.overlaps(total[1])


def test_a_step_has_an_impulse_as_its_slope() -> None:
    assert slope(signal("3*step(t - 2)")) == Signal((), (Impulse(number(3), number(2)),))
    assert slope(signal("3*step(2 - t)")) == Signal((), (Impulse(number(-3), number(2)),))


def test_a_ramp_has_steps_as_its_slope() -> None:
    assert slope(signal("t*step(t) - (t - 2)*step(t - 2)")) == signal("step(t) - step(t - 2)")


def test_jumps_of_bursts_at_one_instant_are_added_before_they_are_judged() -> None:
    found = slope(signal("exp(-t)*step(t)*step(2 - t) + exp(-t)*step(t - 2)"))
    assert found.impulses == (Impulse(number(1), number(0)),)


def test_an_exponential_that_begins_at_its_origin_jumps_by_its_amount() -> None:
    found = slope(signal("5*exp(-(t - 3))*step(t - 3)"))
    assert found.impulses == (Impulse(number(5), number(3)),)
    assert found.bursts == scaled(signal("exp(-(t - 3))*step(t - 3)"), number(-5)).bursts


def test_a_half_sine_pulse_has_no_jump() -> None:
    found = parametric_slope("F0*sin(pi*t/T)*step(t)*step(T - t)")
    assert found == parametric("F0*pi/T*cos(pi*t/T)*step(t)*step(T - t)")


def test_a_sine_cut_at_a_right_angle_jumps_exactly() -> None:
    found = parametric_slope("F0*sin(w*t)*step(t - pi/(2*w))")
    assert found.impulses == (Impulse(F0, PI / (2 * W)),)


@pytest.mark.parametrize(
    ("text", "constant"),
    [
        ("exp(-a*t)*step(t - T)", "exp(-T*a)"),
        ("cos(w*t)*step(t - T)", "cos(T*w)"),
        ("exp(-a*t)*sin(w*t)*step(T - t)", "exp(-T*a)"),
    ],
)
def test_a_jump_outside_the_field_is_refused(text: str, constant: str) -> None:
    with pytest.raises(EdgeValueError) as raised:
        parametric_slope(text)
    assert raised.value.instant == "T"
    assert "written out" in str(raised.value)
    assert raised.value.constant == constant
    assert constant in str(raised.value)


def test_the_derivative_of_an_impulse_is_refused() -> None:
    with pytest.raises(ImpulseDerivativeError):
        slope(signal("delta(t)"))
    with pytest.raises(ImpulseDerivativeError):
        slope(signal("step(t)"), 2)
    assert slope(signal("delta(t)"), 0) == signal("delta(t)")


@given(SHAPES, WEIGHTS)
def test_multiples_are_seen(tree: Expression, weight: SurdSum) -> None:
    given = of(tree)
    if weight.is_zero or given == Signal():
        return
    assert is_multiple_of(scaled(given, weight), given) == weight


@given(SHAPES, SHAPES)
def test_what_is_called_a_multiple_is_one(one: Expression, other: Expression) -> None:
    a, b = of(one), of(other)
    weight = is_multiple_of(a, b)
    if weight is not None:
        assert added([a, scaled(b, -weight)]) == Signal()


def test_what_is_no_multiple_is_none() -> None:
    assert is_multiple_of(signal("sin(t)"), signal("cos(t)")) is None
    assert is_multiple_of(signal("sin(t) + t"), signal("sin(t) + 2*t")) is None
    assert is_multiple_of(signal("step(t)"), signal("step(t - 1)")) is None
    assert is_multiple_of(signal("delta(t)"), signal("delta(t - 1)")) is None
    assert is_multiple_of(signal("delta(t)"), signal("step(t)")) is None


def test_multiples_of_impulses_and_of_turned_sines_are_seen() -> None:
    assert is_multiple_of(signal("3*delta(t)"), signal("2*delta(t)")) == number(Fraction(3, 2))
    zero, one = number(0), number(1)
    turned = Wave(one, 0, zero, "sin", number(-2), zero)
    assert is_multiple_of(Signal((Burst((turned,)),)), signal("sin(2*t)")) == number(-1)


@given(SHAPES)
def test_a_signal_holds_its_numbers_in_another_field(tree: Expression) -> None:
    given = of(tree)
    field = BaseField()
    there = mapped(given, field.scalar)
    assert mapped(there, field.surds) == given
    assert len(numbers_of(given)) == len(numbers_of(there))


def test_every_number_of_a_signal_is_told() -> None:
    repeat = Repeat(T, A, 3)
    found = Signal((Burst((Wave(F0, 1, A, "sin", W, PI),), T, 2 * T),), (Impulse(A, W),), repeat)
    assert set(numbers_of(found)) == {F0, A, W, PI, T, 2 * T}


def test_what_repeats_comes_again() -> None:
    doses = Signal((), (Impulse(number(5), number(1)),), Repeat(number(8), number(0), 3))
    found = unrolled(doses, NUMBERS.number)
    assert found == signal("5*delta(t - 1) + 5*delta(t - 9) + 5*delta(t - 17)")
    assert delayed(doses, number(2)).repeat == Repeat(number(8), number(2), 3)
    assert scaled(doses, number(2)).repeat == doses.repeat
    with pytest.raises(ValueError, match="no end"):
        unrolled(Signal((), doses.impulses, Repeat(number(8), number(0))), NUMBERS.number)
    with pytest.raises(ValueError, match="repeat"):
        added([doses, signal("delta(t)")])


@given(SHAPES, st.integers(0, 3), st.integers(0, 3), INSTANTS)
def test_a_cut_signal_is_zero_outside(tree: Expression, one: int, other: int, at: Fraction) -> None:
    given = of(tree)
    order = order_of_numbers(NUMBERS, Place())
    start, end = min(one, other), max(one, other)
    found = signal_value(cut(given, number(start), number(end), order), ball(at), ball_of)
    inside = start < at < end
    assert found.overlaps(signal_value(given, ball(at), ball_of) if inside else arb(0))
    assert inside or found == 0


@given(st.lists(SMALL, min_size=1, max_size=5), SMALL, SMALL)
def test_a_polynomial_about_another_origin_has_the_same_values(
    coefficients: list[Fraction], shift: Fraction, at: Fraction
) -> None:
    moved = re_expanded(coefficients, shift)
    value = sum(c * at**k for k, c in enumerate(moved))
    assert value == sum(c * (at + shift) ** k for k, c in enumerate(coefficients))


def test_a_polynomial_takes_the_origin_that_makes_it_short() -> None:
    zero = Fraction(0)
    waves = [Wave(Fraction(c), k, zero, "one", zero, zero) for k, c in enumerate((4, -4, 1))]
    (found,) = shortest(waves, None, Fraction(2))
    assert (found.power, found.origin, found.amount) == (2, 2, 1)
    assert shortest(waves, Fraction(5)) == tuple(waves)
