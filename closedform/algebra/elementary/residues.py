"""A quick proof that a constant is no square: its residue in a finite field is none.

A point maps a tower to the field of p elements: its generators to numbers, its roots to roots
of the residues of their radicands.  A square goes to a square there.
"""

from __future__ import annotations

from collections.abc import Iterator

from flint import fmpz

from closedform.algebra.elementary.constant import Constant
from closedform.algebra.elementary.tower import Tower, roots_in
from closedform.algebra.fraction_field import Whole

__all__ = ["Residues"]

POINTS = 8
"""So many are asked; an element that is no square passes all of them once in 2^8."""
MOST_TRIED = 4096
FIRST = 1 << 40


class Residues:
    """The points of a tower, found as they are needed."""

    def __init__(self, tower: Tower) -> None:
        self._tower = tower
        self._points: list[_Point] = []
        self._fresh = _points(tower)

    def excludes(self, element: Constant) -> bool:
        """Whether an element is certainly no square in the tower."""
        for point in self._extended():
            value = point.of(element)
            if value is not None and value and fmpz(value).jacobi(point.prime) == -1:
                return True
        return False

    def _extended(self) -> Iterator[_Point]:
        kept = [point for point in self._points if point.takes_in_all()]
        self._points = kept
        yield from kept
        for _ in range(MOST_TRIED):
            if len(kept) >= POINTS:
                return
            point = next(self._fresh)
            if point.takes_in_all():
                kept.append(point)
                yield point


def _points(tower: Tower) -> Iterator[_Point]:
    prime = FIRST + 1
    while True:
        prime += 4  # i needs p = 4 k + 1
        if fmpz(prime).is_prime():
            yield _Point(tower, prime)


class _Point:
    def __init__(self, tower: Tower, prime: int) -> None:
        self._tower, self.prime = tower, prime
        self._roots: list[int] = []

    def takes_in_all(self) -> bool:
        """Whether the residues of all radicands are squares; their roots are then held."""
        for root in self._tower.roots[len(self._roots) :]:
            value = self.of(root.radicand)
            if not value or fmpz(value).jacobi(self.prime) != 1:
                return False
            self._roots.append(int(fmpz(value).sqrtmod(self.prime)))
        return True

    def of(self, element: Constant) -> int | None:
        """Return the residue, None if the denominator has residue zero."""
        below = self._polynomial(element.below)
        if not below:
            return None
        total = 0
        for mask, polynomial in element.parts.items():
            term = self._polynomial(polynomial)
            for root in roots_in(mask):
                term = term * self._roots[root] % self.prime
            total += term
        return total * pow(below, -1, self.prime) % self.prime

    def _polynomial(self, polynomial: Whole) -> int:
        total = 0
        for exponents, coefficient in polynomial.to_dict().items():
            term = int(coefficient) % self.prime
            for k, exponent in enumerate(exponents):
                if exponent:
                    term = term * pow(self._generator(k), int(exponent), self.prime) % self.prime
            total += term
        return total % self.prime

    def _generator(self, index: int) -> int:
        """Any number will do, as generators are independent."""
        return pow(index + 3, 1001, self.prime)
