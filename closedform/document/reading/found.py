"""What stands in the text of a document: displays, formulas in sentences, tables of decimals."""

from __future__ import annotations

import re
from dataclasses import dataclass

__all__ = ["FoundDisplay", "FoundTable", "displays_in", "formulas_in", "line_at", "tables_in"]

COMMENT = re.compile(r"(?<!\\)((?:\\\\)*)%[^\n]*")
DISPLAY = re.compile(
    r"\\begin\{(?P<kind>equation|align|gather|multline|displaymath|eqnarray|flalign|alignat)"
    r"(?P<star>\*?)\}(?P<body>.*?)\\end\{(?P=kind)(?P=star)\}"
    r"|(?<!\\)\\\[(?P<bracketed>.*?)(?<!\\)\\\]|\$\$(?P<dollars>.*?)\$\$",
    re.DOTALL,
)
FORMULA = re.compile(r"(?<!\\)\$(?P<body>(?:[^$\\]|\\.)+)\$")
TABLE = re.compile(
    r"\\begin\{(?P<kind>tabular|longtable)\}\{@\{\}(?P<columns>(?:r@\{\}l)+)@\{\}\}"
    r"(?P<body>.*?)\\end\{(?P=kind)\}",
    re.DOTALL,
)
RULES = re.compile(r"\\(?:toprule|midrule|bottomrule|endhead|endlastfoot|endfoot|endfirsthead)\b")
LINE = re.compile(r"(?P<cells>(?:[^\\]|\\[^\\])+)(?:\\\\\*?)?")
ALIGNED = frozenset({"align", "flalign", "alignat", "eqnarray", "multline"})
BODY_BEGINS = r"\begin{document}"


@dataclass(frozen=True, slots=True)
class FoundDisplay:
    """A display: `start` is where it begins in the text, `inside` where its body does."""

    text: str
    body: str
    start: int
    inside: int
    aligned: bool


@dataclass(frozen=True, slots=True)
class FoundTable:
    """A table whose cells are cut at the decimal point: its rows, with two cells for each.

    `starts` are the places of the rows in the text.
    """

    rows: tuple[tuple[str, ...], ...]
    starts: tuple[int, ...]
    start: int


def line_at(text: str, place: int) -> int:
    """Return the number of the line that a place in a text is in, from 1."""
    return text.count("\n", 0, place) + 1


def displays_in(text: str) -> list[FoundDisplay]:
    """Return the displays after the preamble, in order; comments are left out."""
    found: list[FoundDisplay] = []
    shown = _body(text)
    for match in DISPLAY.finditer(shown):
        part = next(k for k in ("body", "bracketed", "dollars") if match[k] is not None)
        aligned = match["kind"] in ALIGNED
        found.append(
            FoundDisplay(match.group(), match[part], match.start(), match.start(part), aligned)
        )
    return found


def formulas_in(text: str) -> list[tuple[str, int]]:
    """Return what stands between single dollar signs after the preamble, with its places.

    Tables of decimals are left out.
    """
    shown = TABLE.sub(_blank, DISPLAY.sub(_blank, _body(text)))
    return [(match["body"], match.start()) for match in FORMULA.finditer(shown)]


def tables_in(text: str) -> list[FoundTable]:
    """Return the tables of decimals after the preamble; the first row is the head."""
    found: list[FoundTable] = []
    for match in TABLE.finditer(_body(text)):
        rows: list[tuple[str, ...]] = []
        starts: list[int] = []
        for line in LINE.finditer(RULES.sub(_blank, match["body"])):
            cells = line["cells"]
            if cells.strip():
                rows.append(tuple(cell.strip() for cell in cells.split("&")))
                lead = len(cells) - len(cells.lstrip())
                starts.append(match.start("body") + line.start() + lead)
        found.append(FoundTable(tuple(rows), tuple(starts), match.start()))
    return found


def _body(text: str) -> str:
    """Return the text with preamble and comments blanked, every place where it was."""
    begin = text.find(BODY_BEGINS)
    head = re.sub(r"[^\n]", " ", text[: max(begin, 0)])
    return head + COMMENT.sub(_blanked, text[max(begin, 0) :])


def _blank(match: re.Match[str]) -> str:
    return " " * len(match.group())


def _blanked(match: re.Match[str]) -> str:
    kept = match[1]
    return kept + " " * (len(match.group()) - len(kept))
