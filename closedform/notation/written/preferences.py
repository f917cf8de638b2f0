"""Groups and ends that the likelier reading of a place asks for, set before the grammar."""

from __future__ import annotations

import re
from collections.abc import Sequence

from lark import Token

from closedform.notation.written.grammar import token
from closedform.notation.written.names import Names
from closedform.notation.written.pairs import bounds, pairs
from closedform.notation.written.tree import (
    Constant,
    Symbol,
)

__all__ = ["PLAIN", "denominator", "operand_end", "preferred"]

Insertions = list[tuple[int, Token]]
"""Tokens to be set before indices."""
PLAIN = frozenset(["NUMBER", "ATOM", "CALL", "FRACTION", "ROOT", "BAR_OPEN"])
"""Tokens that begin an operand which an argument without brackets may have."""


def preferred(tokens: list[Token], names: Names, text: str) -> None:
    """Set in tokens what the likelier reading of arguments and slashes asks for."""
    partners = pairs(tokens, "")
    groups = _grouped(tokens, partners, names)
    known = {at for at, _ in groups}
    groups += [one for one in _tight(tokens, partners, names, text) if one[0] not in known]
    _inserted(tokens, groups + _arguments(tokens, partners, names))


def operand_end(tokens: Sequence[Token], at: int, partners: dict[int, int]) -> int:
    """Return the index behind the operand at an index, with its exponent."""
    if at >= len(tokens):
        return at
    kind = tokens[at].type
    if kind in ("FRACTION", "ROOT"):
        at = partners[partners[at + 1] + 1] + 1
    elif kind == "CALL":
        at = partners[at + 1] + 1
    else:
        at = partners.get(at, at) + 1
    while at < len(tokens) and tokens[at].type in ("POWER", "POSTFIX"):
        at = at + 1 if tokens[at].type == "POSTFIX" else partners.get(at + 1, at + 1) + 1
    return at


def _arguments(tokens: list[Token], partners: dict[int, int], names: Names) -> Insertions:
    """Return ends of arguments without brackets, where the time tells.

    In cos t (1 + t) the bracket is behind the argument, which has its time already; in
    sin 2 pi * 50 t and in sin pi/4 the argument goes on behind the sign.
    """
    time = Symbol(names.time)
    new: Insertions = []
    for at, part in enumerate(tokens):
        first = at + 1
        if part.type != "FUNCTION" or first >= len(tokens):
            continue
        if tokens[first].type == "POWER":
            first = partners.get(first + 1, first + 1) + 1
        end, timed, closed = first, False, False
        while end < len(tokens) and (
            tokens[end].type in PLAIN or (tokens[end].type == "OPEN" and end > first)
        ):
            if tokens[end].type == "OPEN" and timed:
                new.append((end, token("ARGUMENT_END", "set", *bounds(tokens[end]))))
                closed = True
                break
            behind = operand_end(tokens, end, partners)
            timed = timed or any(t.value == time for t in tokens[end:behind])
            end = behind
        sign = tokens[end].type if first < end < len(tokens) and not closed else ""
        if sign not in ("TIMES", "OVER") or timed:
            continue
        behind = end + 1
        while behind < len(tokens) and tokens[behind].type in PLAIN:
            behind = operand_end(tokens, behind, partners)
            if sign == "OVER":
                break
        more = any(t.value == time for t in tokens[end:behind])
        number = all(
            t.type not in ("ATOM", "CALL") or isinstance(t.value, Constant)
            for t in tokens[first:behind]
        )
        if behind > end + 1 and ((sign == "TIMES" and more) or (sign == "OVER" and number)):
            new += _around(tokens, first, behind)
    return new


def _around(tokens: Sequence[Token], first: int, behind: int) -> Insertions:
    """Return a group round tokens, marked as set by a choice."""
    start, end = bounds(tokens[first], tokens[behind - 1])
    return [
        (first, token("GROUP_OPEN", "set", start, start)),
        (behind, token("GROUP_CLOSE", "", end, end)),
    ]


def _inserted(tokens: list[Token], new: Insertions) -> None:
    """Insert tokens before indices; closing ones stand before opening ones."""
    order = sorted(new, key=lambda one: (one[0], one[1].type != "GROUP_CLOSE"), reverse=True)
    for_index: dict[int, list[Token]] = {}
    for index, part in reversed(order):
        for_index.setdefault(index, []).append(part)
    tokens[:] = [
        part
        for index in range(len(tokens) + 1)
        for part in (*for_index.get(index, ()), *tokens[index : index + 1])
    ]


def denominator(tokens: Sequence[Token], at: int, partners: dict[int, int]) -> tuple[int, int]:
    """Return the indices behind the first and behind the last factor that follow a slash."""
    first = operand_end(tokens, at + 1, partners)
    last = first
    while last < len(tokens) and tokens[last].type in PLAIN:
        last = operand_end(tokens, last, partners)
    return first, last


def _grouped(tokens: list[Token], partners: dict[int, int], names: Names) -> Insertions:
    """Return groups round RC in an exponent -t/RC: the time is above, and none below."""
    time = Symbol(names.time)
    new: Insertions = []
    opened = [-1]
    times = [0]
    for at, part in enumerate(tokens):
        times.append(times[-1] + (part.value == time))
        if part.type.endswith("OPEN"):
            opened.append(at)
        elif part.type.endswith("CLOSE"):
            opened.pop()
        before = opened[-1]
        if part.type != "OVER" or before < 1 or at + 1 == len(tokens):
            continue
        inside = tokens[before - 1].type in ("POWER", "FUNCTION")
        if not inside or tokens[at + 1].type not in PLAIN or times[at] == times[before]:
            continue
        first, last = denominator(tokens, at, partners)
        if last > first and all(t.value != time for t in tokens[at + 1 : last]):
            new += _around(tokens, at + 1, last)
    return new


def _tight(
    tokens: Sequence[Token], partners: dict[int, int], names: Names, text: str
) -> Insertions:
    """Return groups round 2m in c/2m and RC in 1/RC: names without a gap, and none of them varies.

    1/2m stays one half of m, and k/m x with a gap is as it stands.
    """
    new: Insertions = []
    for at, part in enumerate(tokens):
        first = at + 1
        if part.type != "OVER" or first >= len(tokens) or not at:
            continue
        if tokens[first].type not in ("NUMBER", "ATOM"):
            continue
        numbers = tokens[first].type == "NUMBER" == tokens[at - 1].type
        last = operand_end(tokens, first, partners)
        while last < len(tokens) and tokens[last].type == "ATOM" and _touch(tokens, last, text):
            last = operand_end(tokens, last, partners)
        inside = tokens[first:last]
        several = last > operand_end(tokens, first, partners)
        if several and not numbers and not any(_varies(one, names) for one in inside):
            new += _around(tokens, first, last)
    return new


def _touch(tokens: Sequence[Token], at: int, text: str) -> bool:
    """Tell whether nothing stands between a token and the one before it but what ends a command."""
    start, end = tokens[at - 1].end_pos or 0, tokens[at].start_pos or 0
    name = re.search(r"\\[A-Za-z]+$", text[:start][-20:]) is not None
    return start == end or (name and text[start:end] == " ")


def _varies(part: Token, names: Names) -> bool:
    """Tell whether a token stands for the time, for a function of it, or for no declared name."""
    if part.type != "ATOM" or isinstance(part.value, Constant):
        return False
    return not isinstance(part.value, Symbol) or part.value.name not in names.declared.parameters
