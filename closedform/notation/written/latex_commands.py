"""Commands, brackets and environments of LaTeX in classed tokens for the grammar."""

from __future__ import annotations

from fractions import Fraction

from lark import Token

from closedform.notation.written.grammar import token
from closedform.notation.written.latex_lexer import Raw, lexed
from closedform.notation.written.latex_numbers import printed_number, scaled
from closedform.notation.written.latex_parts import CLOSING, OPENING, OPERAND_ENDS, LatexParts
from closedform.notation.written.latex_units import unit_text
from closedform.notation.written.macros import (
    BARS,
    BIGS,
    BOLD,
    CALLIGRAPHIC,
    DROPPED,
    FONTS,
    FRACTIONS,
    FUNCTION_WORDS,
    RELATION_SIGNS,
    SEPARATING,
    SIGNS,
    SPACES,
    SWITCHES,
)
from closedform.notation.written.tree import EULER, INFINITY, Literal, Symbol
from closedform.notation.written.words import word_of
from closedform.notation.written.written_errors import (
    StopError,
    UnknownCommandError,
)

__all__ = ["LatexCommands"]

PARTING = frozenset({"COMMA", "SEMI", "ROW_END", "PERIOD", "IMPLIES", "TEXT", "WORD", "REL"})
REFUSED = {
    **dict.fromkeys(("SIrange", "numrange", "qtyrange", "SIlist", "numlist", "qtylist"), "range"),
    **dict.fromkeys(("dots", "ldots", "cdots", "vdots", "ddots", "dotsc", "dotsb"), "dots"),
    **dict.fromkeys(("prod", "binom", "iint", "oint", "iiint", "bigcup"), "sign"),
    **dict.fromkeys(("langle", "rangle", "lfloor", "rfloor", "lceil", "rceil"), "bracket"),
    **dict.fromkeys(("middle", "mathchoice", "multicolumn", "bmod", "pmod", "mod"), "sign"),
}
REASONS = {
    "range": "it is several values; write one number",
    "dots": "something is left out; write it in full",
    "sign": "it has no meaning here; write it in sums, products and functions",
    "bracket": "it is no bracket of this notation; use ( ) or [ ]",
}


class LatexCommands(LatexParts):
    """Reads the raw tokens of one text in full."""

    def braces(self, at: int, end: int, font: str, out: list[Token]) -> int:
        """Add what stands in braces; they are not seen, so they bind nothing."""
        close = self.partners[at]
        if close == at + 1:
            return close + 1
        if self.exponent_of_ten(at, close, out):
            return close + 1
        name, _ = self.nucleus(at, end, font)
        if name is not None:
            return self.named(name, close + 1, end, out)
        inside = self.sequence(at + 1, close, font)
        if close + 1 < end and self.raws[close + 1].kind == "^":
            if any(t.type in ("PLUS", "MINUS", "TIMES", "OVER") for t in inside):
                self.stop(self.raws[close + 1], "set brackets round what has the exponent")
            if len(inside) > 1 and inside[-1].type != "CLOSE":
                first, last = self.raws[at], self.raws[close]
                inside = [
                    token("GROUP_OPEN", "", first.start, first.start),
                    *inside,
                    token("GROUP_CLOSE", "", last.end, last.end),
                ]
        out += inside
        return close + 1

    def exponent_of_ten(self, at: int, close: int, out: list[Token]) -> bool:
        """Read 4.0e{-2} as a number, with its other reading beside it."""
        inside = self.raws[at + 1 : close]
        digits = "".join(raw.text for raw in inside).replace("−", "-")
        if len(out) < 2 or out[-1].value != EULER or out[-2].type != "NUMBER":
            return False
        if out[-2].end_pos is None or not digits.lstrip("+-").isdecimal() or len(digits) > 4:
            return False
        euler, number = out.pop(), out.pop()
        value = scaled(number.value, int(digits), self.raws[close].end)
        new = token("NUMBER", value, value.start, value.end)
        size = Literal(Fraction(abs(int(digits))), start=inside[0].start, end=inside[-1].end)
        literal = token("NUMBER", size, size.start, size.end)
        sign = token("MINUS" if digits[0] == "-" else "PLUS", digits[0], size.start, size.start)
        signs = [sign] if digits[0] in "+-" else []
        self.choices.append(((new,), (number, euler, *signs, literal)))
        out.append(new)
        return True

    # texts and units ---------------------------------------------------------------------

    def unit(self, at: int, end: int, out: list[Token]) -> int:
        """Add the unit that begins at an index, if one does; return the index behind it."""
        before = next((t for t in reversed(out) if t.type != "SPACE"), None)
        if before is None or before.type not in OPERAND_ENDS:
            return at
        apart = out[-1].type == "SPACE"
        if self.raws[at].text in ("Omega", "mu") and not (apart and before.type == "NUMBER"):
            return at
        found, stop = "", at
        index = at
        while index < end:
            raw = self.raws[index]
            if raw.kind == "text" or (raw.kind == "command" and raw.text in FONTS):
                index = self.behind(index, end)
            elif raw.kind == "command" and raw.text in ("Omega", "mu", "%"):
                index += 1
            elif raw.kind in ("^", "_"):
                index = self.argument(index + 1, end, raw)[2]
            elif index > at and raw.text in (",", " ", ";", "cdot", "/", "!", ":"):
                index += 1
                continue
            else:
                break
            text = unit_text(self.raws[at:index])
            if text:
                found, stop = text, index
            elif self.raws[index - 1].kind != "text" and raw.text not in ("mu",):
                break
        if not found:
            return at
        following = self.raws[stop].text if stop < end else ""
        single = self.raws[at].kind == "command" and len(found) == 1
        if before.type != "NUMBER":
            word = found if found.isalnum() else ""
            ends = stop >= end or self.raws[stop].kind in ("row", "&", "}", "text")
            ends = ends or following in (",", ";", ".", "=", "quad", "qquad", "approx", " ", ")")
            if (word and self.names.find(word)) or not (ends or not word):
                return at
        if single and found == "H" and following in ("(", "left"):
            return at
        if found == "d" and stop < end and self.is_letter(stop):
            return at
        if self.raws[at].text in ("Omega", "mu") and self.names.find(self.raws[at].text):
            return at
        out.append(token("UNIT", found, self.raws[at].start, self.raws[stop - 1].end))
        return stop

    def words(self, at: int, end: int, font: str, out: list[Token]) -> int:
        """Add a text: a unit, a word between statements, a name, or a note."""
        stop = self.unit(at, end, out)
        if stop > at:
            return stop
        raw = self.raws[at]
        text = raw.arguments[0].replace("~", " ") if raw.arguments else ""
        if not text.strip():
            out.append(token("SPACE", 1, raw.start, raw.end))
            return at + 1
        bare = text.strip()
        if word := word_of(text):
            out.append(token("WORD", word, raw.start, raw.end))
        elif bare in (",", ";", ".", ":"):
            kinds = {",": "COMMA", ";": "SEMI", ".": "PERIOD", ":": "SEMI"}
            out.append(token(kinds[bare], bare, raw.start, raw.end))
        elif (
            text == bare
            and bare.isalnum()
            and bare[0].isalpha()
            and self.is_name(bare, at, end, out)
        ):
            name, behind = self.only_name(at, at + 1, font), at + 1
            if name is None:
                self.stop(raw, "it is no name; write it as one")
            return self.named(name, behind, end, out)
        elif "\\" in text or "$" in text:
            self.stop(raw, "a text with commands in it is not read; part it from the formula")
        else:
            out.append(token("TEXT", bare, raw.start, raw.end))
        return at + 1

    def is_name(self, word: str, at: int, end: int, out: list[Token]) -> bool:
        """Tell whether a word set as text is part of the formula."""
        if self.names.find(word) or word in FUNCTION_WORDS or len(word) == 1:
            return True
        apart = bool(out) and (
            out[-1].type in PARTING or (out[-1].type == "SPACE" and out[-1].value == 2)
        )
        following = self.raws[at + 1].text if at + 1 < end else ""
        return not apart and following in ("_", "=", "(", "^", "left", "+", "-", "approx")

    # commands ----------------------------------------------------------------------------

    def command(self, at: int, end: int, font: str, out: list[Token]) -> int:
        """Add what a command stands for."""
        raw = self.raws[at]
        name, bounds = raw.text, (raw.start, raw.end)
        if name in SPACES:
            out.append(token("SPACE", SPACES[name], *bounds))
        elif name in SWITCHES:
            out.append(token("SWITCH", SWITCHES[name], *bounds))
        elif name in SIGNS:
            out.append(token(SIGNS[name], name, *bounds))
        elif name in RELATION_SIGNS:
            out.append(token("REL", RELATION_SIGNS[name], *bounds))
        elif name in SEPARATING:
            out.append(token("IMPLIES", name, *bounds))
        elif name in OPENING:
            out.append(token("OPEN", OPENING[name], *bounds))
        elif name in CLOSING:
            out.append(token("CLOSE", CLOSING[name], *bounds))
        elif name in BARS or name == "|":
            kind, side = ("NORM", "") if name == "|" else BARS[name]
            out.append(token(kind, side, *bounds))
        elif name == "in":
            out.append(token("IN", "", *bounds))
        elif name == "infty":
            out.append(token("ATOM", INFINITY, *bounds))
        elif name == "colon":
            out.append(token("COLON", ":", *bounds))
        elif name in ("degree", "textdegree"):
            out.append(token("POSTFIX", "degree", *bounds))
        elif name in DROPPED:
            pass
        elif name in REFUSED:
            self.stop(raw, REASONS[REFUSED[name]])
        else:
            return self.taking(at, end, font, out)
        return at + 1

    def taking(self, at: int, end: int, font: str, out: list[Token]) -> int:
        """Add a command that takes arguments or scripts."""
        raw = self.raws[at]
        name = raw.text
        stop = self.unit(at, end, out) if name in FONTS or name in ("%", "Omega", "mu") else at
        if stop > at:
            return stop
        if name == "left":
            return self.left_right(at, end, font, out)
        if name in BIGS:
            return self.big_bracket(at, end, font, out)
        if name in FRACTIONS:
            return self.fraction_command(at, end, font, out)
        if name == "sqrt":
            return self.root(at, end, font, out)
        if name in ("lim", "sum", "int", "limsup"):
            return self.big_operator(at, end, out)
        if name in FUNCTION_WORDS:
            return self.function(at + 1, end, name, (raw.start, raw.end), out)
        if raw.arguments:
            return self.argumented(at, out)
        if name == "partial" or name == "dd":
            out.append(token("ATOM", Symbol("d"), raw.start, raw.end))
            return at + 1
        if name in ("overset", "stackrel", "underset"):
            _, _, behind = self.argument(at + 1, end, raw)
            low, high, behind = self.argument(behind, end, raw)
            out += self.sequence(low, high, font)
            return behind
        if name in ("underbrace", "overbrace"):
            low, high, behind = self.argument(at + 1, end, raw)
            out += self.sequence(low, high, font)
            return self.scripts(behind, end)[1]
        if name == "not" and at + 1 < end and self.raws[at + 1].text == "=":
            out.append(token("REL", "≠", raw.start, self.raws[at + 1].end))
            return at + 2
        if name in ("mathcal", "mathscr") and (stop := self.transform(at, end, out)) > at:
            return stop
        return self.name_command(at, end, font, out)

    def name_command(self, at: int, end: int, font: str, out: list[Token]) -> int:
        """Add a name that begins with a command: a letter, a font, an accent."""
        raw = self.raws[at]
        found, behind = self.nucleus(at, end, font)
        if found is not None:
            return self.named(found, behind, end, out)
        low_high = self.font_argument(at, end)
        if low_high is None:
            raise StopError(UnknownCommandError, raw.start, raw.end, f"\\{raw.text}")
        low, high, behind, inner = low_high
        out += self.sequence(low, high, inner)
        return behind

    def argumented(self, at: int, out: list[Token]) -> int:
        """Add a command whose argument is no formula."""
        raw = self.raws[at]
        bounds = (raw.start, raw.end)
        match raw.text:
            case "num" | "SI" | "qty" | "ang":
                value, negative = printed_number(raw, raw.arguments[0])
                if negative:
                    out.append(token("MINUS", "-", *bounds))
                out.append(token("NUMBER", value, *bounds))
                if raw.text == "ang":
                    out.append(token("POSTFIX", "degree", *bounds))
                elif raw.text != "num":
                    out.append(token("UNIT", self.unit_of(raw, raw.arguments[1]), *bounds))
            case "si" | "unit":
                out.append(token("UNIT", self.unit_of(raw, raw.arguments[0]), *bounds))
            case "hspace" | "mspace":
                wide = any(size in raw.arguments[0] for size in ("cm", "em", "in", "fill"))
                out.append(token("SPACE", 2 if wide else 1, *bounds))
        return at + 1

    def unit_of(self, raw: Raw, text: str) -> str:
        """Return the unit in \\si and its like."""
        found = unit_text(lexed(text))
        return found or " ".join(text.replace("\\", " ").split())

    def fraction_command(self, at: int, end: int, font: str, out: list[Token]) -> int:
        """Add a fraction."""
        raw = self.raws[at]
        if at + 1 < end and self.raws[at + 1].text == "[":
            at += 3
        low, high, behind = self.argument(at + 1, end, raw)
        below, top, behind = self.argument(behind, end, raw)
        out += self.fraction(raw, (low, high), (below, top), font)
        return behind

    def fraction(
        self, raw: Raw, above: tuple[int, int], below: tuple[int, int], font: str
    ) -> list[Token]:
        """Return the tokens of a fraction."""
        out = [token("FRACTION", "", raw.start, raw.end)]
        for low, high in (above, below):
            self.grouped(low, high, out, font)
        return out

    def root(self, at: int, end: int, font: str, out: list[Token]) -> int:
        """Add a root."""
        raw = self.raws[at]
        out.append(token("ROOT", "", raw.start, raw.end))
        at += 1
        if at < end and self.raws[at].text == "[":
            close = at
            while close < end and self.raws[close].text != "]":
                close += 1
            if close == end:
                self.stop(self.raws[at], "the degree of the root has no end")
            self.grouped(at + 1, close, out, font)
            at = close + 1
        else:
            two = Literal(Fraction(2))
            out.append(token("GROUP_OPEN", "", raw.start, raw.start))
            out.append(token("NUMBER", two, raw.start, raw.end))
            out.append(token("GROUP_CLOSE", "", raw.start, raw.start))
        low, high, behind = self.argument(at, end, raw)
        self.grouped(low, high, out, font)
        return behind

    def big_operator(self, at: int, end: int, out: list[Token]) -> int:
        """Add a limit, a sum or an integral with what stands at it."""
        raw = self.raws[at]
        at += 1
        while (
            at < end and self.raws[at].kind == "command" and self.raws[at].text in DROPPED | {"!"}
        ):
            at += 1
        scripts, at = self.scripts(at, end)
        bounds = (raw.start, raw.end)
        if raw.text == "int":
            if bool(scripts.below) != bool(scripts.above):
                self.stop(raw, "it has one bound; write both or none")
            out.append(token("INTEGRAL_BOUNDS" if scripts.below else "INTEGRAL", "", *bounds))
        elif not scripts.below or (raw.text == "sum") != bool(scripts.above):
            self.stop(raw, "it needs its variable and bounds; write them below and above")
        else:
            out.append(token("SUM_OVER" if raw.text == "sum" else "LIMIT", "", *bounds))
        if scripts.below:
            self.grouped(*scripts.below_at, out)
        if scripts.above:
            self.grouped(*scripts.above_at, out)
        return at

    def transform(self, at: int, end: int, out: list[Token]) -> int:
        """Add the Laplace transform if a calligraphic L stands before a bracket."""
        raw = self.raws[at]
        low, high, behind = self.argument(at + 1, end, raw)
        if [part.text for part in self.raws[low:high]] != ["L"]:
            return at
        scripts, behind = self.scripts(behind, end)
        above = "".join(part.text for part in scripts.above)
        while behind < end and self.raws[behind].text in SPACES | BIGS:
            behind += 1
        opens = behind < end and self.raws[behind].text in ("left", *OPENING)
        if not opens or self.raws[behind].kind == "{" or above not in ("", "-1"):
            return at
        out.append(token("TRANSFORM", above == "-1", raw.start, raw.end))
        return behind

    def font_argument(self, at: int, end: int) -> tuple[int, int, int, str] | None:
        """Return the bounds of the argument of a font, the index behind it, and the font."""
        raw = self.raws[at]
        if raw.text not in FONTS | BOLD | CALLIGRAPHIC:
            return None
        low, high, behind = self.argument(at + 1, end, raw)
        return low, high, behind, "mathbf" if raw.text in BOLD else "mathrm"

    def braced(self, at: int, end: int) -> list[Token]:
        """Return the tokens of a piecewise value behind a brace, if it is one."""
        raise NotImplementedError

    # brackets ----------------------------------------------------------------------------

    def big_bracket(self, at: int, end: int, font: str, out: list[Token]) -> int:
        """Add a bracket whose size is given; the command may say its side."""
        if at + 1 >= end:
            self.stop(self.raws[at], "a bracket follows it")
        bracket, side = self.raws[at + 1], BIGS[self.raws[at].text]
        if bracket.text == ".":
            return at + 2
        if bracket.text in BARS or bracket.text == "|":
            norm = bracket.kind == "command" and bracket.text == "|"
            kind, own = ("NORM", "") if norm else BARS[bracket.text]
            out.append(token(kind, own or side.replace("m", ""), bracket.start, bracket.end))
            return at + 2
        return self.step(at + 1, end, font, out)

    def left_right(self, at: int, end: int, font: str, out: list[Token]) -> int:
        """Add a pair of brackets that grow; a dot is an invisible one."""
        close = self.partners[at]
        left, right = (
            self.raws[at + 1],
            self.raws[close + 1] if close + 1 < end else self.raws[close],
        )
        if close + 1 >= end or at + 1 >= close:
            self.stop(self.raws[at], "a bracket follows \\left and \\right")
        inside = self.sequence(at + 2, close, font)
        brace = left.text in ("{", "lbrace") and right.text == "."
        if brace and (pieces := self.braced(at + 2, close)):
            out += pieces
        elif left.text == "." and right.text in BARS:
            scripts, behind = self.scripts(close + 2, end)
            if not scripts.below:
                self.stop(right, "below the bar there must be a variable and its value")
            out.append(token("GROUP_OPEN", "", left.start, left.start))
            out += inside
            out.append(token("GROUP_CLOSE", "", right.start, right.start))
            self.evaluated(scripts, out)
            return behind
        elif (brace or left.text == ".") and any(t.type == "ROW_END" for t in inside):
            out += inside
        else:
            self.delimiter(left, "l", out)
            out += inside
            self.delimiter(right, "r", out)
        return close + 2

    def delimiter(self, raw: Raw, side: str, out: list[Token]) -> None:
        """Add one bracket of a pair that grows."""
        norm = raw.kind == "command" and raw.text == "|"
        if norm or raw.text in BARS:
            out.append(token("NORM" if norm else BARS[raw.text][0], side, raw.start, raw.end))
        elif side == "l" and raw.text in OPENING:
            out.append(token("OPEN", OPENING[raw.text], raw.start, raw.end))
        elif side == "r" and raw.text in CLOSING:
            out.append(token("CLOSE", CLOSING[raw.text], raw.start, raw.end))
        elif raw.text != ".":
            self.stop(raw, "it is no bracket of this notation; use ( ) or [ ]")
