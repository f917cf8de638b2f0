"""From a formula in the time to a signal: bursts of waves, and impulses."""

from __future__ import annotations

from collections.abc import Callable
from dataclasses import dataclass
from fractions import Fraction
from typing import Generic, TypeVar

from closedform.algebra.field import Scalar
from closedform.errors import Place
from closedform.model.driven.harmonics import Harmonic, Harmonics
from closedform.model.driven.instants import Signs, order_of_numbers
from closedform.model.driven.signal import Signal
from closedform.model.driven.signal_errors import (
    NameInInputError,
    NonlinearArgumentError,
    PowerOfTimeError,
    StepArgumentError,
    UnknownDirectionError,
    UnreadFunctionError,
)
from closedform.model.driven.switched import MOST_POWER, Part, Strike, Switched, SwitchedAlgebra
from closedform.notation.arithmetic import Arithmetic
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
    names_in,
)
from closedform.notation.plain import plain

__all__ = ["signal_of"]

T = TypeVar("T")


def signal_of(
    expression: Expression,
    time: str,
    arithmetic: Arithmetic[T],
    place: Place,
    signs: Signs | None = None,
) -> Signal:
    """Return a formula as a signal, whose numbers are values of the arithmetic.

    Read are sums and products of polynomials in the time, exp, sin, cos, sinh and cosh of
    a*t + b, whole powers of these, step(t - a), step(a - t) and delta(t - a).  With
    parameters `signs` tells the sign of an element, where that is known; without it the
    order of instants with parameters is not.

    Raises:  the errors of ``signal_errors``, and what the arithmetic raises; each quotes the
             term concerned.

    >>> from closedform.notation.exact import NUMBERS
    >>> signal_of(Call("sin", Name("t")), "t", NUMBERS, Place()).bursts[0].waves[0].kernel
    'sin'
    """
    order = order_of_numbers(arithmetic, place, signs)
    algebra = SwitchedAlgebra(Harmonics(arithmetic, expression, place), order, time, place)
    return _Reading(arithmetic, algebra, time, place).signal(expression)


@dataclass(frozen=True)
class _Reading(Generic[T]):
    """What stays the same while a formula is walked through."""

    arithmetic: Arithmetic[T]
    switched: SwitchedAlgebra[T]
    time: str
    place: Place

    @property
    def harmonics(self) -> Harmonics[T]:
        return self.switched.harmonics

    def signal(self, expression: Expression) -> Signal:
        for name in sorted(names_in(expression) - self.arithmetic.names - {self.time}):
            raise NameInInputError(self.place, name, self.time, "")
        return self.switched.signal(self.function(expression), expression)

    def function(self, expression: Expression) -> Switched:
        if self._is_number(expression):
            return self.switched.constant(self.arithmetic.value(expression, self.place))
        match expression:
            case Name():
                number = self.harmonics.number
                return self.switched.smooth(self.harmonics.of_polynomial(number(0), number(1)))
            case Negation(operand):
                minus = self.switched.constant(self.harmonics.number(-1))
                return self.switched.product(minus, self.function(operand), expression)
            case Sum(terms):
                return self.switched.sum(map(self.function, terms))
            case Product(factors):
                return self.switched.multiplied(
                    [self.function(factor) for factor in factors], expression
                )
            case Quotient(above, below):
                inverse = self.switched.inverse(self.function(below), expression)
                return self.switched.product(self.function(above), inverse, expression)
            case Power(base, exponent):
                return self._power(base, exponent, expression)
            case Call("step" | "delta" as name, argument):
                return self._switch(name, argument, expression)
            case Call():
                return self._called(expression)
            case Number(value):
                return self.switched.constant(self.arithmetic.number(value))

    def _is_number(self, expression: Expression) -> bool:
        """Whether a formula has no time in it and no function but roots."""
        match expression:
            case Name(text):
                return text != self.time
            case Negation(operand):
                return self._is_number(operand)
            case Sum(several) | Product(several):
                return all(map(self._is_number, several))
            case Quotient(one, other) | Power(one, other):
                return self._is_number(one) and self._is_number(other)
            case Call(function, argument):
                return function == "sqrt" and self._is_number(argument)
            case Number():
                return True

    def _power(self, base: Expression, exponent: Expression, whole: Expression) -> Switched:
        times = None
        if self._is_number(exponent):
            times = self.arithmetic.fraction(self.arithmetic.value(exponent, self.place))
        if times is None or times.denominator != 1 or abs(times) > MOST_POWER:
            raise PowerOfTimeError(self.place, plain(whole), self.time, MOST_POWER)
        function = self.function(base)
        if times < 0:
            function = self.switched.inverse(function, whole)
        if times == 0:
            return self.switched.constant(self.harmonics.number(1))
        return self.switched.multiplied([function] * abs(int(times)), whole)

    def _called(self, call: Call) -> Switched:
        known = _FUNCTIONS.get(call.function)
        if known is None:
            raise UnreadFunctionError(self.place, plain(call), self.time)
        line = self._linear(call.argument)
        if line is None:
            raise NonlinearArgumentError(self.place, plain(call), self.time)
        return self.switched.smooth(known(self.harmonics, *line))

    def _linear(self, argument: Expression) -> tuple[T, T] | None:
        """The numbers a and b of an argument a t + b, None of any other."""
        smooth = self.function(argument).smooth
        zero = self.harmonics.number(0)
        if smooth is None or len(smooth) > 1:
            return None
        if not smooth:
            return zero, zero
        (h,) = smooth
        if h != Harmonic(h.polynomial, zero, zero, "one", zero, zero) or len(h.polynomial) > 2:
            return None
        b, *a = h.polynomial
        return (a[0] if a else zero), b

    def _switch(self, name: str, argument: Expression, whole: Expression) -> Switched:
        """The step or the impulse of c (t - a)."""
        line = self._linear(argument)
        number = self.harmonics.number
        if line is None or line[0] == number(0):
            raise StepArgumentError(self.place, plain(whole), self.time)
        slope: Scalar = line[0]
        constant: Scalar = line[1]
        signs = self.switched.order.signs(slope)
        if len(signs) > 1:
            factor = self.arithmetic.text(slope)
            raise UnknownDirectionError(self.place, plain(whole), self.time, factor)
        (sign,) = signs
        at = -constant / slope
        if name == "delta":
            amount = number(sign) / slope
            return Switched((), (Strike(self.harmonics.of_polynomial(amount), at),))
        one = self.harmonics.of_polynomial(number(1))
        return Switched((Part(one, at, None) if sign > 0 else Part(one, None, at),))


def _hyperbolic(sign: int) -> Callable[[Harmonics[T], T, T], tuple[Harmonic, ...]]:
    """(e^(a t + b) + sign e^(-a t - b))/2."""

    def read(harmonics: Harmonics[T], a: Scalar, b: Scalar) -> tuple[Harmonic, ...]:
        rising = harmonics.exponential(a, b)
        falling = harmonics.exponential(-a, -b)
        half = Fraction(1, 2)
        return harmonics.gathered(
            [
                *harmonics.scaled(rising, harmonics.number(half)),
                *harmonics.scaled(falling, harmonics.number(sign * half)),
            ]
        )

    return read


_FUNCTIONS: dict[str, Callable[..., tuple[Harmonic, ...]]] = {
    "exp": lambda harmonics, a, b: harmonics.exponential(a, b),
    "sin": lambda harmonics, a, b: harmonics.circular("sin", a, b),
    "cos": lambda harmonics, a, b: harmonics.circular("cos", a, b),
    "sinh": _hyperbolic(-1),
    "cosh": _hyperbolic(1),
}
