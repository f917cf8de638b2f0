"""Groups and ends that the likelier reading of a place asks for, set before the grammar."""

from __future__ import annotations

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


def preferred(tokens: list[Token], names: Names) -> None:
    """Set in tokens what the likelier reading of arguments and slashes asks for."""
    partners = pairs(tokens, "")
    _inserted(tokens, _grouped(tokens, partners, names) + _arguments(tokens, partners, names))


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
