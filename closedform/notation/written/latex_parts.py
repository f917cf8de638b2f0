"""LaTeX in classed tokens for the grammar: names, numbers, scripts, brackets and macros."""

from __future__ import annotations

from lark import Token

from closedform.notation.written.grammar import token
from closedform.notation.written.latex_lexer import Raw
from closedform.notation.written.latex_names import Name
from closedform.notation.written.latex_numbers import number_at
from closedform.notation.written.latex_scripted import LatexScripted
from closedform.notation.written.latex_scripts import flattened, mark_of
from closedform.notation.written.macros import (
    BARS,
    FUNCTION_WORDS,
    RELATION_SIGNS,
    SIGNS,
    SPACES,
)
from closedform.notation.written.names import CONSTANTS
from closedform.notation.written.tree import (
    EULER,
    INFINITY,
    Symbol,
)
from closedform.notation.written.words import word_of

__all__ = ["LatexParts"]

LONGEST_RUN = 60  # letters side by side that can be one name
OPENING = {"(": "(", "[": "[", "lbrace": "{", "{": "{", "lbrack": "[", "lparen": "("}
CLOSING = {")": "(", "]": "[", "rbrace": "{", "}": "{", "rbrack": "[", "rparen": "("}

MOST_ORDER_DIGITS = 3
"""Digits of the order of a derivative; what has more is a name that nothing explains."""


class LatexParts(LatexScripted):
    """Reads the raw tokens of one text."""

    def braces(self, at: int, end: int, font: str, out: list[Token]) -> int:
        """Add what stands in braces."""
        raise NotImplementedError

    def words(self, at: int, end: int, font: str, out: list[Token]) -> int:
        """Add a text."""
        raise NotImplementedError

    def command(self, at: int, end: int, font: str, out: list[Token]) -> int:
        """Add what a command stands for."""
        raise NotImplementedError

    def environment(self, at: int, end: int, out: list[Token]) -> int:
        """Add an environment."""
        raise NotImplementedError

    def fraction(
        self, raw: Raw, above: tuple[int, int], below: tuple[int, int], font: str
    ) -> list[Token]:
        """Return the tokens of a fraction."""
        raise NotImplementedError

    def sequence(self, at: int, end: int, font: str = "") -> list[Token]:
        """Return the classed tokens of the raw tokens between two indices."""
        out: list[Token] = []
        for index in range(at, end):
            raw = self.raws[index]
            if raw.kind == "command" and raw.text in ("over", "atop", "choose", "above", "brace"):
                if raw.text != "over":
                    self.stop(raw, "write it as a fraction or in words")
                if self.level(at, index):
                    rest = [k for k in range(index + 1, end) if self.raws[k].text == "over"]
                    if any(self.level(index + 1, k) for k in rest[:1]):
                        self.stop(raw, "there are two in one group; write them as fractions")
                    return self.fraction(raw, (at, index), (index + 1, end), font)
        while at < end:
            at = self.step(at, end, font, out)
            if out and out[-1].type == "SWITCH":
                font = str(out.pop().value)
        return out

    def step(self, at: int, end: int, font: str, out: list[Token]) -> int:
        """Add the tokens of the thing at an index, and return the index behind it."""
        raw = self.raws[at]
        match raw.kind:
            case "digit":
                return self.number(at, end, out)
            case "char" if raw.text == "." and at + 1 < end and self.raws[at + 1].kind == "digit":
                return self.number(at, end, out)
            case "letter":
                return self.letters(at, end, font, out)
            case "{":
                return self.braces(at, end, font, out)
            case "'" if out and out[-1].type == "MATRIX_CLOSE":
                out.append(token("POSTFIX", "transpose", raw.start, raw.end))
            case "^" | "_" | "'":
                scripts, at = self.scripts(at, end)
                self.scripted(scripts, raw, out)
                return at
            case "&":
                out.append(token("COLUMN", "&", raw.start, raw.end))
            case "row":
                out.append(token("ROW_END", "\\\\", raw.start, raw.end))
            case "text":
                return self.words(at, end, font, out)
            case "begin":
                return self.environment(at, end, out)
            case "command":
                return self.command(at, end, font, out)
            case _:
                self.sign(raw, out)
        return at + 1

    def sign(self, raw: Raw, out: list[Token]) -> None:
        """Add the token of a character that is an operator, a bracket or punctuation."""
        sign, bounds = raw.text, (raw.start, raw.end)
        if sign in SIGNS:
            out.append(token(SIGNS[sign], sign, *bounds))
        elif sign in RELATION_SIGNS:
            if sign == "=" and out and out[-1].type == "COLON":
                out.pop()
            out.append(token("REL", RELATION_SIGNS[sign], *bounds))
        elif sign in OPENING:
            out.append(token("OPEN", OPENING[sign], *bounds))
        elif sign in CLOSING:
            out.append(token("CLOSE", CLOSING[sign], *bounds))
        elif sign in BARS:
            kind, side = BARS[sign]
            out.append(token(kind, side, *bounds))
        elif sign == "!":
            out.append(token("POSTFIX", "factorial", *bounds))
        elif sign == "°":
            out.append(token("POSTFIX", "degree", *bounds))
        elif sign == "∞":
            out.append(token("ATOM", INFINITY, *bounds))
        elif sign in ",;.:":
            kinds = {",": "COMMA", ";": "SEMI", ".": "PERIOD", ":": "COLON"}
            out.append(token(kinds[sign], sign, *bounds))
        elif sign.isspace() or sign in "\u200b\u00ad":
            pass
        else:
            self.stop(raw, "no formula has this sign; write what it stands for")

    def number(self, at: int, end: int, out: list[Token]) -> int:
        """Add a number."""
        found, at = number_at(self.raws, at, end)
        out.append(token("NUMBER", found, found.start, found.end))
        return at

    def letters(self, at: int, end: int, font: str, out: list[Token]) -> int:
        """Add the longest name that a run of letters begins with."""
        raws, stop = self.raws, at
        while (
            stop < min(end, at + LONGEST_RUN)
            and raws[stop].kind in ("letter", "digit")
            and (stop == at or raws[stop].start == raws[stop - 1].end)
        ):
            stop += 1
        run = "".join(raw.text for raw in raws[at:stop])
        word = run.rstrip("0123456789")
        before = at > 0 and raws[at - 1].kind == "letter" and raws[at - 1].end == raws[at].start
        scripts, _behind = self.scripts(stop, end)
        if scripts.below and len(run) > 1 and self.names.find(f"{run}_{flattened(scripts.below)}"):
            length = len(run)
        elif (
            not before
            and font != "mathbf"
            and len(word) > 1
            and self.function_word(word, stop, end)
        ):
            bounds = (raws[at].start, raws[at + len(word) - 1].end)
            return self.function(at + len(word), end, word, bounds, out)
        elif self.is_acronym(at, stop, end):
            length = len(run)
        else:
            length = len(self.names.longest(run))
            if length < len(run) or not scripts.below:
                length = self.whole(run, length, upright=font == "mathrm")
            else:
                length = 1 if font != "mathrm" else len(word)
        stop = at + max(length, 1)
        name = Name(
            run[: max(length, 1)],
            raws[at].start,
            raws[stop - 1].end,
            bold=font == "mathbf",
            upright=font == "mathrm",
        )
        return self.named(name, stop, end, out)

    def whole(self, run: str, length: int, *, upright: bool) -> int:
        """Return how many letters of a run are one name when so many are a declared one."""
        if length or not upright:
            return length or 1
        return len(run.rstrip("0123456789"))

    def function_word(self, word: str, stop: int, end: int) -> bool:
        """Tell whether a run of italic letters is the name of a function after all."""
        if word not in FUNCTION_WORDS or self.names.find(word) is not None or len(word) < 2:
            return False
        following = self.raws[stop] if stop < end else None
        if len(word) > 2 and word not in ("min", "max", "arg", "inv", "adj"):
            return following is not None
        opens = following is not None and following.text in ("(", "[", "{", "left")
        return word in ("ln", "lg", "Re", "Im", "tr", "tg", "adj", "max", "min", "arg") and (
            opens or word in ("ln", "lg")
        )

    def named(self, name: Name, at: int, end: int, out: list[Token]) -> int:
        """Add a name with the scripts at an index, as whatever it stands for."""
        known = self.names.find
        if name.upright and name.spelling in FUNCTION_WORDS and known(name.spelling) is None:
            return self.function(at, end, name.spelling, (name.start, name.end), out)
        worded = name.upright and len(name.spelling) > 1 and known(name.spelling) is None
        if worded and (word := word_of(name.spelling)) and not self.scripts(at, end)[0].end:
            out.append(token("WORD", word, name.start, name.end))
            return at
        if name.spelling == "Delta" and known("Delta") is None and at < end:
            following, behind = self.nucleus(at, end) if self.is_letter(at) else (None, at)
            if following is not None and not following.spelling.startswith("Delta"):
                joined = Name("Delta" + following.spelling, name.start, following.end)
                return self.named(joined, behind, end, out)
        scripts, at = self.scripts(at, end)
        spelling = name.spelling
        if scripts.below:
            spelling = f"{spelling}_{flattened(scripts.below)}"
        order = name.order + scripts.primes
        if name.order and (dotted := self.names.dotted(spelling, name.order, bold=name.bold)):
            spelling, order = dotted, scripts.primes
        italic = known("T") is None or name.bold or known(spelling) in self.names.declared.matrices
        mark = mark_of(scripts.above, transposed=italic)
        upright = CONSTANTS.get(spelling) if self.upright(name, spelling) else None
        euler = (upright or self.names.constant(spelling)) == EULER
        goes_on = at < end and self.raws[at].kind in ("letter", "digit")
        if goes_on and mark in ("plus", "minus") and scripts.bare:
            self.stop(scripts.above[0], "write the whole exponent in braces")
        bounds = (name.start, max(name.end, scripts.end))
        if euler and scripts.above and mark != "star":
            if scripts.bare and scripts.above[0].text in "+-":
                self.stop(scripts.above[0], "write the whole exponent in braces")
            out.append(token("EULER", EULER, name.start, name.end))
            self.power(scripts, out)
            return at
        spelling, primes, mark = self.marked(spelling, mark, bold=name.bold)
        order += primes
        value = upright or self.names.operand(spelling, bold=name.bold, order=order)
        if isinstance(value, Symbol) and order == 0:
            value = self.names.identity(spelling, bold=name.bold) or value
        out.append(token("ATOM", value, *bounds))
        if mark and mark != "done":
            self.postfix(mark, scripts, out)
        elif scripts.above and not mark:
            self.power(scripts, out)
        return at

    def marked(self, spelling: str, mark: str, *, bold: bool) -> tuple[str, int, str]:
        """Return a name with a mark above it, how many primes that are, and the mark if it stays.

        x^{(2)} is a derivative of a declared function of time, else a name.
        """
        if mark in ("star", "plus", "minus"):
            return f"{spelling}_{mark}", 0, "done"
        if mark.startswith("word "):
            return f"{spelling}_{mark[5:]}", 0, "done"
        if mark.startswith("primes"):
            return spelling, int(mark[7:]), "done"
        if not mark.startswith("("):
            return spelling, 0, mark
        inside = mark[1:-1]
        declared = self.names.find(spelling, bold=bold)
        order = inside.isdecimal() and len(inside) <= MOST_ORDER_DIGITS
        if order and declared is not None and self.names.varies(declared):
            return spelling, int(inside), "done"
        return f"{spelling}_{inside}", 0, "done"

    def function(
        self, at: int, end: int, word: str, bounds: tuple[int, int], out: list[Token]
    ) -> int:
        """Add a function with its scripts; braces behind it hold its argument."""
        name = FUNCTION_WORDS[word]
        scripts, at = self.scripts(at, end)
        if scripts.below:
            base = flattened(scripts.below)
            if name != "ln" or base not in ("10", "e"):
                self.stop(scripts.below[0], f"{word} has no subscript; write it out")
            name = "log10" if base == "10" else "ln"
        elif word == "log":
            self.logs.append(bounds)
        if scripts.primes:
            self.stop(self.raws[at - 1], "write out the derivative of the function")
        out.append(token("FUNCTION", name, *bounds))
        if scripts.above:
            self.power(scripts, out)
        while at < end and self.raws[at].kind == "command" and self.raws[at].text in SPACES:
            at += 1
        if at < end and self.raws[at].kind == "{":
            close = self.partners[at]
            inside = self.sequence(at + 1, close)
            if len(inside) > 1 and inside[0].type != "OPEN":
                self.grouped(at + 1, close, out)
            else:
                out += inside
            return close + 1
        return at
