"""Formulas as people write them: no factors 1, no double signs, fractions in lowest terms."""

from __future__ import annotations

from fractions import Fraction

from closedform.notation.written.tree import (
    Literal,
    Negation,
    Power,
    Product,
    Quotient,
    Sum,
    Written,
    with_parts,
)

__all__ = ["rational_written", "tidied"]

ZERO, ONE = Literal(Fraction(0)), Literal(Fraction(1))


def tidied(node: Written) -> Written:
    """Return a formula of the same value that leaves out what says nothing.

    Signs go in front of products and fractions, and printed decimals stay as they are.

    >>> from closedform.notation.written.plain_form import plain_written
    >>> from closedform.notation.written.tree import Symbol
    >>> t, minus = Symbol("t"), Negation(Literal(Fraction(3)))
    >>> plain_written(tidied(Product((ONE, Quotient(minus, Literal(Fraction(6))), Power(t, ONE)))))
    '-(1/2)*t'
    """
    whole = with_parts(node, tidied)
    match whole:
        case Negation(Negation(inside)):
            return inside
        case Negation(Literal(value)) if value == 0:
            return ZERO
        case Power(base, Literal(exponent)) if exponent == 1:
            return base
        case Product(factors):
            return _product(factors)
        case Quotient(above, below):
            return _quotient(above, below)
        case Sum(terms):
            left = tuple(term for term in terms if not _is_exactly(term, 0))
            return Sum(left) if len(left) > 1 else left[0] if left else ZERO
    return whole


def rational_written(value: Fraction) -> Written:
    """Return a rational number as a formula: the sign in front, whole numbers without fraction."""
    if value < 0:
        return Negation(rational_written(-value))
    if value.denominator == 1:
        return Literal(value)
    return Quotient(Literal(Fraction(value.numerator)), Literal(Fraction(value.denominator)))


def _is_exactly(node: Written, value: int) -> bool:
    return isinstance(node, Literal) and not node.is_decimal and node.value == value


def _product(factors: tuple[Written, ...]) -> Written:
    negative = False
    kept: list[Written] = []
    for factor in factors:
        inside = factor
        while isinstance(inside, Negation):
            negative, inside = not negative, inside.operand
        kept += inside.factors if isinstance(inside, Product) else (inside,)
    if any(_is_exactly(factor, 0) for factor in kept):
        return ZERO
    kept = [factor for factor in kept if not _is_exactly(factor, 1)]
    result: Written = ONE
    if kept:
        result = kept[0] if len(kept) == 1 else Product(tuple(kept))
    return Negation(result) if negative else result


def _quotient(above: Written, below: Written) -> Written:
    if isinstance(above, Negation):
        return tidied(Negation(_quotient(above.operand, below)))
    if isinstance(below, Negation):
        return tidied(Negation(_quotient(above, below.operand)))
    if _is_exactly(below, 1):
        return above
    whole = [isinstance(n, Literal) and not n.is_decimal for n in (above, below)]
    if all(whole) and isinstance(above, Literal) and isinstance(below, Literal) and below.value:
        value = above.value / below.value
        top = Literal(Fraction(value.numerator))
        return (
            top if value.denominator == 1 else Quotient(top, Literal(Fraction(value.denominator)))
        )
    return Quotient(above, below)
