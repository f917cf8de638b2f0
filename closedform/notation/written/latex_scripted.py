"""Scripts in LaTeX in classed tokens: exponents, signs behind an operand, points below a bar."""

from __future__ import annotations

from lark import Token

from closedform.notation.written.grammar import token
from closedform.notation.written.latex_lexer import Raw
from closedform.notation.written.latex_names import LatexNames
from closedform.notation.written.latex_scripts import Scripts, mark_of
from closedform.notation.written.pairs import OPERAND_ENDS

__all__ = ["LatexScripted"]


class LatexScripted(LatexNames):
    """Adds what stands above and below a part."""

    def sequence(self, at: int, end: int, font: str = "") -> list[Token]:
        """Return the classed tokens of the raw tokens between two indices."""
        raise NotImplementedError

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
        out += [
            token("POSTFIX", sign, scripts.start, scripts.end)
            for sign in mark.replace("star", "conj").split()
        ]

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
        if last.type == "NUMBER" and mark in ("plus", "minus") and not last.value.value:
            return  # an instant, just after or before nought
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
