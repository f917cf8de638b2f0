"""Numbers (a + b sqrt(d)) + i (c + e sqrt(d)) and matrices of them, in fractions.

This is the arithmetic of the generator of derivations: none of it is the program's own.
"""

from __future__ import annotations

from collections.abc import Callable, Sequence
from dataclasses import dataclass
from fractions import Fraction

import mpmath

__all__ = ["Matrix", "Surd", "added", "column", "inverse", "product", "surd", "times", "unit"]

Rational = int | Fraction


@dataclass(frozen=True)
class Surd:
    """The number (a + b sqrt(d)) + i (c + e sqrt(d)); d is 1 where b and e vanish."""

    a: Fraction = Fraction(0)
    b: Fraction = Fraction(0)
    c: Fraction = Fraction(0)
    e: Fraction = Fraction(0)
    d: int = 1

    def _with(self, other: Surd) -> int:
        if 1 not in (self.d, other.d) and self.d != other.d:
            raise ValueError((self.d, other.d))
        return self.d if self.d != 1 else other.d

    def __add__(self, other: Surd) -> Surd:
        d = self._with(other)
        return surd(self.a + other.a, self.b + other.b, self.c + other.c, self.e + other.e, d)

    def __neg__(self) -> Surd:
        return Surd(-self.a, -self.b, -self.c, -self.e, self.d)

    def __sub__(self, other: Surd) -> Surd:
        return self + (-other)

    def __mul__(self, other: Surd) -> Surd:
        d = self._with(other)
        a, b, c, e = self.a, self.b, self.c, self.e
        x, y, z, w = other.a, other.b, other.c, other.e
        return surd(
            a * x + d * b * y - c * z - d * e * w,
            a * y + b * x - c * w - e * z,
            a * z + d * b * w + c * x + d * e * y,
            a * w + b * z + c * y + e * x,
            d,
        )

    def __truediv__(self, other: Surd) -> Surd:
        norm = other * other.conjugate
        below = norm.a * norm.a - norm.d * norm.b * norm.b
        return self * other.conjugate * surd(norm.a / below, -norm.b / below, 0, 0, norm.d)

    def __pow__(self, exponent: int) -> Surd:
        result = ONE
        for _ in range(exponent):
            result = result * self
        return result

    @property
    def conjugate(self) -> Surd:
        """The complex conjugate."""
        return Surd(self.a, self.b, -self.c, -self.e, self.d)

    @property
    def real(self) -> Surd:
        """The real part."""
        return surd(self.a, self.b, 0, 0, self.d)

    @property
    def imag(self) -> Surd:
        """The imaginary part, a real number."""
        return surd(self.c, self.e, 0, 0, self.d)

    @property
    def is_zero(self) -> bool:
        """Whether it is 0."""
        return not (self.a or self.b or self.c or self.e)

    @property
    def is_rational(self) -> bool:
        """Whether it is a rational number."""
        return not (self.b or self.c or self.e)

    def number(self) -> mpmath.mpc:
        """Return its value at mpmath's precision."""
        root = mpmath.sqrt(self.d)
        return mpmath.mpc(_mpf(self.a) + root * _mpf(self.b), _mpf(self.c) + root * _mpf(self.e))

    @property
    def sign(self) -> int:
        """The sign of a real number."""
        value = self.number().real
        return 0 if self.is_zero else (1 if value > 0 else -1)


def _mpf(value: Fraction) -> mpmath.mpf:
    return mpmath.mpf(value.numerator) / value.denominator


def surd(a: Rational, b: Rational = 0, c: Rational = 0, e: Rational = 0, d: int = 1) -> Surd:
    """Return the number with these parts."""
    return Surd(Fraction(a), Fraction(b), Fraction(c), Fraction(e), d if b or e else 1)


ZERO, ONE, IMAGINARY = surd(0), surd(1), surd(0, 0, 1)
Matrix = tuple[tuple[Surd, ...], ...]


def unit(size: int) -> Matrix:
    """Return the unit matrix."""
    return tuple(tuple(ONE if i == j else ZERO for j in range(size)) for i in range(size))


def product(one, other, zero=ZERO):
    """Return the product of two matrices; entries may be of any kind that multiply and add."""
    rows = []
    for row in one:
        entries = []
        for j in range(len(other[0])):
            total = zero
            for k, entry in enumerate(row):
                total = total + entry * other[k][j]
            entries.append(total)
        rows.append(tuple(entries))
    return tuple(rows)


def added(one, other):
    """Return the sum of two matrices."""
    return tuple(
        tuple(x + y for x, y in zip(a, b, strict=True)) for a, b in zip(one, other, strict=True)
    )


def times(matrix, change: Callable):
    """Return a matrix with every entry changed."""
    return tuple(tuple(change(entry) for entry in row) for row in matrix)


def column(entries: Sequence[Surd]) -> Matrix:
    """Return a column."""
    return tuple((entry,) for entry in entries)


def inverse(matrix: Matrix) -> Matrix:
    """Return the inverse.  Raises ZeroDivisionError."""
    size = len(matrix)
    rows = [[*row, *extra] for row, extra in zip(matrix, unit(size), strict=True)]
    for k in range(size):
        at = next((i for i in range(k, size) if not rows[i][k].is_zero), None)
        if at is None:
            raise ZeroDivisionError
        rows[k], rows[at] = rows[at], rows[k]
        pivot = rows[k][k]
        rows[k] = [entry / pivot for entry in rows[k]]
        for i in range(size):
            if i != k and not rows[i][k].is_zero:
                factor = rows[i][k]
                rows[i] = [x - factor * y for x, y in zip(rows[i], rows[k], strict=True)]
    return tuple(tuple(row[size:]) for row in rows)
