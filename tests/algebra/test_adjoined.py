"""Fields with powers of e, cosines and sines adjoined: relations, and one form for equals."""

from __future__ import annotations

from fractions import Fraction

import pytest
from flint import arb, ctx
from hypothesis import given
from hypothesis import strategies as st

from closedform.algebra.adjoined import Adjoined, Recorder, adjoined, taken_over
from closedform.algebra.field import BaseField, Scalar
from closedform.algebra.parameter_field import ParameterField
from closedform.algebra.surds import SurdSum

WITH_PI = ParameterField((), ("T", "pi"))
NUMBERS = BaseField()
WHOLE = st.integers(-4, 4)


def ball(numbers: Adjoined, element: Scalar, known: dict[str, arb] | None = None) -> arb:
    base = numbers.base

    def enclose(e: Scalar) -> arb:
        return (
            base.enclose_at(e, known or {})
            if isinstance(base, ParameterField)
            else (base.enclose(e))
        )

    with ctx.workprec(200):
        return numbers.field.enclose_at(element, numbers.balls(enclose, known))


@given(WHOLE, WHOLE, st.sampled_from([-4, -3, -1, 2, 5]))
def test_angles_add_up(a: int, b: int, square: int) -> None:
    d = NUMBERS.scalar(square)
    first, second = NUMBERS.scalar(Fraction(a, 2)), NUMBERS.scalar(Fraction(b, 3))
    numbers = adjoined(NUMBERS, [], [(d, first), (d, second), (d, first + second)])
    c1, s1 = numbers.turn(d, first)
    c2, s2 = numbers.turn(d, second)
    c, s = numbers.turn(d, first + second)
    core = numbers.lift(d)
    assert not numbers.normal(c - c1 * c2 - core * s1 * s2)
    assert not numbers.normal(s - s1 * c2 - c1 * s2)
    assert numbers.normal(c**2 - core * s**2) == numbers.field.domain.one


@given(st.integers(0, 24), st.sampled_from([1, 2, 3, 4, 5, 6, 7, 12]))
def test_multiples_of_pi_are_algebraic(k: int, q: int) -> None:
    pi, minus = WITH_PI.symbol("pi"), WITH_PI.scalar(-1)
    angle = pi * WITH_PI.scalar(Fraction(k, q))
    numbers = adjoined(WITH_PI, [], [(minus, angle)])
    c, s = numbers.turn(minus, angle)
    with ctx.workprec(200):
        exact = arb.pi() * k / q
        assert ball(numbers, c).overlaps(exact.cos())
        assert ball(numbers, s).overlaps(exact.sin())
    assert numbers.normal(c**2 + s**2) == numbers.field.domain.one


@pytest.mark.parametrize(("turns", "cosine"), [(3, "1/2"), (2, "0"), (1, "-1")])
def test_short_cosines_are_elements_of_the_field(turns: int, cosine: str) -> None:
    pi, minus = WITH_PI.symbol("pi"), WITH_PI.scalar(-1)
    numbers = adjoined(WITH_PI, [], [(minus, pi / turns)])
    found = numbers.lowered(numbers.turn(minus, pi / turns)[0])
    assert found == WITH_PI.scalar(Fraction(cosine))


@given(st.lists(st.fractions(-3, 3, max_denominator=4), min_size=1, max_size=3))
def test_commensurable_exponents_share_one_name(exponents: list[Fraction]) -> None:
    asked = [NUMBERS.scalar(e) for e in exponents]
    numbers = adjoined(NUMBERS, asked, [])
    assert len(numbers.numbers) == int(any(exponents))
    for exponent, element in zip(exponents, asked, strict=True):
        if exponent:
            with ctx.workprec(200):
                expected = (arb(exponent.numerator) / exponent.denominator).exp()
            assert ball(numbers, numbers.power(element)).overlaps(expected)


def test_exponents_with_a_minus_alone_are_not_turned() -> None:
    t = WITH_PI.symbol("T")
    numbers = adjoined(WITH_PI, [-t, -2 * t], [])
    (number,) = numbers.numbers
    assert number.amount == -t
    assert numbers.power(-2 * t) == numbers.field.symbol(number.name) ** 2


def test_independent_exponents_have_names_of_their_own() -> None:
    field = BaseField((2,))
    one, root = field.scalar(1), field.scalar(SurdSum.of({2: Fraction(1)}))
    numbers = adjoined(field, [one, root, one + root], [])
    assert len([n for n in numbers.numbers if n.kind == "exp"]) == 2
    assert not numbers.normal(numbers.power(one) * numbers.power(root) - numbers.power(one + root))
    assert numbers.lowered(numbers.lift(root) ** 2) == field.scalar(2)


@given(WHOLE, WHOLE)
def test_an_element_is_the_same_number_in_another_field(a: int, b: int) -> None:
    square = NUMBERS.scalar(-3)
    angles = [(square, NUMBERS.scalar(Fraction(k, 2))) for k in (a, b)]
    apart = adjoined(NUMBERS, [NUMBERS.scalar(1)], angles, merged=False)
    element = apart.power(NUMBERS.scalar(1))
    for given_square, amount in angles:
        c, s = apart.turn(given_square, amount)
        element = element * (c + 2 * s) + 1
    recorder = Recorder(NUMBERS)
    taken_over(apart, element, recorder)
    merged = adjoined(NUMBERS, recorder.exponents, recorder.angles)
    assert ball(apart, element).overlaps(ball(merged, taken_over(apart, element, merged)))


def test_what_vanishes_is_told_by_the_base() -> None:
    t = WITH_PI.symbol("T")
    numbers = adjoined(WITH_PI, [], [(-t, WITH_PI.scalar(1))])
    c, s = numbers.turn(-t, WITH_PI.scalar(1))
    product = numbers.lift(t - 2) * (c + s)
    assert not numbers.vanishes(product, lambda e: not e)
    assert numbers.vanishes(product, lambda e: e in (t - 2, 0))
