"""Typed text parted: separators, words around formulas, conditions behind them."""

from __future__ import annotations

import re
from collections.abc import Iterator
from dataclasses import dataclass

from closedform.notation.written.multiplicity import is_multiplicity
from closedform.notation.written.tree import Declared
from closedform.notation.written.typed_places import Signs, split_at
from closedform.notation.written.typed_signs import spelled_out

__all__ = ["Chunk", "Parting"]

SEPARATORS = ("SEMICOLON", "NEWLINE", "COMMA", "AND")
JOINING = frozenset({"REL", "PLUS", "MINUS", "PLUS_MINUS", "MINUS_PLUS", "TIMES", "OVER", "POWER"})
FILLERS = frozenset({"so", "thus", "hence", "therefore", "then", "also", "with", "that", "is"})
LABEL = re.compile(
    r"(?:(?:the|die|les)\s+)?(?:eigenvalues?|roots?|poles?|eigenwerte?|pole|valeurs?\s+propres?)"
    r"(?:\s+of\s+\w+)?(?:\s+(?:are|is|at|sind|ist|lauten|sont))?(?=\s+[-−+±{\d.(]|\s+\w+\s*[=,])",
    re.IGNORECASE,
)
NOTE = re.compile(
    r"(?:(?:is|ist|est|with|mit)\s+(?:(?:an?|eine?|une?|der)\s+)?)?"
    r"(?:double|twice|triple|repeated|simple|(?:with )?multiplicity|mult\.?|\d[- ]?fold"
    r"|\(?algebraic|doppelt|(?:ein|zwei|drei|vier)fach"
    r"|(?:mit (?:der )?)?vielfachheit|\w+ in (?![\[({]))[^;=]*",
    re.IGNORECASE,
)

BESIDE = re.compile(r"(?:twice|doppelt|zweifach|dreifach)\s*(?:$|[,;\n])|\w+ in (?![\[({])")
"""Words behind a comma that belong to the formula before it."""


@dataclass
class Chunk:
    """A stretch of text between separators: lexemes of a formula and what stands beside it."""

    start: int
    stop: int
    conditions: list[tuple[int, int]]
    unit: str = ""
    note: str = ""
    otherwise: bool = False


class Parting:
    """Parts one text into stretches of one statement each."""

    def __init__(self, signs: Signs, declared: Declared) -> None:
        self.signs, self.declared = signs, declared

    def chunks(self) -> Iterator[Chunk]:
        """Yield the stretches of the text that are to be statements."""
        for begin, stop in self._parts():
            start, end, note = self._without_words(begin, stop)
            if start >= end:
                continue
            for chunk in self._with_conditions(start, end, note):
                if chunk.conditions:
                    chunk.start, chunk.stop, beside = self._without_words(chunk.start, chunk.stop)
                    chunk.note = " ".join(filter(None, (note, beside)))
                yield chunk

    def _parts(self) -> Iterator[tuple[int, int]]:
        """Yield what stands between separators; a line that ends or begins in a sign goes on."""
        everything = split_at(self.signs, 0, len(self.signs.all), SEPARATORS)
        held: tuple[int, int] | None = None
        for begin, stop in everything:
            if begin == stop:
                continue
            if held is not None and self._goes_on(held[1], begin):
                held = (held[0], stop)
                continue
            if held is not None:
                yield held
            held = (begin, stop)
        if held is not None:
            yield held

    def _goes_on(self, stop: int, begin: int) -> bool:
        between = {sign.kind for sign in self.signs.all[stop:begin]}
        last, first = self.signs.all[stop - 1].kind, self.signs.all[begin].kind
        if between == {"COMMA"} and BESIDE.match(self.signs.text, self.signs.all[begin].start):
            own = self._is_declared(begin)
            return not own or self.signs.inside(begin, begin + 1) == self.declared.time
        if between == {"NEWLINE"}:
            return last in JOINING or first in JOINING
        condition = any(self.signs.all[m].kind == "WHEN" for m in range(self._sentence(stop), stop))
        return "AND" in between and condition and not self._names_value(begin)

    def _sentence(self, stop: int) -> int:
        k = stop - 1
        while k > 0 and self.signs.all[k - 1].kind not in ("SEMICOLON", "NEWLINE", "AND"):
            k -= 1
        return k

    def _names_value(self, begin: int) -> bool:
        """Whether a name and an equals sign begin a statement of their own."""
        follows = next((s for s in self.signs.all[begin:] if s.kind in ("REL", "WHEN")), None)
        return follows is not None and follows.value not in ("<", "≤", ">", "≥", "→")

    def _without_words(self, begin: int, stop: int) -> tuple[int, int, str]:
        """Return a stretch without the words around it, and the note among these."""
        notes = []
        colon = split_at(self.signs, begin, stop, ("COLON",))
        if len(colon) == 2:
            label = self.signs.inside(*colon[0])
            if not any(self.signs.all[m].kind == "REL" for m in range(*colon[0])):
                notes.append(label)
                begin = colon[1][0]
        while begin < stop and self.signs.inside(begin, begin + 1).lower() in FILLERS:
            if self._is_declared(begin):
                break
            begin += 1
        if after := self._label_end(begin, stop):
            notes.append(self.signs.inside(begin, after))
            begin = after
        while stop > begin and self.signs.all[stop - 1].kind == "STOP":
            stop -= 1
        k = self.signs.pairs.get(stop - 1, stop) if stop > begin else stop
        beside = begin < k < stop and self.signs.all[k].spaced
        if beside and (self._is_prose(k + 1, stop - 1) or self._counts(k, stop)):
            notes.append(self.signs.inside(k, stop))
            stop = k
        for k in range(begin + 1, stop):
            sign = self.signs.all[k]
            inside = self.signs.text[sign.start + (sign.kind == "OPEN") : self._last(stop)]
            own = sign.kind == "ATOM" and self._is_declared(k)
            named = own and self.signs.inside(k, k + 1) != self.declared.time
            if sign.spaced and NOTE.fullmatch(inside) and not named:
                notes.append(self.signs.text[sign.start : self._last(stop)])
                return begin, k - (self.signs.all[k - 1].kind == "COMMA"), " ".join(notes)
        return begin, stop, " ".join(notes)

    def _label_end(self, k: int, stop: int) -> int:
        """Return where words end that say what the values behind them are: eigenvalues -1, -3."""
        if k >= stop or self._is_declared(k):
            return 0
        found = LABEL.match(self.signs.text, self.signs.all[k].start, self._last(stop))
        end = found.end() if found else 0
        return next((m for m in range(k, stop) if end and self.signs.all[m].start >= end), 0)

    def _last(self, stop: int) -> int:
        return self.signs.all[stop - 1].end

    def _is_declared(self, k: int) -> bool:
        name = getattr(self.signs.all[k].value, "name", "")
        return name in self.declared.names

    def _is_prose(self, begin: int, stop: int) -> bool:
        """Whether a bracket holds words and no formula."""
        text = self.signs.inside(begin, stop)
        words = re.findall(r"[^\W\d_]{3,}", text)
        plain = re.fullmatch(r"[^\W_]+(?:[ -][^\W_]+)*\.?", text)
        strange = all(
            self.signs.all[k].kind not in ("FUNCTION", "POWER")
            or self.signs.inside(k, k + 1) in ("step", "impulse", "real", "root", "sign")
            for k in range(begin, stop)
        )
        unknown = [w for w in words if spelled_out(w)[0] not in self.declared.names]
        measured = re.match(rf"(?:{re.escape(self.declared.time)} )?in [^\W_]", text)
        return bool(measured or (plain and unknown and strange and len(unknown) == len(words)))

    def _counts(self, k: int, stop: int) -> bool:
        """Whether a bracket says how often the value before it counts: (2x), (3-fold)."""
        free = not any(self._is_declared(m) for m in range(k, stop))
        return free and is_multiplicity(self.signs.inside(k + 1, stop - 1))

    def _with_conditions(self, start: int, stop: int, note: str) -> Iterator[Chunk]:
        """Yield a stretch with its conditions apart; `a if c else b` gives two."""
        chunk = Chunk(start, stop, [], note=note)
        k, end = start, None
        while k < stop:
            kind = self.signs.all[k].kind
            if kind in ("WHEN", "OTHERWISE") or self._is_as(k, stop) or self._is_at(k, stop):
                end = k
                break
            k = self.signs.pairs[k] + 1 if self.signs.pairs.get(k, -1) > k else k + 1
        if end is None:
            self._bracketed_condition(chunk)
            yield chunk
            return
        chunk.stop = end
        if self.signs.all[end].kind == "OTHERWISE":
            chunk.otherwise = True
            if end == start:
                chunk.start, chunk.stop = end + 1, stop
            yield chunk
            return
        parts = split_at(self.signs, end + 1, stop, ("OTHERWISE",))
        chunk.conditions = [
            part for part in split_at(self.signs, *parts[0], ("AND", "COMMA")) if part[0] < part[1]
        ]
        yield chunk
        if len(parts) > 1 and parts[1][0] < parts[1][1]:
            yield Chunk(*parts[1], [], otherwise=True)

    def _is_as(self, k: int, stop: int) -> bool:
        text = self.signs.inside(k, k + 1)
        return text in ("as", "für") and not self._is_declared(k) and k + 2 < stop

    def _is_at(self, k: int, stop: int) -> bool:
        """Whether `at t = 2` begins."""
        sign = self.signs.all[k]
        text = self.signs.text[sign.start : self._last(stop)]
        return re.match(rf"at\s+{re.escape(self.declared.time)}\s*=", text) is not None

    def _bracketed_condition(self, chunk: Chunk) -> None:
        """Take a range in brackets at the end of a formula, (t >= 0), as its condition."""
        k = self.signs.pairs.get(chunk.stop - 1, chunk.stop)
        if (
            chunk.start < k < chunk.stop
            and self.signs.all[k].spaced
            and any(sign.kind in ("REL", "WHEN") for sign in self.signs.all[k : chunk.stop])
            and self.signs.all[k].kind == "OPEN"
            and self.signs.all[k].value != "{"
        ):
            begin = k + 1 + (self.signs.all[k + 1].kind == "WHEN")
            chunk.conditions, chunk.stop = [(begin, chunk.stop - 1)], k
