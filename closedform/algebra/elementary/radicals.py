"""Principal square roots of constants, adjoined as they are met.

What is positive is split where its factors have known signs, so that sqrt(4 m k) is
2 sqrt(m) sqrt(k) for positive m and k.  Every root but i is then one of a real and positive
element; a root whose radicand has no known sign stands alone, and may not be compared with
others on which it depends.
"""

from __future__ import annotations

from fractions import Fraction

from flint import fmpz

from closedform.algebra.elementary.constant import Constant
from closedform.algebra.elementary.errors import NotElementaryError
from closedform.algebra.elementary.residues import Residues
from closedform.algebra.elementary.signs import Signs
from closedform.algebra.elementary.squares import square_root
from closedform.algebra.elementary.tower import Tower, roots_in
from closedform.algebra.fraction_field import Whole

__all__ = ["Radicals"]

MOST_DIGITS = 60
"""A number with more digits is not taken apart into primes."""


class Radicals:
    """The square roots of the constants of a tower."""

    def __init__(self, tower: Tower, signs: Signs) -> None:
        self.tower, self._signs = tower, signs
        self._known: dict[Constant, Constant] = {}
        self._all_atoms = True
        self._residues = Residues(tower)

    def root(self, element: Constant) -> Constant:
        """Return the principal square root.

        Raises NotElementaryError where signs that it takes are not known.
        """
        if element not in self._known:
            self._known[element] = self._root(element)
        return self._known[element]

    def modulus(self, element: Constant) -> Constant:
        """Return the absolute value."""
        self.demand_settled(element)
        real, imaginary = element.real, element.imaginary
        if not imaginary or not real:
            part = real or imaginary
            return self._turned(part)
        return self._positive(real * real + imaginary * imaginary)

    def demand_settled(self, element: Constant) -> None:
        """Raise NotElementaryError if an element may be complex without showing it by i."""
        if not all(k == 0 or self.tower.roots[k].positive for k in roots_in(element.mask())):
            raise NotElementaryError("a square root is real or not, as the parameters are")

    def _turned(self, real: Constant) -> Constant:
        """The absolute value of a real element."""
        sign = self._signs.of(real)
        if sign is None:
            raise NotElementaryError("the sign of a quantity under a root is not known")
        return real if sign > 0 else -real if sign else self.tower.zero

    def _root(self, x: Constant) -> Constant:
        tower = self.tower
        if not x:
            return x
        real, imaginary = x.real, x.imaginary
        if imaginary:
            self.demand_settled(x)
            half = tower.number(Fraction(1, 2))
            u = self._positive((self.modulus(x) + real) * half)
            return u + tower.i * (imaginary * half / u)
        sign = self._signs.of(x)
        if sign is None:
            return self._flat(x) if x.is_flat else self._unsettled(x)
        if sign == 0:
            return tower.zero
        return self._positive(x) if sign > 0 else tower.i * self._positive(-x)

    def _positive(self, x: Constant) -> Constant:
        """The root of an element that is positive."""
        if x.is_flat:
            return self._flat(x, positive=True)
        found = self._in_tower(x)
        if found is not None:
            return self._turned(found)
        outer, inner, scale = self._primitive(x)
        return scale * self._flat(outer, positive=True) * self._known_or_new(inner, positive=True)

    def _in_tower(self, x: Constant) -> Constant | None:
        return None if self._residues.excludes(x) else square_root(self.tower, x)

    def _unsettled(self, x: Constant) -> Constant:
        """The root of an element with roots in it whose sign is not known."""
        outer, inner, scale = self._primitive(x)
        return scale * self._flat(outer, positive=True) * self._known_or_new(inner, positive=False)

    def _primitive(self, x: Constant) -> tuple[Constant, Constant, Constant]:
        """u, v, w with sqrt(x) = w sqrt(u) sqrt(v): u > 0 flat, v without denominator."""
        tower = self.tower
        shared = next(iter(x.parts.values()))
        for part in x.parts.values():
            shared = shared.gcd(part)
        outer = tower.polynomial(shared) / tower.polynomial(x.below)
        sign = self._signs.of(outer)
        if sign:
            return (outer, x / outer, tower.one) if sign > 0 else (-outer, -x / outer, tower.one)
        below = tower.polynomial(x.below)
        return tower.one, x * below * below, self._turned(below).inverse()

    def _flat(self, x: Constant, *, positive: bool = False) -> Constant:
        """The root of an element of Q(names); `positive` says that it is known to be so."""
        tower = self.tower
        content, factors = self._factored(x)
        outside, rest, sign = tower.one, tower.unit, 1 if content > 0 else -1
        for factor, exponent in factors:
            of_factor = self._signs.of_polynomial(factor)
            if exponent // 2:
                outside = outside * self._turned(tower.polynomial(factor)) ** (exponent // 2)
            if exponent % 2 == 0:
                continue
            if of_factor is None:
                rest = rest * factor
                continue
            sign *= of_factor
            outside = outside * self._atom(factor if of_factor > 0 else -factor)
        outside = outside * self._of_number(abs(content))
        if not rest.is_one():
            of_rest = sign if positive else self._signs.of_polynomial(rest)
            inside = tower.polynomial(rest if (of_rest or sign) > 0 else -rest)
            outside = outside * self._known_or_new(inside, positive=of_rest is not None)
            sign = 1 if of_rest is None else sign * of_rest
        return outside if sign > 0 else tower.i * outside

    def _factored(self, x: Constant) -> tuple[Fraction, list[tuple[Whole, int]]]:
        above, over = x.parts[0].factor()
        below, under = x.below.factor()
        factors = [*((f, int(e)) for f, e in over), *((f, -int(e)) for f, e in under)]
        return Fraction(int(above), int(below)), factors

    def _of_number(self, value: Fraction) -> Constant:
        """The root of a positive rational number."""
        whole, outside = value.numerator * value.denominator, Fraction(1, value.denominator)
        root = fmpz(whole).isqrt()
        if root * root == whole:
            return self.tower.number(outside * int(root))
        if whole >= 10**MOST_DIGITS:
            raise NotElementaryError(
                f"the square root of a number of more than {MOST_DIGITS} digits"
            )
        result = self.tower.one
        for prime, exponent in fmpz(whole).factor():
            outside *= int(prime) ** (int(exponent) // 2)
            if exponent % 2:
                result = result * self._atom(self.tower.ring.constant(int(prime)))
        return result * self.tower.number(outside)

    def _atom(self, polynomial: Whole) -> Constant:
        """The root of a prime or irreducible polynomial that is positive."""
        return self._known_or_new(self.tower.polynomial(polynomial), positive=True, atom=True)

    def _known_or_new(self, x: Constant, *, positive: bool, atom: bool = False) -> Constant:
        if x not in self._known:
            self._known[x] = self._new(x, positive=positive, atom=atom)
        return self._known[x]

    def _new(self, x: Constant, *, positive: bool, atom: bool) -> Constant:
        """The root of an element without denominator, found in the tower or adjoined to it."""
        # Roots of distinct primes and irreducible polynomials are independent of each other.
        found = None if atom and self._all_atoms else self._in_tower(x)
        if found is not None:
            if not positive:
                raise NotElementaryError(
                    "square roots depend on each other by a sign that the parameters change"
                )
            return self._turned(found)
        self._all_atoms = self._all_atoms and atom
        return self.tower.adjoined(x, positive=positive)
