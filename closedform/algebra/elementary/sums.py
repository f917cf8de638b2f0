"""Finite sums of c t^k exp(lambda t + alpha) over the constants.

Terms of different (lambda, k) are independent over all constants.  For each of them the sum of
c exp(alpha) over different algebraic alpha is zero only if every c is (the theorem of Lindemann
and Weierstrass; A. Baker, Transcendental Number Theory, 1975, chapter 1), if the c are algebraic
too.  What other transcendental numbers there are beside is settled in `certainty`.
"""

from __future__ import annotations

from math import comb

from closedform.algebra.elementary.angles import Angles
from closedform.algebra.elementary.constant import Constant
from closedform.algebra.elementary.errors import NotElementaryError
from closedform.algebra.elementary.tower import Tower

__all__ = ["Sums", "Terms"]

Terms = dict[tuple[int, int], Constant]
"""Coefficients, none of them zero, by the number of an exponent and the power of t."""

UNBOUNDED = 10**12
"""Products of constants that are never reached in bounded time."""


class Sums:
    """Arithmetic with sums; exponents are numbered as they are met, 0 is that of a constant."""

    def __init__(self, tower: Tower, angles: Angles) -> None:
        self.tower, self._angles = tower, angles
        self._numbers: dict[tuple[Constant, Constant], int] = {}
        self.exponents: list[tuple[Constant, Constant]] = []
        self._added: dict[tuple[int, int], tuple[int, Constant]] = {}
        self.left = UNBOUNDED
        self.exponent(tower.zero, tower.zero)

    def exponent(self, rate: Constant, offset: Constant) -> tuple[int, Constant]:
        """Return (number, factor): exp(rate t + offset) is factor times that of the number."""
        offset, factor = self._angles.normal_exponent(offset)
        pair = rate, offset
        if pair not in self._numbers:
            self._numbers[pair] = len(self.exponents)
            self.exponents.append(pair)
        return self._numbers[pair], factor

    def constant(self, value: Constant) -> Terms:
        """Return a constant as a sum."""
        return {(0, 0): value} if value else {}

    def added(self, one: Terms, other: Terms) -> Terms:
        """Return the sum of two."""
        total = dict(one)
        for key, value in other.items():
            _put(total, key, value)
        return total

    def negated(self, one: Terms) -> Terms:
        """Return a sum with all signs turned."""
        return {key: -value for key, value in one.items()}

    def scaled(self, one: Terms, factor: Constant) -> Terms:
        """Return a sum times a constant."""
        if factor == self.tower.one:
            return one
        return {key: value * factor for key, value in one.items()} if factor else {}

    def multiplied(self, one: Terms, other: Terms) -> Terms:
        """Return the product of two."""
        for these, those in ((one, other), (other, one)):
            if len(those) == 1 and (0, 0) in those:
                return self.scaled(these, those[0, 0])
        self.spend(len(one) * len(other))
        total: Terms = {}
        for (i, k), a in one.items():
            for (j, m), b in other.items():
                number, factor = self._sum_of_exponents(i, j)
                product = a * b
                if factor is not self.tower.one:
                    product = product * factor
                _put(total, (number, k + m), product)
        return total

    def spend(self, products: int) -> None:
        """Take products of constants from what may still be worked out.

        Raises NotElementaryError where nothing is left.
        """
        self.left -= products
        if self.left < 0:
            raise NotElementaryError("it takes too many operations to be worked out")

    def _sum_of_exponents(self, i: int, j: int) -> tuple[int, Constant]:
        if not i or not j:
            return i or j, self.tower.one
        key = (i, j) if i < j else (j, i)
        if key not in self._added:
            (rate, offset), (more, further) = self.exponents[i], self.exponents[j]
            number, factor = self.exponent(rate + more, offset + further)
            self._added[key] = number, self.tower.one if factor == self.tower.one else factor
        return self._added[key]

    def reciprocal(self, number: int) -> Terms:
        """Return exp(-(lambda t + alpha)) for the exponent of a number."""
        rate, offset = self.exponents[number]
        opposite, factor = self.exponent(-rate, -offset)
        return {(opposite, 0): factor}

    def derivative(self, one: Terms) -> Terms:
        """Return the derivative with respect to t."""
        total: Terms = {}
        for (number, k), c in one.items():
            rate = self.exponents[number][0]
            if rate:
                _put(total, (number, k), c * rate)
            if k:
                _put(total, (number, k - 1), c * self.tower.number(k))
        return total

    def integral(self, one: Terms) -> Terms:
        """Return an antiderivative, that without a constant of its own."""
        total: Terms = {}
        for (number, k), c in one.items():
            rate = self.exponents[number][0]
            if not rate:
                _put(total, (number, k + 1), c / self.tower.number(k + 1))
                continue
            for power in range(k, -1, -1):
                c = c / rate  # noqa: PLW2901  the next coefficient comes from this
                _put(total, (number, power), c)
                c = c * self.tower.number(-power)  # noqa: PLW2901  likewise
        return total

    def composed(self, one: Terms, rate: Constant, offset: Constant) -> Terms:
        """Return the sum with rate t + offset in the place of t."""
        total: Terms = {}
        for (number, k), c in one.items():
            own_rate, own_offset = self.exponents[number]
            new, factor = self.exponent(own_rate * rate, own_rate * offset + own_offset)
            before = c * factor
            if not offset:
                _put(total, (new, k), before * rate**k)
                continue
            for power in range(k + 1 if rate else 1):
                part = rate**power * offset ** (k - power) * self.tower.number(comb(k, power))
                _put(total, (new, power), before * part)
        return total

    def conjugate(self, one: Terms) -> Terms:
        """Return the complex conjugate for real t; every root but i is real."""
        total: Terms = {}
        for (number, k), c in one.items():
            rate, offset = self.exponents[number]
            new, factor = self.exponent(rate.mirrored(0), offset.mirrored(0))
            _put(total, (new, k), c.mirrored(0) * factor)
        return total

    def ratio(self, one: Terms, other: Terms) -> Constant | None:
        """Return the constant that the first is times the second, None if there is none."""
        if one.keys() != other.keys():
            return None
        ratio: Constant | None = None
        for key, value in one.items():
            found = value / other[key]
            if ratio is not None and found != ratio:
                return None
            ratio = found
        return ratio


def _put(total: Terms, key: tuple[int, int], value: Constant) -> None:
    if key in total:
        value = total[key] + value
        if not value:
            del total[key]
            return
    if value:
        total[key] = value
