"""What the tests read out of the package's exact numbers, in plain terms."""

from __future__ import annotations

from collections.abc import Sequence
from fractions import Fraction

from flint import acb_poly, arb, fmpq

from closedform.algebra.surds import SurdSum

Exact = int | Fraction | SurdSum


def fractions_of(numbers: Sequence[Exact]) -> tuple[Fraction, ...]:
    """Return rational numbers as fractions.  Raises ValueError if a root is among them."""
    return tuple(x.as_fraction() if isinstance(x, SurdSum) else Fraction(x) for x in numbers)


def ball_of(x: Exact) -> arb:
    """Return a ball around an exact number at the working precision."""
    terms = x.terms if isinstance(x, SurdSum) else ((1, Fraction(x)),)
    return sum((arb(fmpq(c.numerator, c.denominator)) * arb(d).sqrt() for d, c in terms), arb(0))


def coefficients_of(highest_first: Sequence[Exact]) -> acb_poly:
    """Return the polynomial with these coefficients, to evaluate at balls."""
    return acb_poly([ball_of(c) for c in reversed(highest_first)])
