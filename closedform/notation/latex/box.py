"""What a typeset piece of mathematics is: its LaTeX, its width and its height.

Widths are in em of the text size and estimated from above, out of the metrics of
Computer Modern (D. E. Knuth, Computer Modern Typefaces, 1986): a formula that is said to
fit fits.  Nothing is measured by TeX here; the tests compile and search the log.
"""

from __future__ import annotations

from dataclasses import dataclass
from enum import IntEnum

__all__ = ["BINARY", "EM_PER_LINE", "RELATION", "Box", "Style", "bracketed", "joined", "plain"]

EM_PER_LINE = 38.0
"""Width at a formula's disposal: 16 cm of 11 pt text are 41.5 em, less the equation number."""

BINARY = 1.23
"""A plus or minus sign with its spaces."""

RELATION = 1.36
"""An equals sign with its spaces."""


class Style(IntEnum):
    """TeX's sizes: fractions are full size in DISPLAY, small in TEXT and slashed in SCRIPT."""

    DISPLAY = 0
    TEXT = 1
    SCRIPT = 2
    SCRIPTSCRIPT = 3

    @property
    def scale(self) -> float:
        """Size of a letter, as a part of the text size."""
        return (1.0, 1.0, 0.74, 0.57)[self]

    @property
    def script(self) -> Style:
        """The size of this size's subscripts and exponents."""
        return Style.SCRIPT if self < Style.SCRIPT else Style.SCRIPTSCRIPT

    @property
    def inner(self) -> Style:
        """The size of this size's numerators and denominators."""
        return Style(min(self + 1, Style.SCRIPTSCRIPT))


@dataclass(frozen=True, slots=True)
class Box:
    """A piece that TeX will not break.

    `width` is in em.  `height` is 0 for a line of letters, 1 with a small fraction in it,
    2 with a full one, 3 for a matrix.  `start` is printed before it where it begins a
    line: an empty group makes a sign binary, a dot stands for a product.
    """

    latex: str
    width: float
    height: int = 0
    start: str = ""


def plain(latex: str, width: float, style: Style = Style.DISPLAY) -> Box:
    """Return a piece of ordinary height whose width is given at the text size."""
    return Box(latex, width * style.scale)


def joined(*boxes: Box, glue: str = "") -> Box:
    """Return the pieces side by side, with `glue` (of no width) between their LaTeX."""
    return Box(
        glue.join(box.latex for box in boxes),
        sum(box.width for box in boxes),
        max((box.height for box in boxes), default=0),
        boxes[0].start if boxes else "",
    )


def bracketed(box: Box, style: Style = Style.DISPLAY) -> Box:
    """Return the piece in round brackets that grow only when it is tall."""
    if box.height:
        wide = box.width + (0.95 if box.height == 1 else 1.5 if box.height == 2 else 2.0)
        return Box(rf"\left({box.latex}\right)", wide + 0.4, box.height)
    return Box(f"({box.latex})", box.width + 0.8 * style.scale)
