"""Fractions of polynomials in the parameters, multiplied out and reduced by FLINT.

A sum or product of many fractions is brought to lowest terms once, at its end, and not at
every step.

Source:  The FLINT team, FLINT: Fast Library for Number Theory, flintlib.org.
"""

from __future__ import annotations

from collections.abc import Iterable, Mapping, Sequence
from functools import reduce
from math import lcm
from typing import Any

from sympy.polys.domains import QQ

from closedform.algebra.field import Scalar
from closedform.algebra.fraction_field import Whole, whole_ring
from closedform.algebra.parameter_field import Factored, ParameterField, ParameterPolynomial

__all__ = ["equal_under", "fraction", "multiplied_out", "put_in", "sum_at"]


def fraction(
    field: ParameterField,
    above: Sequence[ParameterPolynomial],
    below: Sequence[ParameterPolynomial],
) -> Scalar:
    """Return the product of polynomials over that of others, in lowest terms.

    Raises ZeroDivisionError if one below is zero.
    """
    upper, extra_below = _product(field, above)
    lower, extra_above = _product(field, below)
    return _reduced(field, upper * extra_above, lower * extra_below)


def multiplied_out(field: ParameterField, parts: Factored) -> Scalar:
    """Return the element that was taken apart.  Its factors have nothing in common."""
    sides = [[f for f, e in parts.factors for _ in range(sign * e)] for sign in (1, -1)]
    upper, lower = (_product(field, side)[0] for side in sides)
    return _element(field, upper * parts.content.numerator, lower * parts.content.denominator)


def sum_at(
    field: ParameterField,
    coefficients: Sequence[Scalar],
    place: Scalar,
    divisors: Sequence[Scalar] = (),
) -> Scalar:
    """Return sum c_k x^k, over the product of the divisors; lowest c_k first."""
    ring = whole_ring(len(field.parameters))
    x, d = _whole(ring, place.numer), _whole(ring, place.denom)
    below = _common(ring, [c.denom for c in coefficients])
    total = ring.from_dict({})
    power = _one(ring)
    for c in reversed(coefficients):
        total = total * x + _whole(ring, c.numer) * (below / _whole(ring, c.denom)) * power
        power *= d
    lower = below * d ** max(len(coefficients) - 1, 0)
    for divisor in divisors:
        total *= _whole(ring, divisor.denom)
        lower *= _whole(ring, divisor.numer)
    return _reduced(field, total, lower)


def put_in(field: ParameterField, element: Scalar, name: str, value: Scalar) -> Scalar:
    """Return the element with a value in the place of a parameter.

    Raises ZeroDivisionError where its denominator vanishes there.
    """
    ring = whole_ring(len(field.parameters))
    place = field.parameters.index(name)
    x, d = _whole(ring, value.numer), _whole(ring, value.denom)
    above, below = _by_degree(element.numer, place), _by_degree(element.denom, place)
    excess = max(above, default=0) - max(below)
    upper = _composed(ring, above, x, d) * d ** max(-excess, 0)
    return _reduced(field, upper, _composed(ring, below, x, d) * d ** max(excess, 0))


def equal_under(
    field: ParameterField, first: Scalar, second: Scalar, name: str, power: int, value: Scalar
) -> bool:
    """Whether two elements are equal once name^power = value; lower powers stay."""
    ring = whole_ring(len(field.parameters))
    sides = [_whole(ring, p) for p in (first.numer, first.denom, second.numer, second.denom)]
    difference = sides[0] * sides[3] - sides[2] * sides[1]
    place = field.parameters.index(name)
    alike: dict[int, dict[tuple[int, ...], Any]] = {}
    for monomial, c in difference.to_dict().items():
        whole, left = divmod(int(monomial[place]), power)
        bare = (*monomial[:place], left, *monomial[place + 1 :])
        alike.setdefault(whole, {})[bare] = c
    x, d = _whole(ring, value.numer), _whole(ring, value.denom)
    return not _composed(ring, alike, x, d)


def _by_degree(
    polynomial: ParameterPolynomial, place: int
) -> dict[int, dict[tuple[int, ...], int]]:
    """The coefficients of a polynomial in one parameter; its own are whole numbers."""
    found: dict[int, dict[tuple[int, ...], int]] = {}
    for monomial, c in polynomial.iterterms():
        bare = (*monomial[:place], 0, *monomial[place + 1 :])
        found.setdefault(monomial[place], {})[bare] = c.numerator
    return found


def _composed(
    ring: Any, by_degree: Mapping[int, Mapping[tuple[int, ...], int]], x: Whole, d: Whole
) -> Whole:
    """d^n · sum c_k (x/d)^k, n the highest degree."""
    highest = max(by_degree, default=0)
    total, power = ring.from_dict({}), _one(ring)
    for k in range(highest, -1, -1):
        total = total * x
        if k in by_degree:
            total += ring.from_dict(by_degree[k]) * power
        power *= d
    return total


def _product(
    field: ParameterField, polynomials: Iterable[ParameterPolynomial]
) -> tuple[Whole, int]:
    """The product with whole coefficients, and the number by which it is too large."""
    ring = whole_ring(len(field.parameters))
    total, number = _one(ring), 1
    for polynomial in polynomials:
        below = lcm(*(int(c.denominator) for c in polynomial.itercoeffs()))
        number *= below
        total *= ring.from_dict({m: int(c * below) for m, c in polynomial.iterterms()})
    return total, number


def _common(ring: Any, denominators: Iterable[ParameterPolynomial]) -> Whole:
    """The least common multiple of polynomials with whole coefficients."""

    def joined(one: Whole, other: Whole) -> Whole:
        return one * (other / one.gcd(other))

    return reduce(joined, (_whole(ring, d) for d in dict.fromkeys(denominators)), _one(ring))


def _whole(ring: Any, polynomial: ParameterPolynomial) -> Whole:
    return ring.from_dict({m: c.numerator for m, c in polynomial.iterterms()})


def _one(ring: Any) -> Whole:
    return ring.from_dict({(0,) * ring.nvars(): 1})


def _reduced(field: ParameterField, upper: Whole, lower: Whole) -> Scalar:
    if not lower:
        raise ZeroDivisionError("a denominator is zero")
    if not upper:
        return field.domain.zero
    shared = upper.gcd(lower)
    return _element(field, upper / shared, lower / shared)


def _element(field: ParameterField, upper: Whole, lower: Whole) -> Scalar:
    """Two polynomials without common factor as an element, the denominator led by a plus."""
    if lower.leading_coefficient() < 0:
        upper, lower = -upper, -lower
    fractions = field.domain.field
    return fractions.raw_new(*(_polynomial(fractions.ring, side) for side in (upper, lower)))


def _polynomial(ring: Any, whole: Whole) -> ParameterPolynomial:
    return ring.from_dict({tuple(map(int, m)): QQ(c) for m, c in whole.to_dict().items()})
