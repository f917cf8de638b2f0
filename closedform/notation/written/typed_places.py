"""Where typed mathematics has structure: pairs of brackets, factors, places read in two ways."""

from __future__ import annotations

from collections.abc import Iterator, Sequence
from contextlib import contextmanager
from dataclasses import dataclass, field, replace

from closedform.notation.written.typed_scanner import Lexeme, StrayError

__all__ = ["DEEPEST", "OPERAND", "Doubt", "Signs", "split_at"]

DEEPEST = 50
"""Brackets inside each other in one typed text."""
OPERAND = frozenset(
    {"NUMBER", "ATOM", "EULER", "FUNCTION", "RADICAL", "OPEN", "GROUP_OPEN", "TEXT"}
)
"""Kinds with which a factor begins."""
SIGNED = frozenset({"PLUS", "MINUS", "PLUS_MINUS", "MINUS_PLUS"})
ENDS = frozenset({"NUMBER", "ATOM", "EULER", "CLOSE", "GROUP_CLOSE", "PRIMES", "POSTFIX", "TEXT"})
CLOSING = {"(": ")", "[": "]", "{": "}"}


@dataclass(frozen=True, slots=True)
class Doubt:
    """A place that is read in two ways: its number is where it begins in the text."""

    start: int
    end: int
    chosen: str
    other: str
    decided_by: str = ""


@dataclass
class Signs:
    """The lexemes of a text with what pairs them, and how doubtful places are to be read.

    `flipped` are the places read in the way that is not preferred.
    """

    text: str
    all: list[Lexeme]
    flipped: frozenset[int] = frozenset()
    doubts: dict[int, Doubt] = field(default_factory=dict)
    pairs: dict[int, int] = field(default_factory=dict)
    _depth: int = 0

    def __post_init__(self) -> None:
        opened: list[int] = []
        for k, sign in enumerate(self.all):
            if sign.kind == "REL" and self._is_below(k):
                self.all[k] = replace(sign, kind="INNER")
            if sign.kind in ("OPEN", "GROUP_OPEN"):
                opened.append(k)
            elif sign.kind in ("CLOSE", "GROUP_CLOSE"):
                self._close(k, opened)
            elif sign.kind in ("BAR", "DOUBLE_BAR"):
                self._bar(k, opened)
            if len(opened) > DEEPEST:
                raise StrayError(sign.start, "(", "brackets are nested too deep; name a part of it")
        for k in opened:
            if self.all[k].value == "{" and k and self.all[k - 1].kind == "REL":
                self.all[k] = Lexeme("BRACE", "{", self.all[k].start, self.all[k].end)
            elif self.all[k].kind not in ("BAR", "DOUBLE_BAR"):
                found = str(self.all[k].value)
                raise StrayError(self.all[k].start, found, "this bracket is not closed; close it")
            elif self._begins(k):
                raise StrayError(self.all[k].start, "|", "this bar has no other; close it")

    def _is_below(self, k: int) -> bool:
        """Whether a relation says at which value something is taken: lim t->0, x'|t=0."""
        if k < 2 or self.all[k - 1].kind != "ATOM":
            return False
        head = self.all[k - 2 - (self.all[k - 2].kind == "LOW" and k > 2)]
        return head.kind == "BAR" or self.text[head.start : head.end] in ("lim", "limit", "lim_")

    def _close(self, k: int, opened: list[int]) -> None:
        sign = self.all[k]
        while opened and self.all[opened[-1]].kind in ("BAR", "DOUBLE_BAR"):
            opened.pop()
        if not opened or (
            sign.kind == "CLOSE" and CLOSING[str(self.all[opened[-1]].value)] != sign.value
        ):
            raise StrayError(
                sign.start, str(sign.value), "this bracket closes none; leave it out or open one"
            )
        start = opened.pop()
        self.pairs[start], self.pairs[k] = k, start

    def _bar(self, k: int, opened: list[int]) -> None:
        kind = self.all[k].kind
        if opened and self.all[opened[-1]].kind == kind and not self._begins(k):
            start = opened.pop()
            self.pairs[start], self.pairs[k] = k, start
        else:
            opened.append(k)

    def _begins(self, k: int) -> bool:
        """Whether nothing stands before a bar that it could close or be taken of."""
        before = self.all[k - 1] if k else None
        return before is None or before.kind not in ENDS

    def kind(self, k: int, stop: int) -> str:
        """Return the kind of a lexeme, empty at the stop and behind it."""
        return self.all[k].kind if 0 <= k < stop else ""

    def begins_factor(self, k: int, stop: int) -> bool:
        """Say whether a factor begins at a lexeme."""
        kind = self.kind(k, stop)
        return kind in OPERAND or (kind in ("BAR", "DOUBLE_BAR") and self.pairs.get(k, -1) > k)

    def factor_end(self, k: int, stop: int) -> int:
        """Return where the factor ends that begins at `k`; a function is one with its bracket.

        A function without bracket ends with its argument.
        """
        with self._deeper(k):
            return self._factor_end(k, stop)

    @contextmanager
    def _deeper(self, k: int) -> Iterator[None]:
        """Bound how deep functions and exponents stand inside each other."""
        if self._depth == DEEPEST:
            where = self.all[min(k, len(self.all) - 1)]
            found = self.text[where.start : where.end]
            raise StrayError(
                where.start, found, "the formula is nested too deep; name a part of it"
            )
        self._depth += 1
        try:
            yield
        finally:
            self._depth -= 1

    def _factor_end(self, k: int, stop: int) -> int:
        kind = self.kind(k, stop)
        if kind == "RADICAL":
            k = self.factor_end(k + 1, stop)
        elif kind == "FUNCTION":
            k = self._exponents(k + 1, stop)
            k = self.pairs[k] + 1 if self.kind(k, stop) == "OPEN" else self.argument_end(k, stop)
        elif self.pairs.get(k, -1) > k:
            k = self.pairs[k] + 1
        elif k < stop:
            called = kind == "ATOM" and self.is_called(k, stop)
            k += 1
            while self.kind(k, stop) == "PRIMES":
                k += 1
            if called:
                k = self.pairs[k] + 1
        return self._exponents(k, stop)

    def is_called(self, k: int, stop: int) -> bool:
        """Say whether a function of time stands here with its argument in a bracket."""
        name = type(self.all[k].value).__name__
        k += 1
        while self.kind(k, stop) == "PRIMES":
            k += 1
        return name == "Jet" and self.kind(k, stop) == "OPEN" and not self.all[k].spaced

    def argument_end(self, k: int, stop: int) -> int:
        """Return where the argument ends of a function without brackets."""
        if self.kind(k, stop) in SIGNED:
            k += 1
        first = True
        while self.begins_factor(k, stop) and (
            first or self.kind(k, stop) not in ("FUNCTION", "EULER")
        ):
            k, first = self.factor_end(k, stop), False
        return k

    def _exponents(self, k: int, stop: int) -> int:
        while self.kind(k, stop) in ("POWER", "PRIMES", "POSTFIX"):
            if self.kind(k, stop) != "POWER":
                k += 1
                continue
            k = self.exponent_end(k + 1, stop)
        return k

    def exponent_end(self, k: int, stop: int) -> int:
        """Return where an exponent ends that begins at `k`: signs, an operand, its own exponent."""
        with self._deeper(k):
            return self._exponent_end(k, stop)

    def _exponent_end(self, k: int, stop: int) -> int:
        while self.kind(k, stop) in SIGNED:
            k += 1
        if not self.begins_factor(k, stop):
            return k
        if k in self.pairs:
            return self._exponents(self.pairs[k] + 1, stop)
        if self.kind(k, stop) == "FUNCTION":
            return self.factor_end(k, stop)
        if self.is_called(k, stop):
            while self.kind(k, stop) != "OPEN":
                k += 1
            return self._exponents(self.pairs[k] + 1, stop)
        word = self.all[k].word
        k += 1
        while word >= 0 and k < stop and self.all[k].word == word:
            k += 1
        return self._exponents(k, stop)

    def inside(self, start: int, stop: int) -> str:
        """Return the text of the lexemes from `start` to before `stop`."""
        return self.text[self.all[start].start : self.all[stop - 1].end] if stop > start else ""

    def doubt(self, at: int, until: int, chosen: str, other: str, decided_by: str = "") -> bool:
        """Note a place that is read in two ways; return whether to read it in the other one."""
        place = self.all[at].start
        self.doubts[place] = Doubt(place, self.all[until - 1].end, chosen, other, decided_by)
        return place in self.flipped


def split_at(signs: Signs, start: int, stop: int, kinds: Sequence[str]) -> list[tuple[int, int]]:
    """Return the ranges between lexemes of some kinds that stand in no bracket."""
    parts, begin, k = [], start, start
    while k < stop:
        if signs.all[k].kind in kinds:
            parts.append((begin, k))
            begin = k + 1
        k = signs.pairs[k] + 1 if signs.pairs.get(k, -1) > k else k + 1
    return [*parts, (begin, stop)]
