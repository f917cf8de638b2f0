"""Names in LaTeX: letters, fonts and accents, and the scripts at them."""

from __future__ import annotations

from dataclasses import dataclass
from typing import NoReturn

from lark import Token

from closedform.notation.written.latex_lexer import MOST_NESTED, Raw, matched
from closedform.notation.written.latex_scripts import Scripts, flattened
from closedform.notation.written.macros import (
    ACCENTS,
    BOLD,
    CALLIGRAPHIC,
    DOTS,
    FONTS,
    FRACTIONS,
    SPACES,
    SWITCHES,
)
from closedform.notation.written.names import GREEK, Names
from closedform.notation.written.written_errors import (
    StopError,
    UnusableNotationError,
    WrittenDepthError,
)

__all__ = ["LatexNames", "Name"]


@dataclass(frozen=True, slots=True)
class Name:
    """A name without its scripts."""

    spelling: str
    start: int
    end: int
    bold: bool = False
    upright: bool = False
    order: int = 0


class LatexNames:
    """Finds the names in the raw tokens of one text."""

    def __init__(self, text: str, raws: list[Raw], names: Names) -> None:
        self.text, self.raws, self.names = text, raws, names
        self.partners = matched(raws)
        self.depth = 0
        self.logs: list[tuple[int, int]] = []
        self.choices: list[tuple[tuple[Token, ...], tuple[Token, ...]]] = []

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

    def level(self, at: int, index: int) -> bool:
        """Tell whether an index is in no group that opens behind another index."""
        while at < index:
            at = self.partners[at] + 1 if self.raws[at].kind in ("{", "begin") else at + 1
        return at == index

    def upright(self, name: Name, spelling: str) -> bool:
        """Tell whether an upright e, i or j is set apart from a declared italic one beside it."""
        if not name.upright or spelling not in ("e", "i", "j") or self.names.find(spelling) is None:
            return False
        return any(
            raw.kind == "letter"
            and raw.text == spelling
            and not (self.raws[k - 1].kind == "{" and self.raws[k - 2].text in FONTS)
            and self.raws[k - 1].text not in (*FONTS, *SWITCHES)
            for k, raw in enumerate(self.raws)
        )

    def is_acronym(self, at: int, stop: int, end: int) -> bool:
        """Tell whether capitals are one name that a statement is about: MTTF = ..."""
        letters = [raw.text for raw in self.raws[at:stop]]
        named = any(self.names.find(letter) for letter in letters)
        before = self.raws[at - 1] if at else None
        begins = before is None or before.kind in ("row", "&", "text") or before.text in ",;"
        following = self.raws[stop].text if stop < end else ""
        capitals = len(letters) > 2 and all(letter.isupper() for letter in letters)
        return capitals and begins and not named and following in ("=", "&", "approx")

    def is_letter(self, at: int) -> bool:
        """Tell whether a letter stands at an index, Latin or Greek."""
        raw = self.raws[at]
        return raw.kind == "letter" or (raw.kind == "command" and raw.text in GREEK)

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
        if raw.text.startswith("up") and raw.text[2:] in GREEK:
            return Name(raw.text[2:], raw.start, raw.end), at + 1
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
