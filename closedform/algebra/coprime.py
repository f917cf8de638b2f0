"""Whether polynomials share a root, over a field of numbers or of rational functions."""

from __future__ import annotations

from collections.abc import Iterator

from sympy.polys.densebasic import dup_strip
from sympy.polys.domains import QQ
from sympy.polys.polyclasses import DMP

from closedform.algebra.field import Polynomial, rational

__all__ = ["are_coprime", "is_squarefree"]

_PRIMES = (2, 3, 5, 7, 11, 13, 17, 19, 23, 29, 31, 37, 41, 43, 47, 53, 59, 61, 67, 71)
_TRIES = 3


def are_coprime(f: Polynomial, g: Polynomial) -> bool:
    """Whether two monic polynomials over one field have no root in common.

    Over rational functions numbers are put in the place of the parameters first: if the
    polynomials share no root then, their resultant is not zero there, so it is not zero.
    """
    if f.dom.is_FractionField:
        for point in range(_TRIES):
            left, right = list(_at_numbers(f, point)), list(_at_numbers(g, point))
            if None in left or None in right:
                continue
            numbers = (DMP(dup_strip(c), QQ, 0) for c in (left, right))
            if next(numbers).gcd(next(numbers)).degree() == 0:
                return True
    return bool(f.gcd(g).degree() == 0)


def is_squarefree(p: Polynomial) -> bool:
    """Whether a monic polynomial has no double root."""
    return bool(p.degree() == 1) or are_coprime(p, p.diff())


def _at_numbers(polynomial: Polynomial, point: int) -> Iterator[object]:
    """The coefficients with primes put in for the parameters; None at a pole."""
    for c in polynomial.to_list():
        values = [QQ(_PRIMES[(k + 5 * point) % len(_PRIMES)]) for k in range(c.numer.ring.ngens)]
        below = c.denom.evaluate(list(zip(c.denom.ring.gens, values, strict=True)))
        above = c.numer.evaluate(list(zip(c.numer.ring.gens, values, strict=True)))
        number = rational(below)
        yield None if number == 0 else QQ(1) * above / below
