"""An input as a function of time: sums of waves that are switched on and off, and impulses."""

from __future__ import annotations

from dataclasses import dataclass

from closedform.algebra.field import Scalar
from closedform.algebra.waves import Wave

__all__ = ["Burst", "Impulse", "Repeat", "Signal"]


@dataclass(frozen=True, slots=True)
class Burst:
    """A sum of waves that is on from `start` (None: ever since) until `end` (None: for ever).

    Instants are elements of the model's field; the waves count time from origins of their own.
    """

    waves: tuple[Wave, ...]
    start: Scalar | None = None
    end: Scalar | None = None


@dataclass(frozen=True, slots=True)
class Impulse:
    """amount · delta(t - at)."""

    amount: Scalar
    at: Scalar


@dataclass(frozen=True, slots=True)
class Repeat:
    """What a signal states is one period, which comes `count` times (None: again and again).

    The first period begins at `start` and each takes `period`.
    """

    period: Scalar
    start: Scalar
    count: int | None = None


@dataclass(frozen=True, slots=True)
class Signal:
    """A function of time: the sum of its bursts and its impulses.

    With `repeat`, bursts and impulses lie within one period, from its start to its end.
    """

    bursts: tuple[Burst, ...] = ()
    impulses: tuple[Impulse, ...] = ()
    repeat: Repeat | None = None
