"""Published formulas, read with Python's own parser and evaluated as complex balls.

This is not the package's reader: an outside check must not rest on what it checks.
"""

from __future__ import annotations

import ast
from fractions import Fraction

from flint import acb, arb, fmpq

FUNCTIONS = ("exp", "sin", "cos", "sinh", "cosh", "sqrt", "log")


def ball(text: str, names: dict[str, str] | None = None, time: Fraction | None = None) -> acb:
    """Return a ball around a formula's value; `names` are its letters' values.

    Decimals are exact.  Anything but + - * / ** and the functions above is refused with
    ValueError, an unknown letter with KeyError.
    """
    values = {key: ball(value) for key, value in (names or {}).items() if key != "t"}
    if time is not None:
        values["t"] = acb(arb(fmpq(time.numerator, time.denominator)))
    return _value(ast.parse(text, mode="eval").body, text, values)


def _value(node: ast.expr, text: str, values: dict[str, acb]) -> acb:
    match node:
        case ast.Constant():
            exact = Fraction(ast.get_source_segment(text, node) or "")
            return acb(arb(fmpq(exact.numerator, exact.denominator)))
        case ast.Name("pi"):
            return acb(arb.pi())
        case ast.Name("E"):
            return acb(1).exp()
        case ast.Name("I"):
            return acb(0, 1)
        case ast.Name(name):
            return values[name]
        case ast.UnaryOp(ast.USub(), operand):
            return -_value(operand, text, values)
        case ast.BinOp(left, operator, right):
            return _binary(operator, _value(left, text, values), _value(right, text, values))
        case ast.Call(ast.Name("binomial"), [n, k]):
            above, below = (int(ast.unparse(part)) for part in (n, k))
            return acb(arb.bin_uiui(above, below))
        case ast.Call(ast.Name(function), [argument]) if function in FUNCTIONS:
            return getattr(_value(argument, text, values), function)()
    raise ValueError(f"{text!r} has something in it that is not read here: {ast.dump(node)}")


def _binary(operator: ast.operator, left: acb, right: acb) -> acb:
    match operator:
        case ast.Add():
            return left + right
        case ast.Sub():
            return left - right
        case ast.Mult():
            return left * right
        case ast.Div():
            return left / right
        case ast.Pow():
            power = right.real.unique_fmpz()
            return left ** (right if power is None else int(power))
    raise ValueError(f"{operator} is not read here")
