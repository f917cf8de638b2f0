"""Formulas for tests, typed in Python's notation: I and e are constants, 0.040 has its places."""

from __future__ import annotations

import ast
from fractions import Fraction

from closedform.notation.written.tree import (
    EULER,
    IMAGINARY,
    PI,
    Apply,
    Literal,
    Negation,
    Power,
    Product,
    Quotient,
    Sum,
    Symbol,
    Written,
)

CONSTANTS = {"I": IMAGINARY, "e": EULER, "pi": PI}


def decimal(text: str) -> Literal:
    """Return a number as it is printed."""
    mantissa, _, exponent = text.lower().partition("e")
    places = len(mantissa.partition(".")[2])
    last_place = Fraction(10) ** (int(exponent or 0) - places)
    return Literal(Fraction(text), last_place, "." in text or "e" in text)


def written(text: str) -> Written:
    """Return the formula that a text stands for."""

    def read(node: ast.expr) -> Written:
        match node:
            case ast.BinOp(left, ast.Add(), right):
                return Sum((read(left), read(right)))
            case ast.BinOp(left, ast.Sub(), right):
                return Sum((read(left), Negation(read(right))))
            case ast.BinOp(left, ast.Mult(), right):
                return Product((read(left), read(right)))
            case ast.BinOp(left, ast.Div(), right):
                return Quotient(read(left), read(right))
            case ast.BinOp(left, ast.Pow(), right):
                return Power(read(left), read(right))
            case ast.UnaryOp(ast.USub(), operand):
                return Negation(read(operand))
            case ast.Constant():
                printed = ast.get_source_segment(text, node)
                assert printed is not None
                return decimal(printed)
            case ast.Name(name):
                return CONSTANTS.get(name, Symbol(name))
            case ast.Call(ast.Name(function), arguments):
                return Apply(function, tuple(map(read, arguments)))
        raise ValueError(ast.dump(node))

    return read(ast.parse(text, mode="eval").body)
