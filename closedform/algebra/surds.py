"""Exact real numbers of the form r_1 sqrt(d_1) + … + r_k sqrt(d_k), as models state them.

The radicands d_i are squarefree positive integers (1 for the rational part) and the
r_i are rational.  These numbers form a field: square roots of distinct squarefree
integers are linearly independent over Q (A. S. Besicovitch, On the linear
independence of fractional powers of integers, 1940), so equality is equality of terms.
"""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import dataclass
from fractions import Fraction
from math import gcd, isqrt

from flint import fmpz

__all__ = ["LARGEST_RADICAND", "SurdSum", "drawn_out", "root_of_rational", "square_part"]

LARGEST_RADICAND = 10**45
"""Up to here numbers are factored, whatever their factors: within 0.1 s (46 digits, FLINT 3)."""

_SMALL_PRIMES = tuple(n for n in range(2, 1000) if all(n % k for k in range(2, isqrt(n) + 1)))


def square_part(n: int) -> tuple[int, int]:
    """Return (r, d) with n = r^2 d and d squarefree, for n >= 1.

    Raises ValueError where the factors of n are needed and it is too large: what primes
    below 1000 leave of it is no square and above `LARGEST_RADICAND`.
    """
    root, free, rest = _split(n)
    if rest > 1:
        raise ValueError(f"square roots are taken of numbers up to {LARGEST_RADICAND:.0e}")
    return root, free


def drawn_out(n: int) -> tuple[int, int]:
    """Return (r, m) with n = r^2 m, for n >= 1 of any size.

    m is squarefree where `square_part` gives an answer, and else free of squares of
    primes below 1000.
    """
    root, free, rest = _split(n)
    return root, free * rest


def _split(n: int) -> tuple[int, int, int]:
    """Return (r, d, m) with n = r^2 d m, d squarefree and m, prime to d, not factored."""
    root, free, rest = 1, 1, n
    for p in _SMALL_PRIMES:
        while rest % (p * p) == 0:
            root, rest = root * p, rest // (p * p)
        if rest % p == 0:
            free, rest = free * p, rest // p
    r = isqrt(rest)
    if r * r == rest:
        return root * r, free, 1
    if rest > LARGEST_RADICAND:
        return root, free, rest
    for q, exponent in fmpz(rest).factor():
        root *= int(q) ** (exponent // 2)
        free *= int(q) ** (exponent % 2)
    return root, free, 1


def root_of_rational(value: Fraction) -> SurdSum | None:
    """Return the square root of a rational number >= 0, or None.

    None says that the numerator or the denominator is no square and too large to be
    factored, so that no squarefree radicand is known.
    """
    if value == 0:
        return SurdSum(())
    root, free, rest = _split(value.numerator)
    root_below, free_below, rest_below = _split(value.denominator)
    if rest > 1 or rest_below > 1:
        return None
    return SurdSum.of({free * free_below: Fraction(root, root_below * free_below)})


@dataclass(frozen=True, slots=True)
class SurdSum:
    """A sum of rational multiples of square roots; `terms` maps radicand to coefficient.

    `terms` is sorted by radicand and holds no zero coefficient; use `of` to build one.
    """

    terms: tuple[tuple[int, Fraction], ...]

    @staticmethod
    def of(terms: Mapping[int, Fraction]) -> SurdSum:
        """Return the sum with these coefficients by squarefree radicand."""
        return SurdSum(tuple(sorted((d, c) for d, c in terms.items() if c)))

    @staticmethod
    def rational(value: Fraction | int) -> SurdSum:
        """Return a rational number as a surd sum."""
        return SurdSum.of({1: Fraction(value)})

    @property
    def is_rational(self) -> bool:
        """Whether no square root is left."""
        return all(d == 1 for d, _ in self.terms)

    @property
    def is_zero(self) -> bool:
        """Whether the number is zero, exactly."""
        return not self.terms

    def as_fraction(self) -> Fraction:
        """Return the rational value.  Raises ValueError if there is a square root in it."""
        if not self.is_rational:
            raise ValueError(f"{self!r} is not rational")
        return self.terms[0][1] if self.terms else Fraction(0)

    def __neg__(self) -> SurdSum:
        return SurdSum(tuple((d, -c) for d, c in self.terms))

    def __add__(self, other: SurdSum) -> SurdSum:
        total = dict(self.terms)
        for d, c in other.terms:
            total[d] = total.get(d, Fraction(0)) + c
        return SurdSum.of(total)

    def __sub__(self, other: SurdSum) -> SurdSum:
        return self + (-other)

    def __mul__(self, other: SurdSum) -> SurdSum:
        total: dict[int, Fraction] = {}
        for d, a in self.terms:
            for e, b in other.terms:
                g = gcd(d, e)
                key = (d // g) * (e // g)
                total[key] = total.get(key, Fraction(0)) + a * b * g
        return SurdSum.of(total)

    def inverse(self) -> SurdSum:
        """Return 1/x by multiplying with conjugates.  Raises ZeroDivisionError at zero.

        The conjugate changes the sign of every square root whose radicand a divisor b of
        one of them divides.  That is an automorphism of the field if b divides or is prime
        to each radicand, so no radicand need be factored.
        """
        if self.is_zero:
            raise ZeroDivisionError("division by zero")
        if self.is_rational:
            return SurdSum.rational(1 / self.as_fraction())
        b = max(d for d, _ in self.terms)
        for d, _ in self.terms:
            b = gcd(b, d) if gcd(b, d) > 1 else b
        conjugate = SurdSum(tuple((d, -c if d % b == 0 else c) for d, c in self.terms))
        return conjugate * (self * conjugate).inverse()

    def __truediv__(self, other: SurdSum) -> SurdSum:
        return self * other.inverse()

    def power(self, exponent: int) -> SurdSum:
        """Return x^exponent.  Raises ZeroDivisionError for a negative power of zero."""
        base = self if exponent >= 0 else self.inverse()
        result = SurdSum.rational(1)
        for bit in bin(abs(exponent))[2:]:
            result = result * result
            if bit == "1":
                result = result * base
        return result

    def sqrt(self) -> SurdSum:
        """Return the square root of a rational number >= 0.

        Raises ValueError for a negative number, for one that has a square root in it, and
        where `square_part` does for the numerator or the denominator.
        """
        value = self.as_fraction()
        if value < 0:
            raise ValueError("the square root of a negative number is not real")
        root = root_of_rational(value)
        if root is None:
            raise ValueError(f"square roots are taken of numbers up to {LARGEST_RADICAND:.0e}")
        return root
