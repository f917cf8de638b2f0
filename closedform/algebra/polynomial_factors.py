"""Factors of polynomials in several variables over Q, found by FLINT.

Source:  The FLINT team, FLINT: Fast Library for Number Theory, flintlib.org.
"""

from __future__ import annotations

from collections.abc import Mapping
from fractions import Fraction
from functools import lru_cache
from math import lcm
from typing import Any

from flint import Ordering, fmpz_mpoly_ctx

__all__ = ["PolynomialTerms", "discriminant_in_last", "irreducible_factors"]

PolynomialTerms = Mapping[tuple[int, ...], Fraction]
"""The coefficients of a polynomial by the exponents of its variables."""


def irreducible_factors(
    terms: PolynomialTerms,
) -> tuple[Fraction, tuple[tuple[dict[tuple[int, ...], Fraction], int], ...]]:
    """Return a number and the irreducible factors of a polynomial, each with its exponent.

    The polynomial is not zero.  The factors have whole coefficients without common divisor,
    and a positive one at the term that comes first in the lexicographic order.

    >>> irreducible_factors({(2, 0): Fraction(1, 2), (0, 2): Fraction(-1, 2)})[0]
    Fraction(1, 2)
    """
    variables = len(next(iter(terms)))
    if not variables:
        return terms[()], ()
    below = lcm(*(c.denominator for c in terms.values()))
    whole = {m: int(c * below) for m, c in terms.items()}
    content, found = _ring(variables).from_dict(whole).factor()
    number = Fraction(int(content), below)
    factors = []
    for factor, exponent in found:
        made = {tuple(map(int, m)): Fraction(int(c)) for m, c in factor.to_dict().items()}
        if made[max(made)] < 0:
            made = {m: -c for m, c in made.items()}
            number *= (-1) ** int(exponent)
        factors.append((made, int(exponent)))
    factors.sort(key=lambda pair: sorted(pair[0].items(), reverse=True), reverse=True)
    return number, tuple(factors)


def discriminant_in_last(terms: PolynomialTerms) -> dict[tuple[int, ...], Fraction]:
    """Return the discriminant with respect to the last variable, in the variables before it.

    The polynomial has whole coefficients, and degree 2 or more in the last variable.

    >>> discriminant_in_last({(0, 2): Fraction(1), (1, 0): Fraction(-1)})
    {(1,): Fraction(4, 1)}
    """
    variables = len(next(iter(terms)))
    polynomial = _ring(variables).from_dict({m: int(c) for m, c in terms.items()})
    found = polynomial.discriminant(f"x{variables - 1}").to_dict()
    return {tuple(map(int, m))[:-1]: Fraction(int(c)) for m, c in found.items()}


@lru_cache(maxsize=64)
def _ring(variables: int) -> Any:
    return fmpz_mpoly_ctx.get([f"x{i}" for i in range(variables)], Ordering.lex)
