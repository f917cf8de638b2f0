"""Where statements end, and what stands beside them: conditions, units and notes."""

from __future__ import annotations

import re
from collections.abc import Sequence
from dataclasses import dataclass, field

from lark import Token

from closedform.notation.written.grammar import StoppedError, tree_of
from closedform.notation.written.multiplicity import asks_for_number
from closedform.notation.written.names import Names
from closedform.notation.written.pairs import bounds
from closedform.notation.written.tree import (
    Apply,
    Array,
    Identity,
    Listing,
    Power,
    Range,
    Statement,
    Symbol,
    Written,
    changed,
    walk,
)
from closedform.notation.written.unit_tokens import without_units
from closedform.notation.written.written_errors import (
    StopError,
    UnexpectedPartError,
    UnusableNotationError,
)

__all__ = ["statements_of"]

PARTING = frozenset({"COMMA", "SEMI", "PERIOD", "ROW_END", "IMPLIES", "TEXT", "WORD", "COLON"})
OPERATORS = frozenset({"PLUS", "MINUS", "PLUS_MINUS", "MINUS_PLUS", "TIMES", "OVER"})
_BEFORE_NOUGHT = re.compile(r"(?<![0-9])0\s?\^\s?(?:-|\{-\})")
_WORDS = re.compile(r"\\(?:text|mbox)[a-z]*\{([^{}]*)\}")
ORDERS = frozenset({"<", "≤", ">", "≥", "≠", "→"})


@dataclass(slots=True)
class Draft:
    """The tokens of a statement and of what stands beside it."""

    tokens: list[Token]
    items: list[list[Token]] = field(default_factory=list)
    conditions: list[list[Token]] = field(default_factory=list)
    notes: list[str] = field(default_factory=list)


def statements_of(tokens: Sequence[Token], names: Names, text: str) -> tuple[Statement, ...]:
    """Return the statements of settled tokens, in order.

    Raises:  StopError where the tokens are no formula.
    """
    drafts: list[Draft] = []
    early: list[str] = []
    conditions: list[list[Token]] = []
    for marks, segment in _segments(tokens):
        notes = [str(mark.value) for mark in marks if mark.type == "TEXT"]
        if notes and drafts and notes[0].startswith("in "):
            _note_time(drafts, names, notes)
        (drafts[-1].notes if drafts else early).extend(notes)
        kinds = {mark.type for mark in marks}
        words = {str(mark.value) for mark in marks if mark.type == "WORD"}
        part, beside = _condition_behind(segment)
        if not part:
            pass
        elif drafts and all(one.type == "UNIT" for one in part):
            drafts[-1].tokens.extend(part)
        elif drafts and _joins(drafts[-1], marks, part):
            last = drafts[-1]
            (last.items[-1] if last.items else last.tokens).extend(part)
        elif "for" in words or (drafts and _is_condition(part)):
            (drafts[-1].conditions if drafts else conditions).append(_unwrapped(part))
        elif drafts and notes and asks_for_number(notes[-1]) and part[0].type == "NUMBER":
            drafts[-1].notes[-1] += text[slice(*bounds(part[0], part[-1]))]
        elif drafts and "SPACE" in kinds and _is_number(part):
            drafts[-1].notes.append(text[slice(*bounds(part[0], part[-1]))])
        elif drafts and _lists(drafts[-1], kinds, words, part):
            drafts[-1].items.append(part)
        else:
            drafts.append(Draft(part))
        if beside:
            (drafts[-1].conditions if drafts else conditions).append(beside)
    if not drafts:
        raise StopError(UnexpectedPartError, 0, len(text), "", "a formula")
    drafts[0].notes[:0] = early
    drafts[0].conditions[:0] = conditions
    return tuple(_statement(draft, names, text) for draft in drafts)


def _note_time(drafts: list[Draft], names: Names, notes: list[str]) -> None:
    """Take the time before the words `in s` from what was read into the notes."""
    items = drafts[-1].items
    last = items[-1] if items else drafts[-1].tokens
    if [one.value for one in last] != [Symbol(names.time)]:
        return
    if items:
        items.pop()
    elif len(drafts) > 1:
        drafts.pop()
    notes[0] = f"{names.time} {notes[0]}"


def _segments(tokens: Sequence[Token]) -> list[tuple[list[Token], list[Token]]]:
    """Return the parts between commas, wide spaces, words and line ends, with these before."""
    found: list[tuple[list[Token], list[Token]]] = [([], [])]
    depth = 0
    for part in tokens:
        depth += part.type.endswith("OPEN") - part.type.endswith("CLOSE")
        parts = part.type in PARTING or (part.type == "SPACE" and part.value > 1)
        if part.type == "SPACE" and not parts:
            continue
        if parts and depth == 0:
            if found[-1][1]:
                found.append(([], []))
            found[-1][0].append(part)
        elif part.type == "SPACE" or (part.type == "ROW_END" and depth):
            continue
        else:
            found[-1][1].append(part)
    return found


def _relations(part: Sequence[Token]) -> list[str]:
    """Return the relations outside brackets."""
    depth, found = 0, []
    for one in part:
        depth += one.type.endswith("OPEN") - one.type.endswith("CLOSE")
        if depth == 0 and one.type == "REL":
            found.append(str(one.value))
    return found


def _joins(draft: Draft, marks: list[Token], part: list[Token]) -> bool:
    """Tell whether a part goes on with the statement before it."""
    if part[0].type == "REL":
        return True
    rows = [mark for mark in marks if mark.type == "ROW_END"]
    kinds = {mark.type for mark in marks}
    if not rows or kinds & {"SEMI", "IMPLIES", "TEXT", "WORD"}:
        return (
            bool(draft.tokens)
            and kinds == {"SPACE"}
            and (draft.tokens[-1].type == "REL" or part[0].type == "PLUS")
        )
    ends = draft.tokens[-1].type in OPERATORS | {"REL"}
    if ends or any(row.value == "joined" for row in rows):
        return True
    if "COMMA" in kinds or "PERIOD" in kinds:
        return False
    return part[0].type == "PLUS" or (part[0].type in OPERATORS and not _relations(part))


def _is_condition(part: list[Token]) -> bool:
    """Tell whether a part compares only, as t > 0 or (t > 0) does."""
    relations = _relations(_unwrapped(part))
    return bool(relations) and all(sign in ORDERS for sign in relations)


def _unwrapped(part: list[Token]) -> list[Token]:
    """Return what stands in brackets if these are all there is."""
    if len(part) > 2 and part[0].type == "OPEN" and part[-1].type == "CLOSE":
        depth = 0
        for index, one in enumerate(part):
            depth += one.type.endswith("OPEN") - one.type.endswith("CLOSE")
            if depth == 0:
                return part[1:-1] if index == len(part) - 1 else part
    return part


def _condition_behind(part: list[Token]) -> tuple[list[Token], list[Token]]:
    """Return a part without the bracketed condition at its end, and that condition."""
    if not part or part[-1].type != "CLOSE":
        return part, []
    depth, index = 0, len(part)
    for index in range(len(part) - 1, -1, -1):
        depth += part[index].type.endswith("CLOSE") - part[index].type.endswith("OPEN")
        if depth == 0:
            break
    inside = part[index + 1 : -1]
    if index and part[index].type == "OPEN" and _relations(inside):
        return part[:index], inside
    return part, []


def _is_number(part: list[Token]) -> bool:
    """Tell whether a part is the number of an equation, (3)."""
    return [one.type for one in part] == ["OPEN", "NUMBER", "CLOSE"]


def _lists(draft: Draft, kinds: set[str], words: set[str], part: list[Token]) -> bool:
    """Tell whether a part is one more value of the statement before it."""
    parted = "COMMA" in kinds or "and" in words or "SEMI" in kinds
    relations = _relations(draft.tokens)
    return (
        parted
        and not draft.conditions
        and not _relations(part)
        and bool(relations)
        and relations[-1] in ("=", "≈")
    )


def _counts(condition: list[Token], names: Names) -> bool:
    """Tell whether a condition says how often a value counts: m = 2."""
    kinds = [one.type for one in condition] == ["ATOM", "REL", "NUMBER"]
    return kinds and condition[0].value == Symbol("m") and names.find("m") is None


def _statement(draft: Draft, names: Names, text: str) -> Statement:
    unit, chain = without_units(draft.tokens, names)
    members, relations = _tree(chain, text)
    if draft.items:
        items = [members[-1]]
        for item in draft.items:
            more, rest = without_units(item, names)
            unit = unit or more
            items.append(_tree(rest, text)[0][0])
        members = (*members[:-1], Listing(tuple(items)))
    conditions = []
    for condition in draft.conditions:
        if _counts(condition, names):
            draft.notes.append(text[slice(*bounds(condition[0], condition[-1]))])
            continue
        _, rest = without_units(condition, names)
        found, signs = _tree(rest, text)
        if signs:
            conditions.append(Range(found, signs))
        else:
            draft.notes.append(text[slice(*bounds(condition[0], condition[-1]))])
    last = draft.items[-1] if draft.items else draft.tokens
    start, end = bounds(draft.tokens[0], last[-1])
    members = tuple(_with_determinants(member, names) for member in members)
    if _BEFORE_NOUGHT.search(text, start, end):
        draft.notes.append("at 0^-")
    note = "; ".join(_WORDS.sub(r"\1", note) for note in draft.notes if note)
    return Statement(members, relations, unit, tuple(conditions), note, start, end)


def _tree(part: Sequence[Token], text: str) -> tuple[tuple[Written, ...], tuple[str, ...]]:
    try:
        return tree_of(part)
    except StoppedError as error:
        stopped = error
    if stopped.found is not None:
        start, end = bounds(stopped.found)
    else:
        start = end = (part[-1].end_pos or 0) if part else 0
    found = text[start:end]
    if stopped.why:
        raise StopError(UnusableNotationError, start, end, found, stopped.why)
    operand = "ATOM" in stopped.expected
    expected = "a name, a number or a bracket" if operand else "an operator or the end"
    raise StopError(UnexpectedPartError, start, end, found, expected)


def _with_determinants(node: Written, names: Names) -> Written:
    """Return a formula where bars round a matrix are its determinant."""

    def change(part: Written) -> Written | None:
        if isinstance(part, Apply) and part.function == "abs" and _is_matrix(part.arguments[0]):
            return Apply("det", tuple(_with_determinants(one, names) for one in part.arguments))
        return None

    def _is_matrix(inside: Written) -> bool:
        return any(
            isinstance(part, Array | Identity)
            or (isinstance(part, Symbol) and (part.name in names.declared.matrices or part.bold))
            for part in walk(inside)
        ) and not isinstance(inside, Power)

    return changed(node, change)
