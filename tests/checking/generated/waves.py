"""Sums of c t^k e^(lambda t): how the generator works out e^(Jt), solutions and forced motion."""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import dataclass, field
from math import comb, factorial

import mpmath

from tests.checking.generated.surds import ONE, ZERO, Surd, surd

__all__ = ["RealTerm", "Wave", "block_exponential", "constant", "convolved", "wave"]

Key = tuple[int, Surd]


@dataclass(frozen=True)
class RealTerm:
    """t^k e^(sigma t) (cosine cos(omega t) + sine sin(omega t)), all numbers real."""

    k: int
    sigma: Surd
    omega: Surd
    cosine: Surd
    sine: Surd


@dataclass(frozen=True)
class Wave:
    """A sum of coefficients times t^k e^(lambda t), by (k, lambda)."""

    terms: Mapping[Key, Surd] = field(default_factory=dict)

    def __add__(self, other: Wave) -> Wave:
        found = dict(self.terms)
        for key, c in other.terms.items():
            found[key] = found.get(key, ZERO) + c
        return wave(found)

    def __mul__(self, other: Wave) -> Wave:
        found: dict[Key, Surd] = {}
        for (k, x), c in self.terms.items():
            for (m, y), d in other.terms.items():
                key = (k + m, x + y)
                found[key] = found.get(key, ZERO) + c * d
        return wave(found)

    def __neg__(self) -> Wave:
        return self.scaled(-ONE)

    def __sub__(self, other: Wave) -> Wave:
        return self + (-other)

    def scaled(self, factor: Surd) -> Wave:
        """Return it times a number."""
        return wave({key: c * factor for key, c in self.terms.items()})

    @property
    def is_zero(self) -> bool:
        """Whether it is the function 0."""
        return not self.terms

    def derivative(self) -> Wave:
        """Return the derivative."""
        found: dict[Key, Surd] = {}
        for (k, x), c in self.terms.items():
            found[k, x] = found.get((k, x), ZERO) + c * x
            if k:
                found[k - 1, x] = found.get((k - 1, x), ZERO) + c * surd(k)
        return wave(found)

    def at(self, t: mpmath.mpf) -> mpmath.mpc:
        """Return the value at an instant, at mpmath's precision."""
        total = mpmath.mpc(0)
        for (k, x), c in self.terms.items():
            total += c.number() * t**k * mpmath.exp(x.number() * t)
        return total

    def at_zero(self) -> Surd:
        """Return the value at 0."""
        total = ZERO
        for (k, _), c in self.terms.items():
            if k == 0:
                total = total + c
        return total

    def limit(self) -> Surd | None:
        """Return the limit for t to infinity, None if there is none."""
        total = ZERO
        for (k, x), c in self.terms.items():
            if x.is_zero and k == 0:
                total = total + c
            elif x.real.sign >= 0:
                return None
        return total

    def real_terms(self) -> tuple[RealTerm, ...]:
        """Return the terms with sines and cosines; the wave has to be real."""
        found = []
        for (k, x), c in self.terms.items():
            if x.imag.is_zero:
                found.append(RealTerm(k, x.real, ZERO, c, ZERO))
            elif x.imag.sign > 0:
                two = surd(2)
                found.append(RealTerm(k, x.real, x.imag, c.real * two, -(c.imag * two)))
        return tuple(found)


def wave(terms: Mapping[Key, Surd]) -> Wave:
    """Return a wave without terms that vanish."""
    return Wave({key: c for key, c in terms.items() if not c.is_zero})


def constant(value: Surd) -> Wave:
    """Return a constant function."""
    return wave({(0, ZERO): value})


def power(k: int, rate: Surd, factor: Surd = ONE) -> Wave:
    """Return factor t^k e^(rate t)."""
    return wave({(k, rate): factor})


def block_exponential(rate: Surd, length: int, *, lower: bool = False) -> tuple:
    """Return the exponential of a Jordan block times t."""
    rows = []
    for i in range(length):
        row = []
        for j in range(length):
            k = i - j if lower else j - i
            row.append(power(k, rate, surd(1) / surd(factorial(k))) if k >= 0 else Wave())
        rows.append(tuple(row))
    return tuple(rows)


def convolved(one: Wave, other: Wave) -> Wave:
    """Return the integral from 0 to t of one(t - tau) other(tau), by partial fractions."""
    total = Wave()
    for (k, x), c in one.terms.items():
        for (m, y), d in other.terms.items():
            total = total + _convolved(k, x, m, y).scaled(c * d)
    return total


def _convolved(k: int, x: Surd, m: int, y: Surd) -> Wave:
    if x == y:
        scale = surd(factorial(k) * factorial(m)) / surd(factorial(k + m + 1))
        return power(k + m + 1, x, scale)
    found: dict[Key, Surd] = {}
    p, q = k + 1, m + 1
    scale = surd(factorial(k) * factorial(m))
    for own, other, r, s in ((x, y, p, q), (y, x, q, p)):
        for i in range(1, r + 1):
            c = surd((-1) ** (r - i) * comb(s + r - i - 1, r - i)) / (own - other) ** (s + r - i)
            found[i - 1, own] = scale * c / surd(factorial(i - 1))
    return wave(found)
