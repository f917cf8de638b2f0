"""Formulas as Taylor series in balls: their value and all derivatives at an instant at once."""

from __future__ import annotations

from collections.abc import Callable, Mapping
from fractions import Fraction
from math import factorial
from operator import add, mul, neg, sub, truediv

from flint import arb, arb_series

from tests.parametric.plain_reader import Number, Tree, UnreadableError, ball_of, step

__all__ = ["LENGTH", "constant", "derivatives", "moving", "series"]

LENGTH = 10
"""How many coefficients of each series are kept."""


def constant(number: Number | int) -> arb_series:
    return arb_series([ball_of(number)], LENGTH)


def moving(instant: Number | int) -> arb_series:
    """The time itself near an instant."""
    return arb_series([ball_of(instant), arb(1)], LENGTH)


def derivatives(of: arb_series, count: int) -> list[arb]:
    """The value and the next derivatives, `count` of them."""
    return [of[k] * factorial(k) for k in range(count)]


def series(tree: Tree, known: Mapping[str, arb_series]) -> arb_series:
    """Return the series of a formula whose names are series.

    A step is the constant that it is at the instant and a little later; an impulse is 0.
    Raises UnreadableError for a name without a series and a power that is not whole.
    """
    match tree.kind:
        case "number":
            return constant(Fraction(int(tree.leaf)))
        case "name" if tree.leaf == "pi" and "pi" not in known:
            return constant(arb.pi())
        case "name":
            if tree.leaf not in known:
                raise UnreadableError(f"{tree.leaf} has no value here")
            return known[tree.leaf]
        case "delta":
            return constant(0)
    parts = [series(part, known) for part in tree.parts]
    if tree.kind == "^":
        return _power(parts[0], tree.parts[1], parts[1])
    if tree.kind in SIGNS:
        return SIGNS[tree.kind](*parts)
    return _called(tree.kind, parts[0])


SIGNS: dict[str, Callable[..., arb_series]] = {
    "neg": neg,
    "+": add,
    "-": sub,
    "*": mul,
    "/": truediv,
}


def _called(name: str, of: arb_series) -> arb_series:
    match name:
        case "step":
            return constant(step(of[0]))
        case "sinh":
            return (of.exp() - (-of).exp()) / 2
        case "cosh":
            return (of.exp() + (-of).exp()) / 2
        case "exp" | "sin" | "cos" | "sqrt" | "log":
            found: arb_series = getattr(of, name)()
            return found
    raise UnreadableError(f"{name} is not read here")


def _power(base: arb_series, tree: Tree, exponent: arb_series) -> arb_series:
    sign, inner = (-1, tree.parts[0]) if tree.kind == "neg" else (1, tree)
    if inner.kind != "number":
        return (base.log() * exponent).exp()
    whole = constant(1)
    for _ in range(int(inner.leaf)):
        whole = whole * base
    return whole if sign > 0 else constant(1) / whole
