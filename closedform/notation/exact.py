"""Formulas as exact numbers: rationals and square roots of rationals, nothing rounded."""

from __future__ import annotations

from fractions import Fraction

from closedform.algebra.surds import LARGEST_RADICAND, SurdSum
from closedform.errors import Place
from closedform.notation.errors import (
    DivisionByZeroError,
    ExponentError,
    InexactFunctionError,
    NegativeRootError,
    NestedRootError,
    NotANumberError,
    SizeError,
)
from closedform.notation.expression import (
    Call,
    Expression,
    Name,
    Negation,
    Number,
    Power,
    Product,
    Quotient,
    Sum,
)
from closedform.notation.plain import plain

__all__ = ["exact_value"]

MOST_BITS = 7_000
"""Bits of a numerator or a denominator; about 2 000 decimal digits."""
MOST_TERMS = 64
"""Terms of a sum of roots: all products of six of them."""
MOST_TERMS_BELOW = 7
"""Terms of a denominator.  Its inverse has up to 2^6 terms, and is worked out by conjugates."""

SIZE_LIMIT = (
    f"numerators and denominators have up to {MOST_BITS * 3 // 10} digits, sums up to "
    f"{MOST_TERMS} different roots, denominators up to {MOST_TERMS_BELOW}, and roots are taken "
    f"of integers up to 10^{len(str(LARGEST_RADICAND)) - 1}"
)
HALF = Fraction(1, 2)


def exact_value(expression: Expression, place: Place) -> SurdSum:
    """Return the exact value of a formula without names.

    Read are integers, fractions, decimals, + - * /, integer powers and square roots of
    rational numbers; a power of a rational number may be half an integer.  `place` is
    where the formula stands, for the errors.

    Raises:  DivisionByZeroError, NegativeRootError, NestedRootError, InexactFunctionError,
             ExponentError, NotANumberError, SizeError; each quotes the part concerned.

    >>> exact_value(Power(Number(Fraction(8)), Number(Fraction(1, 2))), Place())
    SurdSum(terms=((2, Fraction(2, 1)),))
    """
    match expression:
        case Number(value):
            return SurdSum.rational(value)
        case Name(text):
            raise NotANumberError(place, text)
        case Negation(operand):
            return -exact_value(operand, place)
        case Sum(terms):
            total = SurdSum.rational(0)
            for term in terms:
                total = bounded(total + exact_value(term, place), expression, place)
            return total
        case Product(factors):
            product = SurdSum.rational(1)
            for factor in factors:
                product = bounded(product * exact_value(factor, place), expression, place)
            return product
        case Quotient(above, below):
            inverse = inverse_of(exact_value(below, place), expression, place)
            return bounded(exact_value(above, place) * inverse, expression, place)
        case Power():
            return _power(expression, place)
        case Call("sqrt", argument):
            return _root(exact_value(argument, place), expression, place)
        case Call():
            raise InexactFunctionError(place, plain(expression))


def inverse_of(value: SurdSum, whole: Expression, place: Place) -> SurdSum:
    """Return 1/value exactly; `whole` is what an error quotes.

    Raises:  DivisionByZeroError, SizeError.
    """
    if value.is_zero:
        raise DivisionByZeroError(place, plain(whole))
    if len(value.terms) > MOST_TERMS_BELOW:
        raise SizeError(place, plain(whole), SIZE_LIMIT)
    return bounded(value.inverse(), whole, place)


def bounded(value: SurdSum, whole: Expression, place: Place) -> SurdSum:
    """Return the value.  Raises SizeError, quoting `whole`, if it is too large to go on with."""
    if len(value.terms) > MOST_TERMS or _bits(value) > MOST_BITS:
        raise SizeError(place, plain(whole), SIZE_LIMIT)
    return value


def _bits(value: SurdSum) -> int:
    """Return the length in bits of the longest integer in the value."""
    return max(
        (
            max(c.numerator.bit_length(), c.denominator.bit_length(), d.bit_length())
            for d, c in value.terms
        ),
        default=0,
    )


def _power(power: Power, place: Place) -> SurdSum:
    base, exponent = exact_value(power.base, place), exact_value(power.exponent, place)
    if not exponent.is_rational:
        raise ExponentError(place, plain(power))
    times = exponent.as_fraction()
    if times.denominator == HALF.denominator and base.is_rational:
        base, times = _root(base, power, place), times * 2
    if times.denominator != 1:
        raise ExponentError(place, plain(power))
    if times < 0:
        base, times = inverse_of(base, power, place), -times
    return _integer_power(base, int(times), power, place)


def _integer_power(base: SurdSum, times: int, power: Power, place: Place) -> SurdSum:
    """Return base^times for times >= 0 by squaring.

    Every value but 0, 1 and -1 grows with each squaring, so `bounded` soon stops a power
    that would become too large.
    """
    result = SurdSum.rational(1)
    for bit in bin(times)[2:]:
        result = bounded(result * result, power, place)
        if bit == "1":
            result = bounded(result * base, power, place)
    return result


def _root(value: SurdSum, whole: Expression, place: Place) -> SurdSum:
    if not value.is_rational:
        raise NestedRootError(place, plain(whole))
    if value.as_fraction() < 0:
        raise NegativeRootError(place, plain(whole))
    try:
        return value.sqrt()
    except ValueError:
        raise SizeError(place, plain(whole), SIZE_LIMIT) from None
