"""Plain notation, read once more: by recursive descent, into exact numbers or balls.

It shares nothing with the package's reader of formulas, so that what the package writes
can be held against something.  Read are + - * / ^, brackets, whole numbers, names and the
functions; a decimal, a/b*c, an unknown name and anything else is refused.  A name `pi`
without a value is the number.
"""

from __future__ import annotations

import re
from collections.abc import Callable, Mapping
from dataclasses import dataclass
from fractions import Fraction
from functools import cache
from math import isqrt
from operator import add, mul, sub, truediv
from typing import Any

from flint import arb, fmpq

__all__ = [
    "DRIVEN_FUNCTIONS",
    "FUNCTIONS",
    "PUBLISHED_FUNCTIONS",
    "Number",
    "Tree",
    "UnreadableError",
    "ball_of",
    "exact_value",
    "names_in",
    "parse",
    "step",
    "value",
]

Number = Fraction | arb
FUNCTIONS = ("exp", "sin", "cos", "sinh", "cosh", "sqrt")
PUBLISHED_FUNCTIONS = (*FUNCTIONS, "log")
"""What published statements use beside the functions of a record."""
DRIVEN_FUNCTIONS = (*FUNCTIONS, "step", "delta")
"""What formulas of a driven model may have in them, too; delta has no value."""
TOKEN = re.compile(r"\s*([A-Za-z_]\w*|\d+|[-+*/^()])")


class UnreadableError(ValueError):
    """A text that is not plain notation, or a name that has no value."""


@dataclass(frozen=True)
class Tree:
    """A formula: `kind` is a sign, "neg", "number", "name" or a function."""

    kind: str
    parts: tuple[Tree, ...] = ()
    leaf: str = ""


@cache
def parse(text: str, functions: tuple[str, ...] = FUNCTIONS) -> Tree:
    """Return the tree of a text.  Raises UnreadableError."""
    return _Parser(text, functions).whole()


class _Parser:
    def __init__(self, text: str, functions: tuple[str, ...]) -> None:
        self.text, self.functions, self.place = text, functions, 0
        self.tokens = TOKEN.findall(text)
        if "".join(self.tokens) != re.sub(r"\s", "", text) or not self.tokens:
            raise UnreadableError(f"{text!r} is not plain notation")

    def whole(self) -> Tree:
        found = self.sum()
        if self.place != len(self.tokens):
            raise self.trouble()
        return found

    def trouble(self) -> UnreadableError:
        return UnreadableError(f"{self.text!r} stops being plain notation at token {self.place}")

    def take(self, *wanted: str) -> str:
        if self.place < len(self.tokens) and self.tokens[self.place] in wanted:
            self.place += 1
            return self.tokens[self.place - 1]
        return ""

    def sum(self) -> Tree:
        total = Tree("neg", (self.product(),)) if self.take("-") else self.product()
        while sign := self.take("+", "-"):
            total = Tree(sign, (total, self.product()))
        return total

    def product(self) -> Tree:
        total = self.power()
        while sign := self.take("*", "/"):
            total = Tree(sign, (total, self.power()))
            if sign == "/" and self.take("*", "/"):  # nobody can tell what a/b*c means
                raise self.trouble()
        return total

    def power(self) -> Tree:
        base = self.atom()
        return Tree("^", (base, self.atom())) if self.take("^") else base

    def atom(self) -> Tree:
        if self.take("("):
            return self.closed()
        if self.place == len(self.tokens) or not re.match(r"\w", self.tokens[self.place]):
            raise self.trouble()
        token = self.tokens[self.place]
        self.place += 1
        if token.isdigit():
            return Tree("number", leaf=token)
        if token in self.functions and self.take("("):
            return Tree(token, (self.closed(),))
        return Tree("name", leaf=token)

    def closed(self) -> Tree:
        inside = self.sum()
        if not self.take(")"):
            raise self.trouble()
        return inside


def names_in(tree: Tree) -> frozenset[str]:
    """Return the names in a formula."""
    if tree.kind == "name":
        return frozenset((tree.leaf,))
    return frozenset().union(*map(names_in, tree.parts))


def exact_value(tree: Tree, values: Mapping[str, Fraction]) -> Fraction:
    """Return the value of a rational function.  Raises UnreadableError, ZeroDivisionError."""
    found = value(tree, values)
    if not isinstance(found, Fraction):
        raise UnreadableError("a rational function has something in it that is not rational")
    return found


def value(tree: Tree, values: Mapping[str, Number]) -> Number:
    """Return the value: exact as long as nothing but rational numbers comes in, else a ball.

    A ball is not finite at a pole, nor is the square root of one that reaches below 0; an
    exact 0 in a denominator raises ZeroDivisionError.
    """
    if tree.kind == "number":
        return Fraction(int(tree.leaf))
    if tree.kind == "name":
        if tree.leaf == "pi" and "pi" not in values:
            return arb.pi()
        if tree.leaf not in values:
            raise UnreadableError(f"{tree.leaf} has no value here")
        return values[tree.leaf]
    parts = [value(part, values) for part in tree.parts]
    if tree.kind == "neg":
        return -parts[0]
    if tree.kind == "^":
        return _power(parts[0], parts[1])
    if tree.kind in SIGNS:
        if not all(isinstance(part, Fraction) for part in parts):
            parts = [ball_of(part) for part in parts]
        return SIGNS[tree.kind](*parts)
    return _function(tree.kind, parts[0])


SIGNS: dict[str, Callable[[Any, Any], Any]] = {"+": add, "-": sub, "*": mul, "/": truediv}


def _power(base: Number, exponent: Number) -> Number:
    if isinstance(exponent, Fraction) and exponent.denominator == 1:
        return base ** int(exponent)
    return ball_of(base) ** ball_of(exponent)


def _function(name: str, argument: Number) -> Number:
    if name == "step":
        return step(argument)
    if name == "delta":
        raise UnreadableError("an impulse has no value")
    if isinstance(argument, Fraction):
        if argument == 0:
            return Fraction(int(name in ("exp", "cos", "cosh")))
        if name == "sqrt" and argument > 0:
            root = Fraction(isqrt(argument.numerator), isqrt(argument.denominator))
            if root * root == argument:
                return root
    found: arb = getattr(ball_of(argument), name)()
    return found


def step(argument: Number) -> Fraction:
    """Return the unit step: 1 from 0 on.  Raises UnreadableError for a ball around 0."""
    if argument >= 0:
        return Fraction(1)
    if argument < 0:
        return Fraction(0)
    raise UnreadableError("a step at an instant that is not told from its own")


def ball_of(number: Number | int) -> arb:
    """Return a ball around a number; a ball stays what it is."""
    if isinstance(number, arb):
        return number
    return arb(fmpq(number.numerator, number.denominator))
