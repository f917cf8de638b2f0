"""Formulas as exact numbers: rationals and square roots of rationals, nothing rounded."""

from __future__ import annotations

from fractions import Fraction

from closedform.algebra.surds import LARGEST_RADICAND, SurdSum
from closedform.errors import Place
from closedform.notation.arithmetic import Arithmetic
from closedform.notation.errors import (
    DivisionByZeroError,
    ExponentError,
    InexactFunctionError,
    NegativeRootError,
    NestedRootError,
    NotANumberError,
    SizeError,
)
from closedform.notation.expression import Call, Expression
from closedform.notation.plain import plain
from closedform.notation.terms import surd_formula

__all__ = ["MOST_BITS", "NUMBERS", "bounded", "exact_value"]

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


def exact_value(expression: Expression, place: Place) -> SurdSum:
    """Return the exact value of a formula without names.

    Read are integers, fractions, decimals, + - * /, integer powers and square roots of
    rational numbers; a power of a rational number may be half an integer.  `place` is
    where the formula stands, for the errors.

    Raises:  DivisionByZeroError, NegativeRootError, NestedRootError, InexactFunctionError,
             ExponentError, NotANumberError, SizeError; each quotes the part concerned.

    >>> from closedform.notation.expression import Number, Power
    >>> exact_value(Power(Number(Fraction(8)), Number(Fraction(1, 2))), Place())
    SurdSum(terms=((2, Fraction(2, 1)),))
    """
    return NUMBERS.value(expression, place)


def bounded(value: SurdSum, whole: Expression, place: Place) -> SurdSum:
    """Return the value.  Raises SizeError, quoting `whole`, if it is too large to go on with."""
    if len(value.terms) > MOST_TERMS or _bits(value) > MOST_BITS:
        raise SizeError(place, plain(whole), SIZE_LIMIT)
    return value


class _Numbers(Arithmetic[SurdSum]):
    """Sums of rational multiples of square roots."""

    def number(self, value: Fraction) -> SurdSum:
        return SurdSum.rational(value)

    def named(self, name: str, place: Place) -> SurdSum:
        raise NotANumberError(place, name)

    def negated(self, value: SurdSum) -> SurdSum:
        return -value

    def added(self, one: SurdSum, other: SurdSum, whole: Expression, place: Place) -> SurdSum:
        return bounded(one + other, whole, place)

    def multiplied(self, one: SurdSum, other: SurdSum, whole: Expression, place: Place) -> SurdSum:
        return bounded(one * other, whole, place)

    def inverted(self, value: SurdSum, whole: Expression, place: Place) -> SurdSum:
        if value.is_zero:
            raise DivisionByZeroError(place, plain(whole))
        if len(value.terms) > MOST_TERMS_BELOW:
            raise SizeError(place, plain(whole), SIZE_LIMIT)
        return bounded(value.inverse(), whole, place)

    def called(self, call: Call, place: Place) -> SurdSum:
        if call.function != "sqrt":
            raise InexactFunctionError(place, plain(call))
        return self.root(self.value(call.argument, place), call, place)

    def root(self, value: SurdSum, whole: Expression, place: Place) -> SurdSum:
        if not value.is_rational:
            nested = isinstance(whole, Call)
            raise (NestedRootError if nested else ExponentError)(place, plain(whole))
        if value.as_fraction() < 0:
            raise NegativeRootError(place, plain(whole))
        try:
            return value.sqrt()
        except ValueError:
            raise SizeError(place, plain(whole), SIZE_LIMIT) from None

    def fraction(self, value: SurdSum) -> Fraction | None:
        return value.as_fraction() if value.is_rational else None

    def text(self, value: SurdSum) -> str:
        return plain(surd_formula(value))


NUMBERS = _Numbers()


def _bits(value: SurdSum) -> int:
    """Return the length in bits of the longest integer in the value."""
    return max(
        (
            max(c.numerator.bit_length(), c.denominator.bit_length(), d.bit_length())
            for d, c in value.terms
        ),
        default=0,
    )
