"""Places that careful readers read in two ways, and what follows for the statements."""

from __future__ import annotations

from collections.abc import Iterator, Sequence
from dataclasses import dataclass, fields
from itertools import islice

from lark import Token

from closedform.notation.written.grammar import token
from closedform.notation.written.names import GREEK, Names
from closedform.notation.written.pairs import bounds, pairs
from closedform.notation.written.plain_form import plain_written
from closedform.notation.written.preferences import PLAIN, denominator, operand_end, preferred
from closedform.notation.written.statements import statements_of
from closedform.notation.written.tree import (
    EULER,
    Ambiguity,
    Literal,
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


@dataclass(frozen=True, slots=True)
class Choice:
    """Tokens of a text as they are read in full, and as they may be read instead.

    `start` and `end` bound the place in the text; `decided_by` is the declared name, if one
    decides it.
    """

    other: tuple[Token, ...]
    start: int
    end: int
    decided_by: str = ""


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
    for pair in given:
        if choice := _replaced(tokens, pair):
            yield choice
    for start, end in logs:
        for index, part in enumerate(tokens):
            if part.type == "FUNCTION" and bounds(part) == (start, end):
                new = token("FUNCTION", "log10", start, end)
                yield Choice((*tokens[:index], new, *tokens[index + 1 :]), start, end)
    for index, part in enumerate(tokens):
        match part.type:
            case "FUNCTION":
                yield from _argument(tokens, index, partners, names)
            case "OVER":
                yield from _division(tokens, index, partners)
            case "EULER":
                yield from _bare_exponent(tokens, index)
            case "FRACTION":
                yield from _mixed(tokens, index, partners)
            case "ATOM" if part.value == Symbol("e") and names.find("e") is not None:
                other = (*tokens[:index], _like(part, "ATOM", EULER), *tokens[index + 1 :])
                yield Choice(other, *bounds(part), decided_by="e")
            case "ATOM" if isinstance(part.value, Symbol) and part.value.name in "smVANWJKFHC":
                yield from _careless_unit(tokens, index)


def _replaced(
    tokens: list[Token], pair: tuple[tuple[Token, ...], tuple[Token, ...]]
) -> Choice | None:
    chosen, other = pair
    for index, part in enumerate(tokens):
        if part is chosen[0]:
            behind = index + len(chosen)
            whole = (*tokens[:index], *other, *tokens[behind:])
            places = [bounds(one) for one in tokens[index:behind]]
            return Choice(whole, min(places)[0], max(end for _, end in places))
    return None


def _like(part: Token, kind: str, value: object) -> Token:
    return token(kind, value, *bounds(part))


def _group(parts: Sequence[Token]) -> list[Token]:
    start, end = bounds(parts[0], parts[-1])
    return [token("GROUP_OPEN", "", start, start), *parts, token("GROUP_CLOSE", "", end, end)]


TRIGONOMETRIC = frozenset({"sin", "cos", "tan", "sinh", "cosh", "tanh"})


def _argument(tokens: list[Token], at: int, partners: dict[int, int], names: Names) -> list[Choice]:
    """Return other readings of a function whose argument has no brackets."""
    first = at + 1
    if first < len(tokens) and tokens[first].type == "POWER":
        first = partners.get(first + 1, first + 1) + 1
    if first < len(tokens) and tokens[first].type == "GROUP_OPEN" and tokens[first].value == "set":
        close = partners[first]
        other = (*tokens[:first], *tokens[first + 1 : close], *tokens[close + 1 :])
        return [Choice(other, *bounds(tokens[at], tokens[close]))]
    if first >= len(tokens) or tokens[first].type not in PLAIN:
        return []
    found, end = [], first
    while end < len(tokens) and tokens[end].type in PLAIN | {"OPEN"}:
        if tokens[end].type == "OPEN":
            stop = token("ARGUMENT_END", "", *bounds(tokens[end]))
            other = (*tokens[:end], stop, *tokens[end:])
            found.append(Choice(other, *bounds(tokens[at], tokens[partners[end]])))
        end = operand_end(tokens, end, partners)
    if end >= len(tokens):
        return found
    if tokens[end].type == "ARGUMENT_END":
        other = (*tokens[:end], *tokens[end + 1 :])
        return [*found, Choice(other, *bounds(tokens[at], tokens[partners[end + 1]]))]
    behind = end
    match tokens[end].type:
        case "EULER":
            behind = operand_end(tokens, end + 2, partners) if end + 2 < len(tokens) else end
        case "OVER":
            behind = operand_end(tokens, end + 1, partners)
        case "PLUS" | "MINUS" if tokens[at].value in TRIGONOMETRIC:
            last = operand_end(tokens, end + 1, partners)
            name = getattr(tokens[end + 1].value, "name", "") if end + 1 < len(tokens) else ""
            phase = name.split("_")[0] in GREEK and tokens[end + 1].type == "ATOM"
            timed = any(t.value == Symbol(names.time) for t in tokens[first:end])
            ends = last >= len(tokens) or tokens[last].type not in PLAIN | {
                "EULER",
                "FUNCTION",
                "OPEN",
                "OVER",
                "TIMES",
            }
            behind = last if phase and timed and ends else end
    if end < behind <= len(tokens):
        other = (*tokens[:first], *_group(tokens[first:behind]), *tokens[behind:])
        found.append(Choice(other, *bounds(tokens[at], tokens[behind - 1])))
    return found


def _division(tokens: list[Token], at: int, partners: dict[int, int]) -> list[Choice]:
    """Return the other reading of a slash with two factors behind it."""
    below = tokens[at + 1] if at + 1 < len(tokens) else None
    if below is None:
        return []
    if below.type == "GROUP_OPEN" and below.value == "set":
        close = partners[at + 1]
        other = (*tokens[: at + 1], *tokens[at + 2 : close], *tokens[close + 1 :])
        return [Choice(other, *bounds(tokens[at - 1], tokens[close]))]
    if below.type not in PLAIN:
        return []
    first, last = denominator(tokens, at, partners)
    if last == first:
        return []
    other = (*tokens[: at + 1], *_group(tokens[at + 1 : last]), *tokens[last:])
    return [Choice(other, *bounds(tokens[at - 1], tokens[last - 1]))]


def _bare_exponent(tokens: list[Token], at: int) -> list[Choice]:
    """Return the other reading of e^2t: the braces were forgotten."""
    if at + 1 >= len(tokens) or tokens[at + 1].value != "bare":
        return []
    close = next((k for k in range(at + 2, len(tokens)) if tokens[k].type == "GROUP_CLOSE"), 0)
    end = close + 1
    while end < len(tokens) and tokens[end].type == "ATOM":
        end += 1
    if not close or end == close + 1:
        return []
    inside = tokens[at + 3 : close]
    other = (*tokens[: at + 2], *_group([*inside, *tokens[close + 1 : end]]), *tokens[end:])
    return [Choice(other, *bounds(tokens[at], tokens[end - 1]))]


def _mixed(tokens: list[Token], at: int, partners: dict[int, int]) -> list[Choice]:
    r"""Return the other reading of 2\\frac12 as a mixed number."""
    before = tokens[at - 1] if at else None
    middle = partners[at + 1]
    close = partners[middle + 1]
    numbers = tokens[at + 2 : middle] + tokens[middle + 2 : close]
    plain = [t.value for t in numbers if t.type == "NUMBER" and isinstance(t.value, Literal)]
    if before is None or before.type != "NUMBER" or before.value.is_decimal:
        return []
    if len(numbers) != 2 or len(plain) != 2 or plain[0].value >= plain[1].value:
        return []
    if at > 1 and tokens[at - 2].type in ("OVER", "POWER", "TIMES", "ATOM", "NUMBER"):
        return []
    plus = token("PLUS", "+", *bounds(tokens[at]))
    whole = [before, plus, *tokens[at : close + 1]]
    other = (*tokens[: at - 1], *_group(whole), *tokens[close + 1 :])
    return [Choice(other, *bounds(before, tokens[close]))]


def _careless_unit(tokens: list[Token], at: int) -> list[Choice]:
    """Return the other reading of an italic m behind a number, as the metre."""
    ends = at + 1 == len(tokens) or tokens[at + 1].type in ("COMMA", "SEMI", "PERIOD", "ROW_END")
    before = tokens[at - 1] if at else None
    if not ends or before is None or before.type != "NUMBER":
        return []
    start, end = bounds(before, tokens[at])
    if (before.end_pos or 0) == (tokens[at].start_pos or 0):
        return []
    new = _like(tokens[at], "UNIT", tokens[at].value.name)
    return [Choice((*tokens[:at], new, *tokens[at + 1 :]), start, end)]
