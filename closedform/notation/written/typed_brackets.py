"""What a bracket in typed text holds: a matrix, a column, a list, pieces, or one formula."""

from __future__ import annotations

from collections.abc import Generator, Iterator
from typing import Literal as OneOf

from lark import Token

from closedform.notation.written.grammar import token
from closedform.notation.written.tree import Jet
from closedform.notation.written.typed_places import ENDS, SIGNED, Signs, split_at
from closedform.notation.written.typed_scanner import StrayError

__all__ = ["Brackets", "Steps"]

Steps = Generator[Token, None, int]
"""Tokens, and at last the lexeme behind those that were used."""
Shape = OneOf["group", "column", "row", "rows", "nested", "listing", "cases"]
Span = tuple[int, int]
ROW_ENDS = ("SEMICOLON", "NEWLINE")


class Brackets:
    """Gives the tokens of brackets and what is in them."""

    def __init__(self, signs: Signs) -> None:
        self.signs = signs
        self.columns: set[int] = set()
        """Ends of columns that were typed as rows with a sign of transposition behind."""

    def tokens(self, k: int, stop: int) -> Iterator[Token]:
        """Yield the tokens of the lexemes from `k` to before `stop`."""
        raise NotImplementedError

    def is_listing(self, close: int) -> bool:
        """Say whether the bracket that ends at a lexeme is a matrix, a row or a column."""
        return self._shape(self.signs.pairs[close]) in ("column", "row", "rows", "nested")

    def _shape(self, k: int) -> Shape:
        close, value = self.signs.pairs[k], self.signs.all[k].value
        kinds = {self.signs.all[m].kind for m in range(k + 1, close)}
        commas = len(split_at(self.signs, k + 1, close, ("COMMA",))) > 1
        rows = len(split_at(self.signs, k + 1, close, ROW_ENDS)) > 1
        if value == "{" and commas and self._nested(k, "{") is not None:
            return "nested"
        if value == "{":
            if kinds & {"WHEN", "OTHERWISE"} or ((rows or commas) and "REL" in kinds):
                return "cases"
            return "listing" if commas or rows else "group"
        if value == "(":
            if commas and self._nested(k, "(") is not None:
                return "nested"
            return "column" if commas or rows else "group"
        if self._nested(k) is not None:
            return "nested"
        if rows:
            return "rows"
        if commas:
            return "column"
        entries = self._spaced(k + 1, close)
        figures = any(self.signs.all[b].kind in ("NUMBER", *SIGNED) for b, _ in entries[1:])
        turned = self._is_turned(close)
        return "row" if len(entries) > 1 and (figures or turned) else "group"

    def _is_turned(self, close: int) -> bool:
        after = self.signs.all[close + 1 : close + 3]
        if not after:
            return False
        if after[0].kind == "PRIMES" or after[0].value == "transpose":
            return True
        text = self.signs.text[after[-1].start : after[-1].start + 2].strip("{")
        return after[0].kind == "POWER" and text[:1] == "T"

    def _nested(self, k: int, bracket: str = "[") -> list[Span] | None:
        """Return the rows of a bracket that holds nothing but rows in brackets, else None."""
        parts = self._filled(k + 1, self.signs.pairs[k], ("COMMA", *ROW_ENDS))
        whole = all(
            self.signs.all[b].value == bracket and self.signs.pairs.get(b) == e - 1
            for b, e in parts
        )
        return [(b + 1, e - 1) for b, e in parts] if parts and whole else None

    def _filled(self, begin: int, stop: int, kinds: tuple[str, ...]) -> list[Span]:
        found = []
        for start, end in split_at(self.signs, begin, stop, kinds):
            first = start
            while first < end and self.signs.all[first].kind == "NEWLINE":
                first += 1
            if first < end:
                found.append((first, end))
        return found

    def _entries(self, begin: int, stop: int) -> list[Span]:
        """Return the entries of a row, between commas or, without any, between spaces."""
        parts = self._filled(begin, stop, ("COMMA",))
        return parts if len(parts) > 1 else self._spaced(begin, stop)

    def _spaced(self, begin: int, stop: int) -> list[Span]:
        """Return the parts of a row between spaces that stand beside no operator."""
        found, start, k = [], begin, begin
        while k < stop:
            sign, kind = self.signs.all[k], self.signs.all[k - 1].kind
            sticks = (
                sign.kind in SIGNED and k + 1 < stop and not self.signs.all[k + 1].spaced
            ) or self.signs.begins_factor(k, stop)
            if k > start and sign.spaced and kind in (*ENDS, "BAR") and sticks:
                found.append((start, k))
                start = k
            k = self.signs.pairs[k] + 1 if self.signs.pairs.get(k, -1) > k else k + 1
        return [*found, (start, stop)] if start < stop else found

    def _open(self, k: int, stop: int) -> Steps:  # noqa: ARG002  each step has both bounds
        """Yield a bracket and what it holds."""
        sign, close = self.signs.all[k], self.signs.pairs[k]
        end = self.signs.all[close].end
        shape = self._shape(k)
        if close == k + 1:
            raise StrayError(
                sign.start, self.signs.text[sign.start : end], "nothing is in brackets"
            )
        if close == k + 2 and self.signs.all[k + 1].kind == "DERIVATIVE":
            yield token("DERIVATIVE", self.signs.all[k + 1].value, sign.start, end)
        elif shape == "group":
            yield token("OPEN", sign.value, sign.start, sign.end)
            yield from self.tokens(k + 1, close)
            yield token("CLOSE", self.signs.all[close].value, end - 1, end)
        elif shape == "listing":
            parts = self._filled(k + 1, close, ("COMMA", *ROW_ENDS))
            yield from self._list(parts, ("OPEN", "COMMA", "CLOSE"), "{", (sign.start, end))
        elif shape == "cases":
            yield from self._cases(k + 1, close)
        else:
            yield from self._matrix(k, close, shape)
        return close + 1

    def _matrix(self, k: int, close: int, shape: Shape) -> Iterator[Token]:
        bounds = (self.signs.all[k].start, self.signs.all[close].end)
        if shape in ("column", "row"):
            parts = self._filled(k + 1, close, ("COMMA", *ROW_ENDS))
            parts = self._spaced(k + 1, close) if shape == "row" else parts
            turned = self._is_turned(close)
            if turned:
                self.columns.add(close)
            elif shape == "row" or self._is_row(k, close):
                yield from self._list(parts, ("MATRIX_OPEN", "COLUMN", "MATRIX_CLOSE"), "", bounds)
                return
            yield from self._list(parts, ("MATRIX_OPEN", "ROW", "MATRIX_CLOSE"), "", bounds)
            return
        rows = (
            self._nested(k, str(self.signs.all[k].value))
            if shape == "nested"
            else self._filled(k + 1, close, ROW_ENDS)
        )
        yield token("MATRIX_OPEN", "", bounds[0], bounds[0] + 1)
        for place, (begin, stop) in enumerate(rows or ()):
            if place:
                at = self.signs.all[begin].start
                yield token("ROW", ";", at, at)
            yield from self._separated(self._entries(begin, stop), "COLUMN")
        yield token("MATRIX_CLOSE", "", bounds[1] - 1, bounds[1])

    def _is_row(self, k: int, close: int) -> bool:
        """Whether a list [1, 2] is to be a row, which is its other reading."""
        text = self.signs.inside(k, close + 1)
        square = self.signs.all[k].value == "["
        return square and self.signs.doubt(k, close + 1, f"the column {text}", f"the row {text}")

    def _list(
        self, parts: list[Span], kinds: tuple[str, str, str], value: str, bounds: Span
    ) -> Iterator[Token]:
        yield token(kinds[0], value, bounds[0], bounds[0] + 1)
        yield from self._separated(parts, kinds[1])
        yield token(kinds[2], value, bounds[1] - 1, bounds[1])

    def _separated(self, parts: list[Span], kind: str) -> Iterator[Token]:
        for place, (begin, stop) in enumerate(parts):
            if place:
                at = self.signs.all[begin].start
                yield token(kind, ",", at, at)
            yield from self.tokens(begin, stop)

    def _arguments(self, k: int, close: int) -> Iterator[Token]:
        """Yield the arguments of a function in their bracket; a list of them is opened."""
        bounds = (self.signs.all[k].start, self.signs.all[close].end)
        inner = k + 1
        many = self.signs.all[k - 1].value in ("diag", "min", "max")
        if (
            many
            and self.signs.pairs.get(inner) == close - 1
            and self.signs.all[inner].kind == "OPEN"
        ):
            k, close = inner, close - 1
        parts = self._filled(k + 1, close, ("COMMA", *ROW_ENDS) if many else ("COMMA",))
        if many and len(parts) == 1:
            parts = self._spaced(k + 1, close)
        if not parts:
            raise StrayError(
                bounds[0], "()", "a function needs its argument; put it in the bracket"
            )
        yield from self._list(parts, ("OPEN", "COMMA", "CLOSE"), "(", bounds)

    def _brace(self, k: int, stop: int) -> Steps:
        """Yield the pieces behind a brace that is never closed."""
        yield from self._cases(k + 1, stop)
        return stop

    def _primes(self, k: int, stop: int) -> Steps:  # noqa: ARG002  each step has both bounds
        """Yield the sign of transposition behind a matrix."""
        sign = self.signs.all[k]
        matrix = self.signs.all[k - 1].kind == "CLOSE" and self.is_listing(k - 1)
        if not matrix or sign.value != 1:
            raise StrayError(
                sign.start,
                "'",
                "a prime stands behind a function of time or a matrix; this is none",
            )
        if k - 1 not in self.columns:
            held = self.signs.all[self.signs.pairs[k - 1] : k]
            if any(isinstance(part.value, Jet) for part in held):
                why = "it may be a derivative or a transposition; write d/dt before it, or ^T"
                raise StrayError(sign.start, "'", why)
            yield token("POSTFIX", "transpose", sign.start, sign.end)
        return k + 1

    def _postfix(self, k: int, stop: int) -> Steps:  # noqa: ARG002  each step has both bounds
        """Yield a sign behind an operand, but for a row that was already made a column."""
        sign = self.signs.all[k]
        if sign.value != "transpose" or k - 1 not in self.columns:
            yield token("POSTFIX", sign.value, sign.start, sign.end)
        return k + 1

    def _cases(self, begin: int, stop: int) -> Iterator[Token]:
        """Yield pieces: each a value and, behind a comma or `for`, where it applies."""
        yield token("CASES_OPEN", "", self.signs.all[begin].start, self.signs.all[begin].start)
        for place, (start, end) in enumerate(self.pieces(begin, stop)):
            if place:
                at = self.signs.all[start].start
                yield token("ROW", ";", at, at)
            yield from self._piece(start, end)
        yield token("CASES_CLOSE", "", self.signs.all[stop - 1].end, self.signs.all[stop - 1].end)

    def pieces(self, begin: int, stop: int) -> list[Span]:
        """Return the pieces between lexemes, each with its condition."""
        parts = self._filled(begin, stop, ROW_ENDS)
        if len(parts) > 1:
            return parts
        parts = self._filled(begin, stop, ("COMMA",))
        if all(self.signs.pairs.get(b) == e - 1 for b, e in parts):
            return [(b + 1, e - 1) for b, e in parts]
        words = ("WHEN", "OTHERWISE")
        if any(self.signs.all[m].kind in words for m in range(begin, stop)):
            joined: list[Span] = []
            for start, end in parts:
                ready = joined and any(self.signs.all[m].kind in words for m in range(*joined[-1]))
                if joined and not ready:
                    joined[-1] = (joined[-1][0], end)
                else:
                    joined.append((start, end))
            return joined
        pairs = [*zip(parts[::2], parts[1::2], strict=False)]
        last = [parts[-1]] if len(parts) % 2 else []
        return [(first[0], second[1]) for first, second in pairs] + last

    def _piece(self, begin: int, stop: int) -> Iterator[Token]:
        (_, end), *rest = split_at(self.signs, begin, stop, ("WHEN", "OTHERWISE", "COMMA"))
        yield from self.tokens(begin, end)
        if not rest:
            return
        at = self.signs.all[end]
        yield token("COLUMN", ",", at.start, at.end)
        while end < stop and self.signs.all[end].kind in ("WHEN", "COMMA"):
            end += 1
        if end < stop and self.signs.all[end].kind == "OTHERWISE":
            yield token("OTHERWISE", "otherwise", at.start, at.end)
        else:
            yield from self.tokens(end, stop)
