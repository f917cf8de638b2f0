"""What stands below or above a part in LaTeX: notes, bars of conjugates; sets behind names."""

from __future__ import annotations

from lark import Token

from closedform.notation.written.grammar import token
from closedform.notation.written.latex_texts import LatexTexts
from closedform.notation.written.macros import BOLD, CALLIGRAPHIC
from closedform.notation.written.tree import IMAGINARY

__all__ = ["LatexAnnotated"]


class LatexAnnotated(LatexTexts):
    """Reads commands that say something about what they are set at."""

    def annotated(self, at: int, end: int, font: str, out: list[Token]) -> int:
        """Add what has an annotation above or below it; that is left out."""
        raw = self.raws[at]
        low, high, behind = self.argument(at + 1, end, raw)
        if raw.text in ("underbrace", "overbrace"):
            behind = self.scripts(behind, end)[1]
        else:
            low, high, behind = self.argument(behind, end, raw)
        out += self.sequence(low, high, font)
        return behind

    def conjugate(self, at: int, end: int, font: str, out: list[Token]) -> int:
        """Add what is below a bar as conjugate, unless with the bar it is a name; return where.

        It is one if it is a formula with the imaginary unit, or if without the bar it is
        declared and with it is not.
        """
        raw = self.raws[at]
        low, high, behind = self.argument(at + 1, end, raw)
        name = self.only_name(low, high, font)
        inside = self.sequence(low, high, font)
        if name is None:
            if not any(one.value == IMAGINARY for one in inside):
                self.stop(raw, "only a name has it; write out what it means of a formula")
        else:
            barred, _ = self.nucleus(at, end, font)
            known = self.names.find(name.spelling)
            named = barred is not None and self.names.find(barred.spelling) is not None
            if named or known is None or self.names.varies(known):
                return 0
        self.grouped(low, high, out, font)
        out.append(token("POSTFIX", "conj", raw.start, self.raws[behind - 1].end))
        return behind

    def number_set(self, at: int, end: int, out: list[Token]) -> int:
        r"""Take names with \\in and a set of numbers, C_1, C_2 \\in R, as a note; return where."""
        inside = self.raws[at + 1 : at + 2]
        if not inside or inside[0].text not in CALLIGRAPHIC | BOLD:
            return 0
        low, high, behind = self.argument(at + 2, end, inside[0])
        if "".join(raw.text for raw in self.raws[low:high]) not in ("R", "C", "N", "Z", "Q"):
            return 0
        behind = self.scripts(behind, end)[1]
        while (out and out[-1].type in ("ATOM", "COMMA")) or (
            out and out[-1].value == 1 and out[-1].type == "SPACE"
        ):
            out.pop()
        first = out[-1].end_pos or 0 if out else 0
        last = self.raws[behind - 1].end
        out.append(token("TEXT", self.text[first:last].strip(), first, last))
        return behind
