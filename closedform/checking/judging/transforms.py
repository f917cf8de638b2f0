"""Laplace transforms of functions in pieces."""

from __future__ import annotations

from collections.abc import Sequence
from fractions import Fraction

from closedform.algebra.elementary import Element
from closedform.checking.errors import NotJudgedError
from closedform.checking.standing.ground import SPECTRAL, Ground
from closedform.checking.values.matrices import ExactMatrix, column
from closedform.checking.values.scope import Value

__all__ = ["laplace", "laplace_in_pieces"]


def laplace(value: Element) -> Element:
    """Return the Laplace transform of an exponential polynomial, in the spectral variable.

    Source: t^k e^(lambda t) goes to k!/(s - lambda)^(k + 1); R. V. Churchill, Operational
    Mathematics (1972), table of transforms.
    """
    field = value.field
    s, total = field.name(SPECTRAL), field.zero
    terms = value.terms()
    if terms is None:
        raise NotJudgedError("the transform of this function is not known")
    for rate, constant, power, coefficient in terms:
        factorial = 1
        for k in range(2, power + 1):
            factorial *= k
        weight = coefficient * field.exp(constant) * field.number(Fraction(factorial))
        total = total + weight / (s - rate) ** (power + 1)
    return total


def laplace_in_pieces(values: Sequence[Value], ground: Ground) -> Value:
    """Return the transform of a function, or a column, that is given for every interval.

    At each join a the difference of the pieces begins, f(t) - g(t) from a on, whose transform
    is e^(-a s) times that of f(t + a) - g(t + a).
    """
    if isinstance(values[0], ExactMatrix):
        rows = zip(*(v.entries for v in values if isinstance(v, ExactMatrix)), strict=True)
        return column(ground.field, (_in_pieces(row, ground) for row in rows))
    return _in_pieces([v for v in values if isinstance(v, Element)], ground)


def _in_pieces(values: Sequence[Element], ground: Ground) -> Element:
    s, total, before = ground.field.name(SPECTRAL), ground.field.zero, ground.field.zero
    for stretch, value in zip(ground.stretches, values, strict=True):
        change = laplace((value - before).shifted(stretch.start))
        if not stretch.start.is_zero:
            change = change * ground.field.exp(-(s * stretch.start))
        total, before = total + change, value
    return total
