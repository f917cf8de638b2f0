"""Formulas as LaTeX, in the ways that people set them: one pen for each derivation."""
# ruff: noqa: ARG002

from __future__ import annotations

import re
from dataclasses import dataclass, field
from decimal import Decimal
from fractions import Fraction
from random import Random

from tests.checking.generated.forms import F

__all__ = ["Pen", "pen_of"]

SUM, PRODUCT, ATOM = 0, 1, 2
MATRICES = (
    (r"\begin{pmatrix}", r"\end{pmatrix}"),
    (r"\begin{bmatrix}", r"\end{bmatrix}"),
    (r"\left[\begin{array}{%s}", r"\end{array}\right]"),
    (r"\left(\begin{array}{%s}", r"\end{array}\right)"),
)


@dataclass
class Pen:
    """The habits of one writer; `rng` decides where a writer varies."""

    rng: Random
    fraction: str = r"\frac"
    euler: str = "e"
    unit: str = "i"
    comma: bool = False
    dot: str = ""
    matrix: int = 0
    brackets: tuple[str, str] = (r"\left(", r"\right)")
    bold: bool = False
    diagonal: bool = False
    names: dict[str, str] = field(default_factory=dict)
    spectral: str = r"\lambda"

    def write(self, f: F, level: int = SUM) -> str:
        """Return a formula; below `level` it is put in brackets."""
        own = {"add": SUM, "neg": SUM, "pm": SUM, "shift": SUM, "mul": PRODUCT}.get(f.op, ATOM)
        text = getattr(self, f"_{f.op}")(f)
        return self.bracketed(text) if own < level else text

    def bracketed(self, text: str) -> str:
        """Return a text in brackets."""
        left, right = self.brackets
        if left == "(" and (r"\frac" in text or r"\dfrac" in text):
            left, right = r"\left(", r"\right)"
        return f"{left}{text}{right}"

    def _t(self, f: F) -> str:
        return "t"

    def _i(self, f: F) -> str:
        return self.unit

    def _pi(self, f: F) -> str:
        return r"\pi"

    def _name(self, f: F) -> str:
        key = f.args[0]
        if key == "lambda":
            return self.spectral
        return self.names.get(key, key)

    def _num(self, f: F) -> str:
        return self.fractional(f.args[0])

    def fractional(self, x: Fraction) -> str:
        """Return a rational number."""
        if x.denominator == 1:
            return str(x.numerator)
        above, below = str(x.numerator), str(x.denominator)
        short = len(above) == len(below) == 1 and self.rng.random() < 0.3
        return (
            f"{self.fraction}{above}{below}" if short else f"{self.fraction}{{{above}}}{{{below}}}"
        )

    def _dec(self, f: F) -> str:
        d = Decimal(f.args[0])
        text = format(d, "f")
        tail = ""
        if d and (not -3 <= d.adjusted() < 5 or d.as_tuple().exponent > 0):
            digits = "".join(map(str, d.as_tuple().digits))
            text = digits[0] + ("." + digits[1:] if len(digits) > 1 else "")
            tail = rf"\times10^{{{d.adjusted()}}}"
        return (text.replace(".", "{,}") if self.comma else text) + tail

    def _neg(self, f: F) -> str:
        return "-" + self.write(f.args[0], PRODUCT)

    def _add(self, f: F) -> str:
        text = ""
        for k, term in enumerate(f.args):
            if term.op == "neg":
                text += "-" + self.write(term.args[0], PRODUCT)
            elif k and term.op == "mul" and term.args[0].op == "neg":
                text += "+" + self.write(term, PRODUCT)
            else:
                text += ("+" if k else "") + self.write(term, PRODUCT)
        return text

    def _pm(self, f: F) -> str:
        a, b = f.args
        sign = r"\pm "
        return (
            (self.write(a, PRODUCT) if a.op != "neg" else self.write(a))
            * (a.op != "num" or a.args[0] != 0)
            + sign
            + self.write(b, PRODUCT)
        )

    def _mul(self, f: F) -> str:
        text = ""
        for k, factor in enumerate(f.args):
            last = k == len(f.args) - 1
            own = self.write(factor, ATOM)
            if factor.op == "fn":
                following = None if last else f.args[k + 1]
                own = self.function(factor, bare=last or following.op == "fn")
            if factor.op == "pow" and factor.args[0].op in ("num", "dec"):
                own = self.bracketed(own)
            if k:
                own = self.between(f.args[k - 1], factor, text) + own
                if own[0].isalpha() and re.search(r"\\[a-zA-Z]+$", text):
                    own = " " + own
            text += own
        return text

    def between(self, before: F, after: F, text: str) -> str:
        """Return what stands between two factors."""
        numeric = after.op in ("num", "dec") or (after.op == "div" and before.op in ("num", "dec"))
        if numeric and before.op not in ("name", "t"):
            return r"\cdot "
        if numeric:
            return r"\cdot "
        if before.op == "num" and before.args[0].denominator != 1:
            return self.rng.choice(("", "", r"\,"))
        if before.op == "dec" and self.rng.random() < 0.3:
            return r"\,"
        if after.op == "fn" or before.op == "fn":
            return self.rng.choice(("", r"\,")) if text.endswith((")", "}", "]")) else r"\,"
        if before.op in ("name", "sqrt", "jet"):
            gap = self.rng.choice((" ", r"\,", self.dot or " "))
            return gap if gap != r"\cdot" else r"\cdot "
        if self.dot and self.rng.random() < 0.5:
            return rf"{self.dot} "
        return self.rng.choice(("", "", r"\,"))

    def _div(self, f: F) -> str:
        above, below = f.args
        simple = above.op in ("num", "name", "t") and below.op in ("num", "name")
        if simple and self.rng.random() < 0.1 and self.fraction != r"\dfrac":
            return rf"\tfrac{{{self.write(above)}}}{{{self.write(below)}}}"
        return f"{self.fraction}{{{self.write(above)}}}{{{self.write(below)}}}"

    def _pow(self, f: F) -> str:
        base, n = f.args
        inner = self.write(base, ATOM)
        if base.op in ("div", "fn", "exp", "pow", "sqrt") or (
            base.op == "num" and base.args[0].denominator != 1
        ):
            inner = self.bracketed(inner)
        return f"{inner}^{n}" if 0 <= n < 10 and self.rng.random() < 0.5 else f"{inner}^{{{n}}}"

    def _sqrt(self, f: F) -> str:
        inner = self.write(f.args[0])
        short = len(inner) == 1 and inner.isdigit() and self.rng.random() < 0.4
        return rf"\sqrt{inner}" if short else rf"\sqrt{{{inner}}}"

    def _exp(self, f: F) -> str:
        inner = self.exponent(f.args[0])
        if self.euler == r"\exp":
            return rf"\exp{self.bracketed(inner)}"
        if inner == "t":
            return f"{self.euler}^{self.rng.choice(('t', '{t}'))}"
        return f"{self.euler}^{{{inner}}}"

    def exponent(self, f: F) -> str:
        """Return an exponent, where fractions may be set with a slash."""
        sign, inner = ("-", f.args[0]) if f.op == "neg" else ("", f)
        if inner.op == "div" and self.rng.random() < 0.5:
            above, below = inner.args
            if below.op in ("num", "name", "dec"):
                return f"{sign}{self.write(above, PRODUCT)}/{self.write(below, ATOM)}"
            if below.op == "mul" and self.rng.random() < 0.5:
                return f"{sign}{self.write(above, PRODUCT)}/({self.write(below)})"
        return self.write(f)

    def _fn(self, f: F) -> str:
        return self.function(f, bare=True)

    def function(self, f: F, *, bare: bool) -> str:
        """Return a function; without brackets only where nothing can follow its argument."""
        which, x = f.args
        simple = x.op in ("t", "num") or (
            x.op == "mul" and all(a.op in ("num", "t", "sqrt", "dec", "name") for a in x.args)
        )
        command = rf"\{which}"
        if simple and self.rng.random() < 0.2:
            return rf"{command}\left({self.write(x)}\right)"
        inner = self.write(x)
        if simple and bare and r"\cdot" not in inner and self.rng.random() < 0.5:
            return f"{command} {inner}"
        return f"{command}({inner})" if r"\frac" not in inner else rf"{command}\left({inner}\right)"

    def _atan2(self, f: F) -> str:
        raise ValueError("an angle is written as a decimal")

    def _oo(self, f: F) -> str:
        return r"\infty"

    def _step(self, f: F) -> str:
        return self.rng.choice((r"u({})", r"\theta({})", r"H({})")).format(self.write(f.args[0]))

    def _jet(self, f: F) -> str:
        return f.args[1]

    def _shift(self, f: F) -> str:
        return "t-" + self.write(f.args[0])

    @staticmethod
    def _is_diagonal(f: F) -> bool:
        zero = F("num", (Fraction(0),))
        square = all(len(row.args) == len(f.args) for row in f.args)
        return square and all(
            e == zero for i, row in enumerate(f.args) for k, e in enumerate(row.args) if i != k
        )

    def _mat(self, f: F) -> str:
        rows = [[self.write(e) for e in row.args] for row in f.args]
        short = len("".join(map("".join, rows))) < 30
        if len(rows[0]) == 1 < len(rows) and short and self.rng.random() < 0.25:
            gap = self.rng.choice((", ", r",\,", r",\;"))
            top = self.rng.choice((r"\mathsf{T}", "T", r"\top", r"{\mathrm T}"))
            return f"({gap.join(row[0] for row in rows)})^{top}"
        if self.diagonal and len(rows) > 1 and self._is_diagonal(f):
            inner = r",\, ".join(row[k] for k, row in enumerate(rows))
            return rf"\operatorname{{diag}}\left({inner}\right)"
        left, right = MATRICES[self.matrix]
        if "%s" in left:
            left %= self.rng.choice("cr") * len(rows[0])
        end = self.rng.choice((r"\\", r"\\ ", r"\\[2pt]"))
        return left + end.join("&".join(row) for row in rows) + right


def pen_of(rng: Random, names: dict[str, str], *, plain_i: bool = True) -> Pen:
    """Return the pen of a writer."""
    units = ["j", r"\mathrm{j}", *(["i", r"\mathrm{i}", "i"] if plain_i else [])]
    return Pen(
        rng,
        fraction=rng.choice((r"\frac", r"\frac", r"\tfrac", r"\dfrac")),
        euler=rng.choice(("e", "e", r"\mathrm{e}", r"\mathrm e", r"\exp")),
        unit=rng.choice(units),
        comma=rng.random() < 0.2,
        dot=rng.choice(("", "", "", r"\cdot")),
        matrix=rng.randrange(4),
        brackets=rng.choice(((r"\left(", r"\right)"), ("(", ")"), (r"\bigl(", r"\bigr)"))),
        bold=rng.random() < 0.3,
        diagonal=rng.random() < 0.2,
        names=names,
        spectral=rng.choice((r"\lambda", r"\lambda", "s")),
    )
