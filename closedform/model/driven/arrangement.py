"""Signals cut at instants and set in their order."""

from __future__ import annotations

from collections.abc import Callable, Sequence
from dataclasses import replace
from functools import cmp_to_key
from itertools import pairwise

from closedform.algebra.field import Scalar
from closedform.model.driven.instants import Order
from closedform.model.driven.signal import Burst, Impulse, Signal
from closedform.model.driven.signal_algebra import added, tidy
from closedform.model.driven.wave_sums import gathered, is_polynomial

__all__ = ["Compared", "arranged", "cut"]

Compared = Callable[[Scalar, Scalar], int]
"""What tells the order of two instants: -1, 0 or 1; it may raise UnknownOrderError."""


def cut(signal: Signal, start: Scalar | None, end: Scalar | None, order: Order) -> Signal:
    """Return the signal between two instants and 0 elsewhere; None is no bound.

    Impulses at the start stay, those at the end do not.

    Raises:  UnknownOrderError, ValueError for a signal that repeats.
    """
    if signal.repeat is not None:
        raise ValueError("a signal that repeats is not cut")
    bursts = []
    for burst in signal.bursts:
        first, last = order.later(burst.start, start), order.earlier(burst.end, end)
        if not order.is_empty(first, last):
            bursts.append(tidy(Burst(burst.waves, first, last)))
    impulses = tuple(
        impulse
        for impulse in signal.impulses
        if (start is None or order.compared(impulse.at, start) >= 0)
        and (end is None or order.compared(impulse.at, end) < 0)
    )
    return added([Signal(tuple(bursts), impulses)])


def arranged(signal: Signal, compared: Compared) -> Signal:
    """Return the same signal in its canonical form.

    No two bursts of it hold like waves at one time: windows are joined, and waves that cancel
    are off, so that step(t) - step(t - 2) is a burst from 0 to 2.  Bursts stand in the order
    of their starts, impulses in that of their instants.

    Raises what `compared` does.
    """
    families: dict[tuple[Scalar, ...], list[Burst]] = {}
    for burst in signal.bursts:
        for wave in burst.waves:
            key: tuple[Scalar, ...] = ()
            if not is_polynomial(wave):
                key = (wave.rate, wave.frequency, wave.origin)
                turned = (wave.rate, -wave.frequency, wave.origin)
                key = turned if turned in families else key
            families.setdefault(key, []).append(replace(burst, waves=(wave,)))
    parts = [Signal(tuple(_apart(family, compared))) for family in families.values()]
    total = added([*parts, Signal((), signal.impulses)])

    def by_window(one: Burst, other: Burst) -> int:
        starts = _compared(one.start, other.start, -1, compared)
        return starts or _compared(one.end, other.end, 1, compared)

    def by_instant(one: Impulse, other: Impulse) -> int:
        return compared(one.at, other.at)

    return Signal(
        tuple(sorted(total.bursts, key=cmp_to_key(by_window))),
        tuple(sorted(total.impulses, key=cmp_to_key(by_instant))),
        signal.repeat,
    )


def _apart(family: Sequence[Burst], compared: Compared) -> list[Burst]:
    """Bursts of like waves as bursts of which no two are on at one time."""
    instants: list[Scalar] = []
    for burst in family:
        instants += [i for i in (burst.start, burst.end) if i is not None and i not in instants]
    instants.sort(key=cmp_to_key(compared))
    place = {None: 0} | {instant: k for k, instant in enumerate(instants, start=1)}
    found: list[Burst] = []
    for k, (start, end) in enumerate(pairwise([None, *instants, None])):
        waves = gathered(
            wave
            for burst in family
            if place[burst.start] <= k and (burst.end is None or k < place[burst.end])
            for wave in burst.waves
        )
        if not waves:
            continue
        if found and found[-1].end is not None and found[-1].end == start:
            minus = [replace(wave, amount=-wave.amount) for wave in found[-1].waves]
            if not gathered([*waves, *minus]):
                found[-1] = replace(found[-1], end=end)
                continue
        found.append(Burst(waves, start, end))
    return found


def _compared(one: Scalar | None, other: Scalar | None, missing: int, compared: Compared) -> int:
    """Compare two starts or two ends; `missing` is -1 if None comes first, 1 if last."""
    if one is None or other is None:
        return missing * ((one is None) - (other is None))
    return compared(one, other)
