"""Sizes of numbers known as balls, for telling near from far; nothing is decided by them."""

from __future__ import annotations

from collections.abc import Sequence
from fractions import Fraction

from flint import acb, arb

__all__ = ["distance", "largest", "real", "size"]


def size(value: acb) -> arb:
    """Return the absolute value, without its radius."""
    return arb(abs(value).mid())


def largest(values: Sequence[acb]) -> arb:
    """Return the largest absolute value."""
    found = arb(0)
    for value in values:
        found = found.max(size(value))
    return found


def distance(one: Sequence[acb], other: Sequence[acb]) -> arb:
    """Return the largest difference of entries."""
    return largest([a - b for a, b in zip(one, other, strict=True)])


def real(value: Fraction) -> arb:
    """Return a ball for a rational number."""
    return arb(value.numerator) / value.denominator
