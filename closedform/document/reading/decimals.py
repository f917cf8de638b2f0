"""Decimals as they are printed, held against the texts they were printed from."""

from __future__ import annotations

import re
from collections.abc import Sequence
from fractions import Fraction

from closedform.document.printed import ShownTable
from closedform.document.reading.expected import Expected, both_signs
from closedform.document.reading.found import FoundTable
from closedform.document.reading.normal import normal
from closedform.document.reading.sides import SideReader
from closedform.document.reading.values import Value, number, plus, times
from closedform.notation.latex.escape import escaped
from closedform.notation.written.tree import IMAGINARY, Literal

__all__ = ["cells_of", "decimal_value", "table_unlike"]

DECIMAL = re.compile(
    r"(?P<sign>[-+\u2212]?)(?P<digits>[0-9]+(\.[0-9]+)?)([eE](?P<power>[-+]?[0-9]+))?"
)
COMPLEX = re.compile(
    r"(?:(?P<real>.*?[0-9])\s*(?P<sign>[-+\u2212\u00b1])|(?P<lone>[-+\u2212\u00b1]?))"
    r"\s*(?P<size>[0-9.]+([eE][-+]?[0-9]+)?)\s*i"
)
MINUS = frozenset("-\u2212")
WHOLE_CELL = re.compile(r"\\multicolumn\{2\}\{[lcr]\}\{(?P<inside>.*)\}", re.DOTALL)


def decimal_value(text: str) -> Value | None:
    """Return the form of a decimal, with its digits as printed; None if it is none.

    Complex ones are -1.5+2.0i, and pairs -1.5 ± 2.0i.
    """
    text = text.strip()
    if match := DECIMAL.fullmatch(text):
        return _real(match)
    match = COMPLEX.fullmatch(text)
    if match is None:
        return None
    size = decimal_value(match["size"])
    real = number(0) if match["real"] is None else decimal_value(match["real"])
    if size is None or real is None:
        return None
    imaginary = times((size, normal(IMAGINARY)))
    sign = match["sign"] or match["lone"]
    if sign == "\u00b1":
        return both_signs(real, imaginary)
    return plus((real, times((number(-1 if sign in MINUS else 1), imaginary))))


def _real(match: re.Match[str]) -> Value:
    digits, power = match["digits"], int(match["power"] or 0)
    scale = Fraction(10) ** power
    places = len(digits.partition(".")[2])
    exact = "." not in digits and not match["power"]
    last = scale / 10**places
    literal = Literal(Fraction(digits) * scale, last, is_decimal=not exact)
    return times((number(-1 if match["sign"] in MINUS and match["sign"] else 1), normal(literal)))


def table_unlike(
    shown: ShownTable, found: FoundTable, reader: SideReader, expected: Expected
) -> str:
    """Return what is wrong with a table of decimals; nothing if it is as it ought to be.

    Raises:  UnreadSideError if a number is not read.
    """
    head, *rows = found.rows
    titles = [reader.read(title.strip("$")) for title in cells_of(head)]
    if titles != [expected.side(side) for side in shown.header]:
        return "its columns have other heads"
    if len(rows) != len(shown.rows):
        return f"it has {len(rows)} rows, not {len(shown.rows)}"
    for place, (row, wanted) in enumerate(zip(rows, shown.rows, strict=True), start=1):
        cells = cells_of(row)
        if len(cells) != len(wanted):
            return f"row {place} has {len(cells)} numbers, not {len(wanted)}"
        for cell, text in zip(cells, wanted, strict=True):
            value = decimal_value(text)
            if value is None:
                if cell != escaped(text):
                    return f"row {place} has {cell!r} where {text!r} belongs"
            elif reader.read(cell) != value:
                return f"row {place} has {cell} where {text} belongs"
    return ""


def cells_of(row: Sequence[str]) -> list[str]:
    """Return the numbers of a row; each is cut in two at the point, or stands in both columns."""
    cells: list[str] = []
    rest = list(row)
    while rest:
        first = rest.pop(0)
        if match := WHOLE_CELL.fullmatch(first):
            cells.append(match["inside"].strip())
        else:
            second = rest.pop(0) if rest else ""
            cells.append(first.strip("$") + second.strip("$"))
    return cells
