"""From the formula tree to plain text that reads back as the same mathematics."""

from __future__ import annotations

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

__all__ = ["plain"]

SUM, PRODUCT, POWER, ATOM = 1, 2, 3, 4


def plain(expression: Expression) -> str:
    """Return the formula in plain notation.

    Brackets stand only where the tree needs them, and around a fraction inside a product,
    a quotient or a power, so that nobody has to know how ``a/b*c`` is read.

    >>> plain(Sum((Quotient(Name("x"), Number(2)), Negation(Product((Number(3), Name("y")))))))
    'x/2 - 3*y'
    """
    match expression:
        case Number(value):
            return str(value)
        case Name(text):
            return text
        case Negation(operand):
            return "-" + _within(operand, PRODUCT)
        case Sum(terms):
            first, *rest = terms
            text = _within(first, SUM + 1) if isinstance(first, Sum) else plain(first)
            return text + "".join(map(_later_term, rest))
        case Product(factors):
            return "*".join(_within(factor, POWER) for factor in factors)
        case Quotient(above, below):
            upper = plain(above) if isinstance(above, Product) else _within(above, POWER)
            return f"{upper}/{_within(below, POWER)}"
        case Power(base, exponent):
            return f"{_within(base, ATOM)}^{_within(exponent, ATOM)}"
        case Call(function, argument):
            return f"{function}({plain(argument)})"


def _later_term(term: Expression) -> str:
    if isinstance(term, Negation):
        return f" - {_within(term.operand, PRODUCT)}"
    return f" + {_within(term, PRODUCT)}"


def _within(expression: Expression, least: int) -> str:
    """Return the formula, in brackets if it binds less than `least`."""
    text = plain(expression)
    return text if _binding(expression) >= least else f"({text})"


def _binding(expression: Expression) -> int:
    match expression:
        case Sum() | Negation():
            return SUM
        case Product() | Quotient():
            return PRODUCT
        case Number(value) if value.denominator != 1:
            return PRODUCT
        case Power():
            return POWER
        case _:
            return ATOM
