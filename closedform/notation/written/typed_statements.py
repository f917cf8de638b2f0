"""Typed text parted into statements: chains with their units, conditions and notes."""

from __future__ import annotations

import re
from collections.abc import Iterator
from dataclasses import replace

from lark import Token

from closedform.notation.written.grammar import token, tree_of
from closedform.notation.written.latex_units import is_unit
from closedform.notation.written.names import GREEK
from closedform.notation.written.tree import (
    Declared,
    Literal,
    Piecewise,
    Range,
    Statement,
    Symbol,
)
from closedform.notation.written.typed_parting import Chunk, Parting
from closedform.notation.written.typed_places import SIGNED, Signs, split_at
from closedform.notation.written.typed_scanner import StrayError
from closedform.notation.written.typed_signs import SUPERSCRIPTS, spelled_out
from closedform.notation.written.typed_weaving import Weaver

__all__ = ["statements_of"]

KNOWN_WORDS = frozenset(
    (
        *("lim", "limit", "laplace", "inverse_laplace", "ilaplace", "deg", "degree", "degrees"),
        *("rad", "eig", "spec", "eye", "piecewise", "cases", "matrix", "array", "mat"),
    )
)
"""Words with a grammar of their own."""
RAISED = re.compile("[⁻⁰¹²³⁴⁵⁶⁷⁸⁹]+")
COMPARING = frozenset("<≤>≥→")
TENDING = frozenset({"tends", "goes", "approaches"})


def statements_of(signs: Signs, declared: Declared) -> tuple[Statement, ...]:
    """Return the statements of a text.

    Raises:  StrayError, StoppedError.
    """
    reader = _Statements(signs, declared)
    found: list[Statement] = []
    pieces: list[tuple[Statement, bool]] = []
    for chunk in reader.chunks():
        statement = reader.statement(chunk)
        if statement is None:
            continue
        if found and _is_condition(statement, declared.time) and not chunk.otherwise:
            beside = Range(statement.members, statement.relations)
            found[-1] = replace(found[-1], conditions=(*found[-1].conditions, beside))
            pieces[-1] = (found[-1], pieces[-1][1])
            continue
        found.append(statement)
        pieces.append((statement, chunk.otherwise))
    return tuple(_merged(pieces))


def _is_measure(text: str) -> bool:
    """Whether a text is a unit that stays beside its number; degrees and percent do not."""
    return is_unit(text) and text not in ("°", "deg", "%")


def _is_condition(statement: Statement, time: str) -> bool:
    """Whether a statement is only a range of the time."""
    if not statement.relations or statement.conditions:
        return False
    return Symbol(time) in statement.members and set(statement.relations) <= COMPARING


def _merged(pieces: list[tuple[Statement, bool]]) -> Iterator[Statement]:
    """Yield statements, values with ranges that follow each other put together as pieces."""
    k = 0
    while k < len(pieces):
        first, end = pieces[k][0], k + 1
        while end < len(pieces) and _is_piece(*pieces[end]):
            end += 1
        if end == k + 1 or not first.conditions:
            yield first
            k += 1
            continue
        made = [(s.members[-1], None if last else s.conditions) for s, last in pieces[k:end]]
        members = (*first.members[:-1], Piecewise(tuple(made)))
        yield replace(first, members=members, conditions=(), end=pieces[end - 1][0].end)
        k = end


def _is_piece(statement: Statement, otherwise: bool) -> bool:  # noqa: FBT001  a pair is passed
    return not statement.relations and (otherwise or bool(statement.conditions))


class _Statements(Parting):
    """Reads the stretches of one text."""

    def __init__(self, signs: Signs, declared: Declared) -> None:
        super().__init__(signs, declared)
        self.weaver = Weaver(signs, declared)

    def statement(self, chunk: Chunk) -> Statement | None:
        """Return the statement of a stretch; None if it has only a condition."""
        conditions, notes = [], [chunk.note] if chunk.note else []
        for begin, stop in chunk.conditions:
            condition = self._range(begin, stop)
            if condition is None:
                notes.append(self.signs.inside(begin, stop))
            else:
                conditions.append(condition)
        if chunk.start == chunk.stop:
            first = self.signs.all[min(chunk.start, len(self.signs.all) - 1)]
            found = self.signs.text[first.start : first.end]
            why = "a condition stands behind the formula that it is for"
            raise StrayError(first.start, found, why)
        members, unit = self._without_units(chunk.start, chunk.stop)
        for bounds in members:
            self._refuse_prose(*bounds)
        tokens: list[Token] = []
        for begin, stop in members:
            if tokens:
                tokens.append(self._relation(begin))
            tokens += self.weaver.tokens(begin, stop)
        nodes, relations = tree_of(tokens)
        return Statement(
            nodes,
            relations,
            unit,
            tuple(conditions),
            "; ".join(notes),
            self.signs.all[chunk.start].start,
            self._last(chunk.stop),
        )

    def _relation(self, begin: int) -> Token:
        """Return the relation before a member: of several signs (= ~) an approximate one wins."""
        k = begin - 1
        signs = []
        while k >= 0 and self.signs.all[k].kind in ("REL", "ABOUT"):
            sign = self.signs.all[k]
            signs.append("≈" if sign.kind == "ABOUT" else str(sign.value))
            k -= 1
        first, last = self.signs.all[k + 1], self.signs.all[begin - 1]
        value = "≈" if "≈" in signs else signs[-1]
        return token("REL", value, first.start, last.end)

    def _range(self, begin: int, stop: int) -> Range | None:
        """Return a condition as a range; None if it is words."""
        kinds = [self.signs.all[k].kind for k in range(begin, stop)]
        words = [k for k in range(begin, stop) if self.signs.inside(k, k + 1) in TENDING]
        if words and words[0] == begin + 1:
            last = self.signs.all[stop - 1]
            at = self.signs.all[begin]
            name = [*self.weaver.tokens(begin, begin + 1)]
            arrow = token("REL", "→", at.end, last.start)
            nodes, relations = tree_of([*name, arrow, *self.weaver.tokens(stop - 1, stop)])
            return Range(nodes, relations)
        if "REL" not in kinds:
            return None
        nodes, relations = tree_of([*self.weaver.tokens(begin, stop)])
        return Range(nodes, relations)

    def _without_units(self, start: int, stop: int) -> tuple[list[tuple[int, int]], str]:
        """Return the members of a chain, and the unit behind the last number that has one."""
        parts = split_at(self.signs, start, stop, ("REL", "ABOUT"))
        members = [part for part in parts if part[0] < part[1]]
        unit = ""
        for place, (begin, end) in enumerate(members):
            number, text = self._unit(begin, end, alone=len(members) == 1)
            if text:
                members[place], unit = (begin, number + 1), text
            elif (last := self._unit_behind(begin, end)) < end:
                members[place], unit = (begin, last), self.signs.inside(last, end)
        return members, unit

    def _unit_behind(self, begin: int, end: int) -> int:
        """Return where a unit of two letters or more begins that ends a formula, else its end."""
        for k in range(begin + 1, end):
            sign, text = self.signs.all[k], self.signs.inside(k, end)
            if sign.kind == "ATOM" and sign.spaced and sign.word < 0 and _is_measure(text):
                words = re.findall(r"[^\W\d_]+", text)
                own = {*self.declared.names, self.declared.time}
                free = not own & {spelled_out(word)[0] for word in words}
                operator = self.signs.all[k - 1].kind in ("TIMES", "OVER", "POWER", *SIGNED)
                if free and not operator and len(words[0]) > 1 and isinstance(sign.value, Symbol):
                    return k
        return end

    def _unit(self, begin: int, end: int, *, alone: bool) -> tuple[int, str]:
        """Return where a signed number ends that a member is, and the unit behind it."""
        k = last = begin
        while k < end and self.signs.all[k].kind in (*SIGNED, "NUMBER"):
            if k > begin and self.signs.all[k].kind == self.signs.all[last].kind == "NUMBER":
                break
            last, k = k, k + 1
        if not begin <= last < end - 1 or self.signs.all[last].kind != "NUMBER":
            return last, ""
        value = self.signs.all[last].value
        text = self.signs.text[self.signs.all[last].end : self._last(end)].strip()
        text = RAISED.sub(lambda run: "^" + "".join(map(SUPERSCRIPTS.__getitem__, run[0])), text)
        text = text.strip("[]").replace("**", "^")
        text = text.replace("(", "").replace(")", "") if "^(" in text else text
        decimal = isinstance(value, Literal) and value.is_decimal
        if not _is_measure(text) or text == self.declared.time:
            return last, ""
        if alone and not decimal:
            return last, ""
        words = re.findall(r"[^\W\d_]+", text)
        names = words if all(word in self.declared.names for word in words) else []
        bracketed = self.signs.all[last + 1].value == "["
        if not names or bracketed:
            return last, text
        product = self.signs.inside(last, end)
        figures = self.signs.inside(last, last + 1)
        other = f"{figures} in the unit {text}"
        flip = self.signs.doubt(last, end, product, other, decided_by=names[0])
        return last, text if flip else ""

    def _refuse_prose(self, start: int, stop: int) -> None:
        """Refuse words that stand side by side: they are no product of names."""
        for k in range(start, stop):
            beside = [m for m in (k - 1, k + 1) if start <= m < stop]
            factors = any(self.signs.all[m].kind in ("ATOM", "NUMBER", "TEXT") for m in beside)
            words = any(self._is_plain_word(m, 2) for m in beside)
            called = self.signs.kind(k + 1, stop) == "OPEN" and not self.signs.all[k + 1].spaced
            factors = factors or called
            if (factors and self._is_plain_word(k, 4)) or (words and self._is_plain_word(k, 3)):
                found = self.signs.inside(k, k + 1)
                raise StrayError(
                    self.signs.all[k].start,
                    found,
                    "it is no declared name and no function; leave words out, or declare it",
                )

    def _is_plain_word(self, k: int, least: int) -> bool:
        """Whether a word of so many small letters is no name and no function that is known."""
        sign = self.signs.all[k]
        text = self.signs.inside(k, k + 1)
        known = self._is_declared(k) or not isinstance(sign.value, Symbol) or sign.word >= 0
        limit = text in KNOWN_WORDS
        return (
            not known
            and re.fullmatch(f"[a-z]{{{least},}}", text) is not None
            and not limit
            and (spelled_out(text)[0] not in GREEK)
        )
