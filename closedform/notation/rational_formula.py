"""Writing rational functions of parameters: of all equal forms that are tried, the shortest.

The forms are the factored one, those with some factors of the numerator multiplied out, and
those with terms of the numerator apart, each with its own denominator.  Signs go into a
difference where there is one: k2 - k1, and not -(k1 - k2).
"""

from __future__ import annotations

from collections.abc import Iterator, Sequence
from fractions import Fraction
from functools import lru_cache
from itertools import chain, combinations
from math import prod
from typing import Any

from closedform.algebra.field import Scalar
from closedform.algebra.parameter_field import Factored, ParameterField, ParameterPolynomial
from closedform.algebra.polynomial_factors import irreducible_factors
from closedform.notation.expression import ZERO, Expression, operations
from closedform.notation.laurent_sum import (
    Laurent,
    Weight,
    laurent_of,
    monomial_weight,
    ordered,
    power_of_weight,
    product_of_weights,
    shortest,
    shortest_sum,
    written,
)
from closedform.notation.terms import opened

__all__ = ["rational_formula", "taken_apart", "weighted_parts", "weighted_rational"]

EXPANDED = 60
"""Products that may have more terms than this are not multiplied out."""


def rational_formula(field: ParameterField, element: Scalar) -> Expression:
    """Return an element of Q(parameters) in its shortest form.

    >>> from closedform.notation.plain import plain
    >>> field = ParameterField((), ("a", "b"))
    >>> a, b = map(field.symbol, "ab")
    >>> plain(rational_formula(field, (b - a) / (2 * a)))
    '(b - a)/(2*a)'
    """
    return weighted_rational(field, element, (), ()) if element else ZERO


def weighted_rational(
    field: ParameterField,
    value: Scalar,
    factors: Sequence[Expression],
    divisors: Sequence[Expression],
) -> Expression:
    """Return value · factors / divisors as one term, its sign outside; `value` is not zero."""
    return weighted_parts(field, taken_apart(value), factors, divisors)


def weighted_parts(
    field: ParameterField,
    value: Factored,
    factors: Sequence[Expression] = (),
    divisors: Sequence[Expression] = (),
) -> Expression:
    """Return the same for a value that is taken apart already."""
    return opened(written(_weight(field, value), factors, divisors))


@lru_cache(maxsize=16384)
def taken_apart(element: Scalar) -> Factored:
    """Return an element that is not zero by its irreducible factors, simple ones first."""
    number, powers = Fraction(1), []
    for polynomial, sign in ((element.numer, 1), (element.denom, -1)):
        content, factors = irreducible_factors(dict(laurent_of(polynomial)))
        number *= content**sign
        powers += [(ordered(factor.items()), exponent * sign) for factor, exponent in factors]
    powers.sort(key=lambda pair: _simplicity(pair[0]))
    ring = element.numer.ring
    return Factored(number, tuple((_polynomial(ring, terms), e) for terms, e in powers))


def _simplicity(terms: Laurent) -> tuple[int, int, list[tuple[list[int], Fraction]]]:
    degree = max(sum(monomial) for monomial, _ in terms)
    return degree, len(terms), [([-e for e in monomial], c) for monomial, c in terms]


def _polynomial(ring: Any, terms: Laurent) -> ParameterPolynomial:
    one = ring.domain.one
    return ring.from_dict({m: one * c.numerator / c.denominator for m, c in terms})


Powers = tuple[tuple[ParameterPolynomial, int], ...]


@lru_cache(maxsize=16384)
def _weight(field: ParameterField, value: Factored) -> Weight:
    """Return the shortest form of a value."""
    exponents = [0] * len(field.parameters)
    long: list[tuple[ParameterPolynomial, int]] = []
    for factor, exponent in value.factors:
        ((monomial, _), *others) = laurent_of(factor)
        if others:
            long.append((factor, exponent))
        else:
            exponents = [e + m * exponent for e, m in zip(exponents, monomial, strict=True)]
    above = tuple((f, e) for f, e in long if e > 0)
    below = tuple((f, -e) for f, e in long if e < 0)
    single = monomial_weight(field, exponents, value.content)
    forms = [_factored(field, single, above, below)]
    for chosen in _expansions(above):
        apart = any(e < 0 for e in exponents) or value.content.denominator > 1
        if len(chosen) == 1 and chosen[0][1] == 1 and not apart:
            continue
        rest = tuple(pair for pair in above if pair not in chosen)
        inner = shortest_sum(field, _multiplied(chosen, tuple(exponents), single))
        forms.append(_factored(field, inner, rest, below))
    return shortest(field, forms)


def _expansions(powers: Powers) -> Iterator[Powers]:
    """Which factors to multiply out: any, if there are few; else all of them."""
    sizes = range(1, len(powers) + 1) if len(powers) <= 3 else [len(powers)]
    for chosen in chain.from_iterable(combinations(powers, size) for size in sizes):
        if prod(len(laurent_of(f)) ** e for f, e in chosen) <= EXPANDED:
            yield chosen


def _multiplied(powers: Powers, exponents: tuple[int, ...], single: Weight) -> Laurent:
    total = prod((f**e for f, e in powers[1:]), start=powers[0][0] ** powers[0][1])
    terms = (
        (tuple(e + d for e, d in zip(m, exponents, strict=True)), c * single.number)
        for m, c in laurent_of(total)
    )
    return ordered(terms)


def _factored(field: ParameterField, front: Weight, above: Powers, below: Powers) -> Weight:
    """Return front · above / below; a sign goes into the first difference that takes it."""
    upper = [_power(field, f, e) for f, e in above]
    lower = [_power(field, f, e) for f, e in below]
    if front.number < 0:
        for parts, powers in ((upper, above), (lower, below)):
            turned = _turned(field, powers, parts)
            if turned is not None:
                parts[turned[0]] = turned[1]
                front = Weight(-front.number, front.above, front.below)
                break
    inverse = product_of_weights(lower)
    return product_of_weights(
        [front, *upper, Weight(1 / inverse.number, inverse.below, inverse.above)]
    )


def _power(field: ParameterField, factor: ParameterPolynomial, exponent: int) -> Weight:
    return power_of_weight(shortest_sum(field, laurent_of(factor)), exponent)


def _turned(
    field: ParameterField, powers: Powers, parts: Sequence[Weight]
) -> tuple[int, Weight] | None:
    """Return the first place where the opposite costs nothing, and the opposite."""
    for place, ((factor, exponent), part) in enumerate(zip(powers, parts, strict=True)):
        if exponent % 2:
            opposite = _power(field, -factor, exponent)
            if opposite.number > 0 and _length(opposite) <= _length(part):
                return place, opposite
    return None


def _length(weight: Weight) -> int:
    return operations(written(weight))
