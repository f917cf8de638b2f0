"""LaTeX in classed tokens for the grammar: names, numbers, scripts, brackets and macros."""

from __future__ import annotations

from dataclasses import dataclass
from typing import NoReturn

from lark import Token

from closedform.notation.written.grammar import token
from closedform.notation.written.latex_lexer import MOST_NESTED, Raw, matched
from closedform.notation.written.latex_numbers import number_at
from closedform.notation.written.latex_scripts import Scripts, flattened, mark_of
from closedform.notation.written.macros import (
    ACCENTS,
    BARS,
    BOLD,
    CALLIGRAPHIC,
    DOTS,
    FONTS,
    FRACTIONS,
    FUNCTION_WORDS,
    RELATION_SIGNS,
    SIGNS,
    SPACES,
    SWITCHES,
)
from closedform.notation.written.names import GREEK, Names
from closedform.notation.written.tree import (
    EULER,
    INFINITY,
    Symbol,
)
from closedform.notation.written.written_errors import (
    StopError,
    UnusableNotationError,
)

__all__ = ["LatexParts"]

OPERAND_ENDS = frozenset(
    [
        "NUMBER",
        "ATOM",
        "CLOSE",
        "GROUP_CLOSE",
        "BAR_CLOSE",
        "NORM_CLOSE",
        "MATRIX_CLOSE",
        "CASES_CLOSE",
        "POSTFIX",
        "UNIT",
        "DIFFERENTIAL",
    ]
)
LONGEST_RUN = 60
"""Letters side by side that can be one name."""
OPENING = {"(": "(", "[": "[", "lbrace": "{", "{": "{", "lbrack": "[", "lparen": "("}
CLOSING = {")": "(", "]": "[", "rbrace": "{", "}": "{", "rbrack": "[", "rparen": "("}


@dataclass(frozen=True, slots=True)
class Name:
    """A name without its scripts."""

    spelling: str
    start: int
    end: int
    bold: bool = False
    upright: bool = False
    order: int = 0


class LatexParts:
    """Reads the raw tokens of one text."""

    def __init__(self, text: str, raws: list[Raw], names: Names) -> None:
        self.text, self.raws, self.names = text, raws, names
        self.partners = matched(raws)
        self.depth = 0
        self.logs: list[tuple[int, int]] = []
        self.choices: list[tuple[tuple[Token, ...], tuple[Token, ...]]] = []

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

    # slices ------------------------------------------------------------------------------

    def argument(self, at: int, end: int, of: Raw) -> tuple[int, int, int]:
        """Return the bounds of the argument at an index, and the index behind it."""
        while at < end and self.raws[at].kind == "command" and self.raws[at].text in SPACES:
            at += 1
        if at >= end or self.raws[at].kind in ("}", "&", "row", "end"):
            self.stop(of, "its argument is missing; write it in braces")
        if self.raws[at].kind == "{":
            close = self.partners[at]
            return at + 1, close, close + 1
        self.depth += 1
        if self.depth > MOST_NESTED:
            raise StopError(WrittenDepthError, of.start, of.end, of.text, MOST_NESTED)
        behind = self.behind(at, end)
        self.depth -= 1
        return at, behind, behind

    def behind(self, at: int, end: int) -> int:
        """Return the index behind the one thing at an index, with the arguments it takes."""
        raw = self.raws[at]
        if raw.kind in ("{", "begin") or (raw.kind == "command" and raw.text == "left"):
            return self.partners[at] + (2 if raw.text == "left" else 1)
        if raw.kind != "command":
            return at + 1
        takes = FONTS | BOLD | CALLIGRAPHIC | ACCENTS.keys() | DOTS.keys() | {"sqrt"}
        count = 2 if raw.text in FRACTIONS else int(raw.text in takes)
        at += 1
        for _ in range(count):
            _, _, at = self.argument(at, end, raw)
        return at

    def stop(self, raw: Raw, why: str) -> NoReturn:
        """Raise the error that a raw token cannot be read."""
        found = self.text[raw.start : max(raw.end, raw.start + 1)]
        raise StopError(UnusableNotationError, raw.start, raw.end, found, why)

    # the walk ----------------------------------------------------------------------------

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

    def level(self, at: int, index: int) -> bool:
        """Tell whether an index is in no group that opens behind another index."""
        while at < index:
            at = self.partners[at] + 1 if self.raws[at].kind in ("{", "begin") else at + 1
        return at == index

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

    # names -------------------------------------------------------------------------------

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
        scripts, behind = self.scripts(stop, end)
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

    def nucleus(self, at: int, end: int, font: str = "") -> tuple[Name | None, int]:
        """Return the name without scripts at an index, if one is there, and the index behind."""
        raw = self.raws[at]
        if raw.kind == "letter":
            return Name(raw.text, raw.start, raw.end, font == "mathbf", font == "mathrm"), at + 1
        if raw.kind == "{":
            close = self.partners[at]
            name = self.only_name(at + 1, close, font)
            return name, close + 1
        if raw.kind != "command":
            return None, at
        if raw.text in GREEK:
            return Name(raw.text, raw.start, raw.end, font == "mathbf"), at + 1
        if raw.text in ("imath", "jmath"):
            return Name(raw.text[0], raw.start, raw.end), at + 1
        if raw.text in FONTS | BOLD | CALLIGRAPHIC:
            return self.in_font(at, end)
        if raw.text in ACCENTS or raw.text in DOTS:
            low, high, behind = self.argument(at + 1, end, raw)
            name = self.only_name(low, high, font)
            if name is None:
                self.stop(raw, "only a name has it; write out what it means of a formula")
            last = self.raws[behind - 1].end
            if raw.text in DOTS:
                order = name.order + DOTS[raw.text]
                return Name(name.spelling, raw.start, last, name.bold, name.upright, order), behind
            base, _, below = name.spelling.partition("_")
            spelling = base + ACCENTS[raw.text] + (f"_{below}" if below else "")
            return Name(spelling, raw.start, last, name.bold, name.upright, name.order), behind
        return None, at

    def in_font(self, at: int, end: int) -> tuple[Name | None, int]:
        """Return the name that is the argument of a font, if it is one."""
        raw = self.raws[at]
        low, high, behind = self.argument(at + 1, end, raw)
        inside = self.raws[low:high]
        last = self.raws[behind - 1].end
        bold = raw.text in BOLD
        if inside and all(part.kind in ("letter", "digit") for part in inside):
            word = "".join(part.text for part in inside)
            single = len(word) == 1 or self.names.find(word, bold=bold) is not None
            if word[0].isalpha() and (raw.text in FONTS or single):
                return Name(
                    word, raw.start, last, bold, raw.text in FONTS and raw.text != "mathit"
                ), behind
            if word[0].isalpha() and word[1:].isdecimal():
                return Name(f"{word[0]}_{word[1:]}", raw.start, last, bold), behind
            return None, at
        font = "mathbf" if bold else "mathrm" if raw.text in FONTS else ""
        name = self.only_name(low, high, font)
        if name is None:
            return None, at
        return Name(
            name.spelling, raw.start, last, bold or name.bold, name.upright, name.order
        ), behind

    def only_name(self, at: int, end: int, font: str) -> Name | None:
        """Return the name, with subscripts and primes, that is all between two indices."""
        while at < end and self.raws[at].kind == "command" and self.raws[at].text in SWITCHES:
            font = SWITCHES[self.raws[at].text]
            at += 1
        if at >= end:
            return None
        inside = self.raws[at:end]
        word = "".join(raw.text for raw in inside)
        if all(raw.kind in ("letter", "digit") for raw in inside) and len(word) > 1:
            known = self.names.find(word, bold=font == "mathbf") is not None
            if word[0].isalpha() and (font == "mathrm" or known):
                return Name(
                    word, inside[0].start, inside[-1].end, font == "mathbf", font == "mathrm"
                )
            return None
        if inside[0].kind == "text" and len(inside) == 1 and word.isalnum():
            return Name(inside[0].arguments[0], inside[0].start, inside[0].end, upright=True)
        name, behind = self.nucleus(at, end, font)
        if name is None:
            return None
        scripts, behind = self.scripts(behind, end)
        if behind != end or scripts.above:
            return None
        spelling = name.spelling
        if scripts.below:
            spelling = f"{spelling}_{flattened(scripts.below)}"
        return Name(
            spelling, name.start, name.end, name.bold, name.upright, name.order + scripts.primes
        )

    def scripts(self, at: int, end: int) -> tuple[Scripts, int]:
        """Return the scripts at an index, and the index behind them."""
        found = Scripts()
        while at < end and self.raws[at].kind in ("^", "_", "'"):
            raw = self.raws[at]
            found.start = found.start or raw.start
            if raw.kind == "'":
                found.primes += 1
                at += 1
            else:
                low, high, behind = self.argument(at + 1, end, raw)
                inside = self.raws[low:high]
                if (found.above if raw.kind == "^" else found.below) or not inside:
                    why = "one thing has two of it" if inside else "it is empty"
                    self.stop(raw, f"{why}; set brackets that say what belongs together")
                if raw.kind == "^":
                    found.above, found.bare = inside, self.raws[at + 1].kind != "{"
                    found.above_at = (low, high)
                else:
                    found.below, found.below_at = inside, (low, high)
                at = behind
            found.end = self.raws[at - 1].end
        return found, at

    def named(self, name: Name, at: int, end: int, out: list[Token]) -> int:
        """Add a name with the scripts at an index, as whatever it stands for."""
        known = self.names.find
        if name.upright and name.spelling in FUNCTION_WORDS and known(name.spelling) is None:
            return self.function(at, end, name.spelling, (name.start, name.end), out)
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
        italic = known("T") is None or name.bold or known(spelling) in self.names.declared.matrices
        mark = mark_of(scripts.above, transposed=italic)
        euler = self.names.constant(spelling) == EULER
        bounds = (name.start, max(name.end, scripts.end))
        if euler and scripts.above and mark != "star":
            if scripts.bare and scripts.above[0].text in "+-":
                self.stop(scripts.above[0], "write the whole exponent in braces")
            out.append(token("EULER", EULER, name.start, name.end))
            self.power(scripts, out)
            return at
        if mark in ("star", "plus", "minus"):
            spelling, mark = f"{spelling}_{mark}", "done"
        elif mark.startswith("word "):
            spelling, mark = f"{spelling}_{mark[5:]}", "done"
        elif mark.startswith("primes"):
            order, mark = order + int(mark[7:]), "done"
        elif mark.startswith("("):
            inside = mark[1:-1]
            declared = known(spelling, bold=name.bold)
            if inside.isdecimal() and (declared is None or self.names.varies(declared)):
                order += int(inside[:3])
            else:
                spelling = f"{spelling}_{inside}"
            mark = "done"
        value = self.names.operand(spelling, bold=name.bold, order=order)
        if isinstance(value, Symbol) and order == 0:
            value = self.names.identity(spelling, bold=name.bold) or value
        out.append(token("ATOM", value, *bounds))
        if mark and mark != "done":
            self.postfix(mark, scripts, out)
        elif scripts.above and not mark:
            self.power(scripts, out)
        return at

    def is_letter(self, at: int) -> bool:
        """Tell whether a letter stands at an index, Latin or Greek."""
        raw = self.raws[at]
        return raw.kind == "letter" or (raw.kind == "command" and raw.text in GREEK)

    def power(self, scripts: Scripts, out: list[Token]) -> None:
        """Add what stands above as an exponent."""
        first, last = scripts.above[0], scripts.above[-1]
        if not scripts.bare:
            last = self.raws[scripts.above_at[1]]
        out.append(token("POWER", "bare" if scripts.bare else "", first.start, first.start))
        out.append(token("GROUP_OPEN", "", first.start, first.start))
        out += self.sequence(*scripts.above_at)
        out.append(token("GROUP_CLOSE", "", last.end, last.end))

    def postfix(self, mark: str, scripts: Scripts, out: list[Token]) -> None:
        """Add what stands above as a sign behind its operand."""
        for sign in mark.replace("star", "conj").split():
            out.append(token("POSTFIX", sign, scripts.start, scripts.end))

    def scripted(self, scripts: Scripts, raw: Raw, out: list[Token]) -> None:
        """Add scripts of what stands before, which is no name: a bracket, a number, a matrix."""
        while out and out[-1].type == "SPACE":
            out.pop()
        last = out[-1] if out else None
        if last is None or last.type not in OPERAND_ENDS | {"BAR", "EVALUATED"}:
            self.stop(raw, "nothing stands before it that could have it")
        if scripts.primes:
            self.stop(raw, "only a name has primes; write the derivative as d/dt")
        if scripts.below:
            if last.type == "BAR":
                out.pop()
            elif last.type not in ("CLOSE", "GROUP_CLOSE", "ATOM"):
                self.stop(raw, "a number or a matrix has no subscript")
            self.evaluated(scripts, out)
            return
        italic = self.names.find("T") is None or last.type == "MATRIX_CLOSE"
        italic = italic or any(t.type == "COMMA" for t in out[-200:])
        mark = mark_of(scripts.above, transposed=italic)
        if last.type == "NUMBER" and mark in ("plus", "minus"):
            return
        if last.type == "NUMBER" and mark == "transpose":
            mark = ""
        if mark == "degree" and last.type not in ("NUMBER", "CLOSE", "GROUP_CLOSE"):
            self.stop(raw, "degrees stand behind a number")
        if mark.startswith(("word", "primes", "(", "plus", "minus")):
            self.stop(raw, "only a name has it; write out what it means")
        if mark:
            self.postfix(mark, scripts, out)
        else:
            self.power(scripts, out)

    def evaluated(self, scripts: Scripts, out: list[Token]) -> None:
        """Add a bar with the point below it, and one above it if there is."""
        kind = "EVALUATED_BOTH" if scripts.above else "EVALUATED"
        out.append(token(kind, self.names.time, scripts.start, scripts.end))
        self.grouped(*scripts.below_at, out)
        if scripts.above:
            low, high = scripts.above_at
            signs = [k for k in range(low, high) if self.raws[k].text == "="]
            self.grouped(signs[0] + 1 if signs else low, high, out)

    def grouped(self, low: int, high: int, out: list[Token], font: str = "") -> None:
        """Add the tokens between two indices as a group."""
        if low >= high:
            raw = self.raws[max(low - 1, 0)]
            self.stop(raw, "there is nothing in it")
        start, end = self.raws[low].start, self.raws[high - 1].end
        out.append(token("GROUP_OPEN", "", start, start))
        out += self.sequence(low, high, font)
        out.append(token("GROUP_CLOSE", "", end, end))

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
