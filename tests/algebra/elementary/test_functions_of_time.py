"""Identities between functions of time hold, and what is none does not."""

from __future__ import annotations

from collections.abc import Mapping
from fractions import Fraction

import pytest

from closedform.algebra.elementary import Element, ElementaryField, NotElementaryError


def underdamped(polynomial: Mapping[tuple[int, ...], Fraction]) -> int | None:
    """The sign of a polynomial in zeta and omega, 0 < zeta < 1 and omega > 0: enough of them."""
    signs = {1 if c > 0 else -1 for c in polynomial.values()}
    if len(signs) == 1:
        return signs.pop()
    if polynomial in ({(1, 0): 1, (0, 0): -1}, {(2, 0): 1, (0, 0): -1}):
        return -1
    return None


@pytest.fixture
def oscillator() -> ElementaryField:
    return ElementaryField(("zeta", "omega"), underdamped)


@pytest.fixture
def response(oscillator: ElementaryField) -> Element:
    z, w, t, below = _quantities(oscillator)
    damped = w * below
    return oscillator.exp(-z * w * t) * (
        oscillator.cos(damped * t) + z / below * oscillator.sin(damped * t)
    )


def _quantities(field: ElementaryField) -> tuple[Element, Element, Element, Element]:
    z = field.name("zeta")
    return z, field.name("omega"), field.t, field.sqrt(1 - z * z)


def test_a_damped_oscillation_solves_its_equation(
    oscillator: ElementaryField, response: Element
) -> None:
    z, w, _, _ = _quantities(oscillator)
    first = response.derivative()
    assert (first.derivative() + 2 * z * w * first + w * w * response).is_zero
    assert not (first.derivative() + z * w * first + w * w * response).is_zero
    assert response.at(0) == 1
    assert first.at(0).is_zero
    assert response.limit() == 0


def test_amplitude_and_phase_say_the_same(oscillator: ElementaryField, response: Element) -> None:
    z, w, t, below = _quantities(oscillator)
    front = oscillator.exp(-z * w * t) / below
    assert front * oscillator.cos(w * below * t - oscillator.atan(z / below)) == response
    assert front * oscillator.sin(w * below * t + oscillator.acos(z)) == response
    assert front * oscillator.sin(w * below * t + oscillator.atan2(below, z)) == response
    assert front * oscillator.cos(w * below * t + oscillator.acos(z)) != response


def test_physical_parameters_take_the_place_of_ratios(
    oscillator: ElementaryField, response: Element
) -> None:
    numbers = {"zeta": oscillator.number(Fraction(3, 5)), "omega": oscillator.sqrt(2)}
    t, root = oscillator.t, oscillator.sqrt(2)
    rate, turn = Fraction(3, 5) * root, Fraction(4, 5) * root
    expected = oscillator.exp(-rate * t) * (
        oscillator.cos(turn * t) + Fraction(3, 4) * oscillator.sin(turn * t)
    )
    assert response.substituted(numbers) == expected
    assert response.free_names == {"zeta", "omega"}


def below_critical(polynomial: Mapping[tuple[int, ...], Fraction]) -> int | None:
    """The sign of a polynomial in positive m, c, k with c^2 < 4 m k: enough of them."""
    signs = {1 if c > 0 else -1 for c in polynomial.values()}
    if len(signs) == 1:
        return signs.pop()
    critical = {(1, 0, 1): 4, (0, 2, 0): -1}
    if polynomial == critical:
        return 1
    return -1 if polynomial == {m: -c for m, c in critical.items()} else None


def test_a_spring_and_its_ratios_say_the_same() -> None:
    field = ElementaryField(("m", "c", "k"), below_critical)
    m, c, k, t = *map(field.name, ("m", "c", "k")), field.t
    root = field.sqrt(4 * m * k - c * c)
    w, z, turn = field.sqrt(k / m), c / (2 * field.sqrt(m * k)), root / (2 * m)
    assert turn == w * field.sqrt(1 - z * z)
    free = field.exp(-c / (2 * m) * t) * (field.cos(turn * t) + c / root * field.sin(turn * t))
    below = field.sqrt(1 - z * z)
    assert free == field.exp(-z * w * t) / below * field.cos(turn * t - field.atan(z / below))
    one, two = ((-c + s * field.sqrt(c * c - 4 * m * k)) / (2 * m) for s in (1, -1))
    assert free == (two * field.exp(one * t) - one * field.exp(two * t)) / (two - one)
    assert free.derivative().at(field.pi / turn).is_zero
    assert free.at(field.pi / turn) == -field.exp(-z * field.pi / below)


def test_trigonometric_and_hyperbolic_forms_agree() -> None:
    field = ElementaryField()
    t = field.t
    assert field.sin(t) ** 2 + field.cos(t) ** 2 == 1
    assert field.sin(2 * t) == 2 * field.sin(t) * field.cos(t)
    assert field.cosh(t) == (field.exp(t) + field.exp(-t)) / 2
    assert field.tanh(t) == (field.exp(2 * t) - 1) / (field.exp(2 * t) + 1)
    assert field.cos(field.i * t) == field.cosh(t)
    assert 1 + field.tan(t) ** 2 == 1 / field.cos(t) ** 2
    assert field.sin(t) != field.cos(t)


def test_complex_and_real_forms_agree() -> None:
    field = ElementaryField()
    t, i = field.t, field.i
    whole = (2 - i) * field.exp((-1 + 3 * i) * t)
    assert 2 * field.re(whole) == whole + field.conj(whole)
    assert field.re(whole) == field.exp(-t) * (2 * field.cos(3 * t) + field.sin(3 * t))
    assert field.abs(whole) == field.sqrt(5) * field.exp(-t)


def test_terms_are_those_of_the_sum() -> None:
    field = ElementaryField()
    t = field.t
    found = (3 * t**2 * field.exp(-2 * t + 1) + 5).terms()
    assert {(rate, offset, power, c) for rate, offset, power, c in found} == {
        (field.zero, field.zero, 0, field.number(5)),
        (field.number(-2), field.one, 2, field.number(3)),
    }
    with pytest.raises(NotElementaryError, match="no terms"):
        field.tanh(t).terms()


def test_an_integral_is_undone_by_the_derivative() -> None:
    field = ElementaryField(("k",))
    t, k = field.t, field.name("k")
    function = t**3 * field.exp(-k * t) * field.sin(2 * t) + t + field.exp(1)
    assert function.integral().derivative() == function


def test_a_convolution_is_worked_out() -> None:
    field = ElementaryField()
    t, held = field.t, field.name("held")
    inside = field.exp(-2 * (held - t)) * field.sin(t)
    whole = inside.integral()
    value = (whole - whole.at(0)).at(held).substituted({"held": t})
    assert value.derivative() + 2 * value == field.sin(t)
    assert value.at(0).is_zero


def test_limits_need_settled_signs() -> None:
    field = ElementaryField()
    t, free = field.t, field.name("q")
    assert (3 + t * field.exp(-t)).limit() == 3
    assert (1 / (2 + field.exp(-t))).limit() == Fraction(1, 2)
    assert field.exp(t).limit() is None
    assert field.sin(t).limit() is None
    assert field.exp(free * t).limit() is None


def test_polynomials_in_a_name_show_their_coefficients() -> None:
    field = ElementaryField(("a",))
    s, a = field.name("s"), field.name("a")
    assert ((s + a) * (s - field.sqrt(2))).coefficients("s") == (
        -field.sqrt(2) * a,
        a - field.sqrt(2),
        1,
    )
    assert field.zero.coefficients("s") == ()
    with pytest.raises(NotElementaryError, match="polynomial"):
        (1 / s).coefficients("s")


@pytest.mark.parametrize(
    "make",
    [
        lambda field: field.exp(field.t**2),
        lambda field: field.ln(field.t),
        lambda field: field.sqrt(1 + field.t),
        lambda field: field.tanh(field.t).integral(),
        lambda field: field.exp(field.exp(field.t)),
    ],
)
def test_what_is_outside_is_refused(make: object) -> None:
    assert callable(make)
    with pytest.raises(NotElementaryError):
        make(ElementaryField())
