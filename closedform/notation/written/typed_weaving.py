"""From the signs of typed text to the tokens of the grammar."""

from __future__ import annotations

from collections.abc import Iterator
from fractions import Fraction

from lark import Token

from closedform.notation.written.grammar import token
from closedform.notation.written.latex_units import is_unit
from closedform.notation.written.tree import (
    EULER,
    Identity,
    Jet,
    Literal,
    Symbol,
)
from closedform.notation.written.typed_brackets import Steps
from closedform.notation.written.typed_doubts import Doubtful
from closedform.notation.written.typed_places import SIGNED

__all__ = ["Weaver"]


class Weaver(Doubtful):
    """Gives the tokens of a range of lexemes; adds the brackets that fix how it is read."""

    def tokens(self, k: int, stop: int) -> Iterator[Token]:
        """Yield the tokens of the lexemes from `k` to before `stop`.

        Raises:  StrayError at a lexeme that can stand for nothing there.
        """
        while k < stop:
            sign = self.signs.all[k]
            if sign.kind == "TEXT":
                raise self._stray(k, "a name has Latin or Greek letters")
            if sign.kind == "NEWLINE":
                k += 1
                continue
            step = getattr(self, f"_{sign.kind.lower()}", None)
            if step is None:
                yield token(sign.kind, sign.value, sign.start, sign.end)
                k += 1
            else:
                k = yield from step(k, stop)

    def _atom(self, k: int, stop: int) -> Steps:
        """Yield a name with its primes and, if it is a function of time, its argument."""
        special = self._special(k, stop)
        if special is not None:
            return (yield from special)
        sign, node, after = self.signs.all[k], self.signs.all[k].value, k + 1
        if node == Symbol("e") and self.signs.doubt(k, after, "the name e", "Euler's number", "e"):
            node = EULER
        primes = 0
        if self.signs.kind(after, stop) == "PRIMES":
            primes, after = int(str(self.signs.all[after].value)), after + 1
        if primes and self._is_matrix_name(node):
            yield token("ATOM", node, sign.start, sign.end)
            yield token("POSTFIX", "transpose", sign.end, sign.end + primes)
            return after
        if primes:
            node = self._differentiated(k, node, primes)
        end = self.signs.all[after - 1].end
        if self._is_call(k, after, stop, node):
            name = node if isinstance(node, Jet) else Jet(getattr(node, "name", ""), 0)
            yield token("CALL", Jet(name.name, name.order, self.time), sign.start, end)
            close = self.signs.pairs[after]
            if self._has_unit(after, close):
                yield from self._number_alone(after, close)
            else:
                yield from self._arguments(after, close)
            return close + 1
        yield token("ATOM", node, sign.start, end)
        return after

    def _has_unit(self, k: int, close: int) -> bool:
        """Whether an instant in brackets is a number with a unit: x(0.1 s)."""
        names = {getattr(sign.value, "name", "") for sign in self.signs.all[k + 2 : close]}
        number = self.signs.kind(k + 1, close) == "NUMBER" and close > k + 2
        unit = is_unit(self.signs.inside(k + 2, close))
        return number and unit and not names & {*self.declared.names, self.declared.time}

    def _number_alone(self, k: int, close: int) -> Iterator[Token]:
        for sign in (self.signs.all[k], self.signs.all[k + 1], self.signs.all[close]):
            yield token(sign.kind, sign.value, sign.start, sign.end)

    def _special(self, k: int, stop: int) -> Steps | None:
        """Return the steps of a word with a grammar of its own: lim, L{..}, eye(2), piecewise."""
        node = self.signs.all[k].value
        if not isinstance(node, Symbol) or node.name in self.declared.names:
            return None
        if (limit := self._limit_end(k, stop)) is not None:
            return self._limit(k, limit)
        if (transform := self._transform(k, stop)) is not None:
            return self._just("TRANSFORM", transform[0], k, transform[1])
        if self.signs.kind(k + 1, stop) != "OPEN":
            return None
        close = self.signs.pairs[k + 1]
        if node.name in ("piecewise", "Piecewise", "cases"):
            return self._pieces(k, close)
        listed = self.signs.all[k + 2].value == "[" and self.signs.pairs.get(k + 2) == close - 1
        if node.name in ("Matrix", "matrix", "array", "mat") and listed:
            return self._inside(k + 2, close)
        size = self.signs.all[k + 2].value
        if node.name == "eye" and isinstance(size, Literal) and close == k + 3:
            return self._just("ATOM", Identity(int(size.value)), k, close + 1)
        return None

    def _just(self, kind: str, value: object, k: int, after: int) -> Steps:
        yield token(kind, value, self.signs.all[k].start, self.signs.all[after - 1].end)
        return after

    def _inside(self, k: int, close: int) -> Steps:
        yield from self.tokens(k, close)
        return close + 1

    def _pieces(self, k: int, close: int) -> Steps:
        yield from self._cases(k + 2, close)
        return close + 1

    def _differentiated(self, k: int, node: object, primes: int) -> Jet:
        """Return a name with primes as a derivative; one that is not declared varies."""
        if isinstance(node, Jet):
            return Jet(node.name, node.order + primes)
        free = isinstance(node, Symbol) and node.name not in self.declared.names
        if not isinstance(node, Symbol) or not free:
            raise self._stray(k, "a prime is the derivative of a function of time; this is none")
        return Jet(node.name, primes)

    def _is_matrix_name(self, node: object) -> bool:
        if not isinstance(node, Symbol):
            return False
        free = node.name not in self.declared.names and len(node.name) == 1
        capital = node.name[0].isupper() and (free or node.name in self.declared.parameters)
        return node.name in self.declared.matrices or capital

    def _is_call(self, k: int, after: int, stop: int, node: object) -> bool:
        """Whether a bracket behind a name holds an instant, and is no factor."""
        if self.signs.kind(after, stop) != "OPEN":
            return False
        inside = self.signs.all[after + 1 : self.signs.pairs[after]]
        simple = len(inside) == 1 and (inside[0].kind == "NUMBER" or inside[0].value == self.time)
        if isinstance(node, Jet):
            return simple or not self.signs.all[after].spaced
        if not isinstance(node, Symbol) or node.name in self.declared.names:
            return False
        if self.signs.all[k].word >= 0 or self.signs.all[after].spaced:
            return False
        first = [inside[0].value, inside[0].kind] if inside else [None, ""]
        delayed = first[0] == self.time and len(inside) == 3 and inside[1].kind in SIGNED
        return simple or delayed or (len(inside) == 1 and first[0] == Symbol("s"))

    def _inner(self, k: int, stop: int) -> Steps:  # noqa: ARG002  each step has both bounds
        sign = self.signs.all[k]
        yield token("REL", sign.value, sign.start, sign.end)
        return k + 1

    def _number(self, k: int, stop: int) -> Steps:
        """Yield a number, the unit step 1(t) or an angle in degrees."""
        sign = self.signs.all[k]
        before = self.signs.kind(k - 1, stop)
        bracket = self.signs.kind(k + 1, stop) == "OPEN" and not self.signs.all[k + 1].spaced
        step = sign.value == Literal(Fraction(1)) and bracket and before not in ("ATOM", "CLOSE")
        if step and self.signs.all[k + 2].value == self.time and before != "OVER":
            yield token("FUNCTION", "step", sign.start, sign.end)
            return k + 1
        yield token("NUMBER", sign.value, sign.start, sign.end)
        after = self.signs.all[k + 1].value if k + 1 < stop else None
        if isinstance(after, Symbol) and after.name not in self.declared.names:
            if after.name in ("deg", "degree", "degrees"):
                yield token("POSTFIX", "degree", sign.end, self.signs.all[k + 1].end)
                return k + 2
            if after.name == "rad":
                return k + 2
        return k + 1

    def _radical(self, k: int, stop: int) -> Steps:
        sign = self.signs.all[k]
        if not self.signs.begins_factor(k + 1, stop):
            raise self._stray(k, "a root needs what it is taken of")
        end = self.signs.pairs[k + 1] + 1 if k + 1 in self.signs.pairs else k + 2
        yield token("ROOT", "√", sign.start, sign.end)
        yield token("GROUP_OPEN", "{", sign.start, sign.start)
        yield token("NUMBER", Literal(Fraction(int(str(sign.value)))), sign.start, sign.end)
        yield token("GROUP_CLOSE", "}", sign.end, sign.end)
        yield from self._group(k + 1, end)
        return end

    def _limit_end(self, k: int, stop: int) -> int | None:
        node = self.signs.all[k].value
        if not isinstance(node, Symbol) or node.name not in ("lim", "limit", "lim_"):
            return None
        k += 1
        k += self.signs.kind(k, stop) == "LOW"
        if self.signs.kind(k, stop) == "OPEN":
            return self.signs.pairs[k] + 1
        while k < stop and self.signs.all[k].kind not in ("REL", "INNER"):
            k += 1
        return self.signs.exponent_end(k + 1, stop) if k < stop else None

    def _limit(self, k: int, end: int) -> Steps:
        sign = self.signs.all[k]
        begin = k + 1 + (self.signs.kind(k + 1, end) == "LOW")
        yield token("LIMIT", "lim", sign.start, sign.end)
        if self.signs.kind(begin, end) == "OPEN":
            yield from self._group(begin + 1, end - 1)
        else:
            yield from self._group(begin, end)
        return end

    def _is_brace(self, k: int, stop: int) -> bool:
        return self.signs.kind(k, stop) == "OPEN" and self.signs.all[k].value in ("{", "[")

    def _transform(self, k: int, stop: int) -> tuple[bool, int] | None:
        """Return whether a transform goes back and where its bracket is; None if it is none."""
        word = self.signs.inside(k, k + 1)
        if not self._is_free(word):
            return None
        if word in ("laplace", "inverse_laplace", "ilaplace"):
            return word != "laplace", k + 1
        if word not in ("L", "ℒ"):
            return None
        if self.signs.kind(k + 1, stop) == "POWER":
            end = self.signs.exponent_end(k + 2, stop)
            back = self.signs.inside(k + 2, end).strip("{}()⁻¹") in ("-1", "−1", "")
            braces = self._is_brace(end, stop)
            return (True, end) if back and braces else None
        braces = self._is_brace(k + 1, stop)
        return (False, k + 1) if braces else None

    def _bar(self, k: int, stop: int) -> Steps:
        """Yield a bar: of an absolute value, or behind what is taken at a value."""
        sign, other = self.signs.all[k], self.signs.pairs.get(k)
        if other is not None:
            side = "OPEN" if other > k else "CLOSE"
            if sign.kind == "BAR" and self._holds_matrix(min(k, other), max(k, other)):
                if side == "OPEN":
                    yield token("FUNCTION", "det", sign.start, sign.start)
                yield token(side, "(", sign.start, sign.end)
                return k + 1
            kind = "NORM" if sign.kind == "DOUBLE_BAR" else "BAR"
            yield token(f"{kind}_{side}", sign.value, sign.start, sign.end)
            return k + 1
        begin = k + 1 + (self.signs.kind(k + 1, stop) == "LOW")
        yield token("EVALUATED", self.declared.time, sign.start, sign.end)
        if self.signs.kind(begin, stop) == "OPEN":
            end = self.signs.pairs[begin] + 1
            yield from self._group(begin + 1, end - 1)
            return end
        equal = begin
        while equal < stop and self.signs.all[equal].kind not in ("REL", "INNER"):
            equal += 1
        end = self.signs.exponent_end(equal + 1, stop) if equal < stop else stop
        if end > stop or begin == stop:
            raise self._stray(k, "behind a bar there must be a variable and its value: |_{t=0}")
        yield from self._group(begin, end)
        return end

    def _holds_matrix(self, k: int, close: int) -> bool:
        """Whether between two bars there is a matrix: then they mean the determinant."""
        inside = self.signs.all[k + 1 : close]
        unit = any(isinstance(sign.value, Identity) for sign in inside)
        whole = self.signs.pairs.get(k + 1) == close - 1 and inside[0].kind == "OPEN"
        return unit or (whole and self._shape(k + 1) in ("rows", "nested"))

    _double_bar = _bar
