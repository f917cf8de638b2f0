"""Sums of square roots are a field, computed exactly."""

from __future__ import annotations

from fractions import Fraction
from math import prod

import pytest
from hypothesis import given
from hypothesis import strategies as st

from closedform.algebra.surds import (
    SurdSum,
    drawn_out,
    root_of_rational,
    square_part,
)

LARGE_PRIMES = (10**30 + 57, 10**31 + 33)
SURDS = st.dictionaries(
    st.sampled_from([1, 2, 3, 5, 6, 10, 15, 77]), st.fractions(max_denominator=9), max_size=4
).map(SurdSum.of)


@given(st.dictionaries(st.sampled_from([2, 3, 5, 7, 999983]), st.integers(0, 3), max_size=3))
def test_the_square_part_is_split_off(exponents: dict[int, int]) -> None:
    n = prod(p**k for p, k in exponents.items())
    expected = prod(p for p, k in exponents.items() if k % 2)
    root, free = square_part(n)
    assert root * root * free == n
    assert free == expected


def test_a_large_number_is_refused_unless_it_is_a_square() -> None:
    assert square_part(10**80) == (10**40, 1)
    with pytest.raises(ValueError, match="up to 1e"):
        square_part(LARGE_PRIMES[0] * LARGE_PRIMES[1])


@pytest.mark.parametrize("n", [10**24 * 77, 394784176044**2 * 5, 2**5 * (10**44 + 31)])
def test_squares_are_drawn_out_of_numbers_as_decimals_make_them(n: int) -> None:
    root, free = square_part(n)
    assert root * root * free == n
    assert drawn_out(n) == (root, free)
    assert root > 1


def test_of_larger_numbers_small_squares_are_drawn_out() -> None:
    p, q = LARGE_PRIMES
    assert drawn_out(p * q * 997**3 * 9) == (3 * 997, p * q * 997)
    assert root_of_rational(Fraction(p * q)) is None
    assert root_of_rational(Fraction(1, p * q)) is None
    assert root_of_rational(Fraction(p * p, q * q)) == SurdSum.rational(Fraction(p, q))
    assert root_of_rational(Fraction(0)) == SurdSum(())
    with pytest.raises(ValueError, match="up to 1e"):
        SurdSum.rational(p * q).sqrt()


def test_a_fraction_needs_its_two_parts_factored_only() -> None:
    root = SurdSum.rational(Fraction(10**17 + 3, 10**17 + 19)).sqrt()
    assert root * root == SurdSum.rational(Fraction(10**17 + 3, 10**17 + 19))


@given(SURDS)
def test_every_number_but_zero_has_an_inverse(x: SurdSum) -> None:
    if x.is_zero:
        with pytest.raises(ZeroDivisionError):
            x.inverse()
    else:
        assert x * x.inverse() == SurdSum.rational(1)


@given(SURDS, SURDS, SURDS)
def test_multiplication_distributes(x: SurdSum, y: SurdSum, z: SurdSum) -> None:
    assert x * (y + z) == x * y + x * z
    assert (x * y) * z == x * (y * z)


def test_an_inverse_needs_no_factors_of_its_radicands() -> None:
    p, q = 10**18 - 11, 10**18 - 33  # the two largest primes below 10^18
    x = SurdSum.of({1: Fraction(1), p: Fraction(2), q: Fraction(3), p * q: Fraction(1, 7)})
    assert x * x.inverse() == SurdSum.rational(1)


def test_only_rational_numbers_that_are_not_negative_have_a_root_here() -> None:
    with pytest.raises(ValueError, match="negative"):
        SurdSum.rational(-1).sqrt()
    with pytest.raises(ValueError, match="not rational"):
        SurdSum.of({2: Fraction(1)}).sqrt()
