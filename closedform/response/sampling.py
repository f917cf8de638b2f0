"""Certified decimals of a response: at given instants, and of its named constants."""

from __future__ import annotations

from decimal import ROUND_FLOOR, Decimal
from fractions import Fraction
from math import pi

from flint import arb, ctx

from closedform.algebra.enclosure import (
    ball_of,
    certified_decimal,
    certified_decimals,
    exact_decimal,
)
from closedform.algebra.exponential import ExponentialMatrix
from closedform.algebra.roots import enclosed_roots
from closedform.algebra.surds import SurdSum
from closedform.response.names import NamedConstant, RootPart
from closedform.response.response import Response

__all__ = ["constant_decimal", "default_times", "isolating_interval", "sampled", "surd_decimal"]

_DEFAULT_STEPS = (0, 1, 2, 4, 8, 16)
_FEWEST_FIGURES = 4
_NEGLIGIBLE = 1e-12
_ISOLATING_BITS = 512


def sampled(
    function: ExponentialMatrix, times: tuple[SurdSum, ...], digits: int
) -> list[list[str]]:
    """Return the entries of a column of functions at each instant, as certified decimals.

    Shapes:  `function` is n x 1; the result has len(times) rows of n decimals, each
    rounded to `digits` significant digits (fewer where the value is exact with fewer).
    """
    return [_column(function, t, digits) for t in times]


def constant_decimal(constant: NamedConstant, digits: int) -> str:
    """Return the certified decimal of a named constant."""
    return certified_decimal(constant.definition.enclosure, digits)


def surd_decimal(value: SurdSum, digits: int) -> str:
    """Return the certified decimal of a surd sum."""
    if value.is_rational:
        return exact_decimal(value.as_fraction(), digits)
    return certified_decimal(lambda: ball_of(value), digits)


def isolating_interval(part: RootPart) -> tuple[str, str]:
    """Return decimals between which the real or imaginary part of a named root lies.

    The intervals of the two parts make a rectangle that holds this root of the polynomial
    and no other; for a real root that is an interval which isolates it.
    """
    with ctx.workprec(_ISOLATING_BITS):
        roots = enclosed_roots(part.base, part.polynomial)
        root = roots[part.which - 1]
        others = [z for z in roots if not z.overlaps(root)]
        digits = _FEWEST_FIGURES
        while True:
            (left, right), (low, high) = (
                _decimals_around(root.real, digits),
                _decimals_around(root.imag, digits),
            )
            if not any(
                z.real.overlaps(ball_of(left).union(ball_of(right)))
                and z.imag.overlaps(ball_of(low).union(ball_of(high)))
                for z in others
            ):
                chosen = (left, right) if part.part == "real" else (low, high)
                return exact_decimal(chosen[0], digits + 2), exact_decimal(chosen[1], digits + 2)
            digits += 2


def _decimals_around(ball: arb, digits: int) -> tuple[Fraction, Fraction]:
    """The nearest decimals with that many figures below and above a number, 0 around itself."""
    if ball == 0:
        return Fraction(0), Fraction(0)
    middle = Decimal(certified_decimal(lambda: ball, digits + 2))
    unit = Decimal(1).scaleb(middle.adjusted() - digits + 1)
    below = (middle / unit).to_integral_value(ROUND_FLOOR) * unit
    return Fraction(below), Fraction(below + unit)


def default_times(response: Response) -> tuple[SurdSum, ...]:
    """Return six instants that suit a model without times of its own.

    The step is 1, 2 or 5 times a power of ten, at most half the longest time constant and
    an eighth of the longest period.
    """
    with ctx.workprec(64):
        roots = [z for f in response.spectrum.factors for z in f.roots.enclosures()]
        decays = [d for z in roots if (d := abs(float(z.real.mid()))) > _NEGLIGIBLE]
        turns = [w for z in roots if (w := abs(float(z.imag.mid()))) > _NEGLIGIBLE]
    bounds = [1 / (2 * min(decays))] if decays else []
    bounds += [pi / (4 * min(turns))] if turns else []
    step = _round_number(Fraction(min(bounds))) if bounds else Fraction(1)
    return tuple(SurdSum.rational(step * k) for k in _DEFAULT_STEPS)


def _round_number(value: Fraction) -> Fraction:
    """The largest of 1, 2, 5 times a power of ten that does not exceed a number > 0."""
    power = Fraction(1)
    while power > value:
        power /= 10
    while power * 10 <= value:
        power *= 10
    return max(power * k for k in (1, 2, 5) if power * k <= value)


def _column(function: ExponentialMatrix, t: SurdSum, digits: int) -> list[str]:
    rows = range(function.shape[0])
    exact = [function.exact_entry(row, 0, t) for row in rows]
    open_rows = [row for row in rows if exact[row] is None]

    def balls() -> list[arb]:
        column = function.enclosure(ball_of(t))
        return [column[row, 0] for row in open_rows]

    texts = dict(zip(open_rows, certified_decimals(balls, digits), strict=True))
    return [
        texts[row] if value is None else surd_decimal(value, digits)
        for row, value in enumerate(exact)
    ]
