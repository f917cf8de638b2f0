"""Factors that may stand in front of a sum, as products of irreducible factors."""

from __future__ import annotations

from collections.abc import Sequence
from fractions import Fraction
from math import gcd, lcm

from closedform.algebra.parameter_field import Factored

__all__ = ["MINUS", "UNIT", "fronts_of", "over"]

UNIT, MINUS = Factored(Fraction(1), ()), Factored(Fraction(-1), ())


LONG = 18
"""Where a numerator has factors with more terms, few fronts are tried: nobody compares them."""


def _terms_above(amount: Factored) -> int:
    return sum(len(factor) for factor, exponent in amount.factors if exponent > 0)


def over(value: Factored, divisor: Factored) -> Factored:
    """Return a quotient."""
    exponents = dict(value.factors)
    for factor, exponent in divisor.factors:
        exponents[factor] = exponents.get(factor, 0) - exponent
    return Factored(
        value.content / divisor.content, tuple((f, e) for f, e in exponents.items() if e)
    )


def fronts_of(
    amounts: Sequence[Factored], *, few: bool = False, partial: bool = True
) -> tuple[Factored, ...]:
    """Return factors that may stand in front of a sum with these amounts, 1 first.

    They are made of the factors shared above, those shared below, and the least common
    denominator, with the number or without; each takes the sign of the first amount, or its
    opposite.  `few` leaves out the signs and what is rarely the best; long amounts are never
    given more.  Without `partial` a
    sum of several terms comes to the common denominator only if all amounts have it: a sum over
    eigenvalues is read term by term, each over its own differences.
    """
    if not amounts:
        return (UNIT,)
    few = few or any(_terms_above(amount) > LONG for amount in amounts)
    factors = list(dict.fromkeys(f for amount in amounts for f, _ in amount.factors))
    above, below, common = [], [], []
    for factor in factors:
        exponents = [dict(amount.factors).get(factor, 0) for amount in amounts]
        low, high = min(exponents), max(exponents)
        above += [(factor, low)] if low > 0 else []
        below += [(factor, high)] if high < 0 else []
        if low < 0 and (partial or high < 0 or len(factor) == 1):
            common.append((factor, low))
    numbers = [amount.content for amount in amounts]
    size = gcd(*(n.numerator for n in numbers))
    shared = gcd(*(n.denominator for n in numbers))
    bottom = lcm(*(n.denominator for n in numbers))
    one = Fraction(1)
    found = [
        (above + common, Fraction(size, bottom)),
        (above + below, Fraction(size, shared)),
        (common, Fraction(1, bottom)),
    ]
    if not few:
        found += [
            (above + common, one),
            (above + below, one),
            (above, Fraction(size)),
            (above, one),
            (below, Fraction(1, shared)),
            (below, one),
            (common, one),
        ]
    sign = 1 if numbers[0] > 0 else -1
    fronts = [UNIT]
    for powers, number in found:
        signed = [number * sign] if few else [number * sign, -number * sign]
        fronts += [Factored(n, tuple(powers)) for n in signed]
    return tuple(dict.fromkeys(fronts))
