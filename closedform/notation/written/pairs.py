"""Tokens in pairs: which bracket belongs to which."""

from __future__ import annotations

from collections.abc import Sequence

from lark import Token

from closedform.notation.written.written_errors import StopError, UnbalancedError, WrittenDepthError

__all__ = ["OPERAND_ENDS", "OPERAND_STARTS", "bounds", "pairs"]

OPERAND_ENDS = frozenset(
    [
        "NUMBER",
        "ATOM",
        "CLOSE",
        "GROUP_CLOSE",
        "BAR_CLOSE",
        "NORM_CLOSE",
        "MATRIX_CLOSE",
        "CASES_CLOSE",
        "POSTFIX",
        "UNIT",
        "DIFFERENTIAL",
    ]
)
"""Types of tokens with which an operand can end."""
OPERAND_STARTS = frozenset(
    [
        "NUMBER",
        "ATOM",
        "EULER",
        "CALL",
        "FUNCTION",
        "FRACTION",
        "ROOT",
        "OPEN",
        "GROUP_OPEN",
        "BAR_OPEN",
        "NORM_OPEN",
        "MATRIX_OPEN",
        "MINUS",
    ]
)
"""Types of tokens with which an entry of a row can begin."""


DEEPEST = 100
"""Brackets inside each other."""


def bounds(first: Token, last: Token | None = None) -> tuple[int, int]:
    """Return where tokens begin and end in the text."""
    return first.start_pos or 0, (first if last is None else last).end_pos or 0


def pairs(tokens: Sequence[Token], text: str) -> dict[int, int]:
    """Return the index of the partner of every opening bracket.

    Raises:  StopError at a bracket that has none, or one of another kind.
    """
    found: dict[int, int] = {}
    opened: list[int] = []
    for index, part in enumerate(tokens):
        if part.type.endswith("OPEN"):
            opened.append(index)
            if len(opened) > DEEPEST:
                raise StopError(WrittenDepthError, *bounds(part), _shown(part, text), DEEPEST)
        elif part.type.endswith("CLOSE"):
            first = tokens[opened[-1]] if opened else None
            if first is None or first.type[:-4] != part.type[:-5]:
                raise StopError(UnbalancedError, *bounds(part), _shown(part, text))
            if part.type == "CLOSE" and first.value != part.value:
                raise StopError(UnbalancedError, *bounds(part), _shown(part, text))
            found[opened.pop()] = index
    if opened:
        part = tokens[opened[-1]]
        raise StopError(UnbalancedError, *bounds(part), _shown(part, text))
    return found


def _shown(part: Token, text: str) -> str:
    start, end = bounds(part)
    return text[start:end] or str(part.value) or part.type.lower()
