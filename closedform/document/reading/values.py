"""Sums of products in a normal form that undoes what printing and reading may do, and no more.

Factors lose their order unless they are matrices, terms theirs; numbers that multiply are
gathered into one, like terms are added; a sign and a number common to a bracket come out of
it; a factor before a matrix goes into its entries.  Brackets are not multiplied out, so the
form of a formula is not much longer than the formula.  Formulas with the same form are equal.

A value is a set of terms.  A term has factors that are numbers, each a base with a whole
exponent, factors that are matrices in their order, and a rational coefficient.
"""

from __future__ import annotations

from collections.abc import Hashable, Iterable
from fractions import Fraction
from math import gcd, lcm
from typing import Any, cast

__all__ = [
    "Value",
    "atom",
    "entries_of",
    "exponential",
    "inverted",
    "number",
    "plus",
    "raised",
    "times",
]

Value = frozenset[tuple[tuple[frozenset[tuple[Hashable, int]], tuple[Hashable, ...]], Fraction]]
"""Terms: factors with their exponents, matrices in order, and the coefficient."""
Rows = tuple[tuple[Value, ...], ...]
NO_FACTORS: tuple[frozenset[tuple[Hashable, int]], tuple[Hashable, ...]] = (frozenset(), ())
LARGEST_POWER = 4096
"""A number to a higher exponent is not worked out."""


def number(value: Fraction | int) -> Value:
    """Return the form of a rational number."""
    return frozenset({(NO_FACTORS, Fraction(value))}) if value else frozenset()


def atom(base: Hashable, *, matrix: bool = False) -> Value:
    """Return the form of something that is not taken apart."""
    key = (frozenset(), (base,)) if matrix else (frozenset({(base, 1)}), ())
    return frozenset({(key, Fraction(1))})


def times(values: Iterable[Value]) -> Value:
    """Return the form of a product."""
    coefficient = Fraction(1)
    factors: dict[Hashable, int] = {}
    matrices: list[Hashable] = []
    for value in values:
        if not value:
            return value
        scale, powers, ordered = _as_factor(value)
        coefficient *= scale
        for base, exponent in powers:
            factors[base] = factors.get(base, 0) + exponent
        matrices += ordered
    key = frozenset((base, exponent) for base, exponent in factors.items() if exponent)
    return _into_array(key, tuple(matrices), coefficient)


def plus(values: Iterable[Value]) -> Value:
    """Return the form of a sum."""
    terms: dict[Any, Fraction] = {}
    for value in values:
        for key, coefficient in value:
            terms[key] = terms.get(key, Fraction(0)) + coefficient
    return frozenset((key, coefficient) for key, coefficient in terms.items() if coefficient)


def raised(base: Value, exponent: Value) -> Value:
    """Return the form of a power."""
    size = _whole(exponent)
    if base and size is not None and abs(size) <= LARGEST_POWER:
        scale, factors, matrices = _as_factor(base)
        if not matrices:
            key = frozenset((inner, power * size) for inner, power in factors if power * size)
            return frozenset({((key, ()), scale**size)})
    return atom(("power", base, exponent), matrix=_is_matrix(base))


def inverted(value: Value) -> Value:
    """Return the form of one over something, a number or a matrix."""
    return raised(value, number(-1))


def exponential(exponent: Value) -> Value:
    """Return the form of e to an exponent, a number or a matrix."""
    return atom(("exp", exponent), matrix=_is_matrix(exponent))


def entries_of(value: Value) -> Rows | None:
    """Return the entries of a form that is one matrix, row by row; None if it is none."""
    if len(value) != 1:
        return None
    (((factors, matrices), coefficient),) = value
    if factors or coefficient != 1 or len(matrices) != 1:
        return None
    return _rows_of(matrices[0])


def _rows_of(base: Hashable) -> Rows | None:
    """Return the entries of a matrix that is written out."""
    match base:
        case ("array", rows):
            return cast("Rows", rows)
    return None


def _as_factor(
    value: Value,
) -> tuple[Fraction, frozenset[tuple[Hashable, int]], tuple[Hashable, ...]]:
    """Return a form as coefficient, factors and matrices: a sum is one factor."""
    if len(value) == 1:
        (((factors, matrices), coefficient),) = value
        return coefficient, factors, matrices
    content = _content(coefficient for _, coefficient in value)
    terms, opposite = (
        frozenset((key, coefficient / scale) for key, coefficient in value)
        for scale in (content, -content)
    )
    # either sign would do; equal sums have equal hashes, so that they take the same
    if hash(opposite) < hash(terms):
        terms, content = opposite, -content
    base = ("sum", terms)
    if any(matrices for (_, matrices), _ in value):
        return content, frozenset(), (base,)
    return content, frozenset({(base, 1)}), ()


def _content(coefficients: Iterable[Fraction]) -> Fraction:
    """Return the positive number that leaves whole numbers without a common divisor."""
    values = list(coefficients)
    above = gcd(*(abs(value.numerator) for value in values))
    return Fraction(above, lcm(*(value.denominator for value in values)))


def _into_array(
    factors: frozenset[tuple[Hashable, int]], matrices: tuple[Hashable, ...], scale: Fraction
) -> Value:
    """Return a term; what multiplies a matrix that is written out goes into its entries."""
    if factors or scale != 1:
        front = frozenset({((factors, ()), scale)})
        for place, matrix in enumerate(matrices):
            rows = _rows_of(matrix)
            if rows is not None:
                inside = tuple(tuple(times((front, entry)) for entry in row) for row in rows)
                ordered = (*matrices[:place], ("array", inside), *matrices[place + 1 :])
                return frozenset({((frozenset(), ordered), Fraction(1))})
    whole = _lone_sum(factors, matrices)
    if whole is not None:
        return frozenset((key, scale * coefficient) for key, coefficient in whole)
    return frozenset({((factors, matrices), scale)})


def _lone_sum(
    factors: frozenset[tuple[Hashable, int]], matrices: tuple[Hashable, ...]
) -> Value | None:
    """Return the terms of a sum that is the only factor: no bracket is left around it."""
    if len(factors) + len(matrices) != 1:
        return None
    base, exponent = next(iter(factors)) if factors else (matrices[0], 1)
    match base:
        case ("sum", terms) if exponent == 1:
            return cast("Value", terms)
    return None


def _whole(value: Value) -> int | None:
    """Return a form that is a whole number as one."""
    if not value:
        return 0
    if len(value) == 1:
        ((key, coefficient),) = value
        if key == NO_FACTORS and coefficient.denominator == 1:
            return int(coefficient)
    return None


def _is_matrix(value: Value) -> bool:
    return any(matrices for (_, matrices), _ in value)
