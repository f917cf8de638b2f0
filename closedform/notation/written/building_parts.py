"""The parts of a tree that is being built, and how they are put together."""

from __future__ import annotations

from dataclasses import dataclass, field
from fractions import Fraction

from closedform.notation.written.tree import (
    IMAGINARY,
    Apply,
    Derivative,
    Jet,
    Literal,
    Negation,
    PlusMinus,
    Power,
    Product,
    Quotient,
    Range,
    Symbol,
    Written,
    walk,
)

__all__ = [
    "ONE",
    "Chain",
    "Part",
    "RefusedError",
    "application",
    "differentiated",
    "folded",
    "indexed",
    "only_name",
    "part_of",
    "range_of",
    "with_signs",
]

DEEPEST = 100
"""Nodes above each other in one tree."""

ONE = Literal(Fraction(1))
INVERSES = {
    **{name: "a" + name for name in ("sin", "cos", "tan", "sinh", "cosh", "tanh")},
}
MANY = frozenset({"diag", "max", "min"})
"""Functions of any number of arguments."""


class RefusedError(Exception):
    """What the grammar lets pass and still is no formula; the text says why and what to do."""


@dataclass(slots=True)
class Part:
    """A part of the tree and how deep it is; a statement has `members` and `relations`."""

    node: Written
    depth: int = 1
    members: tuple[Written, ...] = ()
    relations: tuple[str, ...] = ()


@dataclass(slots=True)
class Chain:
    """Factors from left to right, each with the operator before it and signs behind that."""

    links: list[tuple[str, tuple[str, ...], Part]] = field(default_factory=list)


def part_of(node: Written, *inside: Part) -> Part:
    """Return a node as a part, one deeper than what is inside it."""
    depth = 1 + max((part.depth for part in inside), default=0)
    if depth > DEEPEST:
        raise RefusedError(
            f"the formula is nested more than {DEEPEST} deep; name a part of it and write the name"
        )
    return Part(node, depth)


def with_signs(signs: tuple[str, ...], part: Part) -> Part:
    """Return a part with signs before it, the outermost first."""
    for sign in reversed(signs):
        if sign == "MINUS":
            part = part_of(Negation(part.node), part)
        elif sign == "PLUS_MINUS":
            part = part_of(PlusMinus(part.node), part)
        elif sign == "MINUS_PLUS":
            part = part_of(PlusMinus(part.node, -1), part)
    return part


def application(function: str, arguments: list[Part], exponent: Part | None = None) -> Part:
    """Return a function of arguments; sin^-1 is the inverse function, sin^2 the square."""
    count = 2 if function == "atan2" else 1
    if function not in MANY and len(arguments) != count:
        raise RefusedError(
            f"{function} takes {count} argument{'s'[: count - 1]}, and here are {len(arguments)}"
        )
    nodes = tuple(part.node for part in arguments)
    if exponent is None:
        return part_of(Apply(function, nodes), *arguments)
    if exponent.node == Negation(ONE) and function in INVERSES:
        return part_of(Apply(INVERSES[function], nodes), *arguments)
    applied = part_of(Apply(function, nodes), *arguments)
    return part_of(Power(applied.node, exponent.node), applied, exponent)


def differentiated(node: Written, variable: str, order: int, time: str) -> Written:
    """Return the derivative of a body; that of a function of time is a jet again."""
    if isinstance(node, Jet) and node.at is None and variable == time:
        return Jet(node.name, node.order + order)
    return Derivative(node, variable, order)


def only_name(node: Written, time: str) -> str:
    """Return the variable of a difference of two values of a body that names none."""
    names = sorted({part.name for part in walk(node) if isinstance(part, Symbol)})
    if len(names) == 1:
        return names[0]
    if not names:
        return time
    raise RefusedError("name the variable at the lower bound, as in _{\\tau=0}^{t}")


def folded(chain: Chain) -> Part:
    """Return the product of a chain, from left to right."""
    factors: list[Part] = []
    for operator, signs, part in chain.links:
        factor = with_signs(signs, part)
        if operator == "OVER":
            above = _product(factors)
            factors = [part_of(Quotient(above.node, factor.node), above, factor)]
        else:
            factors.append(factor)
    return _product(factors)


def _product(factors: list[Part]) -> Part:
    if len(factors) == 1:
        return factors[0]
    return part_of(Product(tuple(factor.node for factor in factors)), *factors)


def indexed(variable: str, node: Written) -> Written | None:
    """Return the variable of a sum where it was read as the imaginary unit or a function."""
    if (variable == "i" and node == IMAGINARY) or node == Jet(variable):
        return Symbol(variable)
    return None


def range_of(part: Part) -> Range:
    """Return a chain of comparisons as a range."""
    return Range(part.members, part.relations)
