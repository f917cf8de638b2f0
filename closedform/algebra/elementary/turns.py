"""The numbers exp(i pi q) that are expressions in square roots."""

from __future__ import annotations

from fractions import Fraction

from closedform.algebra.elementary.constant import Constant
from closedform.algebra.elementary.errors import NotElementaryError
from closedform.algebra.elementary.radicals import Radicals

__all__ = ["parted", "turned"]


def turned(radicals: Radicals, share: Fraction) -> Constant:
    """Return exp(i pi share) for a denominator 2^a, 3 · 2^a, 5 · 2^a or 15 · 2^a, a <= 4.

    Raises NotElementaryError for others.
    """
    tower = radicals.tower
    share %= 2
    below = share.denominator
    dyadic, odd = parted(share)
    if odd.denominator not in (1, 3, 5, 15) or dyadic.denominator > 16:
        raise NotElementaryError(f"the cosine of pi/{below} is no expression in square roots")
    result, depth = -tower.one, dyadic.denominator
    while depth > 1:
        result, depth = radicals.root(result), depth // 2
    result = result**dyadic.numerator
    if odd:  # odd = x/3 + y/5, and whole numbers
        over = odd * 15
        x, y = int(over) * 2 % 3, int(over) * 2 % 5
        whole = odd - Fraction(x, 3) - Fraction(y, 5)
        result = result * _third(radicals) ** x * _fifth(radicals) ** y
        result = result * (-tower.one if whole % 2 else tower.one)
    return result


def _third(radicals: Radicals) -> Constant:
    tower = radicals.tower
    root = radicals.root(tower.number(3))
    return (tower.one + tower.i * root) * tower.number(Fraction(1, 2))


def _fifth(radicals: Radicals) -> Constant:
    tower = radicals.tower
    root = radicals.root(tower.number(5))
    cosine = (tower.one + root) * tower.number(Fraction(1, 4))
    return cosine + tower.i * radicals.root(tower.one - cosine * cosine)


def parted(value: Fraction) -> tuple[Fraction, Fraction]:
    """A sum of two: a power of 2 is below, and an odd number below what lies in [0, 1)."""
    odd = value.denominator
    even = odd & -odd
    odd //= even
    above = value.numerator * pow(even, -1, odd) % odd if odd > 1 else 0
    rest = Fraction(above, odd)
    return value - rest, rest
