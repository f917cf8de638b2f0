"""Powers by repeated squaring."""

from __future__ import annotations

from typing import Protocol, Self, TypeVar

__all__ = ["power"]


class Multiplied(Protocol):
    """What can be multiplied with its like."""

    def __mul__(self, other: Self, /) -> Self:
        """Return the product."""


M = TypeVar("M", bound=Multiplied)


def power(base: M, exponent: int, one: M) -> M:
    """Return a power to an integer exponent of at least 0; `one` is that to the exponent 0."""
    result = one
    while exponent:
        if exponent & 1:
            result = result * base
        exponent >>= 1
        if exponent:
            base = base * base
    return result
