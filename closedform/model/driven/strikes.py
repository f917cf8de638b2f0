"""Rows that follow at each instant from the inputs cannot hold impulses: they have no values."""

from __future__ import annotations

from collections.abc import Iterator, Sequence
from dataclasses import dataclass

from closedform.algebra.field import BaseField, Scalar
from closedform.model.driven.signal import Repeat, Signal
from closedform.model.driven.values_at import element_text
from closedform.notation.plain import plain

__all__ = ["Strike", "strikes_in"]


@dataclass(frozen=True, slots=True)
class Strike:
    """The first impulse in a sum of inputs: the place of an input that holds it, and when."""

    place: int
    at: str


def strikes_in(
    field: BaseField, weights: Sequence[Scalar], signals: Sequence[Signal]
) -> Strike | None:
    """Return an impulse in the sum of weight · signal, None if there is none or all cancel."""
    totals: dict[tuple[Repeat | None, Scalar], Scalar] = {}
    places: dict[tuple[Repeat | None, Scalar], int] = {}
    for key, place, amount in _impulses(weights, signals):
        totals[key] = totals.get(key, field.domain.zero) + amount
        places.setdefault(key, place)
    for (repeat, at), total in totals.items():
        if total:
            return Strike(places[repeat, at], plain(element_text(field, at)))
    return None


def _impulses(
    weights: Sequence[Scalar], signals: Sequence[Signal]
) -> Iterator[tuple[tuple[Repeat | None, Scalar], int, Scalar]]:
    for place, (weight, signal) in enumerate(zip(weights, signals, strict=True)):
        if weight:
            for impulse in signal.impulses:
                yield (signal.repeat, impulse.at), place, weight * impulse.amount
