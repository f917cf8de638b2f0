"""Factors of polynomials in several variables multiply back, and are irreducible."""

from __future__ import annotations

from fractions import Fraction
from math import gcd

from hypothesis import given
from hypothesis import strategies as st

from closedform.algebra.polynomial_factors import irreducible_factors

Terms = dict[tuple[int, ...], Fraction]

MONOMIALS = st.tuples(*[st.integers(0, 2)] * 3)
COEFFICIENTS = st.fractions(-6, 6, max_denominator=4).filter(bool)
POLYNOMIALS = st.dictionaries(MONOMIALS, COEFFICIENTS, min_size=1, max_size=4)


def times(first: Terms, second: Terms) -> Terms:
    total: Terms = {}
    for m, c in first.items():
        for n, d in second.items():
            key = tuple(e + f for e, f in zip(m, n, strict=True))
            total[key] = total.get(key, Fraction(0)) + c * d
    return {m: c for m, c in total.items() if c}


@given(st.lists(POLYNOMIALS, min_size=1, max_size=3))
def test_the_factors_multiply_back(parts: list[Terms]) -> None:
    whole: Terms = {(0, 0, 0): Fraction(1)}
    for part in parts:
        whole = times(whole, part)
    number, factors = irreducible_factors(whole)
    product: Terms = {(0, 0, 0): number}
    for factor, exponent in factors:
        for _ in range(exponent):
            product = times(product, factor)
    assert product == whole
    constants = sum(set(part) == {(0, 0, 0)} for part in parts)
    assert sum(exponent for _, exponent in factors) >= len(parts) - constants


@given(POLYNOMIALS)
def test_each_factor_is_in_its_one_form(polynomial: Terms) -> None:
    for factor, _ in irreducible_factors(polynomial)[1]:
        assert factor[max(factor)] > 0
        assert all(c.denominator == 1 for c in factor.values())
        assert gcd(*(c.numerator for c in factor.values())) == 1
        assert irreducible_factors(factor) == (1, ((factor, 1),))


def test_a_number_has_no_factors() -> None:
    assert irreducible_factors({(): Fraction(3, 2)}) == (Fraction(3, 2), ())
    assert irreducible_factors({(0, 0): Fraction(-3, 2)}) == (Fraction(-3, 2), ())


def test_a_difference_of_squares() -> None:
    number, factors = irreducible_factors({(2, 0): Fraction(1, 2), (0, 2): Fraction(-1, 2)})
    assert number == Fraction(1, 2)
    plus = {(1, 0): Fraction(1), (0, 1): Fraction(1)}
    minus = {(1, 0): Fraction(1), (0, 1): Fraction(-1)}
    assert sorted((sorted(f.items()), e) for f, e in factors) == sorted(
        [(sorted(plus.items()), 1), (sorted(minus.items()), 1)]
    )
