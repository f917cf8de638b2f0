"""Formulas of the time with steps and impulses in them, taken apart."""

from __future__ import annotations

from collections.abc import Mapping
from fractions import Fraction

from tests.driven.amounts import order_of
from tests.parametric.plain_reader import Number, Tree, ball_of, names_in, value

__all__ = ["moved", "seen", "steps_in", "with_zeros", "without_impulses", "zero_of"]

Values = Mapping[str, Number]


def zero_of(tree: Tree, time: str, values: Values) -> Number:
    """Where a function a t + b is zero."""
    zero, one = (value(tree, {**values, time: Fraction(k)}) for k in (0, 1))
    if isinstance(one, Fraction) and isinstance(zero, Fraction):
        return -zero / (one - zero)
    return -ball_of(zero) / (ball_of(one) - ball_of(zero))


def steps_in(tree: Tree) -> list[Tree]:
    found = [tree.parts[0]] if tree.kind == "step" else []
    return found + [inner for part in tree.parts for inner in steps_in(part)]


def seen(tree: Tree, time: str, values: Values, at: Number, *, before: bool) -> Tree:
    """A formula with each step as the number that it is just before or after an instant."""
    if tree.kind == "step":
        (inner,) = tree.parts
        zero, one = (value(inner, {**values, time: Fraction(k)}) for k in (0, 1))
        rising = bool(ball_of(one) > ball_of(zero))
        side = order_of(at, zero_of(inner, time, values))
        later = side > 0 or (side == 0 and not before)
        return Tree("number", leaf=str(int(later == rising)))
    return Tree(
        tree.kind,
        tuple(seen(part, time, values, at, before=before) for part in tree.parts),
        tree.leaf,
    )


def with_zeros(tree: Tree, names: frozenset[str]) -> Tree:
    if tree.kind == "name" and tree.leaf in names:
        return Tree("number", leaf="0")
    if not names & names_in(tree):
        return tree
    return Tree(tree.kind, tuple(with_zeros(part, names) for part in tree.parts), tree.leaf)


def without_impulses(tree: Tree) -> Tree:
    if tree.kind == "delta":
        return Tree("number", leaf="0")
    return Tree(tree.kind, tuple(map(without_impulses, tree.parts)), tree.leaf)


def moved(tree: Tree, time: str, later: Number) -> Tree:
    """f(t - later); `later` is rational."""
    if tree.kind == "name" and tree.leaf == time:
        assert isinstance(later, Fraction)
        ratio = (
            Tree("number", leaf=str(later.numerator)),
            Tree("number", leaf=str(later.denominator)),
        )
        return Tree("-", (tree, Tree("/", ratio)))
    return Tree(tree.kind, tuple(moved(part, time, later) for part in tree.parts), tree.leaf)
