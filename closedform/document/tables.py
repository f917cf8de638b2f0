"""Tables of decimals: aligned at the point, and wide ones cut into several."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass

from closedform.derivation.step import Side
from closedform.document.latex import inline, split_decimal
from closedform.document.symbols import side_box
from closedform.notation.latex.escape import escaped

__all__ = ["DecimalTable", "decimal_tables"]

LINE = 41.0
COLUMN_GAP = 1.2
DIGIT = 0.52


@dataclass(frozen=True, slots=True)
class DecimalTable:
    """A table for booktabs: the column specification, the head and the rows, as LaTeX.

    `places` are the columns of the whole table that it shows.
    """

    columns: str
    head: str
    rows: tuple[str, ...]
    places: tuple[int, ...] = ()


def decimal_tables(header: Sequence[Side], rows: Sequence[Sequence[str]]) -> list[DecimalTable]:
    """Return the table, cut between columns so that each part fits the line.

    Every part begins with the first column.  Raises ValueError if a row has another
    length than the header.
    """
    if any(len(row) != len(header) for row in rows):
        raise ValueError("every row of values needs one cell for each column of the header")
    widths = [_width(side, [row[j] for row in rows]) for j, side in enumerate(header)]
    groups: list[list[int]] = [[0]]
    used = widths[0]
    for j in range(1, len(header)):
        if len(groups[-1]) > 1 and used + widths[j] > LINE:
            groups.append([0])
            used = widths[0]
        groups[-1].append(j)
        used += widths[j]
    return [_table(header, rows, group) for group in groups]


def _width(head: Side, cells: Sequence[str]) -> float:
    body = max(map(_cell_width, cells), default=0.0)
    return max(side_box(head).width, body) + COLUMN_GAP


def _cell_width(text: str) -> float:
    mantissa, _, power = text.lower().partition("e")
    # the sign is wider than a digit, the point narrower
    width = DIGIT * len(mantissa) + (0.3 if text.startswith(("-", "\u2212")) else 0.0)
    return width + (2.4 + 0.4 * len(power) if power else 0.0)


def _table(
    header: Sequence[Side], rows: Sequence[Sequence[str]], group: Sequence[int]
) -> DecimalTable:
    head = " & ".join(rf"\multicolumn{{2}}{{c}}{{{inline(header[j])}}}" for j in group)
    lines = tuple(" & ".join(_cell(row[j]) for j in group) for row in rows)
    return DecimalTable("r@{}l" * len(group), head, lines, tuple(group))


def _cell(text: str) -> str:
    sign, whole, part = split_decimal(text)
    if not whole:
        return rf"\multicolumn{{2}}{{c}}{{{escaped(text)}}}"
    return f"${sign}{whole}$ & " + (f"${part}$" if part else "")
