"""The parameters that a model declares."""

from __future__ import annotations

from collections.abc import Mapping
from difflib import get_close_matches
from keyword import iskeyword
from typing import get_args

from closedform.algebra.domain import Comparison
from closedform.algebra.field import Scalar
from closedform.model.entries import kind_of, number_from
from closedform.model.errors import UnusableNameError, WrongKindError
from closedform.model.keys import check_table, refuse_misplaced
from closedform.model.naming import Names, named_in
from closedform.model.parameter_errors import (
    NoParametersError,
    TooManyParametersError,
    UnknownAssumptionError,
)
from closedform.model.parametric import Assumption, Parameter
from closedform.model.source import Source
from closedform.model.statement import table_of, text_of

__all__ = ["assumed", "check_words", "parameters_of"]

MOST_PARAMETERS = 40
ASSUMPTIONS: tuple[Assumption, ...] = get_args(Assumption)
USUAL_ASSUMPTIONS: dict[str, Assumption] = {
    ">0": "positive",
    "> 0": "positive",
    ">=0": "nonnegative",
    ">= 0": "nonnegative",
    "<0": "negative",
    "< 0": "negative",
    "!=0": "nonzero",
    "!= 0": "nonzero",
    "non-negative": "nonnegative",
    "non-zero": "nonzero",
}
"""How people say it elsewhere."""
LETTERS = ("lambda",)
"""Python's words that are letters in mathematics: rates go by them."""
KEYS = ("assume", "value", "unit", "meaning")
USUAL_KEYS = {
    "assumption": "assume",
    "sign": "assume",
    "default": "value",
    "units": "unit",
    "description": "meaning",
    "name": "meaning",
}


def parameters_of(
    value: object, names: Names, source: Source
) -> tuple[tuple[Parameter, ...], Names]:
    """Return the parameters in the order of their declaration, and the names with theirs.

    A parameter is declared by a table, or by its assumption alone.

    Raises:  NoParametersError, TooManyParametersError, UnknownAssumptionError, the errors of
             names, and what the kinds of values raise.
    """
    table = table_of(value, "a table for each parameter, as [parameters.k],", "parameters", source)
    if not table:
        raise NoParametersError(source.at_name("parameters"), restated=False)
    if len(table) > MOST_PARAMETERS:
        place = source.at_name("parameters")
        raise TooManyParametersError(place, len(table), MOST_PARAMETERS)
    for name, given in table.items():
        if not isinstance(given, str | Mapping):
            refuse_misplaced(str(name), "parameters", source)
    check_words(table, "parameters", source)
    names = named_in(table, "parameters", "a parameter", names, source)
    return tuple(_parameter(name, given, source) for name, given in table.items()), names


def check_words(table: Mapping[str, object], key: str, source: Source) -> None:
    """Raise UnusableNameError for a name that a parameter may not have, though a state may."""
    for name in table:
        reason = None
        if iskeyword(name) and name not in LETTERS:
            reason = f"Python, which may read the results, keeps this word; write '{name}_1'"
        elif name == "label":
            reason = "in [[values]] the word stands for the label of a row; choose another"
        if reason:
            raise UnusableNameError(source.at_name(f"{key}.{name}"), name, reason)


def _parameter(name: str, given: object, source: Source) -> Parameter:
    key = f"parameters.{name}"
    if isinstance(given, str):
        return Parameter(name, _assumption(given, key, source))
    if not isinstance(given, Mapping):
        expected = 'an assumption such as "positive", or a table such as {value = 3},'
        raise WrongKindError(source.at(key), expected, kind_of(given))
    check_table(given, KEYS, key, source, usual=USUAL_KEYS)
    number = number_from(given["value"], f"{key}.value", source) if "value" in given else None
    return Parameter(
        name,
        _assumption(given.get("assume", "real"), f"{key}.assume", source),
        number,
        text_of(given.get("unit", ""), f"{key}.unit", source),
        text_of(given.get("meaning", ""), f"{key}.meaning", source),
    )


def _assumption(value: object, key: str, source: Source) -> Assumption:
    text = text_of(value, key, source)
    for word in ASSUMPTIONS:
        if text == word:
            return word
    small = text.lower()
    near = get_close_matches(small, ASSUMPTIONS, n=1)
    meant = USUAL_ASSUMPTIONS.get(small) or (near[0] if near else None)
    raise UnknownAssumptionError(source.at(key), text, meant, ASSUMPTIONS)


def assumed(name: str, assume: Assumption, element: Scalar) -> tuple[str, Comparison] | None:
    """Return what an assumption says of an element, in words and exactly; None for "real"."""
    match assume:
        case "positive":
            return f"{name} > 0", Comparison(element, ">")
        case "nonnegative":
            return f"{name} >= 0", Comparison(element, ">=")
        case "negative":
            return f"{name} < 0", Comparison(-element, ">")
        case "nonzero":
            return f"{name} != 0", Comparison(element, "!=")
        case "real":
            return None
