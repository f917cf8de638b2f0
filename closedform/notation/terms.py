"""Writing exact factors: signs, fractions and square roots gathered the short way."""

from __future__ import annotations

from collections.abc import Sequence
from fractions import Fraction
from math import gcd, isqrt, lcm

from closedform.algebra.surds import SurdSum, drawn_out, root_of_rational
from closedform.notation.expression import (
    ONE,
    Call,
    Expression,
    Negation,
    Number,
    Quotient,
    Sum,
    number,
    operations,
    product,
)

__all__ = [
    "content_of",
    "negated",
    "opened",
    "radical_formula",
    "square_root_of_surd",
    "sum_of",
    "surd_formula",
    "weighted",
]


def square_root_of_surd(value: SurdSum) -> SurdSum | None:
    """Return the square root of a number > 0 as a surd sum, or None if none is found.

    None may also say that numbers too large to be factored stand below the root.
    sqrt(A + B sqrt(d)) = sqrt((A + c)/2) ± sqrt((A - c)/2) when c = sqrt(A^2 - B^2 d) is
    rational.  Source:  Euclid, Elements, book X; common practice.
    """
    if value.is_rational:
        return root_of_rational(value.as_fraction())
    terms = dict(value.terms)
    whole = terms.pop(1, Fraction(0))
    if len(terms) != 1 or whole <= 0:
        return None
    ((radicand, slope),) = terms.items()
    norm = whole * whole - slope * slope * radicand
    if norm < 0 or not _is_square(norm):
        return None
    c = _root(norm)
    plus, minus = root_of_rational((whole + c) / 2), root_of_rational((whole - c) / 2)
    if plus is None or minus is None:
        return None
    return plus + minus if slope > 0 else plus - minus


def radical_formula(square: SurdSum) -> Expression:
    """Return the formula of sqrt(square): no nested root where there is a short form.

    Else square factors are drawn out, as far as they are known: 20 sqrt(2 - sqrt(2)).
    """
    root = square_root_of_surd(square)
    if root is not None:
        return surd_formula(root)
    content = _rational_content([square])
    whole, _ = drawn_out(content.numerator * content.denominator)
    outside = Fraction(whole, content.denominator)
    inside = square * SurdSum.rational(1 / outside**2)
    return weighted(SurdSum.rational(outside), [Call("sqrt", surd_formula(inside))], [])


def surd_formula(value: SurdSum) -> Expression:
    """Return the shortest formula of a number: of equals, the terms over one denominator.

    A positive term comes first, if there is one; the others follow by radicand.

    >>> from closedform.notation.plain import plain
    >>> plain(surd_formula(SurdSum.of({1: Fraction(-1, 2), 5: Fraction(1, 2)})))
    '(sqrt(5) - 1)/2'
    """
    if value.is_rational:
        return number(value.as_fraction())
    denominator = lcm(*(c.denominator for _, c in value.terms))
    above = _terms_apart(value * SurdSum.rational(denominator))
    if isinstance(above, Negation):
        together: Expression = Negation(_fraction([above.operand], [number(denominator)]))
    else:
        together = _fraction([above], [number(denominator)])
    apart = opened(_terms_apart(value))
    forms = (opened(together), apart, weighted(value, (), ()))
    return min(forms, key=operations)


def _terms_apart(value: SurdSum) -> Expression:
    return sum_of([weighted(SurdSum.of({d: c}), (), ()) for d, c in value.terms])


def weighted(
    value: SurdSum, factors: Sequence[Expression], divisors: Sequence[Expression]
) -> Expression:
    """Return value · factors / divisors as one term, its sign outside.

    `value` is not zero.  Of the equal ways to write a single root, p sqrt(d)/q or
    p/(q sqrt(d)), the one with fewer operations is taken.
    """
    if all(c < 0 for _, c in value.terms) or (
        len(value.terms) > 1 and sum(c < 0 for _, c in value.terms) * 2 > len(value.terms)
    ):
        return Negation(weighted(-value, factors, divisors))
    denominator = lcm(*(c.denominator for _, c in value.terms))
    if len(value.terms) > 1:
        content = gcd(*(int(c * denominator) for _, c in value.terms))
        return min(
            (_gathered(value, top, denominator, factors, divisors) for top in (1, content)),
            key=operations,
        )
    ((radicand, coefficient),) = value.terms
    top, bottom = Fraction(coefficient.numerator), Fraction(coefficient.denominator)
    usual = _fraction([Number(top), _surd(radicand), *factors], [Number(bottom), *divisors])
    if radicand == 1:
        return usual
    turned = coefficient * radicand
    other = _fraction(
        [Number(Fraction(turned.numerator)), *factors],
        [Number(Fraction(turned.denominator)), _surd(radicand), *divisors],
    )
    return other if operations(other) < operations(usual) else usual


def _gathered(
    value: SurdSum,
    top: int,
    bottom: int,
    factors: Sequence[Expression],
    divisors: Sequence[Expression],
) -> Expression:
    """top/bottom times what is then left of the value, in brackets, positive terms first."""
    terms = [
        (product((number(abs(n)), _surd(d))), n < 0)
        for d, n in ((d, int(c * bottom) // top) for d, c in value.terms)
    ]
    terms.sort(key=lambda term: term[1])
    total = Sum(tuple(Negation(term) if minus else term for term, minus in terms))
    return _fraction([number(top), total, *factors], [number(bottom), *divisors])


def sum_of(terms: Sequence[Expression]) -> Expression:
    """Return the sum of the terms, brackets opened, a positive term first where there is one.

    Terms that are all negative give one `Negation`; `opened` turns it into -a - b.
    """
    flat = [part for term in terms for part in _parts(term)]
    if not flat:
        return Number(Fraction(0))
    if len(flat) == 1:
        return flat[0]
    if all(isinstance(term, Negation) for term in flat):
        return Negation(Sum(tuple(negated(term) for term in flat)))
    lead = next(i for i, term in enumerate(flat) if not isinstance(term, Negation))
    return Sum((flat[lead], *flat[:lead], *flat[lead + 1 :]))


def opened(expression: Expression) -> Expression:
    """Return -(a + b) as -a - b."""
    if isinstance(expression, Negation) and isinstance(expression.operand, Sum):
        return Sum(tuple(negated(term) for term in expression.operand.terms))
    return expression


def _parts(term: Expression) -> tuple[Expression, ...]:
    inside = opened(term)
    return inside.terms if isinstance(inside, Sum) else (inside,)


def negated(expression: Expression) -> Expression:
    """Return the expression with the opposite sign."""
    return expression.operand if isinstance(expression, Negation) else Negation(expression)


def content_of(values: Sequence[SurdSum]) -> tuple[SurdSum, ...]:
    """Return common factors that may be put in front of the values, 1 always among them.

    The others are 1/denominator, the rational content, and that times a common root.
    """
    content = _rational_content(values)
    found = [Fraction(1), Fraction(1, content.denominator), content]
    contents = [SurdSum.rational(c) for c in dict.fromkeys(found)]
    radicands = {value.terms[0][0] for value in values if len(value.terms) == 1}
    if len(radicands) == 1 and radicands != {1} and all(len(v.terms) == 1 for v in values):
        root = SurdSum.of({radicands.pop(): Fraction(1)})
        contents += [content * root for content in contents]
    return tuple(contents)


def _rational_content(values: Sequence[SurdSum]) -> Fraction:
    """The largest rational number of which all coefficients are whole multiples."""
    coefficients = [c for value in values for _, c in value.terms]
    bottom = lcm(*(c.denominator for c in coefficients))
    return Fraction(gcd(*(int(c * bottom) for c in coefficients)), bottom)


def _surd(radicand: int) -> Expression:
    return ONE if radicand == 1 else Call("sqrt", number(radicand))


def _fraction(above: Sequence[Expression], below: Sequence[Expression]) -> Expression:
    top, bottom = product(above), product(below)
    if bottom == ONE:
        return top
    if isinstance(top, Number) and isinstance(bottom, Number):
        return Number(top.value / bottom.value)
    return Quotient(top, bottom)


def _is_square(value: Fraction) -> bool:
    return all(isqrt(n) ** 2 == n for n in (value.numerator, value.denominator))


def _root(value: Fraction) -> Fraction:
    return Fraction(isqrt(value.numerator), isqrt(value.denominator))
