"""Commands, brackets and environments of LaTeX in classed tokens for the grammar."""

from __future__ import annotations

from fractions import Fraction

from lark import Token

from closedform.notation.written.grammar import token
from closedform.notation.written.latex_annotated import LatexAnnotated
from closedform.notation.written.latex_lexer import Raw
from closedform.notation.written.latex_parts import CLOSING, OPENING
from closedform.notation.written.latex_texts import UNIT_COMMANDS
from closedform.notation.written.macros import (
    BARS,
    BIGS,
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
from closedform.notation.written.tree import INFINITY, Literal, Symbol
from closedform.notation.written.written_errors import (
    StopError,
    UnknownCommandError,
)

__all__ = ["LatexCommands"]

UNIT_STARTS = FONTS | FRACTIONS | UNIT_COMMANDS
REFUSED = {
    **dict.fromkeys(("SIrange", "numrange", "qtyrange", "SIlist", "numlist", "qtylist"), "range"),
    **dict.fromkeys(("dots", "ldots", "cdots", "vdots", "ddots", "dotsc", "dotsb"), "dots"),
    **dict.fromkeys(("prod", "binom", "iint", "oint", "iiint", "bigcup"), "sign"),
    **dict.fromkeys(("langle", "rangle", "lfloor", "rfloor", "lceil", "rceil"), "bracket"),
    **dict.fromkeys(("mathchoice", "multicolumn", "bmod", "pmod", "mod"), "sign"),
}
REASONS = {
    "range": "it is several values; write one number",
    "dots": "something is left out; write it in full",
    "sign": "it has no meaning here; write it in sums, products and functions",
    "bracket": "it is no bracket of this notation; use ( ) or [ ]",
}


TOKENS: dict[str, tuple[str, object]] = {
    **{name: ("SPACE", width) for name, width in SPACES.items()},
    **{name: ("SWITCH", font) for name, font in SWITCHES.items()},
    **{name: (kind, name) for name, kind in SIGNS.items()},
    **{name: ("REL", sign) for name, sign in RELATION_SIGNS.items()},
    **{name: ("IMPLIES", name) for name in SEPARATING},
    **{name: ("OPEN", bracket) for name, bracket in OPENING.items()},
    **{name: ("CLOSE", bracket) for name, bracket in CLOSING.items()},
    **BARS,
    **dict.fromkeys(("degree", "textdegree"), ("POSTFIX", "degree")),
    **dict.fromkeys(("partial", "dd"), ("ATOM", Symbol("d"))),
    "|": ("NORM", ""),
    "in": ("IN", ""),
    "infty": ("ATOM", INFINITY),
    "colon": ("COLON", ":"),
}
"""Commands that are one token."""


class LatexCommands(LatexAnnotated):
    """Reads the raw tokens of one text in full."""

    def command(self, at: int, end: int, font: str, out: list[Token]) -> int:
        """Add what a command stands for."""
        raw = self.raws[at]
        if raw.text == "in" and (stop := self.number_set(at, end, out)):
            return stop
        if raw.text in TOKENS and not raw.arguments:
            kind, value = TOKENS[raw.text]
            out.append(token(kind, value, raw.start, raw.end))
        elif raw.text in REFUSED:
            self.stop(raw, REASONS[REFUSED[raw.text]])
        elif raw.text not in DROPPED:
            return self.taking(at, end, font, out)
        return at + 1

    def taking(self, at: int, end: int, font: str, out: list[Token]) -> int:
        """Add a command that takes arguments or scripts."""
        raw = self.raws[at]
        name = raw.text
        stop = self.unit(at, end, out) if name in UNIT_STARTS else at
        if stop == at and name in ("mathcal", "mathscr"):
            stop = self.transform(at, end, out)
        if stop > at:
            return stop
        if name in FUNCTION_WORDS and name != "sqrt":
            return self.function(at + 1, end, name, (raw.start, raw.end), out)
        if name in BIGS:
            return self.big_bracket(at, end, font, out)
        if name in FRACTIONS:
            return self.fraction_command(at, end, font, out)
        match name:
            case "left":
                return self.left_right(at, end, font, out)
            case "sqrt":
                return self.root(at, end, font, out)
            case "lim" | "sum" | "int":
                return self.big_operator(at, end, out)
            case "overset" | "stackrel" | "underset" | "underbrace" | "overbrace":
                return self.annotated(at, end, font, out)
            case "middle" if at + 1 < end and self.raws[at + 1].text == "/":
                return self.step(at + 1, end, font, out)
            case "not" if at + 1 < end and self.raws[at + 1].text == "=":
                out.append(token("REL", "≠", raw.start, self.raws[at + 1].end))
                return at + 2
        return self.argumented(at, out) if raw.arguments else self.name_command(at, end, font, out)

    def name_command(self, at: int, end: int, font: str, out: list[Token]) -> int:
        """Add a name that begins with a command: a letter, a font, an accent."""
        raw = self.raws[at]
        if raw.text == "overline" and (stop := self.conjugate(at, end, font, out)):
            return stop
        found, behind = self.nucleus(at, end, font)
        if found is not None:
            unknown = raw.text.startswith("operatorname") and len(found.spelling) > 1
            if unknown and self.names.find(found.spelling) is None and behind < end:
                applied = self.raws[behind].kind in ("letter", "digit") or self.is_letter(behind)
                if applied and found.spelling not in FUNCTION_WORDS:
                    self.stop(raw, "this function is not known; write it in those that are")
            return self.named(found, behind, end, out)
        low_high = self.font_argument(at, end)
        if low_high is None:
            raise StopError(UnknownCommandError, raw.start, raw.end, f"\\{raw.text}")
        low, high, behind, inner = low_high
        out += self.sequence(low, high, inner)
        return behind

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

    def braced(self, at: int, end: int) -> list[Token]:
        """Return the tokens of a piecewise value behind a brace, if it is one."""
        raise NotImplementedError

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
