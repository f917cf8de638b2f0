"""Writing rational functions of parameters: of all equal forms that are tried, the shortest.

The forms are the factored one, those with some factors of the numerator multiplied out, and
those with terms of the numerator apart, each with its own denominator.  Signs go into a
difference where there is one: k2 - k1, and not -(k1 - k2).
"""

from __future__ import annotations

from collections.abc import Iterator, Sequence
from dataclasses import replace
from fractions import Fraction
from functools import lru_cache
from itertools import chain, combinations
from math import prod
from typing import Any

from closedform.algebra.field import Scalar
from closedform.algebra.parameter_field import Factored, ParameterField, ParameterPolynomial
from closedform.algebra.polynomial_factors import irreducible_factors
from closedform.notation.expression import ZERO, Expression
from closedform.notation.laurent_sum import Laurent, laurent_of, ordered, shortest_sum
from closedform.notation.terms import opened
from closedform.notation.weight import (
    Weight,
    monomial_weight,
    power_of_weight,
    product_of_weights,
    shortest,
    sum_of_weights,
    written,
)

__all__ = ["rational_formula", "taken_apart", "weight_of", "weighted_parts", "weighted_rational"]

EXPANDED = 60
"""Products that may have more terms than this are not multiplied out."""

DIVIDED = 12
"""Numerators with more terms than this are not divided by factors of the denominator."""

DISTRIBUTED = 18
"""Sums with more terms than this take no other factors into their terms."""


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
    return opened(written(weight_of(field, value), factors, divisors))


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
def weight_of(field: ParameterField, value: Factored) -> Weight:
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
    forms: list[Weight] = []
    for single, number, lower in _denominators(exponents, value.content, below):
        forms.append(_factored(field, monomial_weight(field, single, number), above, lower))
        for chosen, whole in _expansions(above):
            if len(whole) > DISTRIBUTED and len(chosen) == 1:
                continue
            if any(single) or abs(number) != 1 or len(chosen) > 1 or chosen[0][1] > 1:
                rest = tuple(pair for pair in above if pair not in chosen)
                inner = shortest_sum(field, _times(whole, single, number))
                forms.append(_factored(field, inner, rest, lower))
    return shortest(field, [*forms, *_divisions(field, value, above, below)])


def _denominators(
    exponents: Sequence[int], number: Fraction, below: Powers
) -> Iterator[tuple[Sequence[int], Fraction, Powers]]:
    """Yield the denominator in factors, and multiplied out, with what is left for the front."""
    yield exponents, number, below
    lows = [max(-e, 0) for e in exponents]
    whole = _expanded(below)
    if whole is None or not (any(lows) or number.denominator > 1 or len(below) > 1):
        return
    lower = _polynomial(whole.ring, _times(whole, lows, Fraction(number.denominator)))
    yield [max(e, 0) for e in exponents], Fraction(number.numerator), ((lower, 1),)


def _expanded(powers: Powers) -> ParameterPolynomial | None:
    """Return a product multiplied out, if it is of moderate size; None for the empty product."""
    if not powers or prod(len(laurent_of(f)) ** e for f, e in powers) > EXPANDED:
        return None
    return prod((f**e for f, e in powers[1:]), start=powers[0][0] ** powers[0][1])


def _divisions(
    field: ParameterField, value: Factored, above: Powers, below: Powers
) -> Iterator[Weight]:
    """Numerator = q·f + r for a factor f below: q + r/f, what else is there inside or outside."""
    upper = _expanded(above)
    if upper is None or len(upper) > DIVIDED:
        return
    others = tuple(pair for pair in value.factors if pair not in above)
    for factor, _ in below:
        whole, remainder = _divided(upper, factor)
        if whole and remainder:
            front = replace(value, factors=others)
            once = Factored(Fraction(1), ((factor, -1),))
            parts = [taken_apart(field.of_polynomial(part)) for part in (whole, remainder)]
            yield sum_of_weights([weight_of(field, _joined(part, front)) for part in parts])
            outside = weight_of(field, _joined(front, Factored(Fraction(1), ((factor, 1),))))
            inside = sum_of_weights([weight_of(field, _joined(part, once)) for part in parts])
            yield product_of_weights([outside, inside])


def _joined(first: Factored, second: Factored) -> Factored:
    """Return a product, simple factors first."""
    exponents = dict(first.factors)
    for factor, exponent in second.factors:
        exponents[factor] = exponents.get(factor, 0) + exponent
    powers = [(factor, exponent) for factor, exponent in exponents.items() if exponent]
    powers.sort(key=lambda pair: _simplicity(laurent_of(pair[0])))
    return Factored(first.content * second.content, tuple(powers))


def _divided(
    upper: ParameterPolynomial, factor: ParameterPolynomial
) -> tuple[ParameterPolynomial, ParameterPolynomial]:
    """Return a multiple of the factor and the rest of the terms, such that they add up.

    Terms are taken together that are alike in the parameters that are not in the factor.
    """
    ring = upper.ring
    inner = [any(column) for column in zip(*factor.itermonoms(), strict=True)]
    alike: dict[tuple[int, ...], dict[tuple[int, ...], Any]] = {}
    for monomial, coefficient in upper.iterterms():
        key = tuple(0 if i else e for i, e in zip(inner, monomial, strict=True))
        alike.setdefault(key, {})[monomial] = coefficient
    multiple, rest = ring.zero, ring.zero
    for terms in alike.values():
        part = ring.from_dict(terms)
        if len(terms) < len(factor) or part.rem(factor):
            rest += part
        else:
            multiple += part
    return multiple, rest


def _expansions(powers: Powers) -> Iterator[tuple[Powers, ParameterPolynomial]]:
    """Yield factors to multiply out, and their product: any, if there are few; else all."""
    sizes = range(1, len(powers) + 1) if len(powers) <= 3 else [len(powers)]
    for chosen in chain.from_iterable(combinations(powers, size) for size in sizes):
        if (whole := _expanded(chosen)) is not None:
            yield chosen, whole


def _times(polynomial: ParameterPolynomial, exponents: Sequence[int], number: Fraction) -> Laurent:
    return ordered(
        (tuple(e + d for e, d in zip(m, exponents, strict=True)), c * number)
        for m, c in laurent_of(polynomial)
    )


def _factored(field: ParameterField, front: Weight, above: Powers, below: Powers) -> Weight:
    """Return front · above / below; a sign goes into the first difference that takes it."""
    upper = [_power(field, f, e) for f, e in above]
    lower = [_power(field, f, e) for f, e in below]
    if front.number < 0:
        for parts, powers in ((upper, above), (lower, below)):
            turned = _turned(field, powers, parts)
            if turned is not None:
                parts[turned[0]] = turned[1]
                front = replace(front, number=-front.number)
                break
    inverse = product_of_weights(lower)
    return product_of_weights(
        [front, *upper, Weight(1 / inverse.number, inverse.below, inverse.above, inverse.cost)]
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
            if opposite.number > 0 and opposite.length <= part.length:
                return place, opposite
    return None
