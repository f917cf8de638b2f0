"""Fields of rational functions whose fractions FLINT brings to lowest terms.

They are SymPy's, and their elements are written down as SymPy writes them: numerator and
denominator with whole coefficients and no common factor, the denominator led by a plus.

Source:  The FLINT team, FLINT: Fast Library for Number Theory, flintlib.org.
"""

from __future__ import annotations

from collections.abc import Sequence
from functools import lru_cache
from math import lcm
from typing import Any, Self

from flint import Ordering, fmpz_mpoly_ctx
from sympy import Symbol
from sympy.polys.domains import QQ, FractionField
from sympy.polys.fields import FracElement, FracField
from sympy.polys.orderings import lex
from sympy.polys.rings import PolyElement, PolyRing

__all__ = ["Whole", "fraction_field", "whole_ring"]

Whole = Any
"""A polynomial with whole coefficients (FLINT's fmpz_mpoly)."""


@lru_cache(maxsize=256)
def fraction_field(names: tuple[str, ...]) -> Any:
    """Return SymPy's domain of the rational functions of names over Q."""
    symbols = tuple(map(Symbol, names))
    fractions, ring = FracField(symbols, QQ, lex), _Ring(symbols, QQ, lex)
    fractions.ring = ring
    fractions.zero, fractions.one = (FracElement(fractions, e) for e in (ring.zero, ring.one))
    fractions.gens = tuple(FracElement(fractions, gen) for gen in ring.gens)
    fractions.dtype = fractions.zero.raw_new
    return FractionField(fractions)


@lru_cache(maxsize=64)
def whole_ring(variables: int) -> Any:
    """Return FLINT's ring of polynomials with whole coefficients in so many variables."""
    return fmpz_mpoly_ctx.get([f"x{i}" for i in range(variables)], Ordering.lex)


class _Polynomial(PolyElement):  # type: ignore[misc]
    """A polynomial that is reduced against another by FLINT, where its coefficients are in Q."""

    def cancel(self, g: _Polynomial) -> tuple[_Polynomial, _Polynomial]:
        """Return two polynomials of the same quotient, in lowest terms."""
        ring = self.ring
        if not self or not g or ring.domain != QQ:
            return super().cancel(g)  # type: ignore[no-any-return]
        scale, below = (lcm(*(int(c.denominator) for c in p.values())) for p in (self, g))
        if scale == 1 and g == ring.one:
            return self, g
        upper, lower = _whole(self, scale) * below, _whole(g, below) * scale
        shared = upper.gcd(lower)
        if lower.leading_coefficient() < 0:
            shared = -shared
        if shared == 1:
            return (self, g) if scale == below == 1 else (_back(self, upper), _back(self, lower))
        return _back(self, upper / shared), _back(self, lower / shared)


class _Ring(PolyRing):  # type: ignore[misc]
    """A ring of such polynomials; it is equal to SymPy's own."""

    def __new__(cls, symbols: Sequence[Symbol], domain: Any, order: Any) -> Self:
        """Return the ring, which SymPy takes for one of its own."""
        ring = super().__new__(cls, symbols, domain, order)
        ring._hash = hash(PolyRing(symbols, domain, order))
        ring.dtype = _Polynomial(ring, ()).new
        ring.gens = tuple(map(ring.dtype, ring.gens))
        ring._gens_set = set(ring.gens)
        return ring  # type: ignore[no-any-return]

    def __eq__(self, other: object) -> bool:
        """Say at once that a ring is itself: each operation asks."""
        return self is other or bool(super().__eq__(other))

    __hash__ = PolyRing.__hash__


def _whole(polynomial: _Polynomial, scale: int) -> Whole:
    """The polynomial times a number that makes its coefficients whole."""
    ring = whole_ring(polynomial.ring.ngens)
    if scale == 1:
        return ring.from_dict({m: int(c.numerator) for m, c in polynomial.items()})
    return ring.from_dict({m: int(c * scale) for m, c in polynomial.items()})


def _back(like: _Polynomial, whole: Whole) -> _Polynomial:
    """A polynomial in the ring of another."""
    terms = {tuple(map(int, m)): QQ(c) for m, c in whole.to_dict().items()}
    return like.new(terms)  # type: ignore[no-any-return]
