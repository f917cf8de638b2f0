"""The walk from a formula to its exact value, in whatever the numbers of a model are."""

from __future__ import annotations

from abc import ABC, abstractmethod
from fractions import Fraction
from typing import Generic, TypeVar

from closedform.errors import Place
from closedform.notation.errors import ExponentError
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

__all__ = ["Arithmetic"]

T = TypeVar("T")


class Arithmetic(ABC, Generic[T]):
    """Exact arithmetic with values of one kind, held to a size that can be worked with.

    `whole` is the part of a formula that an error quotes, `place` where the formula stands.
    """

    names: frozenset[str] = frozenset()
    """The names that have a value."""

    @abstractmethod
    def number(self, value: Fraction) -> T:
        """Return a rational number."""

    @abstractmethod
    def named(self, name: str, place: Place) -> T:
        """Return what a name stands for.  Raises NotANumberError for one that is unknown."""

    @abstractmethod
    def negated(self, value: T) -> T:
        """Return -value."""

    @abstractmethod
    def added(self, one: T, other: T, whole: Expression, place: Place) -> T:
        """Return the sum.  Raises the errors of size."""

    @abstractmethod
    def multiplied(self, one: T, other: T, whole: Expression, place: Place) -> T:
        """Return the product.  Raises the errors of size."""

    @abstractmethod
    def inverted(self, value: T, whole: Expression, place: Place) -> T:
        """Return 1/value.  Raises DivisionByZeroError and the errors of size."""

    @abstractmethod
    def called(self, call: Call, place: Place) -> T:
        """Return the value of a function, or refuse it."""

    @abstractmethod
    def root(self, value: T, whole: Expression, place: Place) -> T:
        """Return the square root of a value, or refuse it."""

    @abstractmethod
    def fraction(self, value: T) -> Fraction | None:
        """Return a value that is a rational number, or None."""

    @abstractmethod
    def text(self, value: T) -> str:
        """Return a value in plain notation, for an error."""

    def value(self, expression: Expression, place: Place) -> T:
        """Return the exact value of a formula.

        Raises:  DivisionByZeroError, ExponentError, NotANumberError, and what the kind of
                 value adds; each quotes the part concerned.
        """
        match expression:
            case Number(value):
                return self.number(value)
            case Name(text):
                return self.named(text, place)
            case Negation(operand):
                return self.negated(self.value(operand, place))
            case Sum(terms):
                total = self.number(Fraction(0))
                for term in terms:
                    total = self.added(total, self.value(term, place), expression, place)
                return total
            case Product(factors):
                product = self.number(Fraction(1))
                for factor in factors:
                    product = self.multiplied(product, self.value(factor, place), expression, place)
                return product
            case Quotient(above, below):
                inverse = self.inverted(self.value(below, place), expression, place)
                return self.multiplied(self.value(above, place), inverse, expression, place)
            case Power():
                return self._power(expression, place)
            case Call():
                return self.called(expression, place)

    def _power(self, power: Power, place: Place) -> T:
        base = self.value(power.base, place)
        times = self.fraction(self.value(power.exponent, place))
        if times is None:
            raise ExponentError(place, plain(power))
        if times.denominator == 2:
            base, times = self.root(base, power, place), times * 2
        if times.denominator != 1:
            raise ExponentError(place, plain(power))
        if times < 0:
            base, times = self.inverted(base, power, place), -times
        return self._integer_power(base, int(times), power, place)

    def _integer_power(self, base: T, times: int, power: Power, place: Place) -> T:
        """Return base^times for times >= 0 by squaring.

        Every value but 0, 1 and -1 grows with each squaring, so the limits of size soon stop
        a power that would become too large.
        """
        result = self.number(Fraction(1))
        for bit in bin(times)[2:]:
            result = self.multiplied(result, result, power, place)
            if bit == "1":
                result = self.multiplied(result, base, power, place)
        return result
