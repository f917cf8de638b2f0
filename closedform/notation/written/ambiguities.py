"""Places that careful readers read in two ways, and what follows for the statements."""

from __future__ import annotations

from collections.abc import Iterator, Sequence
from dataclasses import fields
from itertools import islice

from lark import Token

from closedform.notation.written.choices import (
    Choice,
    argument,
    bare_exponent,
    careless_unit,
    division,
    function_of,
    inverse,
    like,
    mixed,
    replaced,
)
from closedform.notation.written.grammar import token
from closedform.notation.written.names import Names
from closedform.notation.written.pairs import bounds, pairs
from closedform.notation.written.plain_form import plain_written
from closedform.notation.written.preferences import preferred
from closedform.notation.written.statements import statements_of
from closedform.notation.written.tree import (
    EULER,
    Ambiguity,
    Reading,
    Statement,
    Symbol,
    Written,
)
from closedform.notation.written.written_errors import StopError

__all__ = ["Choice", "found_choices", "reading_of"]

LARGEST = 5_000
"""Tokens of a text whose other readings are worked out."""
MOST = 8
"""Places of one text for which the other reading is worked out."""


def reading_of(
    tokens: Sequence[Token], choices: Sequence[Choice], names: Names, text: str
) -> Reading:
    """Return the reading of settled tokens, with those of the other readings that make sense."""
    statements = statements_of(tokens, names, text)
    ambiguities: list[Ambiguity] = []
    others: list[tuple[Statement, ...]] = []
    for choice in choices[:MOST]:
        try:
            other = statements_of(choice.other, names, text)
        except StopError:
            continue
        if other == statements or other in others:
            continue
        first, second = _difference(statements, other)
        if choice.decided_by and first == second:
            first, second = f"the declared {first}", f"the number {second}"
        place = text[choice.start : choice.end]
        ambiguities.append(Ambiguity(place, first, second, choice.decided_by))
        others.append(other)
    return Reading(statements, tuple(ambiguities), tuple(others))


def _difference(first: tuple[Statement, ...], second: tuple[Statement, ...]) -> tuple[str, str]:
    """Return in plain notation the smallest parts in which two readings differ."""
    for one, other in zip(first, second, strict=False):
        for member, instead in zip(one.members, other.members, strict=False):
            if member != instead:
                return _parts(member, instead)
        if one.unit != other.unit:
            return one.unit or "a factor", other.unit or "a factor"
    return f"{len(first)} statements", f"{len(second)} statements"


def _parts(first: Written, second: Written) -> tuple[str, str]:
    while type(first) is type(second):
        inner = [
            (one, other)
            for slot in fields(first)
            for one, other in _paired(getattr(first, slot.name), getattr(second, slot.name))
            if one != other
        ]
        if len(inner) != 1:
            break
        one, other = inner[0]
        if not isinstance(one, Written) or not isinstance(other, Written):
            break
        first, second = one, other
    return plain_written(first), plain_written(second)


def _paired(one: object, other: object) -> Iterator[tuple[object, object]]:
    if isinstance(one, tuple) and isinstance(other, tuple) and len(one) == len(other):
        for a, b in zip(one, other, strict=True):
            yield from _paired(a, b)
    else:
        yield one, other


def found_choices(
    tokens: list[Token],
    names: Names,
    given: Sequence[tuple[tuple[Token, ...], tuple[Token, ...]]],
    logs: Sequence[tuple[int, int]],
    text: str,
) -> list[Choice]:
    """Return the places of settled tokens that may be read in another way.

    `given` are those that were found on the way, `logs` where there is a logarithm without
    base.  A slash whose likelier reading takes two factors below gets a group in `tokens`.
    """
    preferred(tokens, names, text)
    if len(tokens) > LARGEST:
        return []
    return list(islice(_choices(tokens, names, given, logs), MOST))


def _choices(
    tokens: list[Token],
    names: Names,
    given: Sequence[tuple[tuple[Token, ...], tuple[Token, ...]]],
    logs: Sequence[tuple[int, int]],
) -> Iterator[Choice]:
    partners = pairs(tokens, "")
    yield from _found_before(tokens, given, logs)
    for index, part in enumerate(tokens):
        match part.type:
            case "FUNCTION":
                yield from inverse(tokens, index, partners)
                yield from argument(tokens, index, partners, names)
            case "OVER":
                yield from division(tokens, index, partners)
            case "EULER":
                yield from bare_exponent(tokens, index)
            case "FRACTION":
                yield from mixed(tokens, index, partners)
            case "ATOM" if part.value == Symbol("e") and names.find("e") is not None:
                other = (*tokens[:index], like(part, "ATOM", EULER), *tokens[index + 1 :])
                yield Choice(other, *bounds(part), decided_by="e")
            case "ATOM" if function_of(tokens, index, names):
                new = like(part, "FUNCTION", function_of(tokens, index, names))
                other = (*tokens[:index], new, *tokens[index + 1 :])
                yield Choice(other, *bounds(part), decided_by=part.value.name)
            case "ATOM" if isinstance(part.value, Symbol) and part.value.name in "smVANWJKFHC":
                yield from careless_unit(tokens, index)


def _found_before(
    tokens: list[Token],
    given: Sequence[tuple[tuple[Token, ...], tuple[Token, ...]]],
    logs: Sequence[tuple[int, int]],
) -> Iterator[Choice]:
    for pair in given:
        if choice := replaced(tokens, pair):
            yield choice
    for start, end in logs:
        for index, part in enumerate(tokens):
            if part.type == "FUNCTION" and bounds(part) == (start, end):
                new = token("FUNCTION", "log10", start, end)
                yield Choice((*tokens[:index], new, *tokens[index + 1 :]), start, end)
