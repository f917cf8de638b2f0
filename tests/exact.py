"""What the tests read out of the package's exact numbers, in plain terms."""

from __future__ import annotations

from collections.abc import Sequence
from fractions import Fraction
from typing import Protocol

from flint import acb_poly, fmpq, fmpq_poly


class Rational(Protocol):
    """An exact rational number of whichever kind: int, Fraction, FLINT's or SymPy's."""

    @property
    def numerator(self) -> int: ...

    @property
    def denominator(self) -> int: ...


def fractions_of(numbers: Sequence[Rational]) -> tuple[Fraction, ...]:
    """Return rational numbers as fractions.  A number with a root in it has no numerator."""
    return tuple(Fraction(int(x.numerator), int(x.denominator)) for x in numbers)


def polynomial_of(highest_first: Sequence[Rational]) -> fmpq_poly:
    """Return the polynomial with these rational coefficients."""
    coefficients = reversed(fractions_of(highest_first))
    return fmpq_poly([fmpq(c.numerator, c.denominator) for c in coefficients])


def at_balls(p: fmpq_poly) -> acb_poly:
    """Return the same polynomial, to evaluate at balls of the working precision."""
    return acb_poly(p)
