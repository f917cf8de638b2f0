"""Constants: elements of Q(names, pi, logarithms, angles)[r_0, …, r_k], square roots adjoined.

r_0 is i, and each r_j^2 is a given element of what stands below it in which it is no square;
so the products of distinct r_j are a basis, every element has one form, and all but zero have
an inverse (A. S. Besicovitch, On the linear independence of fractional powers of integers,
Journal of the London Mathematical Society 15, 1940, for roots of numbers; in general, degree
by degree).  Whether something is a square is told in `squares`.
"""

from __future__ import annotations

from collections.abc import Iterator, Sequence
from dataclasses import dataclass
from fractions import Fraction
from typing import Literal

from closedform.algebra.elementary.constant import Constant
from closedform.algebra.elementary.errors import NotElementaryError
from closedform.algebra.fraction_field import Whole, whole_ring

__all__ = ["Generator", "Root", "Tower", "roots_in", "used"]

SPARE = 14
"""Names, logarithms and angles that may come to those with which a tower starts."""
MOST_ROOTS = 24
"""Independent square roots of one tower, i among them."""
NONE: frozenset[int] = frozenset()


@dataclass(frozen=True, eq=False)
class Generator:
    """A name, or a transcendental number or function.

    name   a free real quantity             ln     ln(of), of > 0
    pi     the number                       atan   atan(of), of real
    """

    kind: Literal["name", "pi", "ln", "atan"]
    text: str
    of: Constant | None = None


@dataclass(frozen=True, eq=False)
class Root:
    """The principal square root of a radicand without denominator.

    `positive` says that the radicand is real and positive on the whole domain.
    """

    radicand: Constant
    positive: bool


def used(whole: Whole) -> set[int]:
    """Return the indices of the generators in a polynomial."""
    return {k for k, degree in enumerate(whole.degrees()) if degree > 0}


def roots_in(mask: int) -> Iterator[int]:
    """Yield the indices of the roots of a mask."""
    return (k for k in range(mask.bit_length()) if mask >> k & 1)


class Tower:
    """The field of constants; it grows as generators and roots are met.

    Elements that were there keep their form, as new roots are independent of the old.
    """

    def __init__(self, names: Sequence[str]) -> None:
        self.ring = whole_ring(len(names) + 1 + SPARE)
        self.generators = [*(Generator("name", name) for name in names), Generator("pi", "pi")]
        self.unit: Whole = self.ring.constant(1)
        self._symbols = self.ring.gens()
        self._inside: dict[int, frozenset[int]] = {}
        self._products: dict[tuple[int, int], tuple[tuple[int, Whole], ...]] = {}
        self.zero = Constant(self, {}, self.unit)
        self.one = Constant(self, {0: self.unit}, self.unit)
        self.roots = [Root(-self.one, positive=False)]
        self.i = Constant(self, {1: self.unit}, self.unit)
        self.pi = self.generator(len(names))

    def number(self, value: Fraction | int) -> Constant:
        """Return a rational number."""
        value = Fraction(value)
        above, below = map(self.ring.constant, (value.numerator, value.denominator))
        return Constant(self, {0: above}, below) if value else self.zero

    def polynomial(self, whole: Whole) -> Constant:
        """Return a polynomial with whole coefficients."""
        return Constant(self, {0: whole} if whole else {}, self.unit)

    def generator(self, index: int) -> Constant:
        """Return a generator as an element."""
        return self.polynomial(self._symbols[index])

    def with_generator(self, generator: Generator) -> int:
        """Append a generator that is independent of the others; return its index."""
        if len(self.generators) == len(self._symbols):
            raise NotElementaryError("too many names, logarithms and angles in one context")
        self.generators.append(generator)
        return len(self.generators) - 1

    def adjoined(self, radicand: Constant, *, positive: bool) -> Constant:
        """Adjoin the root of an element without denominator that is no square; return it."""
        if len(self.roots) == MOST_ROOTS:
            raise NotElementaryError(f"more than {MOST_ROOTS} independent square roots")
        self.roots.append(Root(radicand, positive))
        return Constant(self, {1 << (len(self.roots) - 1): self.unit}, self.unit)

    def product(self, one: int, other: int) -> tuple[tuple[int, Whole], ...]:
        """Return the product of two basis elements, as (mask, polynomial)."""
        if not one & other:
            return ((one ^ other, self.unit),)
        found = self._products.get((one, other))
        if found is None:
            top = 1 << ((one & other).bit_length() - 1)
            rest = Constant(self, dict(self.product(one & ~top, other & ~top)), self.unit)
            radicand = self.roots[top.bit_length() - 1].radicand
            found = tuple((rest * radicand).parts.items())
            self._products[one, other] = found
        return found

    def generators_in(self, element: Constant) -> frozenset[int]:
        """Return the indices of the generators in an element, and in what they stand for."""
        found: set[int] = set()
        for polynomial in element.polynomials():
            if not polynomial.is_constant():
                found |= used(polynomial)
        for k in tuple(found):
            inside = self.generators[k].of
            if inside is not None:
                found |= self.generators_in(inside)
        for root in roots_in(element.mask()):
            found |= self._in_root(root)
        return frozenset(found)

    def is_number(self, element: Constant) -> bool:
        """Whether there is no name in an element."""
        return all(self.generators[k].kind != "name" for k in self.generators_in(element))

    def _in_root(self, root: int) -> frozenset[int]:
        if root not in self._inside:
            self._inside[root] = self.generators_in(self.roots[root].radicand) if root else NONE
        return self._inside[root]
