"""The other readings of single places: ends of arguments, slashes, exponents, letters of units."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass

from lark import Token

from closedform.notation.written.grammar import token
from closedform.notation.written.names import GREEK, STEPS, Names
from closedform.notation.written.pairs import bounds
from closedform.notation.written.preferences import PLAIN, denominator, operand_end
from closedform.notation.written.tree import Literal, Symbol

__all__ = [
    "Choice",
    "argument",
    "bare_exponent",
    "careless_unit",
    "division",
    "function_of",
    "inverse",
    "like",
    "mixed",
    "replaced",
]


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


def replaced(
    tokens: list[Token], pair: tuple[tuple[Token, ...], tuple[Token, ...]]
) -> Choice | None:
    """Return the choice of tokens in the place of others, if these are still there."""
    chosen, other = pair
    for index, part in enumerate(tokens):
        if part is chosen[0]:
            behind = index + len(chosen)
            whole = (*tokens[:index], *other, *tokens[behind:])
            places = [bounds(one) for one in tokens[index:behind]]
            return Choice(whole, min(places)[0], max(end for _, end in places))
    return None


def like(part: Token, kind: str, value: object) -> Token:
    """Return a token of another kind and value in the place of one."""
    return token(kind, value, *bounds(part))


def _group(parts: Sequence[Token]) -> list[Token]:
    start, end = bounds(parts[0], parts[-1])
    return [token("GROUP_OPEN", "", start, start), *parts, token("GROUP_CLOSE", "", end, end)]


TRIGONOMETRIC = frozenset({"sin", "cos", "tan", "sinh", "cosh", "tanh"})


def argument(tokens: list[Token], at: int, partners: dict[int, int], names: Names) -> list[Choice]:
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


def division(tokens: list[Token], at: int, partners: dict[int, int]) -> list[Choice]:
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


def bare_exponent(tokens: list[Token], at: int) -> list[Choice]:
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


def mixed(tokens: list[Token], at: int, partners: dict[int, int]) -> list[Choice]:
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


def careless_unit(tokens: list[Token], at: int) -> list[Choice]:
    """Return the other reading of an italic m behind a number, as the metre."""
    ends = at + 1 == len(tokens) or tokens[at + 1].type in ("COMMA", "SEMI", "PERIOD", "ROW_END")
    before = tokens[at - 1] if at else None
    if not ends or before is None or before.type != "NUMBER":
        return []
    start, end = bounds(before, tokens[at])
    if (before.end_pos or 0) == (tokens[at].start_pos or 0):
        return []
    new = like(tokens[at], "UNIT", tokens[at].value.name)
    return [Choice((*tokens[:at], new, *tokens[at + 1 :]), start, end)]


def inverse(tokens: list[Token], at: int, partners: dict[int, int]) -> list[Choice]:
    """Return the other reading of sin^-1 x as a power."""
    if tokens[at].value not in TRIGONOMETRIC or [t.type for t in tokens[at + 1 : at + 3]] != [
        "POWER",
        "GROUP_OPEN",
    ]:
        return []
    first = partners[at + 2] + 1
    inside = tokens[at + 3 : first - 1]
    if [t.type for t in inside] != ["MINUS", "NUMBER"] or inside[1].value.value != 1:
        return []
    end = first
    while end < len(tokens) and (tokens[end].type in PLAIN or end == first):
        end = operand_end(tokens, end, partners)
    if end == first:
        return []
    whole = _group([tokens[at], *tokens[first:end]])
    other = (*tokens[:at], *whole, *tokens[at + 1 : first], *tokens[end:])
    return [Choice(other, *bounds(tokens[at], tokens[end - 1]))]


def function_of(tokens: list[Token], at: int, names: Names) -> str:
    r"""Return the step or impulse that a declared parameter before a bracket may be, or nothing.

    The bracket begins with the time, as in \delta(t-T).
    """
    value = tokens[at].value
    kinds = [t.type for t in tokens[at + 1 : at + 3]]
    if not isinstance(value, Symbol) or kinds != ["OPEN", "ATOM"]:
        return ""
    if tokens[at + 2].value != Symbol(names.time) or value.name not in STEPS | {"delta"}:
        return ""
    return "delta" if value.name == "delta" else "step"
