"""What was written in plain notation: for a terminal, for JSON, and to be read again."""

from __future__ import annotations

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
    Statement,
    Sum,
    SumOver,
    Symbol,
    Transform,
    Written,
)

__all__ = ["digits", "plain_range", "plain_statement", "plain_written"]

SUM, PRODUCT, POWER, ATOM = 1, 2, 3, 4
"""How tightly a formula binds; brackets stand where a place asks for more."""


def plain_written(tree: Written) -> str:
    """Return a formula in typed notation, a matrix as [[1, 2], [3, 4]].

    Brackets stand where the tree needs them, and around a fraction in a product.

    >>> decay = Power(EULER, Negation(Product((Symbol("a"), Symbol("t")))))
    >>> plain_written(Sum((Symbol("b"), Negation(Quotient(decay, Symbol("c"))))))
    'b - exp(-a*t)/c'
    """
    match tree:
        case Literal(value):
            return digits(tree) or f"{value.numerator}/{value.denominator}"
        case Constant(name):
            return name
        case Symbol(name):
            return name
        case Jet(name, order, at):
            return f"{name}{_primes(order)}" + ("" if at is None else f"({plain_written(at)})")
        case Negation(operand):
            return "-" + _within(operand, PRODUCT)
        case PlusMinus(operand, upper):
            return ("±" if upper == 1 else "∓") + _within(operand, PRODUCT)
        case Sum((first, *rest)):
            return _within(first, SUM, first=True) + "".join(map(_later_term, rest))
        case Product(factors):
            return "*".join(_within(factor, POWER) for factor in factors)
        case Quotient(above, below):
            over = plain_written(above) if isinstance(above, Product) else _within(above, POWER)
            return f"{over}/{_within(below, POWER)}"
        case Power(base, exponent):
            if base == EULER:
                return f"exp({plain_written(exponent)})"
            return f"{_within(base, ATOM)}^{_within(exponent, ATOM)}"
        case Apply(function, arguments):
            return _called(function, *map(plain_written, arguments))
    return _other(tree)


def _other(tree: Written) -> str:
    match tree:
        case Array(rows):
            return f"[{', '.join(f'[{_listed(row)}]' for row in rows)}]"
        case Identity(size):
            return "I" if size is None else f"I_{size}"
        case Listing(items):
            return f"{{{_listed(items)}}}"
        case Range():
            return plain_range(tree)
        case Piecewise(pieces):
            texts = (f"{plain_written(value)} {_when(ranges)}" for value, ranges in pieces)
            return f"{{{'; '.join(texts)}}}"
        case Integral(body, variable, None, _) | Integral(body, variable, _, None):
            return _called("integral", plain_written(body), variable)
        case Integral(body, variable, lower, upper) if lower is not None and upper is not None:
            bounds = map(plain_written, (lower, upper))
            return _called("integral", plain_written(body), variable, *bounds)
        case SumOver(body, variable, low, high):
            bounds = map(plain_written, (low, high))
            return _called("sum", plain_written(body), variable, *bounds)
        case Limit(body, variable, point):
            return _called("limit", plain_written(body), variable, plain_written(point))
        case Transform(body, back):
            return _called("inverse_laplace" if back else "laplace", plain_written(body))
        case Evaluated(body, variable, at, lower):
            ends = [plain_written(at)] + ([] if lower is None else [plain_written(lower)])
            return _called("taken_at", plain_written(body), variable, *ends)
        case Derivative(body, variable, order):
            power = "" if order == 1 else f"^{order}"
            return f"d{power}/d{variable}{power}({plain_written(body)})"
    raise ValueError(f"no plain form of {type(tree).__name__}")


def digits(number: Literal) -> str:
    """Return the digits of a number as they were printed; empty for a fraction.

    >>> from fractions import Fraction
    >>> digits(Literal(Fraction("0.04"), Fraction(1, 1000), is_decimal=True))
    '0.040'
    """
    value, last = number.value, number.last_place
    if not number.is_decimal:
        return str(value) if value.denominator == 1 else ""
    units = value / last
    zeros = len(str(last.denominator)) - 1
    if units.denominator != 1 or (last.numerator > 1) == (last.denominator > 1):
        return "" if last != 1 else f"{value}e0"
    if last.numerator > 1:
        return f"{units}e{len(str(last.numerator)) - 1}"
    text = str(units).zfill(zeros + 1)
    return f"{text[:-zeros]}.{text[-zeros:]}"


def plain_range(given: Range) -> str:
    """Return a chain of comparisons in typed notation: 0 <= t < 2."""
    first, *rest = map(plain_written, given.members)
    later = zip(given.signs, rest, strict=False)
    return first + "".join(f" {TYPED.get(sign, sign)} {text}" for sign, text in later)


def plain_statement(statement: Statement) -> str:
    """Return a whole line in typed notation: its chain, its unit and its conditions."""
    first, *rest = map(plain_written, statement.members)
    later = zip(statement.relations, rest, strict=False)
    text = first + "".join(f" {TYPED.get(sign, sign)} {member}" for sign, member in later)
    unit = f" {statement.unit}" if statement.unit else ""
    return text + unit + (f" {_when(statement.conditions)}" if statement.conditions else "")


TYPED = {"≤": "<=", "≥": ">=", "≈": "~=", "≠": "!=", "→": "->"}


def _when(ranges: tuple[Range, ...] | None) -> str:
    return "otherwise" if ranges is None else f"for {' and '.join(map(plain_range, ranges))}"


def _primes(order: int) -> str:
    return "'" * order


def _called(function: str, *arguments: str) -> str:
    return f"{function}({', '.join(arguments)})"


def _listed(items: tuple[Written, ...]) -> str:
    return ", ".join(map(plain_written, items))


def _later_term(term: Written) -> str:
    match term:
        case Negation(operand):
            return f" - {_within(operand, PRODUCT)}"
        case PlusMinus(operand, upper):
            return f" {'±' if upper == 1 else '∓'} {_within(operand, PRODUCT)}"
    return f" + {_within(term, PRODUCT)}"


def _within(tree: Written, least: int, *, first: bool = False) -> str:
    """Return the formula, in brackets if it binds less than `least`.

    As the `first` of several terms a signed formula has none.
    """
    strength = _strength(tree)
    if first and not isinstance(tree, Sum):
        strength = ATOM
    text = plain_written(tree)
    return text if strength >= least and not (first and isinstance(tree, Sum)) else f"({text})"


def _strength(tree: Written) -> int:
    match tree:
        case Literal():
            text = digits(tree)
            return PRODUCT if not text else SUM if text.startswith("-") else ATOM
        case Sum() | Negation() | PlusMinus() | Range() | Derivative():
            return SUM
        case Product() | Quotient():
            return PRODUCT
        case Power(base, _):
            return ATOM if base == EULER else POWER
    return ATOM
