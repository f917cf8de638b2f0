"""The normal form of a formula or matrix that was read, or is to be printed."""

from __future__ import annotations

import re
from collections.abc import Callable, Hashable
from fractions import Fraction
from typing import Any

from closedform.document.reading.spelling import BOLD
from closedform.document.reading.values import (
    Value,
    atom,
    exponential,
    inverted,
    number,
    plus,
    raised,
    times,
)
from closedform.notation.latex.names import printed_key
from closedform.notation.written.tree import (
    EULER,
    Apply,
    Array,
    Constant,
    Derivative,
    Evaluated,
    Identity,
    Integral,
    Jet,
    Limit,
    Listing,
    Literal,
    Negation,
    Piecewise,
    PlusMinus,
    Power,
    Product,
    Quotient,
    Range,
    Sum,
    SumOver,
    Symbol,
    Transform,
    Written,
)

__all__ = ["named", "normal"]

DECIMAL = re.compile(r"[0-9]+(?:\.[0-9]+)?")
OF_MATRICES = frozenset({"transpose", "inverse", "adj", "diag"})


def normal(node: Written) -> Value:
    """Return the normal form of a formula or matrix."""
    return FORMS[type(node)](node)


def named(text: str, *, bold: bool = False, argument: Value | None = None) -> Value:
    """Return the form of a name, or of what it is at an argument that is not the time."""
    if text.startswith(BOLD):
        text, bold = text.removeprefix(BOLD), True
    key = printed_key(text.replace("_hat", "hat").replace(",", "_").replace("-", "minus"))
    base = ("name", key, bold) if argument is None else ("at", key, bold, argument)
    return atom(base, matrix=bold)


def _literal(node: Literal) -> Value:
    if not node.is_decimal:
        return number(node.value)
    # 1.25e-7 and 1.25 times 10^-7 are one: the digits printed, and a power of ten
    digits = ("digits", node.value / node.last_place)
    return times((number(node.last_place), atom(digits)))


def _symbol(node: Symbol) -> Value:
    if DECIMAL.fullmatch(node.name):
        places = len(node.name.partition(".")[2])
        last = Fraction(1, 10**places)
        return _literal(Literal(Fraction(node.name), last, is_decimal=places > 0))
    return named(node.name, bold=node.bold)


def _jet(node: Jet) -> Value:
    text = node.name + "'" * node.order
    return named(text, argument=None if node.at is None else normal(node.at))


def _power(node: Power) -> Value:
    exponent = normal(node.exponent)
    if node.base == EULER:
        return exponential(exponent)
    return raised(normal(node.base), exponent)


def _apply(node: Apply) -> Value:
    arguments = tuple(map(normal, node.arguments))
    match node.function, arguments:
        case "sqrt", (argument,):
            return raised(argument, number(Fraction(1, 2)))
        case "exp", (argument,):
            return exponential(argument)
        case "inverse", (argument,):
            return inverted(argument)
    return atom((node.function, *arguments), matrix=node.function in OF_MATRICES)


def _quotient(node: Quotient) -> Value:
    return times((normal(node.numerator), inverted(normal(node.denominator))))


def _array(node: Array) -> Value:
    rows = tuple(tuple(map(normal, row)) for row in node.rows)
    return atom(("array", rows), matrix=True)


def _range(node: Range) -> Hashable:
    return (tuple(map(normal, node.members)), node.signs)


def _piecewise(node: Piecewise) -> Value:
    pieces = tuple(
        (normal(value), None if where is None else tuple(map(_range, where)))
        for value, where in node.pieces
    )
    return atom(("cases", pieces))


def _opaque(node: Any) -> Value:
    """Return the form of what this program prints in no formula: it equals itself only."""
    return atom(("as written", node))


FORMS: dict[type[Any], Callable[[Any], Value]] = {
    Literal: _literal,
    Constant: lambda node: atom(("constant", node.name)),
    Symbol: _symbol,
    Jet: _jet,
    Negation: lambda node: times((number(-1), normal(node.operand))),
    PlusMinus: lambda node: atom(("both signs", normal(node.operand), node.upper)),
    Sum: lambda node: plus(map(normal, node.terms)),
    Product: lambda node: times(map(normal, node.factors)),
    Quotient: _quotient,
    Power: _power,
    Apply: _apply,
    Array: _array,
    Identity: lambda _: named("I", bold=True),
    Listing: lambda node: atom(("list", tuple(map(normal, node.items)))),
    Range: lambda node: atom(("range", _range(node))),
    Piecewise: _piecewise,
    Integral: _opaque,
    SumOver: _opaque,
    Limit: _opaque,
    Transform: _opaque,
    Evaluated: _opaque,
    Derivative: lambda node: atom(("derivative", normal(node.body), node.variable, node.order)),
}
