"""Signals delayed, differentiated, added, scaled and compared.

The numbers of a signal are elements of a field, or the values of an arithmetic that is one.
"""

from __future__ import annotations

from collections.abc import Callable, Iterable
from dataclasses import replace
from fractions import Fraction
from typing import TypeVar

from closedform.algebra.field import Scalar
from closedform.algebra.waves import Wave
from closedform.errors import Place
from closedform.model.driven.harmonics import Harmonics, NoNumberError
from closedform.model.driven.signal import Burst, Impulse, Repeat, Signal
from closedform.model.driven.signal_errors import EdgeValueError, ImpulseDerivativeError
from closedform.model.driven.wave_sums import (
    derivative,
    gathered,
    is_zero,
    scaled_waves,
    shortest,
)
from closedform.notation.arithmetic import Arithmetic
from closedform.notation.expression import Expression
from closedform.notation.plain import plain

__all__ = [
    "added",
    "delayed",
    "derived",
    "is_multiple_of",
    "mapped",
    "numbers_of",
    "scaled",
    "tidy",
    "unrolled",
]

T = TypeVar("T")
Window = tuple[Scalar | None, Scalar | None]


def mapped(signal: Signal, convert: Callable[[Scalar], Scalar]) -> Signal:
    """Return the signal with every number converted, to those of another field say."""

    def instant(value: Scalar | None) -> Scalar | None:
        return None if value is None else convert(value)

    def wave(given: Wave) -> Wave:
        return Wave(
            convert(given.amount),
            given.power,
            convert(given.rate),
            given.kernel,
            convert(given.frequency),
            convert(given.origin),
        )

    repeat = signal.repeat
    return Signal(
        tuple(
            Burst(tuple(map(wave, burst.waves)), instant(burst.start), instant(burst.end))
            for burst in signal.bursts
        ),
        tuple(Impulse(convert(i.amount), convert(i.at)) for i in signal.impulses),
        repeat and Repeat(convert(repeat.period), convert(repeat.start), repeat.count),
    )


def numbers_of(signal: Signal) -> tuple[Scalar, ...]:
    """Return every number in a signal, for what has to hold all of them."""
    found: list[Scalar] = []

    def noted(value: Scalar) -> Scalar:
        found.append(value)
        return value

    mapped(signal, noted)
    return tuple(found)


def delayed(signal: Signal, delay: Scalar) -> Signal:
    """Return u(t - delay), later by a delay, or earlier by a negative one."""

    def instant(value: Scalar | None) -> Scalar | None:
        return None if value is None else value + delay

    repeat = signal.repeat
    bursts = (
        Burst(
            tuple(replace(wave, origin=wave.origin + delay) for wave in burst.waves),
            instant(burst.start),
            instant(burst.end),
        )
        for burst in signal.bursts
    )
    return replace(
        signal,
        bursts=tuple(tidy(burst) for burst in bursts),
        impulses=tuple(Impulse(i.amount, i.at + delay) for i in signal.impulses),
        repeat=repeat and replace(repeat, start=repeat.start + delay),
    )


def scaled(signal: Signal, weight: Scalar) -> Signal:
    """Return weight · u; nothing is on if the weight is zero."""
    if is_zero(weight):
        return Signal()
    return replace(
        signal,
        bursts=tuple(
            replace(burst, waves=scaled_waves(burst.waves, weight)) for burst in signal.bursts
        ),
        impulses=tuple(Impulse(weight * i.amount, i.at) for i in signal.impulses),
    )


def added(signals: Iterable[Signal]) -> Signal:
    """Return the sum of signals: bursts of one window and impulses of one instant merged.

    Raises ValueError for signals that do not repeat alike.
    """
    given = [signal for signal in signals if signal.bursts or signal.impulses]
    repeats = list(dict.fromkeys(signal.repeat for signal in given))
    if len(repeats) > 1:
        raise ValueError("signals that repeat in different ways have no sum among signals")
    windows: dict[Window, list[Wave]] = {}
    for signal in given:
        for burst in signal.bursts:
            windows.setdefault((burst.start, burst.end), []).extend(burst.waves)
    bursts = (tidy(Burst(tuple(waves), *window)) for window, waves in windows.items())
    impulses = _merged(impulse for signal in given for impulse in signal.impulses)
    total = Signal(tuple(burst for burst in bursts if burst.waves), impulses, *repeats)
    return total if total.bursts or total.impulses else Signal()


def derived(
    signal: Signal,
    order: int,
    arithmetic: Arithmetic[T],
    *,
    formula: Expression,
    time: str,
    place: Place,
) -> Signal:
    """Return the derivative of an order >= 0, jumps at the edges of bursts included.

    `formula` is how the derivative is written, `time` the variable, for the errors.

    Raises:  EdgeValueError for a jump that is no number of the arithmetic,
             ImpulseDerivativeError for the derivative of an impulse.
    """
    for _ in range(order):
        if signal.impulses:
            raise ImpulseDerivativeError(place, plain(formula), time)
        slopes = tuple(
            replace(burst, waves=derivative(burst.waves, arithmetic.number))
            for burst in signal.bursts
        )
        harmonics = Harmonics(arithmetic, formula, place)
        jumps = []
        for at, waves in _edges(signal, harmonics.number(-1)):
            values = harmonics.at(map(harmonics.of_wave, waves), at)
            try:
                jumps.append(Impulse(harmonics.constant(values), at))
            except NoNumberError as error:
                raise EdgeValueError(
                    place, plain(formula), time, arithmetic.text(at), error.constant
                ) from None
        signal = added([Signal(slopes, tuple(jumps), signal.repeat)])
    return signal


def is_multiple_of(one: Signal, other: Signal) -> Scalar | None:
    """Return the weight with one = weight · other, None if there is none or it is not seen.

    Compared are bursts of the same window and impulses of the same instant, so that both
    should be `arranged` or come from the same formula.  Neither may be zero.
    """
    if one.repeat != other.repeat or len(one.bursts) != len(other.bursts):
        return None
    for weight in _weights(one, other):
        difference = added([one, scaled(other, -weight)])
        if not difference.bursts and not difference.impulses:
            return weight
    return None


def unrolled(signal: Signal, number: Callable[[Fraction], Scalar]) -> Signal:
    """Return a signal that repeats a number of times as one that does not repeat.

    Raises ValueError if it repeats for ever.
    """
    repeat = signal.repeat
    if repeat is None:
        return signal
    if repeat.count is None:
        raise ValueError("a signal that repeats for ever has no end")
    once = replace(signal, repeat=None)
    return added(delayed(once, number(Fraction(k)) * repeat.period) for k in range(repeat.count))


def tidy(burst: Burst) -> Burst:
    """Return a burst with its waves gathered, and written as short as is tried."""
    return replace(burst, waves=shortest(burst.waves, burst.start, burst.end))


def _merged(impulses: Iterable[Impulse]) -> tuple[Impulse, ...]:
    amounts: dict[Scalar, Scalar] = {}
    for impulse in impulses:
        at = impulse.at
        amounts[at] = amounts[at] + impulse.amount if at in amounts else impulse.amount
    return tuple(Impulse(amount, at) for at, amount in amounts.items() if not is_zero(amount))


def _edges(signal: Signal, minus: Scalar) -> list[tuple[Scalar, tuple[Wave, ...]]]:
    """The instants at which bursts begin or end, and the waves by which the signal changes."""
    edges: dict[Scalar, list[Wave]] = {}
    for burst in signal.bursts:
        if burst.start is not None:
            edges.setdefault(burst.start, []).extend(burst.waves)
        if burst.end is not None:
            edges.setdefault(burst.end, []).extend(scaled_waves(burst.waves, minus))
    return [(at, gathered(waves)) for at, waves in edges.items()]


def _weights(one: Signal, other: Signal) -> list[Scalar]:
    """The weights that the first wave or impulse of one signal allows."""
    if one.bursts:
        first, window = one.bursts[0].waves[0], (one.bursts[0].start, one.bursts[0].end)
        return [
            first.amount / wave.amount if sign > 0 else -(first.amount / wave.amount)
            for burst in other.bursts
            if (burst.start, burst.end) == window
            for wave in burst.waves
            for sign in (1, -1)
            if (wave.power, wave.rate, wave.kernel) == (first.power, first.rate, first.kernel)
        ]
    return [i.amount / j.amount for i in one.impulses[:1] for j in other.impulses if i.at == j.at]
