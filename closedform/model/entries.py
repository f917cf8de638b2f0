"""From one entry of a model to an exact number."""

from __future__ import annotations

import numbers
import re
from dataclasses import dataclass
from decimal import Decimal
from fractions import Fraction

from closedform.algebra.surds import SurdSum
from closedform.errors import Place
from closedform.model.errors import BinaryFractionError, WrongKindError
from closedform.model.source import Source
from closedform.notation.errors import NotFiniteError
from closedform.notation.exact import bounded, exact_value
from closedform.notation.expression import Name
from closedform.notation.reader import read_formula

__all__ = ["DecimalText", "kind_of", "number_from"]

SIMPLE = re.compile(
    r"[+-]?(?:[0-9]+(?:\.[0-9]*)?|\.[0-9]+)(?:[eE][+-]?[0-9]{1,2})?|[+-]?[0-9]+/0*[1-9][0-9]*"
)
"""Numbers that need no parser."""
LONGEST_SIMPLE = 60


@dataclass(frozen=True, slots=True)
class DecimalText:
    """A decimal as it stands in a file, so that 0.1 is 1/10."""

    text: str


def number_from(value: object, key: str, source: Source) -> SurdSum:
    """Return an entry as an exact number.

    Read are integers, rationals (`Fraction` or any other), `Decimal`, `SurdSum`, decimals
    of a file, and text: a formula of integers, decimals, fractions and square roots.

    Raises:  BinaryFractionError for a float, WrongKindError for anything else, NotFiniteError,
             and what `read_formula` and `exact_value` raise.
    """
    match value:
        case bool():
            raise WrongKindError(source.at(key), "a number", kind_of(value))
        case int():
            return _checked(SurdSum.rational(value), key, source)
        case str(text) | DecimalText(text):
            return _from_text(
                text if isinstance(value, str) else text.replace("_", ""), key, source
            )
        case SurdSum():
            return _checked(value, key, source)
        case numbers.Rational():
            exact = Fraction(int(value.numerator), int(value.denominator))
            return _checked(SurdSum.rational(exact), key, source)
        case Decimal():
            return _from_text(str(value), key, source)
        case float():
            if value - value != 0:
                raise NotFiniteError(source.at(key), str(value))
            raise BinaryFractionError(source.at(key), float(value))
        case _:
            raise WrongKindError(source.at(key), "a number", kind_of(value))


def _from_text(text: str, key: str, source: Source) -> SurdSum:
    if len(text) <= LONGEST_SIMPLE and SIMPLE.fullmatch(text):
        return SurdSum.rational(Fraction(text))

    def work(place: Place) -> SurdSum:
        return exact_value(read_formula(text, names=frozenset(), place=place), place)

    return source.read(text, key, work)


def _checked(value: SurdSum, key: str, source: Source) -> SurdSum:
    """Return a number that came as such, held to the same size as a formula's."""
    return source.read("", key, lambda place: bounded(value, Name("this number"), place))


def kind_of(value: object) -> str:
    """Return what a value is, in the words of a model file."""
    match value:
        case bool():
            return f"the truth value {str(value).lower()}"
        case int() | DecimalText() | float():
            return "a number"
        case str():
            return "text" if value.strip() else "empty text"
        case dict():
            return "a table"
        case list() | tuple():
            return "an array"
        case None:
            return "None"
        case _:
            return f"a value of type {type(value).__name__}"
