"""What the tests read out of the package's exact numbers, in plain terms."""

from __future__ import annotations

from collections.abc import Mapping, Sequence
from fractions import Fraction
from typing import Protocol

from flint import acb_poly, arb, fmpq, fmpq_poly

from closedform.notation.expression import (
    Call,
    Expression,
    Name,
    Negation,
    Number,
    Power,
    Product,
    Quotient,
    Sum,
)


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


def value_of(formula: Expression, names: Mapping[str, arb]) -> arb:
    """Return a ball for what a formula says, worked out apart from the package's evaluation."""

    def at(part: Expression) -> arb:
        match part:
            case Number(value):
                return arb(fmpq(value.numerator, value.denominator))
            case Name(text):
                return names[text]
            case Negation(operand):
                return -at(operand)
            case Sum(terms):
                return sum(map(at, terms), arb(0))
            case Product(factors):
                product = arb(1)
                for factor in factors:
                    product *= at(factor)
                return product
            case Quotient(above, below):
                return at(above) / at(below)
            case Power(base, Number(exponent)):
                assert exponent.denominator == 1
                return at(base) ** exponent.numerator
            case Power(base, exponent):
                return at(base) ** at(exponent)
            case Call(function, argument):
                found: arb = getattr(at(argument), function)()
                return found

    return at(formula)
