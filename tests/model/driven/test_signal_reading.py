"""A formula in the time, read as a signal, has the same values."""

from __future__ import annotations

from fractions import Fraction

import pytest
from flint import arb
from hypothesis import given
from hypothesis import strategies as st

from closedform.algebra.enclosure import ball_of
from closedform.algebra.field import Scalar
from closedform.algebra.parameter_field import ParameterField
from closedform.algebra.surds import SurdSum
from closedform.algebra.waves import Wave
from closedform.errors import InputError, Place
from closedform.model.driven.signal import Burst, Impulse, Signal
from closedform.model.driven.signal_errors import (
    DivisionByTimeError,
    ImpulseProductError,
    NameInInputError,
    NonlinearArgumentError,
    OutsideConstantError,
    PowerOfTimeError,
    SignalError,
    SignalSizeError,
    StepArgumentError,
    UnknownDirectionError,
    UnknownOrderError,
    UnreadFunctionError,
)
from closedform.model.driven.signal_reading import signal_of
from closedform.notation.errors import DivisionByZeroError
from closedform.notation.exact import NUMBERS
from closedform.notation.expression import (
    Call,
    Expression,
    Name,
    Negation,
    Power,
    Product,
    Quotient,
    Sum,
    number,
)
from closedform.notation.plain import plain
from closedform.notation.rational import _Functions
from closedform.notation.reader import read_formula
from tests.model.driven.signal_values import (
    INSTANTS,
    SMALL,
    T,
    ball,
    formulas,
    signal_value,
    step,
    tree_value,
)

NAMES = ("F0", "a", "pi", "phi", "tau", "w")
FIELD = ParameterField(parameters=NAMES)
VALUES = {
    "F0": ball(Fraction(7, 2)),
    "a": ball(Fraction(2, 3)),
    "pi": arb.pi(),
    "phi": ball(Fraction(4, 5)),
    "tau": ball(Fraction(1, 2)),
    "w": ball(Fraction(5, 4)),
}
PARAMETRIC = _Functions(FIELD, {})


def of_numbers(tree: Expression) -> Signal:
    return signal_of(tree, "t", NUMBERS, Place())


def of_text(text: str) -> Signal:
    tree = read_formula(text, names=frozenset({*NAMES, "t"}))
    return signal_of(tree, "t", PARAMETRIC, Place())


def surd(value: Fraction | int) -> SurdSum:
    return SurdSum.rational(value)


def agrees(tree: Expression, signal: Signal, at: Fraction) -> None:
    one = tree_value(tree, {"t": ball(at)})
    other = signal_value(signal, ball(at), ball_of)
    assert one.overlaps(other), plain(tree)
    assert one.rad() + other.rad() < abs(one.mid()) / 10**6 + arb(10) ** -6


@given(st.data(), SMALL, INSTANTS)
def test_functions_that_count_time_from_one_instant_are_read_with_their_values(
    data: st.DataObject, shift: Fraction, at: Fraction
) -> None:
    tree = data.draw(formulas(st.just(shift)))
    agrees(tree, of_numbers(tree), at)


@given(formulas(SMALL), INSTANTS)
def test_other_functions_are_read_with_their_values_or_refused(
    tree: Expression, at: Fraction
) -> None:
    try:
        signal = of_numbers(tree)
    except OutsideConstantError as error:
        assert error.constant in str(error)
        return
    agrees(tree, signal, at)


@pytest.mark.parametrize(
    "text",
    [
        "F0*sin(w*t)",
        "F0*sin(w*t + phi)",
        "F0*cos(w*t - phi)^3",
        "F0*exp(-a*t + phi)*t^2",
        "exp(-a*(t - tau))*sin(w*(t - tau))",
        "F0*exp(-t/tau)*sin(w*t + pi/2)",
        "sin(w*t)*sin(w*t + pi/3)",
        "sin(w*t)*cos(a*t)",
        "sinh(a*t)*cosh(w*t)",
        "cosh(a*t + phi)",
        "sin(pi*t/tau)^2*(1 + a*t)",
        "F0*cos(phi)*sin(w*t) + F0*sin(phi)*cos(w*t)",
        "(t - tau)^4/(2*tau)",
        "F0/exp(a*t)",
        "1/exp(t/tau)^2",
        "F0*exp(-a*t)^(-1)",
        "cos(pi/3)*t",
        "exp(phi)/exp(t + phi)",
        "cos(-w*t + phi)",
        "sin(t*(a - w))",
    ],
)
@given(at=INSTANTS)
def test_formulas_with_parameters_are_read_with_their_values(text: str, at: Fraction) -> None:
    tree = read_formula(text, names=frozenset({*NAMES, "t"}))
    signal = of_text(text)

    def enclose(element: Scalar) -> arb:
        return FIELD.enclose_at(element, VALUES)

    one = tree_value(tree_with_positive_powers(tree), {**VALUES, "t": ball(at)})
    other = signal_value(signal, ball(at), enclose)
    assert one.overlaps(other)
    assert one.rad() + other.rad() < arb(10) ** -8


def tree_with_positive_powers(tree: Expression) -> Expression:
    """Write a factor to the power -1 as a denominator, which the tests evaluate."""
    match tree:
        case Product(factors):
            return Product(tuple(map(tree_with_positive_powers, factors)))
        case Power(base, Negation(exponent)):
            return Quotient(number(1), Power(base, exponent))
    return tree


def test_a_phase_becomes_the_origin_of_the_wave() -> None:
    (burst,) = of_text("F0*sin(w*t + phi)").bursts
    w, phi, zero = FIELD.symbol("w"), FIELD.symbol("phi"), FIELD.domain.zero
    assert burst == Burst((Wave(FIELD.symbol("F0"), 0, zero, "sin", w, -phi / w),))


def test_a_right_angle_turns_a_sine_into_a_cosine() -> None:
    (burst,) = of_text("exp(-a*t)*sin(w*t + pi/2)").bursts
    (wave,) = burst.waves
    assert (wave.kernel, wave.origin, wave.amount) == ("cos", 0, 1)


def test_exponentials_of_different_instants_have_one_between_them() -> None:
    (burst,) = of_text("exp(-a*t + phi)*exp(-w*t)").bursts
    a, w, phi = map(FIELD.symbol, ("a", "w", "phi"))
    assert burst.waves[0].origin == phi / (a + w)


def test_what_cancels_is_nothing() -> None:
    assert of_text("sin(w*t)^2 + cos(w*t)^2 - 1") == Signal()
    assert of_text("cosh(a*t + phi)^2 - sinh(a*t + phi)^2 - 1") == Signal()


def test_steps_make_windows() -> None:
    one, two = surd(1), surd(2)
    (burst,) = of_numbers(Product((step(1), step(2, falling=True)))).bursts
    assert (burst.start, burst.end) == (one, two)
    assert of_numbers(Product((step(2), step(1, falling=True)))) == Signal()
    (burst,) = of_numbers(Product((step(1), step(2)))).bursts
    assert (burst.start, burst.end) == (two, None)


def test_a_ramp_counts_from_its_own_start() -> None:
    (burst,) = of_numbers(Product((Sum((T, number(-2))), step(2)))).bursts
    (wave,) = burst.waves
    assert (wave.power, wave.origin, burst.start) == (1, surd(2), surd(2))


def test_the_factor_in_a_step_gives_its_direction() -> None:
    (rising,) = of_numbers(Call("step", Sum((Product((number(3), T)), number(-6))))).bursts
    (falling,) = of_numbers(Call("step", Sum((number(6), Product((number(-3), T)))))).bursts
    assert (rising.start, rising.end) == (surd(2), None)
    assert (falling.start, falling.end) == (None, surd(2))


def delta(at: int, slope: int = 1) -> Expression:
    return Call("delta", Product((number(slope), Sum((T, number(-at))))))


def test_an_impulse_takes_the_value_of_its_factor() -> None:
    square = Power(T, number(2))
    assert of_numbers(Product((square, delta(3)))).impulses == (Impulse(surd(9), surd(3)),)
    assert of_numbers(Product((Call("exp", T), delta(0)))).impulses == (Impulse(surd(1), surd(0)),)
    assert of_numbers(Product((step(1), delta(3)))).impulses == (Impulse(surd(1), surd(3)),)
    assert of_numbers(Product((step(4), delta(3)))) == Signal()
    assert of_numbers(Product((T, delta(0)))) == Signal()


def test_an_impulse_of_a_stretched_time_is_smaller() -> None:
    half = surd(Fraction(1, 2))
    for slope in (2, -2):
        assert of_numbers(delta(3, slope)).impulses == (Impulse(half, surd(3)),)


@pytest.mark.parametrize(
    ("text", "error"),
    [
        ("sin(t^2)", NonlinearArgumentError),
        ("exp(t*sin(t))", NonlinearArgumentError),
        ("exp(-t*exp(-a*t))", NonlinearArgumentError),
        ("1/t", DivisionByTimeError),
        ("1/(1 + exp(t))", DivisionByTimeError),
        ("F0/sin(w*t)", DivisionByTimeError),
        ("1/(sin(t)^2 + cos(t)^2 - 1)", DivisionByZeroError),
        ("sqrt(t)", UnreadFunctionError),
        ("t^(1/2)", PowerOfTimeError),
        ("t^a", PowerOfTimeError),
        ("2^t", PowerOfTimeError),
        ("t^21", PowerOfTimeError),
        ("exp(a)*t", OutsideConstantError),
        ("exp(-a*t)*sin(w*t + phi)", OutsideConstantError),
        ("sin(w*t)*sin(w*t + phi)", OutsideConstantError),
        ("1/(1 + cos(phi))", OutsideConstantError),
        ("(t^5)^5", SignalSizeError),
        ("t^12*(t - a)^9", SignalSizeError),
        (
            "(t + sin(t) + exp(t) + cos(2*t))^9*(exp(3*t) + sin(5*t) + t^3)^9",
            SignalSizeError,
        ),
    ],
)
def test_what_is_no_sum_of_waves_is_refused(text: str, error: type[InputError]) -> None:
    with pytest.raises(error) as raised:
        of_text(text)
    if isinstance(raised.value, SignalError):
        assert raised.value.found in plain(read_formula(text, names=frozenset({*NAMES, "t"})))
        assert raised.value.found[:50] in str(raised.value)


@pytest.mark.parametrize(
    ("tree", "error"),
    [
        (Call("step", Power(T, number(2))), StepArgumentError),
        (Call("step", number(2)), StepArgumentError),
        (Call("delta", Call("sin", T)), StepArgumentError),
        (Call("step", Product((Name("a"), T))), UnknownDirectionError),
        (Product((Call("step", T), Call("delta", T))), ImpulseProductError),
        (Power(Call("delta", T), number(2)), ImpulseProductError),
        (Call("tan", T), UnreadFunctionError),
        (Call("exp", Call("step", T)), NonlinearArgumentError),
        (Product((Name("x"), T)), NameInInputError),
        (
            Product(
                (
                    Call("step", Sum((T, Negation(Name("a"))))),
                    Call("step", Sum((T, Negation(Name("w"))))),
                )
            ),
            UnknownOrderError,
        ),
    ],
)
def test_steps_and_impulses_without_a_meaning_are_refused(
    tree: Expression, error: type[InputError]
) -> None:
    with pytest.raises(error):
        signal_of(tree, "t", PARAMETRIC, Place())


def test_a_known_sign_tells_direction_and_order() -> None:
    def signs(element: Scalar) -> frozenset[int]:
        value = FIELD.enclose_at(element, VALUES)
        return frozenset({1 if value > 0 else -1})

    tree = Product(
        (
            Call("step", Product((Name("a"), Sum((T, Negation(Name("w"))))))),
            Call("step", Sum((T, Negation(Name("a"))))),
        )
    )
    (burst,) = signal_of(tree, "t", PARAMETRIC, Place(), signs).bursts
    assert (burst.start, burst.end) == (FIELD.symbol("w"), None)
