"""The instants of a model, in their order, and its inputs from the start on."""

from __future__ import annotations

from collections.abc import Callable, Iterable, Sequence
from dataclasses import replace
from functools import cmp_to_key
from typing import NamedTuple

from closedform.algebra.domain import ParameterDomain
from closedform.algebra.field import BaseField, Scalar
from closedform.errors import Place
from closedform.model.driven.arrangement import arranged
from closedform.model.driven.instants import Order, order_in
from closedform.model.driven.signal import Burst, Impulse, Signal

__all__ = ["Timeline", "timeline_of"]

NOWHERE = Place()


class Timeline(NamedTuple):
    """The later instants in rising order, and the signals as they are from the start on."""

    instants: tuple[Scalar, ...]
    signals: tuple[Signal, ...]


def timeline_of(
    signals: Sequence[Signal],
    start: Scalar,
    field: BaseField,
    domain: ParameterDomain | None,
    place: Place = NOWHERE,
) -> Timeline:
    """Return the instants after the start, and the signals in their canonical form from there.

    A burst that is on at the start has none of its own; what is over by then is gone, impulses
    before the start too, but not one at the start.  Instants that the domain says to be equal
    are one element.  Every instant is the start or end of a burst, or that of an impulse.
    Signals that repeat stay as they are, and their instants are not told.

    Raises UnknownOrderError where the domain does not say which of two instants comes first.
    """
    ranks = _ranks(signals, start, order_in(field, domain, place))
    elements = {rank: instant for instant, rank in reversed(ranks.items())}
    elements[ranks[start]] = start

    def unified(instant: Scalar) -> Scalar:
        return elements[ranks[instant]]

    def compared(one: Scalar, other: Scalar) -> int:
        return ranks[one] - ranks[other]

    found = tuple(
        signal
        if signal.repeat is not None
        else arranged(_from_start(_moved(signal, unified), start, compared), compared)
        for signal in signals
    )
    instants = {at for signal in found for at in _instants(signal)} - {start}
    return Timeline(tuple(sorted(instants, key=ranks.__getitem__)), found)


def _instants(signal: Signal) -> Iterable[Scalar]:
    """Every instant at which a signal that does not repeat switches or strikes."""
    if signal.repeat is not None:
        return
    for burst in signal.bursts:
        yield from (at for at in (burst.start, burst.end) if at is not None)
    yield from (impulse.at for impulse in signal.impulses)


def _ranks(signals: Sequence[Signal], start: Scalar, order: Order) -> dict[Scalar, int]:
    """The instants with their numbers in the order of time; equal ones have the same."""
    instants = list(dict.fromkeys([start, *(at for s in signals for at in _instants(s))]))
    instants.sort(key=cmp_to_key(order.compared))
    ranks: dict[Scalar, int] = {}
    before, rank = instants[0], 0
    for instant in instants:
        rank += order.compared(before, instant) != 0
        ranks[instant] = rank
        before = instant
    return ranks


def _moved(signal: Signal, unified: Callable[[Scalar], Scalar]) -> Signal:
    """The signal with other elements for the same instants."""

    def bound(instant: Scalar | None) -> Scalar | None:
        return None if instant is None else unified(instant)

    return replace(
        signal,
        bursts=tuple(Burst(b.waves, bound(b.start), bound(b.end)) for b in signal.bursts),
        impulses=tuple(Impulse(i.amount, unified(i.at)) for i in signal.impulses),
    )


def _from_start(signal: Signal, start: Scalar, compared: Callable[[Scalar, Scalar], int]) -> Signal:
    bursts = tuple(
        replace(burst, start=None)
        if burst.start is not None and compared(burst.start, start) <= 0
        else burst
        for burst in signal.bursts
        if burst.end is None or compared(burst.end, start) > 0
    )
    impulses = tuple(i for i in signal.impulses if compared(i.at, start) >= 0)
    return replace(signal, bursts=bursts, impulses=impulses)
