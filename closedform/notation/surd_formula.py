"""Exact numbers as formulas, written as people write them."""

from __future__ import annotations

from fractions import Fraction
from math import lcm

from closedform.algebra.surds import SurdSum
from closedform.notation.expression import (
    Call,
    Expression,
    Negation,
    Number,
    Product,
    Quotient,
    Sum,
    number,
    operations,
)

__all__ = ["surd_expression"]


def surd_expression(value: SurdSum) -> Expression:
    """Return the shortest formula of a sum of square roots.

    The terms stand over their common denominator unless apart they take fewer operations.
    A positive term comes first, if there is one; the others follow by radicand.

    >>> from closedform.notation.plain import plain
    >>> plain(surd_expression(SurdSum.of({1: Fraction(-1, 2), 5: Fraction(1, 2)})))
    '(sqrt(5) - 1)/2'
    """
    if value.is_rational:
        return number(value.as_fraction())
    denominator = lcm(*(c.denominator for _, c in value.terms))
    apart = _sum(value)
    if denominator == 1:
        return apart
    above = SurdSum.of({d: c * denominator for d, c in value.terms})
    if all(c < 0 for _, c in above.terms):
        together: Expression = Negation(Quotient(_sum(-above), number(denominator)))
    else:
        together = Quotient(_sum(above), number(denominator))
    return min(together, apart, key=operations)


def _sum(value: SurdSum) -> Expression:
    """Return the terms one by one, a positive one first."""
    terms = list(value.terms)
    first = next((k for k, (_, c) in enumerate(terms) if c > 0), 0)
    terms.insert(0, terms.pop(first))
    written = tuple(_term(d, c) for d, c in terms)
    return written[0] if len(written) == 1 else Sum(written)


def _term(radicand: int, coefficient: Fraction) -> Expression:
    if radicand == 1:
        return number(coefficient)
    root = Call("sqrt", Number(Fraction(radicand)))
    above, below = abs(coefficient.numerator), coefficient.denominator
    term: Expression = root if above == 1 else Product((Number(Fraction(above)), root))
    if below != 1:
        term = Quotient(term, Number(Fraction(below)))
    return Negation(term) if coefficient < 0 else term
