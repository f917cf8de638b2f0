"""Sums of monomials in the parameters, written with few operations.

A Laurent polynomial is a sum of monomials with exponents of either sign.  It may be written
term by term, with a common factor or denominator in front, grouped by a parameter or a number
that several terms share (W. G. Horner's scheme), factored, or as a square and a rest.  Groups
are written in the same way.  Long sums are tried in few forms only.
"""

from __future__ import annotations

from collections.abc import Iterable, Iterator, Sequence
from dataclasses import replace
from fractions import Fraction
from functools import lru_cache
from itertools import chain, combinations
from math import gcd, isqrt, lcm

from closedform.algebra.field import rational
from closedform.algebra.parameter_field import ParameterField, ParameterPolynomial
from closedform.algebra.polynomial_factors import irreducible_factors
from closedform.notation.weight import (
    Weight,
    monomial_weight,
    power_of_weight,
    product_of_weights,
    shortest,
    sum_of_weights,
)

__all__ = ["Laurent", "flat_size", "laurent_of", "ordered", "shortest_sum"]

Laurent = tuple[tuple[tuple[int, ...], Fraction], ...]
"""(exponents, coefficient) of every term, coefficients not 0, in the order of printing."""

FULL = 8
"""Up to this number of terms all groupings are tried."""
GROUPED = 40
"""Up to this number of terms one grouping is tried at each step."""


@lru_cache(maxsize=4096)
def laurent_of(polynomial: ParameterPolynomial) -> Laurent:
    """Return the terms of a polynomial in the order of printing."""
    return ordered((monomial, rational(c)) for monomial, c in polynomial.iterterms())


def ordered(terms: Iterable[tuple[tuple[int, ...], Fraction]]) -> Laurent:
    """Return terms in the order of printing: simple ones first, then by the parameters in them."""
    return tuple(
        sorted(
            ((m, c) for m, c in terms if c),
            key=lambda term: (sum(map(abs, term[0])), [-e for e in term[0]]),
        )
    )


@lru_cache(maxsize=65536)
def shortest_sum(field: ParameterField, terms: Laurent) -> Weight:
    """Return a sum of at least one term in its shortest form."""
    if len(terms) == 1:
        return monomial_weight(field, *terms[0])
    exponents, number = _shared(terms)
    forms: list[Weight]
    shared = any(exponents) or number != 1
    if shared:
        forms, groupings = [_pulled(field, terms, exponents, number)], []
    else:
        forms = [*_fractions(field, terms), *_products(field, terms), *_squares(field, terms)]
        groupings = [
            [shortest_sum(field, group) for group in groups] for groups in _groupings(terms)
        ]
    sizes = [sum(weight.size for weight in weights) + len(weights) - 1 for weights in groupings]
    size = flat_size(terms)
    # a sign is one operation more: what is longer by two is not written
    most = min([size, *sizes, *(form.length for form in forms)]) + 1
    forms += [sum_of_weights(w) for w, n in zip(groupings, sizes, strict=True) if n <= most]
    if size <= most:
        flat = sum_of_weights([monomial_weight(field, *term) for term in terms])
        forms.insert(1 if shared else 0, flat)
    return shortest(field, forms)


def flat_size(terms: Laurent) -> int:
    """Return the operations of a sum written term by term, without a sign of all of it."""
    size = len(terms) - 1
    for exponents, number in terms:
        above = int(abs(number.numerator) != 1)
        for e in exponents:
            if e > 0:
                above += 1
                size += e > 1
            elif e:
                size += 1 + (e < -1)
        size += max(above - 1, 0) + (number.denominator != 1)
    return size


def _shared(terms: Laurent) -> tuple[tuple[int, ...], Fraction]:
    """Return the monomial and the number that all terms share, above or below."""
    shared = []
    for column in zip(*(m for m, _ in terms), strict=True):
        low, high = min(column), max(column)
        shared.append(low if low > 0 else min(0, high))
    above = gcd(*(c.numerator for _, c in terms))
    below = gcd(*(c.denominator for _, c in terms))
    return tuple(shared), Fraction(above, below)


def _pulled(
    field: ParameterField, terms: Laurent, exponents: Sequence[int], number: Fraction
) -> Weight:
    """The factor times what is left of the terms without it."""
    left = ordered(
        (tuple(e - d for e, d in zip(m, exponents, strict=True)), c / number) for m, c in terms
    )
    front = monomial_weight(field, exponents, number)
    return product_of_weights([front, shortest_sum(field, left)])


def _fractions(field: ParameterField, terms: Laurent) -> Iterator[Weight]:
    """Common denominators of some of the parameters that stand below, and of the number."""
    lows = [min(column) for column in zip(*(m for m, _ in terms), strict=True)]
    number = Fraction(1, lcm(*(c.denominator for _, c in terms)))
    below = [i for i, low in enumerate(lows) if low < 0] + ([-1] if number != 1 else [])
    sizes = range(1, len(below) + 1) if len(below) <= 3 and len(terms) <= FULL else [len(below)]
    for chosen in chain.from_iterable(combinations(below, size) for size in sizes if below):
        exponents = tuple(low if i in chosen else 0 for i, low in enumerate(lows))
        yield _pulled(field, terms, exponents, number if -1 in chosen else Fraction(1))


def _groupings(terms: Laurent) -> list[list[Laurent]]:
    """Ways to set those terms apart that share a parameter, or a number."""
    if len(terms) > GROUPED:
        return []
    found: dict[tuple[int, ...], None] = {}
    for column in zip(*(m for m, _ in terms), strict=True):
        for sign in (1, -1):
            found[tuple(i for i, e in enumerate(column) if e * sign > 0)] = None
    for size in dict.fromkeys(abs(c) for _, c in terms if abs(c) != 1):
        found[tuple(i for i, (_, c) in enumerate(terms) if abs(c) == size)] = None
    chosen = [places for places in found if 1 < len(places) < len(terms)]
    if len(terms) > FULL:
        chosen = sorted(chosen, key=len, reverse=True)[:1]
    groupings = []
    for places in chosen:
        inside = tuple(terms[i] for i in places)
        outside = tuple(term for i, term in enumerate(terms) if i not in places)
        groupings.append([inside, outside] if 0 in places else [outside, inside])
    return groupings


def _products(field: ParameterField, terms: Laurent) -> Iterator[Weight]:
    """The factored form of a polynomial with whole coefficients, if it has factors."""
    if len(terms) > FULL or _is_irreducible(terms):
        return
    if any(e < 0 for m, _ in terms for e in m) or any(c.denominator != 1 for _, c in terms):
        return
    number, factors = irreducible_factors(dict(terms))
    if len(factors) > 1 or factors[0][1] > 1:
        weights = [
            power_of_weight(shortest_sum(field, ordered(factor.items())), exponent)
            for factor, exponent in factors
        ]
        yield product_of_weights([Weight(number), *weights])


def _is_irreducible(terms: Laurent) -> bool:
    """Whether a parameter occurs in one term only, once: with nothing shared, no factors."""
    columns = zip(*(m for m, _ in terms), strict=True)
    return any(sorted(map(abs, column))[-2:] == [0, 1] for column in columns)


def _squares(field: ParameterField, terms: Laurent) -> Iterator[Weight]:
    """The square completed in one parameter: (r x + b)^2 and a short rest."""
    if not 4 <= len(terms) <= FULL:
        return
    for place in range(len(field.parameters)):
        by_degree = {d: [t for t in terms if t[0][place] == d] for d in (1, 2)}
        if len(by_degree[2]) != 1 or not by_degree[1] or any(t[0][place] > 2 for t in terms):
            continue
        ((exponents, size),) = by_degree[2]
        root = _root(abs(size))
        if root is None or any(e % 2 for e in exponents):
            continue
        sign = 1 if size > 0 else -1
        half = tuple(e // 2 for e in exponents)
        inner = [(half, root)] + [
            (tuple(e - h for e, h in zip(m, half, strict=True)), c * sign / (2 * root))
            for m, c in by_degree[1]
        ]
        rest = _without_square(terms, inner, sign)
        if len(rest) < len(terms) - 2:
            square = power_of_weight(shortest_sum(field, ordered(inner)), 2)
            square = replace(square, number=square.number * sign)
            yield sum_of_weights([square, shortest_sum(field, rest)]) if rest else square


def _without_square(
    terms: Laurent, inner: Sequence[tuple[tuple[int, ...], Fraction]], sign: int
) -> Laurent:
    left = dict(terms)
    for first, c in inner:
        for second, d in inner:
            monomial = tuple(e + f for e, f in zip(first, second, strict=True))
            left[monomial] = left.get(monomial, Fraction(0)) - sign * c * d
    return ordered(left.items())


def _root(value: Fraction) -> Fraction | None:
    root = Fraction(isqrt(value.numerator), isqrt(value.denominator))
    return root if root * root == value else None
