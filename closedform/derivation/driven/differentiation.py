"""The derivative of a printed formula, term by term, in the names that it has."""

from __future__ import annotations

from collections.abc import Iterable, Sequence
from dataclasses import dataclass
from fractions import Fraction

from closedform.notation.expression import (
    ONE,
    ZERO,
    Call,
    Expression,
    Name,
    Negation,
    Number,
    Power,
    Product,
    Quotient,
    Sum,
    names_in,
    number,
    power_of,
    product,
)
from closedform.notation.terms import opened, sum_of

__all__ = ["derivative_of", "times"]

_DERIVED = {"exp": (1, "exp"), "sin": (1, "cos"), "cos": (-1, "sin")}
_DERIVED |= {"sinh": (1, "cosh"), "cosh": (1, "sinh")}
"""Sign and name of the derivative of each function."""


@dataclass(frozen=True)
class _Term:
    """number · factors / divisors."""

    number: Fraction
    above: tuple[Expression, ...] = ()
    below: tuple[Expression, ...] = ()


def derivative_of(formula: Expression, variable: str) -> Expression:
    """Return the derivative of a formula with respect to a variable.

    Raises TypeError for what is no sum, product, whole power, exponential, sine or cosine,
    circular or hyperbolic, or where the variable stands in a divisor.
    """
    if variable not in names_in(formula):
        return ZERO
    match formula:
        case Name():
            return ONE
        case Negation(inside):
            return times([Negation(ONE), derivative_of(inside, variable)])
        case Sum(terms):
            return _sum(derivative_of(term, variable) for term in terms)
        case Product(factors):
            return _sum(
                times([*factors[:k], derivative_of(factor, variable), *factors[k + 1 :]])
                for k, factor in enumerate(factors)
                if variable in names_in(factor)
            )
        case Quotient(above, below) if variable not in names_in(below):
            return times([derivative_of(above, variable), Quotient(ONE, below)])
        case Power(base, Number(exponent)) if exponent.denominator == 1 and exponent:
            below = power_of(base, int(exponent) - 1)
            return times([number(exponent), below, derivative_of(base, variable)])
        case Call(function, argument) if function in _DERIVED:
            sign, name = _DERIVED[function]
            return times([number(sign), derivative_of(argument, variable), Call(name, argument)])
    raise TypeError(f"{formula} is not made as solutions are")


def times(factors: Sequence[Expression]) -> Expression:
    """Return a product with its sign outside and its numbers multiplied."""
    parts = [_taken(factor) for factor in factors]
    total = Fraction(1)
    for part in parts:
        total *= part.number
    if not total:
        return ZERO
    above = [f for part in parts for f in part.above]
    below = []
    for divisor in (f for part in parts for f in part.below):
        if divisor in above:
            above.remove(divisor)
        else:
            below.append(divisor)
    size = abs(total)
    whole = product([Number(Fraction(size.numerator)), *above])
    if below or size.denominator > 1:
        whole = Quotient(whole, product([Number(Fraction(size.denominator)), *below]))
    return Negation(whole) if total < 0 else whole


def _taken(formula: Expression) -> _Term:
    match formula:
        case Number(value):
            return _Term(value)
        case Negation(inside):
            part = _taken(inside)
            return _Term(-part.number, part.above, part.below)
        case Product(factors):
            whole = _Term(Fraction(1))
            for part in map(_taken, factors):
                above, below = whole.above + part.above, whole.below + part.below
                whole = _Term(whole.number * part.number, above, below)
            return whole
        case Quotient(upper, lower):
            part, under = _taken(upper), _taken(lower)
            above, below = part.above + under.below, part.below + under.above
            return _Term(part.number / under.number, above, below)
    return _Term(Fraction(1), (formula,))


def _sum(terms: Iterable[Expression]) -> Expression:
    kept = [term for term in terms if term != ZERO]
    return opened(sum_of(kept)) if kept else ZERO
