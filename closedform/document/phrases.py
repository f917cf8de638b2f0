"""What the templates say things with: filters, and formulas to put into a sentence."""

from __future__ import annotations

from collections.abc import Callable, Iterable, Mapping
from typing import Any

from closedform.derivation.step import IMAGINARY_UNIT, LAMBDA, Matrix, Side, Statement, Step, Symbol
from closedform.notation.expression import (
    Call,
    Expression,
    Name,
    Power,
    Product,
    is_expression,
    names_in,
    number,
)
from closedform.notation.latex.escape import escaped

__all__ = ["FILTERS", "FUNCTIONS", "is_complex", "stacked_symbol"]

NUMBER_WORDS = "no one two three four five six seven eight nine ten eleven twelve"
WORDS = NUMBER_WORDS.split()


def said(step: Step, *says: str) -> list[Statement]:
    """Return the step's statements that say one of these, in order."""
    return [statement for statement in step.statements if statement.says in says]


def is_complex(item: object) -> bool:
    """Whether the imaginary unit is in a step, or in anything that a step holds."""
    match item:
        case Step(_, statements, facts):
            return is_complex(statements) or is_complex(facts)
        case Statement(_, sides):
            return is_complex(sides)
        case Matrix(rows):
            return is_complex(rows)
        case Symbol("pair"):
            return True
        case Symbol(argument=argument, parts=parts):
            return is_complex(argument) or is_complex(parts)
        case Mapping():
            return any(map(is_complex, item.values()))
        case tuple() | list():
            return any(map(is_complex, item))
    return is_expression(item) and IMAGINARY_UNIT.text in names_in(item)


def symbol(
    kind: str,
    letter: str = "",
    *indices: str,
    argument: Expression | None = None,
    order: int = 0,
) -> Symbol:
    """Return a symbol of a kind for use in a sentence."""
    return Symbol(kind, indices, argument, letter, order)


STACKED = {
    "matrix": "A",
    "vector": "x",
    "transition": "A",
    "determinant": "A",
    "shifted": "A",
    "resolvent": "A",
    "adjugate": "A",
}
"""The letters that get a hat where a derivation is about states and inputs stacked."""


def stacked_symbol(
    kind: str,
    letter: str = "",
    *indices: str,
    argument: Expression | None = None,
    order: int = 0,
) -> Symbol:
    """Return a symbol as `symbol` does, the matrix and the vector of the model in hats.

    Only where the letter is left out: a letter that is given is meant as it stands.
    """
    if not letter and kind in STACKED:
        letter = f"{STACKED[kind]}_hat"
    return symbol(kind, letter, *indices, argument=argument, order=order)


def named(item: str | Expression) -> Expression:
    """Return a name for its text; a formula is left as it is."""
    return Name(item) if isinstance(item, str) else item


def times(*factors: str | Expression) -> Expression:
    """Return a product of names and formulas."""
    return Product(tuple(map(named, factors)))


def exponential(*factors: str | Expression) -> Expression:
    """Return e to the product of names and formulas."""
    return Call("exp", times(*factors))


def power(base: str | Expression, exponent: str | Expression) -> Expression:
    """Return a power of names or formulas."""
    return Power(named(base), named(exponent))


def pair(real: str, frequency: str) -> Symbol:
    """Return the symbol real part +- i frequency, from a whole number or names."""
    middle = number(int(real)) if real.isdigit() else Name(real)
    return Symbol("pair", parts=(middle, Name(frequency)))


def counted(count: int, singular: str, plural: str) -> str:
    """Return a number, in words up to twelve, with its noun."""
    return f"{WORDS[count] if count < len(WORDS) else count} {singular if count == 1 else plural}"


def listed(items: Iterable[str]) -> str:
    """Return words as a list with commas and a last 'and'."""
    words = list(items)
    return words[0] if len(words) == 1 else f"{', '.join(words[:-1])} and {words[-1]}"


def add_one(value: int) -> int:
    """Return the next whole number: what is counted from 0 is printed counted from 1."""
    return value + 1


def quotient(
    several: bool,  # noqa: FBT001  called from templates only
    argument: Name = LAMBDA,
    index: str = "i",
) -> Side:
    """Return r(lambda)/p'(lambda), with an index on p if there are several factors."""
    above = Symbol("scalar", letter="r", argument=argument)
    below = Symbol("scalar", (index,) if several else (), argument, letter="p", order=1)
    return Symbol("quotient", parts=(above, below))


FILTERS: dict[str, Callable[..., Any]] = {
    "text": escaped,
    "said": said,
    "listed": listed,
    "add_one": add_one,
}

FUNCTIONS: dict[str, Callable[..., Any]] = {
    "counted": counted,
    "symbol": symbol,
    "name": Name,
    "times": times,
    "exponential": exponential,
    "power": power,
    "pair": pair,
    "quotient": quotient,
}
