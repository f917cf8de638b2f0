"""The formula tree, made while the parser reduces: no walk over a parse tree is needed."""

from __future__ import annotations

from fractions import Fraction
from typing import Any, NamedTuple

from lark import Token, Transformer

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
from closedform.notation.jets import spelled

__all__ = ["DEEPEST", "Builder", "DivisionError", "Part", "TooDeepError"]

DEEPEST = 100
"""Levels of the tree, and of brackets; whoever walks the tree may recurse."""


class Part(NamedTuple):
    """A piece of the tree with its depth; `adjoining` if it is made of adjoining factors."""

    node: Expression
    depth: int = 1
    adjoining: bool = False


class TooDeepError(Exception):
    """The tree became deeper than `DEEPEST`."""


class DivisionError(Exception):
    """A division by adjoining factors, with the place of its sign and its two readings."""

    def __init__(self, offset: int, ways: tuple[Expression, Expression]) -> None:
        super().__init__(offset, ways)
        self.offset, self.ways = offset, ways


class Builder(Transformer[Token, Part]):
    """One method for each rule of the grammar; `children` are parts and tokens in order."""

    def sum(self, children: list[Any]) -> Part:
        """A sum; a subtracted term becomes a `Negation`."""
        terms = [children[0].node]
        for sign, part in zip(children[1::2], children[2::2], strict=True):
            terms.append(Negation(part.node) if sign.type == "MINUS" else part.node)
        return Part(Sum(tuple(terms)), _above(2, children[::2]))

    def sign(self, children: list[Any]) -> Part:
        """A sign before a term, a factor or an exponent."""
        sign, part = children
        if sign.type == "PLUS":
            return Part(part.node, part.depth, part.adjoining)
        return Part(Negation(part.node), _above(1, [part]), part.adjoining)

    def product(self, children: list[Any]) -> Part:
        """A chain of * and / from the left; what is multiplied becomes one `Product`."""
        factors, depth = _factors(children[0]), children[0].depth
        for operator, part in zip(children[1::2], children[2::2], strict=True):
            if operator.type == "TIMES":
                factors += _factors(part)
                depth = max(depth, _above(1, [part]))
                continue
            above = _product(factors)
            if part.adjoining:
                raise DivisionError(operator.start_pos, _readings(above, part.node))
            depth = _above(2, [Part(above, depth), part])
            factors = [Quotient(above, part.node)]
        return Part(_product(factors), _above(1, [Part(children[0].node, depth)]))

    def adjoining(self, children: list[Any]) -> Part:
        """Factors side by side."""
        node = Product(tuple(part.node for part in children))
        return Part(node, _above(1, children), adjoining=True)

    def power(self, children: list[Any]) -> Part:
        """A base, the sign of a power, and an exponent."""
        base, _, exponent = children
        return Part(Power(base.node, exponent.node), _above(1, [base, exponent]))

    def brackets(self, children: list[Any]) -> Part:
        """A formula in brackets: the tree needs none."""
        return Part(children[1].node, children[1].depth)

    def call(self, children: list[Any]) -> Part:
        """A function and its argument."""
        function, _, argument, _ = children
        return Part(Call(spelled(function), argument.node), _above(1, [argument]))

    def name(self, children: list[Any]) -> Part:
        """A name, in ASCII spelling."""
        return Part(Name(spelled(children[0])))

    def number(self, children: list[Any]) -> Part:
        """A number, exactly."""
        return Part(Number(Fraction(children[0])))


def _above(levels: int, parts: list[Part]) -> int:
    """Return the depth of a node above these parts.  Raises TooDeepError."""
    depth = levels + max(part.depth for part in parts)
    if depth > DEEPEST:
        raise TooDeepError
    return depth


def _factors(part: Part) -> list[Expression]:
    """Return the factors that a part brings into a chain: adjoining ones join it."""
    if part.adjoining and isinstance(part.node, Product):
        return list(part.node.factors)
    return [part.node]


def _product(factors: list[Expression]) -> Expression:
    return factors[0] if len(factors) == 1 else Product(tuple(factors))


def _readings(above: Expression, below: Expression) -> tuple[Expression, Expression]:
    """Return a/(b*c) and (a/b)*c for a, and adjoining b c with or without a sign."""
    positive = below.operand if isinstance(below, Negation) else below
    first, *rest = positive.factors if isinstance(positive, Product) else (positive,)
    divisor = Negation(first) if isinstance(below, Negation) else first
    return Quotient(above, below), _product([Quotient(above, divisor), *rest])
