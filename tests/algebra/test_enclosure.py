"""Decimals are correctly rounded: every digit against mpmath at far higher precision."""

from __future__ import annotations

import pickle
from decimal import ROUND_HALF_EVEN, Context, Decimal
from fractions import Fraction

import mpmath
import pytest
from flint import acb, arb, arb_mat, ctx, fmpq
from hypothesis import example, given, settings
from hypothesis import strategies as st

from closedform.algebra.enclosure import (
    UnsettledError,
    ball_of,
    certified_decimal,
    certified_decimals,
    decimal_order,
    enclosed_to,
    exact_decimal,
    exact_end,
    value_at,
)
from closedform.algebra.surds import SurdSum
from closedform.errors import InputError


def rounded_by_mpmath(text: str, digits: int) -> Decimal:
    """A number given by many digits, rounded by the decimal module."""
    return Context(prec=digits, rounding=ROUND_HALF_EVEN).create_decimal(text)


@pytest.mark.parametrize("digits", [1, 2, 5, 6, 15, 40, 200, 1000])
@pytest.mark.parametrize("power", [-400, -30, -5, -1, 0, 1, 8, 9, 30, 400])
@pytest.mark.parametrize("sign", [1, -1])
def test_digits_are_those_of_mpmath(digits: int, power: int, sign: int) -> None:
    """sign · sqrt(3) · e^power."""
    mp = mpmath.mp.clone()
    mp.dps = digits + 30
    value = sign * mp.sqrt(3) * mp.exp(power)
    expected = rounded_by_mpmath(mp.nstr(value, digits + 20, strip_zeros=False), digits)
    found = certified_decimal(lambda: sign * arb(3).sqrt() * arb(power).exp(), digits)
    assert Decimal(found) == expected
    assert len(Decimal(found).as_tuple().digits) >= digits


@given(
    st.fractions(-3, 3, max_denominator=99).filter(bool),
    st.integers(-60, 60),
    st.integers(1, 50),
)
@settings(max_examples=60)
def test_random_digits_are_those_of_mpmath(x: Fraction, power: int, digits: int) -> None:
    mp = mpmath.mp.clone()
    mp.dps = digits + 30
    value = mp.exp(mp.mpf(x.numerator) / x.denominator) * mp.mpf(10) ** power - 1
    if value == 0:
        return
    expected = rounded_by_mpmath(mp.nstr(value, digits + 15, strip_zeros=False), digits)
    found = certified_decimal(
        lambda: arb(fmpq(x.numerator, x.denominator)).exp() * arb(10) ** power - 1, digits
    )
    assert Decimal(found) == expected


@pytest.mark.parametrize(
    ("number", "digits", "expected"),
    [
        # p + 10^-k sqrt(2): a hair above or below a tie.
        (("0.125", "1e-40"), 2, "0.13"),
        (("0.125", "-1e-40"), 2, "0.12"),
        (("2.5", "1e-90"), 1, "3"),
        (("2.5", "-1e-90"), 1, "2"),
        (("-2.5", "1e-90"), 1, "-2"),
        (("-2.5", "-1e-90"), 1, "-3"),
        (("9.9995", "1e-60"), 4, "10.00"),
        (("9.9995", "-1e-60"), 4, "9.999"),
        (("99999.5", "1e-30"), 5, "1.0000e5"),
        (("0.99995", "1e-30"), 4, "1.000"),
        (("1", "-1e-80"), 6, "1.00000"),
        (("1", "1e-80"), 6, "1.00000"),
        (("1000", "-1e-80"), 4, "1000"),
    ],
)
def test_rounding_near_a_tie_is_settled(
    number: tuple[str, str], digits: int, expected: str
) -> None:
    base, hair = (Fraction(Decimal(part)) for part in number)
    found = certified_decimal(lambda: ball_of(base) + ball_of(hair) * arb(2).sqrt(), digits)
    assert Decimal(found) == Decimal(expected)
    assert found == expected


@pytest.mark.parametrize(
    ("number", "expected"),
    [
        ("123456.789", "123457"),
        ("1234567.89", "1.23457e6"),
        ("0.00001234567", "0.0000123457"),
        ("0.000001234567", "1.23457e-6"),
        ("-123456789.5", "-1.23457e8"),
        ("1e300", "1.00000e300"),
        ("-1e-300", "-1.00000e-300"),
    ],
)
def test_a_number_says_no_more_digits_than_are_settled(number: str, expected: str) -> None:
    """Six significant digits: 1234567.89 is not 1234570, which would claim a seventh."""
    exact = Fraction(Decimal(number)) * (1 + Fraction(1, 10**40))
    hair = exact * Fraction(1, 10**60)
    found = certified_decimal(lambda: ball_of(exact) + ball_of(hair) * arb(2).sqrt(), 6)
    assert Decimal(found) == Decimal(expected)
    assert len(Decimal(found).as_tuple().digits) == 6


def test_a_number_that_nothing_tells_from_zero_is_refused() -> None:
    with pytest.raises(UnsettledError, match="65536 bits") as caught:
        certified_decimal(lambda: arb(2).sqrt() ** 2 - 2, 6)
    assert isinstance(caught.value, InputError)
    again = pickle.loads(pickle.dumps(caught.value))  # noqa: S301
    assert (again.what, again.bits) == ("a number to 6 digits", 65536)
    with pytest.raises(UnsettledError):
        certified_decimals(lambda: [arb(3).exp(), arb(2).sqrt() ** 2 - 2], 6)


@pytest.mark.parametrize(
    ("value", "digits", "text"),
    [("0", 6, "0"), ("1.234565", 6, "1.23456"), ("-1.234575", 6, "-1.23458"), ("9.5", 1, "1e1")],
)
def test_a_tie_or_zero_is_rounded_where_it_is_known_to_be_one(
    value: str, digits: int, text: str
) -> None:
    number = Fraction(value)

    def ball() -> arb:
        return ball_of(number) + arb(2).sqrt() ** 2 - 2

    assert certified_decimal(ball, digits, equals=lambda tie: tie == number) == text
    with pytest.raises(UnsettledError):
        certified_decimal(ball, digits, equals=lambda tie: tie != number)


@pytest.mark.parametrize(
    ("exponent", "text"),
    [
        (-(10**10), "7.71095e-4342944820"),
        (-(10**20), "7.71095e-43429448190325182766"),
        (10**20, "1.29686e43429448190325182765"),
    ],
)
def test_exponents_beyond_those_of_the_decimal_module(exponent: int, text: str) -> None:
    """e^(10^20), by its logarithm in mpmath."""
    mp = mpmath.mp.clone()
    mp.dps = 80
    log = exponent / mp.log(10)
    order = int(mp.floor(log))
    expected = mp.nstr(mp.mpf(10) ** (log - order), 6, strip_zeros=False)
    found = certified_decimal(lambda: arb(exponent).exp(), 6)
    assert found == f"{expected}e{order}"
    assert exponent == -(10**10) or found == text


@pytest.mark.parametrize("digits", [4000, 6000])
def test_thousands_of_digits_can_be_asked_for(digits: int) -> None:
    """Python itself writes integers of up to 4300 digits."""
    mp = mpmath.mp.clone()
    mp.dps = digits + 30
    expected = rounded_by_mpmath(mp.nstr(mp.sqrt(2), digits + 20), digits)
    assert Decimal(certified_decimal(lambda: arb(2).sqrt(), digits)) == expected
    third = exact_decimal(Fraction(1, 3), digits)
    assert third == "0." + "3" * digits


@given(st.fractions().filter(lambda x: x > 0))
@example(Fraction(10) ** 700)
@example(1 / Fraction(10) ** 700)
def test_the_order_of_a_fraction(x: Fraction) -> None:
    found = decimal_order(x)
    assert Fraction(10) ** found <= x < Fraction(10) ** (found + 1)


@pytest.mark.parametrize("x", [Fraction(0), Fraction(-3, 8), Fraction(2) ** 300])
def test_an_exact_ball_is_a_fraction(x: Fraction) -> None:
    assert exact_end(ball_of(x)) == x


def test_several_numbers_are_settled_together() -> None:
    def balls() -> list[arb]:
        return [arb(2).sqrt(), arb(-1).exp(), arb(100).exp()]

    assert certified_decimals(balls, 6) == ["1.41421", "0.367879", "2.68812e43"]
    assert certified_decimals(list, 6) == []


def test_a_hard_number_among_easy_ones_changes_no_digit_of_theirs() -> None:
    def balls() -> list[arb]:
        return [arb(2).sqrt(), arb(2).sqrt() * arb(10) ** -200 + arb(0.5)]

    assert certified_decimals(balls, 3) == ["1.41", "0.500"]


@given(st.fractions(), st.integers(1, 30))
@example(Fraction(0), 5)
@example(Fraction(1, 8), 2)
@example(Fraction(3, 8), 2)
@example(Fraction(-25, 10), 1)
@example(Fraction(10**30 + 1), 6)
@example(Fraction(1, 3 * 10**20), 6)
@example(Fraction(1200), 6)
def test_rational_numbers_are_rounded_half_to_even(x: Fraction, digits: int) -> None:
    found = Fraction(Decimal(exact_decimal(x, digits)))
    if x == 0:
        assert found == 0
        return
    exponent = order(x)
    unit = Fraction(10) ** (exponent - digits + 1)
    quotient = x / unit
    assert found == round(quotient) * unit  # Python rounds fractions half to even
    figures = Decimal(exact_decimal(x, digits)).normalize().as_tuple().digits
    assert len(figures) <= digits


def order(x: Fraction) -> int:
    exponent = len(str(abs(x.numerator))) - len(str(x.denominator))
    while Fraction(10) ** (exponent + 1) <= abs(x):
        exponent += 1
    while Fraction(10) ** exponent > abs(x):
        exponent -= 1
    return exponent


@pytest.mark.parametrize(
    ("value", "digits", "expected"),
    [
        (Fraction(0), 6, "0"),
        (Fraction(1, 4), 6, "0.25"),
        (Fraction(-1, 4), 6, "-0.25"),
        (Fraction(100), 6, "100"),
        (Fraction(100), 2, "100"),
        (Fraction(10**8), 6, "100000000"),
        (Fraction(10**20), 6, "1e20"),
        (Fraction(2, 3), 6, "0.666667"),
        (Fraction(1, 10**5), 6, "0.00001"),
        (Fraction(1, 10**6), 6, "1e-6"),
        (Fraction(15, 10**7), 6, "1.5e-6"),
        (Fraction(5, 2), 1, "2"),
        (Fraction(7, 2), 1, "4"),
    ],
)
def test_exact_decimals_as_they_are_written(value: Fraction, digits: int, expected: str) -> None:
    assert exact_decimal(value, digits) == expected


@given(st.dictionaries(st.sampled_from([1, 2, 3, 6]), st.fractions(-9, 9), max_size=3))
def test_a_ball_holds_its_number(terms: dict[int, Fraction]) -> None:
    value = SurdSum.of(terms)
    with ctx.workprec(128):
        assert (ball_of(value) - ball_of(value)).contains(0)
        squared = ball_of(value) ** 2
        assert squared.overlaps(ball_of(value * value))
        assert squared.rad() < arb(2) ** -80 * (1 + squared)


def test_horner_takes_the_highest_coefficient_first() -> None:
    assert value_at([arb(2), arb(-3), arb(5)], acb(2)) == 7
    assert value_at([], acb(2)) == 0


@pytest.mark.parametrize("digits", [5, 30, 300])
def test_enclosures_are_as_narrow_as_asked(digits: int) -> None:
    found = enclosed_to(lambda: arb_mat([[arb(2).sqrt(), arb(100).exp(), arb(0)]]), digits)
    for ball in found.entries():
        assert ball.rad() <= arb(10) ** -digits * max(arb(1), abs(ball.mid()))
