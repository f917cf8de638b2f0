"""Certified decimals of a response: at given instants, and of its named constants."""

from __future__ import annotations

from collections.abc import Callable
from fractions import Fraction
from math import floor

from flint import acb, arb, ctx

from closedform.algebra.enclosure import (
    ball_of,
    certified_decimal,
    certified_decimals,
    decimal_order,
    exact_decimal,
    exact_end,
)
from closedform.algebra.exponential import ExponentialMatrix
from closedform.algebra.roots import ORDERING_BITS, enclosed_roots
from closedform.algebra.surds import SurdSum
from closedform.response.names import NamedConstant, Radical, RootPart
from closedform.response.response import Response

__all__ = [
    "constant_decimal",
    "default_times",
    "isolating_interval",
    "sampled",
    "suitable_times",
    "surd_decimal",
]

_DEFAULT_STEPS = (0, 1, 2, 4, 8, 16)
_FEWEST_FIGURES = 4
_FIGURES_OF_RATES = 32
_MOST_GROWTH = 30


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
    definition = constant.definition
    # A radical is irrational, and lies on no tie.
    equals = None if isinstance(definition, Radical) else definition.equals
    return certified_decimal(definition.enclosure, digits, equals=equals)


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
    bits = ORDERING_BITS
    while True:
        with ctx.workprec(bits):
            roots = enclosed_roots(part.base, part.polynomial)
            root = roots[part.which - 1]
            others = [*roots[: part.which - 1], *roots[part.which :]]
            for digits in range(_FEWEST_FIGURES, bits * 3 // 20, 2):
                real, imaginary = (_decimals_around(x, digits) for x in (root.real, root.imag))
                if real is None or imaginary is None:
                    continue
                if not any(_meets(real, z.real) and _meets(imaginary, z.imag) for z in others):
                    low, high = real if part.part == "real" else imaginary
                    return exact_decimal(low, digits + 2), exact_decimal(high, digits + 2)
        bits *= 2


def _meets(side: tuple[Fraction, Fraction], ball: arb) -> bool:
    low, high = side
    return bool(ball.overlaps(ball_of(low).union(ball_of(high))))


def _decimals_around(ball: arb, digits: int) -> tuple[Fraction, Fraction] | None:
    """The nearest decimals with that many figures below and above a number, 0 around itself.

    None where the ball is too wide to tell.
    """
    if ball == 0:
        return Fraction(0), Fraction(0)
    if ball.contains(0):
        return None
    unit = Fraction(10) ** (decimal_order(exact_end(ball.abs_lower())) - digits + 1)
    low = floor(exact_end(ball.lower()) / unit)
    high = floor(exact_end(ball.upper()) / unit) + 1
    return (low * unit, high * unit) if high - low <= len((low, high)) else None


def default_times(response: Response) -> tuple[SurdSum, ...]:
    """Return six instants that suit a model without times of its own."""
    return suitable_times(
        lambda: [z for f in response.spectrum.factors for z in f.roots.enclosures()]
    )


def suitable_times(eigenvalues: Callable[[], list[acb]]) -> tuple[SurdSum, ...]:
    """Return six instants that suit these eigenvalues, enclosed at FLINT's current precision.

    The step is 1, 2 or 5 times a power of ten, at most half the longest time constant and
    an eighth of the longest period; and nothing grows by more than e^30 to the last instant.
    """
    bits = 64
    while True:
        with ctx.workprec(bits):
            roots = eigenvalues()
            rates = [z.real for z in roots if z.real != 0]
            turns = [abs(z.imag) for z in roots if z.imag != 0]
            if all(x.rel_accuracy_bits() >= _FIGURES_OF_RATES for x in (*rates, *turns)):
                bounds = [1 / (2 * abs(rate)) for rate in rates]
                longest = [max(bounds, key=arb.mid)] if rates else []
                longest += [max((arb.pi() / (4 * w) for w in turns), key=arb.mid)] if turns else []
                last = _DEFAULT_STEPS[-1]
                longest += [_MOST_GROWTH / (last * rate) for rate in rates if rate > 0]
                break
        bits *= 2
    step = Fraction(1)
    if longest:
        # The upper end, so that a bound which is a round number itself is met.
        step = _round_number(min(exact_end(bound.upper()) for bound in longest))
    return tuple(SurdSum.rational(step * k) for k in _DEFAULT_STEPS)


def _round_number(value: Fraction) -> Fraction:
    """The largest of 1, 2, 5 times a power of ten that does not exceed a number > 0."""
    power = Fraction(10) ** decimal_order(value)
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
