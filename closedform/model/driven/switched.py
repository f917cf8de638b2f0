"""Functions of the time that switch: harmonics between instants, and impulses.

They are what a formula is while it is read; in the end they become a signal.
"""

from __future__ import annotations

from collections.abc import Iterable, Sequence
from dataclasses import dataclass
from functools import reduce
from typing import Generic, TypeVar

from closedform.algebra.field import Scalar
from closedform.errors import Place
from closedform.model.driven.harmonics import Harmonic, Harmonics, NoNumberError
from closedform.model.driven.instants import Order
from closedform.model.driven.signal import Burst, Impulse, Signal
from closedform.model.driven.signal_algebra import added
from closedform.model.driven.signal_errors import (
    DivisionByTimeError,
    ImpulseProductError,
    OutsideConstantError,
    SignalSizeError,
)
from closedform.notation.errors import DivisionByZeroError
from closedform.notation.expression import Expression
from closedform.notation.plain import plain

__all__ = ["MOST_POWER", "Part", "Strike", "Switched", "SwitchedAlgebra"]

T = TypeVar("T")

MOST_POWER = 20
"""The largest exponent; each power of the time is a row more in the model of the input."""
MOST_TERMS = 400
"""Products of terms in one multiplication."""


@dataclass(frozen=True, slots=True)
class Part:
    """A sum of harmonics between two instants, None for no bound."""

    harmonics: tuple[Harmonic, ...]
    start: Scalar | None = None
    end: Scalar | None = None


@dataclass(frozen=True, slots=True)
class Strike:
    """An impulse whose amount is a sum of constants not worked out yet."""

    amount: tuple[Harmonic, ...]
    at: Scalar


@dataclass(frozen=True, slots=True)
class Switched:
    """A function of the time: the sum of its parts and its impulses."""

    parts: tuple[Part, ...] = ()
    strikes: tuple[Strike, ...] = ()

    @property
    def smooth(self) -> tuple[Harmonic, ...] | None:
        """The one sum of harmonics that holds at all times, None if something switches."""
        bounds = (bound for part in self.parts for bound in (part.start, part.end))
        if self.strikes or any(bound is not None for bound in bounds):
            return None
        return self.parts[0].harmonics if self.parts else ()


@dataclass(frozen=True)
class SwitchedAlgebra(Generic[T]):
    """Sums and products of such functions; `time` and `place` are for the errors."""

    harmonics: Harmonics[T]
    order: Order
    time: str
    place: Place

    def constant(self, value: T) -> Switched:
        """Return a constant."""
        return self.smooth(self.harmonics.of_polynomial(value))

    def smooth(self, harmonics: tuple[Harmonic, ...]) -> Switched:
        """Return a sum of harmonics that holds at all times."""
        return Switched((Part(harmonics),)) if harmonics else Switched()

    def sum(self, functions: Iterable[Switched]) -> Switched:
        """Return the sum, with like parts gathered."""
        windows: dict[tuple[Scalar | None, Scalar | None], list[Harmonic]] = {}
        strikes: dict[Scalar, list[Harmonic]] = {}
        for function in functions:
            for part in function.parts:
                windows.setdefault((part.start, part.end), []).extend(part.harmonics)
            for strike in function.strikes:
                strikes.setdefault(strike.at, []).extend(strike.amount)
        gathered = self.harmonics.gathered
        parts = (Part(gathered(h), *window) for window, h in windows.items())
        struck = (Strike(gathered(h), at) for at, h in strikes.items())
        return Switched(
            tuple(part for part in parts if part.harmonics),
            tuple(strike for strike in struck if strike.amount),
        )

    def multiplied(self, functions: Sequence[Switched], whole: Expression) -> Switched:
        """Return the product of one function or more."""
        return reduce(lambda one, other: self.product(one, other, whole), functions)

    def product(self, one: Switched, other: Switched, whole: Expression) -> Switched:
        """Return the product; `whole` is its formula.

        Raises:  ImpulseProductError, SignalSizeError, UnknownOrderError.
        """
        if one.strikes and other.strikes:
            raise ImpulseProductError(self.place, plain(whole), self.time)
        strikes = [
            strike
            for impulses, parts in ((one.strikes, other.parts), (other.strikes, one.parts))
            for given in impulses
            for part in parts
            for strike in self._struck(given, part, whole)
        ]
        parts = [part for a in one.parts for b in other.parts for part in self._both(a, b, whole)]
        return self.sum([Switched(tuple(parts), tuple(strikes))])

    def _both(self, one: Part, other: Part, whole: Expression) -> list[Part]:
        """The product of two parts, where both are on."""
        many = len(one.harmonics) * len(other.harmonics) > MOST_TERMS
        if many or _degree(one) + _degree(other) > MOST_POWER:
            raise SignalSizeError(self.place, plain(whole), self.time, MOST_TERMS, MOST_POWER)
        start = self.order.later(one.start, other.start)
        end = self.order.earlier(one.end, other.end)
        if self.order.is_empty(start, end):
            return []
        return [Part(self.harmonics.product(one.harmonics, other.harmonics), start, end)]

    def _struck(self, strike: Strike, part: Part, whole: Expression) -> list[Strike]:
        """f(t) delta(t - a) = f(a) delta(t - a), where f is on at a."""
        for edge, outside in ((part.start, -1), (part.end, 1)):
            if edge is None:
                continue
            side = self.order.compared(strike.at, edge)
            if side == 0:
                raise ImpulseProductError(self.place, plain(whole), self.time)
            if side == outside:
                return []
        value = self.harmonics.at(part.harmonics, strike.at)
        return [Strike(self.harmonics.product(strike.amount, value), strike.at)]

    def inverse(self, function: Switched, whole: Expression) -> Switched:
        """Return 1/f of an exponential or a constant.

        Raises:  DivisionByZeroError, DivisionByTimeError, OutsideConstantError.
        """
        smooth = function.smooth
        if smooth == ():
            raise DivisionByZeroError(self.place, plain(whole))
        try:
            inverse = self.harmonics.inverse(smooth) if smooth else None
        except NoNumberError as error:
            raise OutsideConstantError(
                self.place, plain(whole), self.time, error.constant
            ) from None
        if inverse is None:
            raise DivisionByTimeError(self.place, plain(whole), self.time)
        return self.smooth(inverse)

    def signal(self, function: Switched, whole: Expression) -> Signal:
        """Return a function as a signal.  Raises OutsideConstantError."""
        try:
            bursts = [
                Burst(self.harmonics.waves(part.harmonics), part.start, part.end)
                for part in function.parts
            ]
            impulses = [
                Impulse(self.harmonics.constant(strike.amount), strike.at)
                for strike in function.strikes
            ]
        except NoNumberError as error:
            raise OutsideConstantError(
                self.place, plain(whole), self.time, error.constant
            ) from None
        return added([Signal(tuple(bursts), tuple(impulses))])


def _degree(part: Part) -> int:
    return max(len(h.polynomial) for h in part.harmonics) - 1
