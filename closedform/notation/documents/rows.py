r"""The rows of a display, and which of them make one chain.

A row goes on with the one before if it begins with a relation or a sign, if it is indented or
the row before is not numbered and it holds no relation of its own, or if the row before breaks
off at an operator or inside brackets.  Open to debate is a row that begins with a minus and
holds a relation, ``&-a + b = 0``: it is a formula of its own if the formula before it began
behind an alignment mark too, as in a list of equations, and else it goes on with that chain.
"""

from __future__ import annotations

import re
from dataclasses import dataclass, field

__all__ = ["Line", "Row", "lines_of"]

RELATIONS = (
    *("approx", "simeq", "cong", "sim", "neq", "ne", "le", "leq", "leqslant", "ge", "geq"),
    *("geqslant", "lt", "gt", "equiv", "to", "rightarrow", "propto", "doteq", "coloneqq"),
    *("coloneq", "eqqcolon", "triangleq", "ll", "gg", "longrightarrow", "mapsto", "in"),
    *("gets", "stackrel", "overset", "underset", "lesssim", "gtrsim", "asymp"),
)
RELATION = rf"(?:[=<>≈≠≤≥≡∝→]|:=|\\(?:{'|'.join(RELATIONS)})(?![a-zA-Z]))"
MINUS = "[-−–]"
BLANK = r"(?:\s|\{\}|\\[,;:!> ]|~|\\(?:thinspace|medspace|negthinspace)(?![a-zA-Z]))"
INDENT = (
    r"(?:\\(?:q?quad|enspace|hskip|hfill)(?![a-zA-Z])|\\(?:hspace\*?|mspace|hphantom|phantom"
    r"|mathrel|mathbin)\s*\{[^{}]*\})"
)
LEAD = re.compile(
    rf"(?P<all>(?:{BLANK}|{INDENT})*)(?:(?P<relation>{RELATION})|(?P<plus>\+|"
    rf"\\(?:pm|mp|cdot|times)(?![a-zA-Z])|[*/])|(?P<minus>{MINUS}))?"
)
ANY_RELATION = re.compile(RELATION)
INDENTED = re.compile(INDENT)
BREAKS_OFF = re.compile(rf"(?:{RELATION}|[-+*/−–]|\\(?:pm|mp|cdot|times)){BLANK}*\Z")
OPEN = re.compile(r"[(\[]")
SHUT = re.compile(r"[)\]]")
IMPLIES = re.compile(
    rf"(?:{BLANK}|{INDENT})*\\(?:Rightarrow|Longrightarrow|implies|therefore|iff|Leftrightarrow"
    r"|Longleftrightarrow|Leftarrow|impliedby)(?![a-zA-Z])"
)
TOKEN = re.compile(
    r"""(?sx) \\(?P<side> begin | end )\s*\{[^{}\n]*\}
    | (?P<row> \\\\ \*? (?: \[ \s* [-+]? [\d.,]* \s* (?: [a-z]{2} | \\[a-zA-Z]+ ) \s* \] )?
        | \\(?: cr | tabularnewline | newline ) (?![a-zA-Z@]) )
    | \\label \s* \{ (?P<label> [^{}]* ) \}
    | (?P<drop> \\ (?: tag\*? | intertext | shortintertext | vspace\*? ) \s*
        \{ (?: [^{}] | \{ [^{}]* \} )* \}
        | \\ (?: displaybreak | allowdisplaybreaks ) (?![a-zA-Z]) (?: \[\d\] )?
        | \\ (?: qedhere | yesnumber | IEEEyesnumber | IEEEeqnarraynumspace | hline | noalign
            | displaystyle | limits | nolimits ) (?![a-zA-Z])
        | \\ l?eqno (?![a-zA-Z]) .* )
    | (?P<unnumbered> \\ (?: nonumber | notag | IEEEnonumber ) (?![a-zA-Z]) )
    | (?P<single> \\[^a-zA-Z] ) | (?P<brace> [{}] ) | (?P<cell> & )
"""
)


@dataclass(slots=True)
class Row:
    """A row of a display: its cells, and where it stands.

    `region` is where it begins, behind the row before, and `end` where the next does; `start`
    is where its text begins.  `surface` is what stands inside no braces and environments.
    """

    region: int
    end: int
    start: int = -1
    cells: list[str] = field(default_factory=list)
    surface: str = ""
    label: str = ""
    unnumbered: bool = False

    @property
    def bare(self) -> bool:
        """Whether nothing stands in front of the first alignment mark."""
        return len(self.cells) > 1 and not self.cells[0].strip()

    @property
    def head(self) -> int:
        """The first cell that holds anything."""
        return next((i for i, cell in enumerate(self.cells) if cell.strip()), 0)


@dataclass(slots=True)
class Line:
    """A formula of a display: the rows that it is made of, and what they say together.

    `columns` are formulas side by side, each in parts; `pairs` tells in which column a pair of
    cells stands.  `open` counts the brackets that are not closed.
    """

    rows: list[Row]
    columns: list[list[str]]
    pairs: list[int]
    open: int = 0

    @property
    def text(self) -> str:
        """The formula in one line, without alignment marks."""
        columns = (" ".join(" ".join(column).split()) for column in self.columns)
        return r" \quad ".join(column for column in columns if column)

    @property
    def label(self) -> str:
        """The first label, or nothing."""
        return next((row.label for row in self.rows if row.label), "")


def lines_of(text: str, start: int, end: int, kind: str) -> list[Line]:
    """Return the formulas of a display that spans a part of a text.

    `kind` is the name of its environment without star: the rows of ``multline`` and ``dmath``
    are one formula, the cells of ``eqnarray`` belong together, and those of the others are
    pairs, each a formula beside the one before.
    """
    paired, joined = "eqnarray" not in kind, kind in ("multline", "dmath")
    lines: list[Line] = []
    for row in _Rows(text, start, end).read():
        if row.start < 0:
            if lines:
                lines[-1].rows.append(row)
        elif lines and (joined or _goes_on(row, lines[-1])):
            _append(lines[-1], row, paired=paired)
        else:
            if found := IMPLIES.match(row.cells[row.head]):
                row.cells[row.head] = row.cells[row.head][found.end() :]
            lines.append(_line(row, paired=paired))
    return lines


def _goes_on(row: Row, before: Line) -> bool:
    """Say whether a row goes on with the formula before it."""
    lead = LEAD.match(row.cells[row.head])
    if lead is None or IMPLIES.match(row.cells[row.head]):
        return False
    last = next(r for r in reversed(before.rows) if r.start >= 0)
    if lead["relation"] or lead["plus"] or before.open > 0:
        return True
    if BREAKS_OFF.search(last.surface.rstrip()):
        return True
    related = ANY_RELATION.search(row.surface) is not None
    indented = last.unnumbered or (row.bare and INDENTED.search(lead["all"]) is not None)
    if lead["minus"]:
        return not related or (row.bare and (indented or not before.rows[0].bare))
    return indented and not related


def _pairs(row: Row, *, paired: bool) -> list[str]:
    """Return the cells of a row two by two, or all as one."""
    step = 2 if paired else max(len(row.cells), 1)
    return [" ".join(row.cells[i : i + step]) for i in range(0, len(row.cells), step)]


def _line(row: Row, *, paired: bool) -> Line:
    """Return the formula that begins with a row."""
    line = Line([row], [], [], _opened(row))
    for pair in _pairs(row, paired=paired):
        lead = LEAD.match(pair)
        joins = lead and (
            lead["relation"] or lead["plus"] or (lead["minus"] and not ANY_RELATION.search(pair))
        )
        if line.columns and joins:
            line.columns[-1].append(pair)
        else:
            line.columns.append([pair])
        line.pairs.append(len(line.columns) - 1)
    return line


def _append(line: Line, row: Row, *, paired: bool) -> None:
    """Add a row to the formula with which it goes on, column by column."""
    line.rows.append(row)
    line.open += _opened(row)
    for index, pair in enumerate(_pairs(row, paired=paired)):
        column = line.pairs[index] if index < len(line.pairs) else len(line.columns) - 1
        line.columns[column].append(pair)


def _opened(row: Row) -> int:
    return len(OPEN.findall(row.surface)) - len(SHUT.findall(row.surface))


class _Rows:
    """The state of one walk through a display."""

    def __init__(self, text: str, start: int, end: int) -> None:
        self.text, self.start, self.end = text, start, end
        self.depth = 0
        self.rows: list[Row] = []
        self.begin(start)

    def begin(self, region: int) -> None:
        """Begin a row."""
        self.row = Row(region, self.end)
        self.pieces: list[str] = []
        self.surface: list[str] = []

    def keep(self, start: int, end: int) -> None:
        """Keep a part of the text in the row."""
        piece = self.text[start:end]
        if self.row.start < 0 and piece.strip():
            self.row.start = start + len(piece) - len(piece.lstrip())
        self.pieces.append(piece)
        if self.depth == 0:
            self.surface.append(piece)

    def close(self, end: int) -> None:
        """End a row."""
        self.row.cells.append("".join(self.pieces))
        self.row.surface = "".join(self.surface)
        self.row.end = end
        self.rows.append(self.row)

    def read(self) -> list[Row]:
        """Return the rows."""
        position = self.start
        for found in TOKEN.finditer(self.text, self.start, self.end):
            kind = found.lastgroup
            if kind in ("row", "cell") and self.depth:
                continue
            if kind == "single":
                continue
            self.keep(position, found.start())
            position = found.end()
            self._token(kind or "", found)
        self.keep(position, self.end)
        self.close(self.end)
        return self.rows

    def _token(self, kind: str, found: re.Match[str]) -> None:
        """Do what a token asks for."""
        match kind:
            case "row":
                self.close(found.end())
                self.begin(found.end())
            case "cell":
                self.row.cells.append("".join(self.pieces))
                self.pieces = []
            case "label":
                self.row.label = self.row.label or found["label"].strip()
                self.pieces.append(" ")
            case "unnumbered":
                self.row.unnumbered = True
                self.pieces.append(" ")
            case "drop":
                self.pieces.append(" ")
            case "side" | "brace":
                opens = found[0] == "{" or found["side"] == "begin"
                self.depth = self.depth + 1 if opens else max(0, self.depth - 1)
                self.keep(found.start(), found.end())
