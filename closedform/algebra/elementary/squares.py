"""Whether a constant is a square in its tower, and its root.

a + b r with r^2 = d is a square just if a^2 - b^2 d is a square N^2 below, and one of
(a + N)/2 and (a - N)/2 is a square u^2 there: then it is (u + b r/(2u))^2.  For b = 0 it is
one just if a or a/d is a square below.

Source:  A. Borodin, R. Fagin, J. E. Hopcroft, M. Tompa, Decreasing the nesting depth of
         expressions involving square roots, Journal of Symbolic Computation 1 (1985).
"""

from __future__ import annotations

from fractions import Fraction

from flint.utils.flint_exceptions import DomainError

from closedform.algebra.elementary.constant import Constant
from closedform.algebra.elementary.tower import Tower
from closedform.algebra.fraction_field import Whole

__all__ = ["square_root"]


def square_root(tower: Tower, element: Constant) -> Constant | None:
    """Return an element whose square is the given one, of either sign; None if none is."""
    known: dict[tuple[Constant, int], Constant | None] = {}

    def root(x: Constant, level: int) -> Constant | None:
        if not x:
            return x
        if level == 0:
            return _flat_root(tower, x)
        if (x, level) not in known:
            known[x, level] = in_tower(x, level)
        return known[x, level]

    def in_tower(x: Constant, level: int) -> Constant | None:
        index, half = level - 1, tower.number(Fraction(1, 2))
        radicand = tower.roots[index].radicand
        r = Constant(tower, {1 << index: tower.unit}, tower.unit)
        a, b = x.halves(index)
        if not b:
            found = root(a, index)
            if found is None:
                found = root(a / radicand, index)
                return None if found is None else found * r
            return found
        norm = root(a * a - b * b * radicand, index)
        if norm is None:
            return None
        for signed in (norm, -norm):
            u = root((a + signed) * half, index)
            if u is not None and u:
                return u + b * half / u * r
        return None

    return root(element, len(tower.roots))


def _flat_root(tower: Tower, element: Constant) -> Constant | None:
    above, below = _polynomial_root(element.parts[0]), _polynomial_root(element.below)
    if above is None or below is None:
        return None
    return tower.polynomial(above) / tower.polynomial(below)


def _polynomial_root(polynomial: Whole) -> Whole | None:
    if polynomial.leading_coefficient() < 0:
        return None
    try:
        return polynomial.sqrt()
    except DomainError:
        return None
