"""Places in typed text that are read in two ways: slashes, exponents, loose arguments."""

from __future__ import annotations

from collections.abc import Iterator

from lark import Token

from closedform.notation.written.grammar import token
from closedform.notation.written.tree import EULER, Declared, Symbol
from closedform.notation.written.typed_brackets import Brackets, Steps
from closedform.notation.written.typed_places import SIGNED, Signs
from closedform.notation.written.typed_scanner import StrayError
from closedform.notation.written.typed_signs import spelled_out
from closedform.notation.written.typed_words import STEPS

__all__ = ["Doubtful"]

PHASES = frozenset({"phi", "varphi", "theta", "psi", "alpha", "beta", "delta", "phi_0", "phi0"})
"""Names of phase angles: behind a plus sign one may belong to the argument before."""


class Doubtful(Brackets):
    """Gives the tokens of what people read in two ways, and notes each place."""

    def __init__(self, signs: Signs, declared: Declared) -> None:
        super().__init__(signs)
        self.declared = declared
        self.time = Symbol(declared.time)

    def _group(self, k: int, stop: int) -> Iterator[Token]:
        first, last = self.signs.all[k].start, self.signs.all[stop - 1].end
        yield token("GROUP_OPEN", "{", first, first)
        yield from self.tokens(k, stop)
        yield token("GROUP_CLOSE", "}", last, last)

    def _stray(self, k: int, why: str) -> StrayError:
        return StrayError(self.signs.all[k].start, self.signs.inside(k, k + 1), why)

    def _euler(self, k: int, stop: int) -> Steps:
        sign = self.signs.all[k]
        raised = self.signs.kind(k + 1, stop) == "POWER"
        yield token("EULER" if raised else "ATOM", EULER, sign.start, sign.end)
        return k + 1

    def _power(self, k: int, stop: int) -> Steps:
        """Yield an exponent; ^T is a transposition, and what was typed without a gap is one."""
        sign = self.signs.all[k]
        end = self.signs.exponent_end(k + 1, stop)
        raised = self.signs.inside(k + 1, end).strip("{}() ")
        listed = self.signs.kind(k - 1, stop) == "CLOSE" and self.is_listing(k - 1)
        if raised in ("T", "t", "⊤") and (listed or (raised != "t" and self._is_free("T"))):
            if not (listed and k - 1 in self.columns):
                yield token("POSTFIX", "transpose", sign.start, self.signs.all[end - 1].end)
            return end
        yield token("POWER", "^", sign.start, sign.end)
        if end == k + 1:
            return end
        words = {self.signs.all[m].word for m in range(k + 1, end)}
        tail = self._tail(k, end, stop)
        if tail > end:
            minus = self.signs.kind(k + 1, stop) in SIGNED
            text, rest = self.signs.inside(k + 1, end), self.signs.inside(k + 1, tail)
            ways = [f"e^({text})*…", f"e^({rest})"]
            chosen, other = ways[::-1] if minus else ways
            if self.signs.doubt(k, tail, chosen, other) != minus:
                end = tail
                words = {0}
        if self.signs.kind(k + 1, stop) == "OPEN" or words == {-1}:
            yield from self.tokens(k + 1, end)
        else:
            yield from self._group(k + 1, end)
        return end

    def _is_free(self, name: str) -> bool:
        return name not in self.declared.names

    def _tail(self, k: int, end: int, stop: int) -> int:
        """Return where a tight product ends that begins with the number in an exponent of e."""
        base = self.signs.kind(k - 1, stop) == "EULER"
        if not (base and self.signs.kind(end - 1, stop) == "NUMBER"):
            return end
        while self.signs.kind(end, stop) in ("ATOM", "NUMBER") and not self.signs.all[end].spaced:
            end = self.signs.factor_end(end, stop)
        return end

    def _over(self, k: int, stop: int) -> Steps:
        """Yield a slash; where the denominator goes on without an operator it is doubtful."""
        sign = self.signs.all[k]
        yield token("OVER", "/", sign.start, sign.end)
        begin = k + 1
        while self.signs.kind(begin, stop) in SIGNED:
            begin += 1
        if not self.signs.begins_factor(begin, stop):
            return k + 1
        first = tight = self.signs.factor_end(begin, stop)
        while self._is_tight(tight, stop):
            tight = self.signs.factor_end(tight, stop)
        whole = tight
        while self.signs.begins_factor(whole, stop):
            whole = self.signs.factor_end(whole, stop)
        if whole == first:
            return k + 1
        numbers = (
            self.signs.kind(k - 1, stop) == "NUMBER" and self.signs.kind(begin, stop) == "NUMBER"
        )
        closed = tight > first and not numbers
        end = tight if tight > first else whole
        text = self.signs.inside(begin, end)
        head = self.signs.inside(begin, first)
        ways = [f"…/({text})", f"(…/{head})*…"]
        chosen, other = ways if closed else ways[::-1]
        if self.signs.doubt(k, end, chosen, other) != closed:
            yield from self.tokens(k + 1, begin)
            yield from self._group(begin, end)
            return end
        return k + 1

    def _is_tight(self, k: int, stop: int) -> bool:
        return self.signs.kind(k, stop) in ("ATOM", "NUMBER") and not self.signs.all[k].spaced

    def _function(self, k: int, stop: int) -> Steps:
        """Yield a function; where its argument has no brackets, its end may be doubtful."""
        sign, after = self.signs.all[k], k + 1
        bracket = self.signs.kind(after, stop) == "OPEN"
        if sign.value == "exp" and bracket:
            yield from self._exponential(k)
            return self.signs.pairs[after] + 1
        if bracket and sign.value in ("step", "delta") and self._is_letter_of(k, after):
            name = Symbol(self._spelled(k))
            yield token("ATOM", name, sign.start, sign.end)
            return after
        yield token("FUNCTION", sign.value, sign.start, sign.end)
        while self.signs.kind(after, stop) == "POWER":
            end = self.signs.exponent_end(after + 1, stop)
            yield token("POWER", "^", sign.end, sign.end)
            yield from self.tokens(after + 1, end)
            after = end
        if self.signs.kind(after, stop) == "OPEN":
            close = self.signs.pairs[after]
            if self.signs.all[after].value != "[" or not self.is_listing(close):
                yield from self._arguments(after, close)
                return close + 1
            return after
        return (yield from self._loose_argument(k, after, stop))

    def _exponential(self, k: int) -> Iterator[Token]:
        """Yield exp(..) as a power of e, in a group: an exponent behind it is that of the whole."""
        sign, end = self.signs.all[k], self.signs.pairs[k + 1] + 1
        raised = self.signs.kind(end, len(self.signs.all)) == "POWER"
        if raised:
            yield token("GROUP_OPEN", "{", sign.start, sign.start)
        yield token("EULER", EULER, sign.start, sign.end)
        yield token("POWER", "^", sign.end, sign.end)
        yield from self.tokens(k + 1, end)
        if raised:
            last = self.signs.all[end - 1].end
            yield token("GROUP_CLOSE", "}", last, last)

    def _is_letter_of(self, k: int, after: int) -> bool:
        """Whether a letter for the unit step or impulse stands before something without time."""
        inside = self.signs.all[after + 1 : self.signs.pairs[after]]
        word = self._spelled(k)
        return word in STEPS | {"delta"} and all(part.value != self.time for part in inside)

    def _spelled(self, k: int) -> str:
        return spelled_out(self.signs.inside(k, k + 1))[0]

    def _loose_argument(self, k: int, begin: int, stop: int) -> Steps:
        end = self.signs.argument_end(begin, stop)
        if end == begin:
            raise self._stray(k, "a function needs its argument; put it in brackets behind it")
        bracket = next((m for m in range(begin + 1, end) if self._is_factor_bracket(m)), None)
        text = self.signs.inside(k, end)
        kind = self.signs.kind(end, stop)
        if bracket is not None and self.signs.doubt(
            k, end, text, f"{self.signs.inside(k, bracket)} (…)"
        ):
            yield from self.tokens(begin, bracket)
            place = self.signs.all[bracket].start
            yield token("ARGUMENT_END", "", place, place)
            return bracket
        if bracket is None and self._goes_on(kind, end, stop):
            further = self.signs.factor_end(end + (kind != "EULER"), stop)
            name = self.signs.inside(k, k + 1)
            other = f"{name}({self.signs.inside(begin, further)})"
            if self.signs.doubt(k, further, f"{name}({self.signs.inside(begin, end)})…", other):
                yield from self._group(begin, further)
                return further
        yield from self.tokens(begin, end)
        return end

    def _is_factor_bracket(self, m: int) -> bool:
        return self.signs.all[m].kind == "OPEN" and self.signs.all[m - 1].kind in ("ATOM", "NUMBER")

    def _goes_on(self, kind: str, end: int, stop: int) -> bool:
        """Whether people may mean an argument without brackets to go on behind its end."""
        if kind in ("EULER", "OVER"):
            return True
        name = getattr(self.signs.all[end + 1].value, "name", "") if end + 1 < stop else ""
        return kind in ("PLUS", "MINUS") and name in PHASES
