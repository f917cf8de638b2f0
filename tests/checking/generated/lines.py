"""A line of a generated derivation: what it says, in which form, and what it ought to be."""

from __future__ import annotations

from dataclasses import dataclass, field, replace

from tests.checking.generated.forms import F
from tests.checking.generated.pen import Pen
from tests.checking.generated.reference import Judge

__all__ = ["Derivation", "Line"]


@dataclass(frozen=True)
class Line:
    r"""One line.  `lefts` are the left sides of its groups, `forms` their values.

    `judge` tells whether values are true.  `wrong` says that they are not (`slip` how, in the
    line where it was made); `follows` that the line was worked out from a wrong one.
    Several forms behind one left side are a chain, with `signs` before each.
    """

    says: str
    lefts: tuple[str, ...]
    forms: tuple[F, ...]
    judge: Judge
    subject: str = ""
    of: str = ""
    at: str = ""
    signs: tuple[str, ...] = ("=",)
    head: str = ""
    tail: str = ""
    gap: str = r",\quad "
    slip: str = ""
    wrong: bool = False
    follows: bool = False
    strict: bool = True
    stated: bool = False
    defines: bool = False
    latex: str = field(default="")

    def written(self, pen: Pen) -> Line:
        """Return the line with its text."""
        if len(self.lefts) == 1:
            (text,) = self.lefts
            for k, form in enumerate(self.forms):
                sign = self.signs[min(k, len(self.signs) - 1)] + " "
                text += (sign if k or text else "") + pen.write(form)
            return replace(self, latex=self.head + text + self.tail)
        parts = []
        for left, form in zip(self.lefts, self.forms, strict=True):
            parts.append(f"{left}{self.signs[0] + ' ' if left else ''}{pen.write(form)}")
        return replace(self, latex=self.head + self.gap.join(parts) + self.tail)

    def has_decimals(self) -> bool:
        """Whether a rounded decimal stands in it."""
        from tests.checking.generated.forms import nodes

        return any(
            n.op == "dec" and n.args[1].op != "num" for form in self.forms for _, n in nodes(form)
        )


@dataclass(frozen=True)
class Derivation:
    """A model as text, and lines; `slip` names the one that was made, empty if none was."""

    seed: int
    kind: str
    model: dict
    lines: tuple[Line, ...]
    slip: str = ""
