"""Intervals of time between the instants at which anything is switched."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass
from itertools import count

from closedform.algebra.elementary import Element, ElementaryField

__all__ = ["Stretch", "stretches_between"]


@dataclass(frozen=True)
class Stretch:
    """An interval of time, with an instant inside it; `end` is None for ever.

    `index` is its place on the time axis, the same on every ground of a model.
    """

    index: int
    start: Element
    end: Element | None
    inside: Element


def stretches_between(
    starts: Sequence[Element],
    ends: Sequence[Element | None],
    cuts: Sequence[Element],
    field: ElementaryField,
) -> tuple[Stretch, ...]:
    """Return the intervals with such starts and ends, parted at further instants inside them."""
    starts, ends = list(starts), list(ends)
    for cut in cuts:
        for k, (one, other) in enumerate(zip(starts, ends, strict=True)):
            if (cut - one).sign() == 1 and (other is None or (other - cut).sign() == 1):
                starts[k : k + 1], ends[k : k + 1] = [one, cut], [cut, other]
                break
    two = field.one + field.one
    insides = [
        start + field.one if end is None else (start + end) / two
        for start, end in zip(starts, ends, strict=True)
    ]
    return tuple(map(Stretch, count(), starts, ends, insides))
