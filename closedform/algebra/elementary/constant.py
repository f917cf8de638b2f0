"""An element of the field of constants, and its arithmetic."""

from __future__ import annotations

from collections.abc import Iterator, Mapping
from fractions import Fraction
from typing import Protocol

from closedform.algebra.elementary.errors import NotElementaryError
from closedform.algebra.elementary.powers import power
from closedform.algebra.fraction_field import Whole

__all__ = ["LARGEST_EXPONENT", "Constant", "Parts"]

LARGEST_EXPONENT = 4096
LARGEST_PRODUCT = 200_000
MOST_PAIRS = 40_000
"""Pairs of products of roots that are multiplied for one product: 200 with 200."""
"""Terms that are multiplied with one another in a product of two polynomials."""

Parts = dict[int, Whole]
"""Polynomials by the set of roots before which they stand, as a bit mask; none is zero."""


class Basis(Protocol):
    """What the tower in which constants lie says of its basis."""

    zero: Constant
    one: Constant
    unit: Whole

    def product(self, one: int, other: int) -> tuple[tuple[int, Whole], ...]:
        """Return the product of two basis elements, as (mask, polynomial)."""


class Constant:
    """An element: the sum of parts[m] r^m over `below`, in lowest terms.

    `below` is a polynomial without roots whose leading coefficient is positive.
    """

    __slots__ = ("_hash", "below", "parts", "tower")

    def __init__(self, tower: Basis, parts: Parts, below: Whole) -> None:
        self.tower, self.parts, self.below = tower, parts, below
        self._hash: int | None = None

    def __bool__(self) -> bool:
        return bool(self.parts)

    def __eq__(self, other: object) -> bool:
        if not isinstance(other, Constant):
            return NotImplemented
        return self is other or (self.below == other.below and self.parts == other.parts)

    def __hash__(self) -> int:
        if self._hash is None:
            traits = [(m, len(p), int(p.leading_coefficient())) for m, p in self.parts.items()]
            self._hash = hash((frozenset(traits), int(self.below.leading_coefficient())))
        return self._hash

    def __neg__(self) -> Constant:
        return Constant(self.tower, {m: -p for m, p in self.parts.items()}, self.below)

    def __add__(self, other: Constant) -> Constant:
        if not self.parts:
            return other
        if not other.parts:
            return self
        if self.below == other.below:
            return _lowest(self.tower, _sum(self.parts, other.parts), self.below)
        shared = self.below.gcd(other.below)
        left, right = other.below / shared, self.below / shared
        parts = _sum(_scaled(self.parts, left), _scaled(other.parts, right))
        return _lowest(self.tower, parts, self.below * left)

    def __sub__(self, other: Constant) -> Constant:
        return self + -other

    def __mul__(self, other: Constant) -> Constant:
        tower, one, two = self.tower, self.parts, other.parts
        if not one or not two:
            return tower.zero
        below = self.below * other.below
        if len(two) == 1 and 0 in two:
            return _lowest(tower, _scaled(one, two[0]), below)
        if len(one) * len(two) > MOST_PAIRS:
            raise NotElementaryError("it takes too many square roots to be worked out")
        parts: Parts = {}
        for m, p in one.items():
            for n, q in two.items():
                if len(p) * len(q) > LARGEST_PRODUCT:
                    raise NotElementaryError("a polynomial with too many terms")
                pq = p * q
                if not m & n:
                    parts[m ^ n] = parts[m ^ n] + pq if m ^ n in parts else pq
                    continue
                for mask, factor in tower.product(m, n):
                    term = pq * factor
                    parts[mask] = parts[mask] + term if mask in parts else term
        return _lowest(tower, parts, below)

    def inverse(self) -> Constant:
        """Return 1/x, by conjugation at one root after the other.  Raises ZeroDivisionError."""
        if not self.parts:
            raise ZeroDivisionError("division by zero")
        factor, left = self.tower.one, self
        while (top := left.top) >= 0:
            mirrored = left.mirrored(top)
            factor, left = factor * mirrored, left * mirrored
        below = left.parts[0]
        upper = left.below
        if below.leading_coefficient() < 0:
            below, upper = -below, -upper
        return factor * Constant(self.tower, {0: upper}, below)

    def __truediv__(self, other: Constant) -> Constant:
        return self * other.inverse()

    def __pow__(self, exponent: int) -> Constant:
        if abs(exponent) > LARGEST_EXPONENT:
            raise NotElementaryError(f"a power to the exponent {exponent}")
        return power(self if exponent >= 0 else self.inverse(), abs(exponent), self.tower.one)

    @property
    def top(self) -> int:
        """The index of the highest root in it, -1 if there is none."""
        return max((m.bit_length() for m in self.parts), default=0) - 1

    def mirrored(self, root: int) -> Constant:
        """Return the element with the sign of a root turned that is in no radicand here.

        For root 0, i, it is the complex conjugate if the others are real.
        """
        bit = 1 << root
        parts = {m: -p if m & bit else p for m, p in self.parts.items()}
        return Constant(self.tower, parts, self.below)

    def halves(self, root: int) -> tuple[Constant, Constant]:
        """Return a and b without the root r where the element is a + b r."""
        bit = 1 << root
        without = {m: p for m, p in self.parts.items() if not m & bit}
        before = {m ^ bit: p for m, p in self.parts.items() if m & bit}
        a, b = (_lowest(self.tower, parts, self.below) for parts in (without, before))
        return a, b

    @property
    def real(self) -> Constant:
        """The part without i."""
        return self.halves(0)[0]

    @property
    def imaginary(self) -> Constant:
        """The factor of i."""
        return self.halves(0)[1]

    @property
    def is_flat(self) -> bool:
        """Whether there is no root in it."""
        return not self.parts or (len(self.parts) == 1 and 0 in self.parts)

    def as_fraction(self) -> Fraction | None:
        """Return the rational number that it is, None if it is none."""
        if not self.parts:
            return Fraction(0)
        if not self.is_flat or not self.below.is_constant() or not self.parts[0].is_constant():
            return None
        above, below = self.parts[0].leading_coefficient(), self.below.leading_coefficient()
        return Fraction(int(above), int(below))

    def polynomials(self) -> Iterator[Whole]:
        """Yield the polynomials of which it is made."""
        yield from self.parts.values()
        yield self.below

    def mask(self) -> int:
        """Return the set of roots in it, without those in their radicands."""
        found = 0
        for m in self.parts:
            found |= m
        return found


def _sum(one: Mapping[int, Whole], other: Mapping[int, Whole]) -> Parts:
    parts = dict(one)
    for m, p in other.items():
        parts[m] = parts[m] + p if m in parts else p
    return parts


def _scaled(parts: Parts, factor: Whole) -> Parts:
    return parts if factor.is_one() else {m: p * factor for m, p in parts.items()}


def _lowest(tower: Basis, parts: Parts, below: Whole) -> Constant:
    """The element with these parts; the leading coefficient of `below` is positive."""
    parts = {m: p for m, p in parts.items() if p}
    if not parts:
        return tower.zero
    if below.is_one():
        return Constant(tower, parts, below)
    shared = below
    for p in parts.values():
        shared = shared.gcd(p)
        if shared.is_one():
            return Constant(tower, parts, below)
    return Constant(tower, {m: p / shared for m, p in parts.items()}, below / shared)
