"""The formula tree: what the reader makes of text and what the writers print.

A formula is an immutable tree of the nodes below.  It says how something is
*written*; two trees that differ may well be equal as mathematics.  Equality of
values is decided in ``closedform.algebra``, never here.
"""

from __future__ import annotations

from collections.abc import Callable, Iterable
from dataclasses import dataclass
from fractions import Fraction
from typing import TypeGuard

__all__ = [
    "FUNCTIONS",
    "ONE",
    "SIGNALS",
    "ZERO",
    "Call",
    "Expression",
    "Name",
    "Negation",
    "Number",
    "Power",
    "Product",
    "Quotient",
    "Sum",
    "factors_of",
    "is_expression",
    "names_in",
    "number",
    "operations",
    "power_of",
    "product",
    "rebuilt",
]

FUNCTIONS = ("exp", "sin", "cos", "sinh", "cosh", "sqrt", "step")
"""Names that mean a function wherever they stand, and so can name nothing else."""
SIGNALS = ("step", "delta")
"""Unit step and unit impulse, which inputs are made of; `delta` may name something else too."""


@dataclass(frozen=True, slots=True)
class Number:
    """A non-negative rational number; a sign is a `Negation` around it."""

    value: Fraction


@dataclass(frozen=True, slots=True)
class Name:
    """A named quantity in its ASCII spelling: a state, the time, a root (``omega_1``).

    With primes behind it, ``x1''``, it is a derivative with respect to the time.
    """

    text: str


@dataclass(frozen=True, slots=True)
class Negation:
    """The operand with the opposite sign."""

    operand: Expression


@dataclass(frozen=True, slots=True)
class Sum:
    """Two or more terms; a subtracted term is a `Negation`."""

    terms: tuple[Expression, ...]


@dataclass(frozen=True, slots=True)
class Product:
    """Two or more factors, in the order in which they are printed."""

    factors: tuple[Expression, ...]


@dataclass(frozen=True, slots=True)
class Quotient:
    """Numerator over denominator."""

    numerator: Expression
    denominator: Expression


@dataclass(frozen=True, slots=True)
class Power:
    """Base to an exponent."""

    base: Expression
    exponent: Expression


@dataclass(frozen=True, slots=True)
class Call:
    """A function of one argument: one of `FUNCTIONS` and `SIGNALS`, or an input ``u(t - 2)``."""

    function: str
    argument: Expression


ZERO, ONE = Number(Fraction(0)), Number(Fraction(1))

Expression = Number | Name | Negation | Sum | Product | Quotient | Power | Call


def is_expression(item: object) -> TypeGuard[Expression]:
    """Whether something is a node of a formula."""
    return isinstance(item, Expression)


def names_in(expression: Expression) -> frozenset[str]:
    """Return every name that occurs in a formula."""
    found: set[str] = set()
    pending: list[Expression] = [expression]
    while pending:
        match pending.pop():
            case Name(text):
                found.add(text)
            case Negation(inside) | Call(_, inside):
                pending.append(inside)
            case Sum(several) | Product(several):
                pending += several
            case Quotient(left, right) | Power(left, right):
                pending += (left, right)
            case Number():
                pass
    return frozenset(found)


def rebuilt(
    expression: Expression, change: Callable[[Expression], Expression | None]
) -> Expression:
    """Return a formula with what `change` gives in the place of nodes, from the outside in.

    A node for which it gives None stays, and its parts are rebuilt; exponents stay as they are.
    """

    def put(node: Expression) -> Expression:
        changed = change(node)
        if changed is not None:
            return changed
        match node:
            case Name() | Number():
                return node
            case Negation(inside):
                return Negation(put(inside))
            case Sum(terms):
                return Sum(tuple(map(put, terms)))
            case Product(factors):
                return Product(tuple(map(put, factors)))
            case Quotient(above, below):
                return Quotient(put(above), put(below))
            case Power(base, exponent):
                return Power(put(base), exponent)
            case Call(function, argument):
                return Call(function, put(argument))

    return put(expression)


def number(value: Fraction | int) -> Expression:
    """Return the formula of a rational number, with its sign outside."""
    value = Fraction(value)
    return Negation(Number(-value)) if value < 0 else Number(value)


def factors_of(expression: Expression) -> tuple[Expression, ...]:
    """Return the factors of a product, products among them opened, ones left out.

    Anything else is its own only factor; a product of ones is one.
    """
    if not isinstance(expression, Product):
        return (expression,)
    factors = tuple(f for part in expression.factors for f in factors_of(part))
    return tuple(f for f in factors if f != ONE) or factors[:1]


def product(factors: Iterable[Expression]) -> Expression:
    """Return the product of factors in their order, products among them opened, ones left out.

    It is 1 if nothing is left, and no `Product` if one factor is.

    >>> product([ONE, Name("a"), Product((Name("b"), Name("c")))])
    Product(factors=(Name(text='a'), Name(text='b'), Name(text='c')))
    """
    flat = tuple(f for factor in factors for f in factors_of(factor) if f != ONE)
    if len(flat) > 1:
        return Product(flat)
    return flat[0] if flat else ONE


def power_of(base: Expression, exponent: int) -> Expression:
    """Return a base to an integer exponent; to 0 it is 1, to 1 the base itself."""
    if exponent == 0:
        return ONE
    return base if exponent == 1 else Power(base, number(exponent))


def operations(expression: Expression) -> int:
    """Count the operations a reader sees: + - * / ^, signs, and function calls.

    A fraction p/q of two integers counts one division.  ``a - b`` counts one
    subtraction (the sign of a later term is part of it); a leading sign counts one,
    unless a number follows, whose sign it is: ``-3*t`` is one multiplication.
    """
    match expression:
        case Name():
            return 0
        case Number(value):
            return int(value.denominator != 1)
        case Call(_, argument):
            return 1 + operations(argument)
        case Product(factors):
            return sum(map(operations, factors)) + len(factors) - 1
        case Negation(operand):
            return operations(operand) + (not _starts_with_number(operand))
        case Sum(terms):
            inside = sum(
                operations(term.operand if isinstance(term, Negation) and i else term)
                for i, term in enumerate(terms)
            )
            return inside + len(terms) - 1
        case Quotient(above, below) | Power(above, below):
            return 1 + operations(above) + operations(below)


def _starts_with_number(expression: Expression) -> bool:
    match expression:
        case Number():
            return True
        case Product(factors):
            return _starts_with_number(factors[0])
        case Quotient(above, _):
            return _starts_with_number(above)
    return False
