"""Functions of the time while a formula is read: closed under products, whatever the phases.

A harmonic is p(t) e^(rate t + growth) kernel(frequency t + phase) with a polynomial p.  Products
of harmonics are sums of them without any constant being worked out; only what is left in the
end has to be a wave, with one origin and an amount in the field.  So cos(b)*sin(w*t) +
sin(b)*cos(w*t) is read, though cos(b) is no number that could be written.
"""

from __future__ import annotations

from collections.abc import Iterable, Sequence
from dataclasses import dataclass, replace
from fractions import Fraction
from functools import cached_property
from typing import Generic, TypeVar

from closedform.algebra.field import Scalar
from closedform.algebra.waves import Kernel, Wave
from closedform.errors import Place
from closedform.model.driven.wave_sums import is_zero
from closedform.notation.arithmetic import Arithmetic
from closedform.notation.expression import Expression

__all__ = ["Harmonic", "Harmonics", "NoNumberError"]

T = TypeVar("T")

COSINES = {
    Fraction(0): Fraction(1),
    Fraction(1, 3): Fraction(1, 2),
    Fraction(1, 2): Fraction(0),
    Fraction(2, 3): Fraction(-1, 2),
    Fraction(1): Fraction(-1),
    Fraction(4, 3): Fraction(-1, 2),
    Fraction(3, 2): Fraction(0),
    Fraction(5, 3): Fraction(1, 2),
}
"""cos(q pi) where it is rational (I. Niven, Irrational numbers, 1956, corollary 3.12)."""


class NoNumberError(ValueError):
    """A constant, given as text, is no number of the field; whoever asks knows the place."""

    def __init__(self, constant: str) -> None:
        super().__init__(constant)
        self.constant = constant


@dataclass(frozen=True, slots=True)
class Harmonic:
    """p(t) e^(rate t + growth) kernel(frequency t + phase).

    The coefficients of p are given lowest first.  Frequency and phase are zero where the
    kernel is "one"; with frequency zero the rest is a constant.
    """

    polynomial: tuple[Scalar, ...]
    rate: Scalar
    growth: Scalar
    kernel: Kernel
    frequency: Scalar
    phase: Scalar


@dataclass(frozen=True)
class Harmonics(Generic[T]):
    """Arithmetic of sums of harmonics over the values of an arithmetic.

    `whole` at `place` is the formula that is read, for the errors of size, which every method
    may raise.
    """

    arithmetic: Arithmetic[T]
    whole: Expression
    place: Place

    @cached_property
    def pi(self) -> T | None:
        """The number pi where it is a value."""
        known = "pi" in self.arithmetic.names
        return self.arithmetic.named("pi", self.place) if known else None

    def number(self, value: Fraction | int) -> T:
        """Return a rational number."""
        return self.arithmetic.number(Fraction(value))

    def of_polynomial(self, *coefficients: T) -> tuple[Harmonic, ...]:
        """Return the polynomial with these coefficients, lowest first, as a sum of harmonics."""
        zero = self.number(0)
        return self.gathered([Harmonic(coefficients, zero, zero, "one", zero, zero)])

    def exponential(self, rate: T, growth: T) -> tuple[Harmonic, ...]:
        """Return e^(rate t + growth)."""
        zero, one = self.number(0), self.number(1)
        return self.gathered([Harmonic((one,), rate, growth, "one", zero, zero)])

    def circular(self, kernel: Kernel, frequency: T, phase: T) -> tuple[Harmonic, ...]:
        """Return cos or sin of frequency t + phase."""
        zero, one = self.number(0), self.number(1)
        return self.gathered([Harmonic((one,), zero, zero, kernel, frequency, phase)])

    def scaled(self, harmonics: Iterable[Harmonic], weight: T) -> tuple[Harmonic, ...]:
        """Return weight · the sum."""
        return self.gathered([_times(h, weight) for h in harmonics])

    def gathered(self, harmonics: Iterable[Harmonic]) -> tuple[Harmonic, ...]:
        """Return the sum with like harmonics added up and none that is zero."""
        found: dict[Harmonic, list[Scalar]] = {}
        for given in harmonics:
            harmonic = self._upright(given)
            key = replace(harmonic, polynomial=())
            total = found.setdefault(key, [])
            for k, c in enumerate(harmonic.polynomial):
                if k < len(total):
                    total[k] = self._plus(total[k], c)
                else:
                    total.append(c)
        for total in found.values():
            while total and is_zero(total[-1]):
                total.pop()
        return tuple(replace(key, polynomial=tuple(c)) for key, c in found.items() if c)

    def product(self, one: Sequence[Harmonic], other: Sequence[Harmonic]) -> tuple[Harmonic, ...]:
        """Return the product of two sums."""
        return self.gathered([h for a in one for b in other for h in self._product(a, b)])

    def of_wave(self, wave: Wave) -> Harmonic:
        """Return a wave as a harmonic."""
        zero = self.number(0)
        powers = self._re_expanded([zero] * wave.power + [wave.amount], -wave.origin)
        return Harmonic(
            tuple(powers),
            wave.rate,
            -(wave.rate * wave.origin),
            wave.kernel,
            wave.frequency,
            -(wave.frequency * wave.origin),
        )

    def waves(self, harmonics: Iterable[Harmonic]) -> tuple[Wave, ...]:
        """Return a sum as waves.

        Raises:  NoNumberError for one whose exponential and circular part count the time from
                 different instants, or that holds the constant e^b, cos b or sin b.
        """
        return tuple(wave for harmonic in harmonics for wave in self._waves(harmonic))

    def at(self, harmonics: Iterable[Harmonic], instant: T) -> tuple[Harmonic, ...]:
        """Return the value at an instant, as a sum of constants."""
        zero = self.number(0)
        return self.gathered(
            Harmonic(
                (self._re_expanded(h.polynomial, instant)[0],),
                zero,
                h.rate * instant + h.growth,
                h.kernel,
                zero,
                h.frequency * instant + h.phase,
            )
            for h in harmonics
        )

    def constant(self, harmonics: Iterable[Harmonic]) -> T | None:
        """Return the value of a sum that does not depend on the time, None if it does.

        Raises NoNumberError.
        """
        total = self.number(0)
        for harmonic in harmonics:
            if len(harmonic.polynomial) > 1 or harmonic.rate != self.number(0):
                return None
            if harmonic.frequency != self.number(0):
                return None
            for wave in self._waves(harmonic):
                total = total + wave.amount
        return total

    def inverse(self, harmonics: Sequence[Harmonic]) -> tuple[Harmonic, ...] | None:
        """Return 1/f for one exponential or a constant, which is not zero, None for others."""
        if len(harmonics) == 1:
            (h,) = harmonics
            if h.kernel == "one" and len(h.polynomial) == 1:
                inverse = self.number(1) / h.polynomial[0]
                return (Harmonic((inverse,), -h.rate, -h.growth, "one", h.frequency, h.phase),)
        value = self.constant(harmonics)
        if value is None or is_zero(value):
            return None
        one: Scalar = self.number(1)
        return self.of_polynomial(one / value)

    def _waves(self, h: Harmonic) -> list[Wave]:
        """The waves of a harmonic, about the instant at which its exponent or its angle is 0."""
        zero = self.number(0)
        if is_zero(h.rate):
            if not is_zero(h.growth):
                raise NoNumberError(f"exp({self.arithmetic.text(h.growth)})")
            origin = zero
            if h.frequency != zero and self._turned(h.phase) is None:
                origin = -h.phase / h.frequency
        else:
            origin = -h.growth / h.rate
        angle = h.phase + h.frequency * origin
        parts: list[tuple[Kernel, Scalar]]
        if h.frequency == zero:
            parts = [("one", self._exact(h.kernel, angle))]
        else:
            turned = self._turned(angle)
            if turned is None:
                raise NoNumberError(f"{h.kernel}({self.arithmetic.text(angle)})")
            cos, sin = turned
            weights = (cos, -sin) if h.kernel == "cos" else (sin, cos)
            parts = [("cos", self.number(weights[0])), ("sin", self.number(weights[1]))]
        return [
            Wave(c * weight, power, h.rate, kernel, h.frequency, origin)
            for kernel, weight in parts
            if not is_zero(weight)
            for power, c in enumerate(self._re_expanded(h.polynomial, origin))
            if not is_zero(c)
        ]

    def _re_expanded(self, coefficients: Sequence[Scalar], shift: Scalar) -> list[Scalar]:
        """The coefficients of p(s + shift), held to the size of the arithmetic."""
        moved = list(coefficients)
        if is_zero(shift):
            return moved
        for first in range(len(moved) - 1):
            for k in range(len(moved) - 2, first - 1, -1):
                moved[k] = self._plus(moved[k], self._times(shift, moved[k + 1]))
        return moved

    def _plus(self, one: Scalar, other: Scalar) -> Scalar:
        return self.arithmetic.added(one, other, self.whole, self.place)

    def _times(self, one: Scalar, other: Scalar) -> Scalar:
        return self.arithmetic.multiplied(one, other, self.whole, self.place)

    def _exact(self, kernel: Kernel, angle: T) -> T:
        """The value of cos or sin at an angle that is a known part of a turn."""
        if kernel == "one":
            return self.number(1)
        turns = self._half_turns(angle)
        if turns is not None:
            shift = Fraction(0) if kernel == "cos" else Fraction(1, 2)
            value = COSINES.get((turns - shift) % 2)
            if value is not None:
                return self.number(value)
        raise NoNumberError(f"{kernel}({self.arithmetic.text(angle)})")

    def _turned(self, angle: T) -> tuple[Fraction, Fraction] | None:
        """The cosine and the sine of a whole number of right angles, None of other angles."""
        turns = self._half_turns(angle)
        if turns is None or (2 * turns).denominator != 1:
            return None
        return COSINES[turns % 2], COSINES[(turns - Fraction(1, 2)) % 2]

    def _half_turns(self, angle: Scalar) -> Fraction | None:
        """An angle in multiples of pi, if it is a rational one."""
        if is_zero(angle):
            return Fraction(0)
        if self.pi is None:
            return None
        return self.arithmetic.fraction(angle / self.pi)

    def _upright(self, h: Harmonic) -> Harmonic:
        """The same with a frequency, or else a phase, that is written without a minus."""
        if h.kernel == "one":
            return h
        leading = h.phase if is_zero(h.frequency) else h.frequency
        if is_zero(leading):
            zero = self.number(0)
            polynomial = h.polynomial if h.kernel == "cos" else ()
            return Harmonic(polynomial, h.rate, h.growth, "one", zero, zero)
        if not self.arithmetic.text(leading).startswith("-"):
            return h
        turned = h if h.kernel == "cos" else _times(h, self.number(-1))
        return replace(turned, frequency=-h.frequency, phase=-h.phase)

    def _product(self, a: Harmonic, b: Harmonic) -> list[Harmonic]:
        zero = self.number(0)
        powers = [zero] * (len(a.polynomial) + len(b.polynomial) - 1)
        for j, c in enumerate(a.polynomial):
            for k, d in enumerate(b.polynomial):
                powers[j + k] = self._plus(powers[j + k], self._times(c, d))
        joint = replace(
            a, polynomial=tuple(powers), rate=a.rate + b.rate, growth=a.growth + b.growth
        )
        if b.kernel == "one":
            return [joint]
        if a.kernel == "one":
            return [replace(joint, kernel=b.kernel, frequency=b.frequency, phase=b.phase)]
        half = _times(joint, self.number(Fraction(1, 2)))
        sum_of = replace(half, frequency=a.frequency + b.frequency, phase=a.phase + b.phase)
        difference = replace(half, frequency=a.frequency - b.frequency, phase=a.phase - b.phase)
        minus = self.number(-1)
        match a.kernel, b.kernel:
            case "cos", "cos":
                return [difference, sum_of]
            case "sin", "sin":
                cosine = replace(sum_of, kernel="cos")
                return [replace(difference, kernel="cos"), _times(cosine, minus)]
            case "sin", _:
                return [sum_of, difference]
            case _:
                sine = replace(difference, kernel="sin")
                return [replace(sum_of, kernel="sin"), _times(sine, minus)]


def _times(harmonic: Harmonic, weight: Scalar) -> Harmonic:
    return replace(harmonic, polynomial=tuple(weight * c for c in harmonic.polynomial))
