"""Braces, texts and units in LaTeX in classed tokens."""

from __future__ import annotations

import re
from fractions import Fraction

from lark import Token

from closedform.notation.written.grammar import token
from closedform.notation.written.latex_lexer import lexed
from closedform.notation.written.latex_numbers import printed_number, scaled
from closedform.notation.written.latex_parts import LatexParts
from closedform.notation.written.latex_units import unit_text
from closedform.notation.written.macros import (
    BOLD,
    CALLIGRAPHIC,
    FONTS,
    FRACTIONS,
    FUNCTION_WORDS,
)
from closedform.notation.written.pairs import OPERAND_ENDS
from closedform.notation.written.tree import EULER, Constant, Literal, Symbol
from closedform.notation.written.words import word_of

__all__ = ["LatexTexts"]

UNIT_COMMANDS = frozenset({"%", "Omega", "mu", "upmu", "upOmega"})
PARTING = frozenset({"COMMA", "SEMI", "ROW_END", "PERIOD", "IMPLIES", "TEXT", "WORD", "REL"})


class LatexTexts(LatexParts):
    """Reads what stands in braces, in texts and behind numbers."""

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
        while len(out) > 1 and out[-2].type == "SPACE" and out[-1].value == Symbol("E"):
            del out[-2]
        if len(out) < 2 or out[-1].value not in (EULER, Symbol("E")) or out[-2].type != "NUMBER":
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

    def unit(self, at: int, end: int, out: list[Token]) -> int:
        """Add the unit that begins at an index, if one does; return the index behind it."""
        before = next((t for t in reversed(out) if t.type != "SPACE"), None)
        if before is None or before.type not in OPERAND_ENDS:
            return at
        apart = out[-1].type == "SPACE"
        if apart and out[-1].value > 1 and before.type != "NUMBER":
            return at
        if before.type == "NUMBER" and (stop := self.programmed(at, end, out)) > at:
            return stop
        if self.raws[at].text in UNIT_COMMANDS - {"%"} and not (apart and before.type == "NUMBER"):
            return at
        found, stop = self.unit_extent(at, end)
        if not found:
            return at
        following = self.raws[stop].text if stop < end else ""
        single = self.raws[at].kind == "command" and len(found) == 1
        if not _is_number(out):
            word = found if found.isalnum() else ""
            ends = stop >= end or self.raws[stop].kind in ("row", "&", "}", "text")
            ends = ends or following in (",", ";", ".", "=", "quad", "qquad", "approx", " ", ")")
            if (word and self.names.find(word)) or not (ends or not word):
                return at
        if following == "_" or (single and found == "H" and following in ("(", "left")):
            return at
        if found == "d" and stop < end and self.is_letter(stop):
            return at
        if self.raws[at].text == "Omega" and self.names.find("Omega"):
            return at
        out.append(token("UNIT", found, self.raws[at].start, self.raws[stop - 1].end))
        return stop

    def programmed(self, at: int, end: int, out: list[Token]) -> int:
        """Read the upright e-4 behind a number as a power of ten; return the index behind it."""
        raw = self.raws[at]
        if raw.kind == "text":
            behind, word = at + 1, raw.arguments[0] if raw.arguments else ""
        elif raw.text in FONTS:
            low, high, behind = self.argument(at + 1, end, raw)
            word = "".join(part.text for part in self.raws[low:high])
        else:
            return at
        form = re.fullmatch(r"[eE]([+−-]?[0-9]{1,3})", word.strip())
        if form is None:
            return at
        while out[-1].type == "SPACE":
            out.pop()
        number = scaled(out.pop().value, int(form[1].replace("−", "-")), raw.end)
        out.append(token("NUMBER", number, number.start, number.end))
        return behind

    def unit_extent(self, at: int, end: int) -> tuple[str, int]:
        """Return the longest unit that begins at an index, and the index behind it."""
        found, stop = "", at
        index = at
        while index < end:
            raw = self.raws[index]
            takes = FONTS | (FRACTIONS if index == at else frozenset())
            if raw.kind == "text" or (raw.kind == "command" and raw.text in takes):
                index = self.behind(index, end)
            elif raw.kind == "command" and raw.text in UNIT_COMMANDS:
                index += 1
            elif raw.kind == "^":
                index = self.argument(index + 1, end, raw)[2]
            elif index > at and raw.text in (",", " ", ";", "cdot", "/", "!", ":"):
                index += 1
                continue
            else:
                break
            text = unit_text(self.raws[at:index])
            if text:
                found, stop = text, index
            elif (
                raw.text not in ("mu", "upmu")
                and self.raws[index - 1].kind != "text"
                and not self.is_prefix(at, index)
            ):
                break
        return found, stop

    def is_prefix(self, at: int, end: int) -> bool:
        """Tell whether all between two indices is one upright letter that may multiply a unit."""
        letters = [raw.text for raw in self.raws[at:end] if raw.kind not in "{}"]
        return len(letters) == 2 and letters[0] in FONTS and letters[1] in "kMGmnpµ"

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
        elif bare.isalpha() and self.is_behind_number(out):
            out.append(token("UNIT", bare, raw.start, raw.end))
        else:
            out.append(token("TEXT", bare, raw.start, raw.end))
        return at + 1

    def is_behind_number(self, out: list[Token]) -> bool:
        """Tell whether a number stands right before, at most with a narrow space between."""
        wide = bool(out) and out[-1].type == "SPACE" and out[-1].value > 1
        before = next((part for part in reversed(out) if part.type != "SPACE"), None)
        return before is not None and before.type == "NUMBER" and not wide

    def is_name(self, word: str, at: int, end: int, out: list[Token]) -> bool:
        """Tell whether a word set as text is part of the formula."""
        if self.names.find(word) or word in FUNCTION_WORDS or len(word) == 1:
            return True
        apart = bool(out) and (
            out[-1].type in PARTING or (out[-1].type == "SPACE" and out[-1].value == 2)
        )
        following = self.raws[at + 1].text if at + 1 < end else ""
        return not apart and following in ("_", "=", "(", "^", "left", "+", "-", "approx")

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
                    out.append(token("UNIT", _unit_of(raw.arguments[1]), *bounds))
            case "si" | "unit":
                out.append(token("UNIT", _unit_of(raw.arguments[0]), *bounds))
            case "hspace" | "mspace":
                wide = any(size in raw.arguments[0] for size in ("cm", "em", "in", "fill"))
                out.append(token("SPACE", 2 if wide else 1, *bounds))
        return at + 1

    def font_argument(self, at: int, end: int) -> tuple[int, int, int, str] | None:
        """Return the bounds of the argument of a font, the index behind it, and the font."""
        raw = self.raws[at]
        if raw.text not in FONTS | BOLD | CALLIGRAPHIC:
            return None
        low, high, behind = self.argument(at + 1, end, raw)
        return low, high, behind, "mathbf" if raw.text in BOLD else "mathrm"


def _is_number(tokens: list[Token]) -> bool:
    """Tell whether what stands behind the last relation is a number, with no name in it."""
    for part in reversed(tokens):
        if part.type in PARTING or part.type in ("PLUS", "MINUS"):
            return True
        if part.type in ("CALL", "INTEGRAL", "CASES_OPEN", "UNIT"):
            return part.type == "UNIT"
        if part.type == "ATOM" and not isinstance(part.value, Constant):
            return False
    return True


def _unit_of(text: str) -> str:
    """Return the unit that a command says, as it stands if it is not known."""
    found = unit_text(lexed(text))
    return found or " ".join(text.replace("\\", " ").split())
