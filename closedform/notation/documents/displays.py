r"""The displayed formulas of a LaTeX document, in their order.

Formulas in a line of text are passed by, and so is all that TeX does not set.  The branches of
conditionals count as set, and a macro whose definition is not followed is left as it stands and
said so.
"""

from __future__ import annotations

import re
from bisect import bisect_left
from collections.abc import Iterator
from dataclasses import dataclass

from closedform.errors import Place
from closedform.notation.documents.errors import (
    DocumentSizeError,
    IncludedFileError,
    UnendedError,
)
from closedform.notation.documents.expansion import Expanded, Unfollowed, expanded
from closedform.notation.documents.flattening import Comment, Flat, Opener, flattened
from closedform.notation.documents.rows import Row, lines_of
from closedform.notation.documents.weaving import TextFile

__all__ = ["Displayed", "Formula", "Remark", "displayed_formulas"]

MOST_FORMULAS = 5_000
LONGEST_DISPLAY = 100_000
"""Characters of a display, its macros expanded."""
ENVIRONMENTS = frozenset(
    (
        *("equation", "align", "gather", "multline", "eqnarray", "alignat", "xalignat"),
        *("xxalignat", "flalign", "displaymath", "math", "dmath", "IEEEeqnarray"),
    )
)
"""Those that display formulas; each has a form with a star."""
OPENING = re.compile(
    r"(?s)\\begin\s*\{(?P<name>[^{}\n]*)\}|(?P<bracket>\\\[)|(?P<dollars>\$\$?)|\\[^a-zA-Z]"
)
CLOSING = {
    r"\[": re.compile(r"(?s)(?P<end>\\\])|\\[^a-zA-Z]"),
    "$$": re.compile(r"(?s)(?P<end>\$\$)|\\[^a-zA-Z]"),
    "$": re.compile(r"(?s)(?P<end>\$)|(?P<stop>\n[ \t]*\n)|\\[^a-zA-Z]"),
}
ARGUMENTS = {
    "alignat": re.compile(r"\s*\{[^{}]*\}"),
    "xalignat": re.compile(r"\s*\{[^{}]*\}"),
    "xxalignat": re.compile(r"\s*\{[^{}]*\}"),
    "IEEEeqnarray": re.compile(r"\s*(?:\[[^\]]*\])?\s*\{(?:[^{}]|\{[^{}]*\})*\}"),
    "dmath": re.compile(r"\[[^\]]*\]"),
}
r"""What stands behind ``\begin{..}`` and is no formula."""


@dataclass(frozen=True, slots=True)
class Formula:
    r"""A displayed formula: its LaTeX text in one line, its macros expanded, and where it begins.

    `label` is that of a ``\label``.  `unfollowed` says which macros stand in it whose
    definitions are not followed, each with the reason; the text does not say what they set.
    """

    text: str
    place: Place
    label: str = ""
    unfollowed: tuple[tuple[str, str], ...] = ()


@dataclass(frozen=True, slots=True)
class Remark:
    r"""A comment ``% closedform: text``, and the indices of the formulas that it is about.

    One inside a display is about the row on whose line it stands, or about the next row if it
    has a line to itself.  One behind ``\begin{..}``, or behind the display on its last line,
    is about all of the display, and any other about all of the next display.
    """

    text: str
    place: Place
    formulas: tuple[int, ...]


@dataclass(frozen=True, slots=True)
class Displayed:
    """What a document displays, and the remarks in it, both in their order."""

    formulas: tuple[Formula, ...]
    remarks: tuple[Remark, ...]


@dataclass(frozen=True, slots=True)
class _Display:
    """A display in the expanded text: all of it, and its rows with the index of their formula."""

    start: int
    end: int
    formulas: range
    rows: tuple[tuple[Row, int], ...]


def displayed_formulas(
    text: str, *, name: str | None = None, opener: Opener | None = None
) -> Displayed:
    """Return the displayed formulas of a document, or of a fragment of one.

    `name` is that of the file.  `opener` opens the files that it takes in; without one, such a
    file is an error.

    Raises:  UnendedError, IncludedFileError, DocumentSizeError, and what `opener` raises.
    """
    flat = flattened(TextFile(name, text), opener or _refuse)
    full = expanded(flat)
    formulas: list[Formula] = []
    displays: list[_Display] = []
    offsets = [used.offset for used in full.unfollowed]
    for start, end, inner, kind in _displays(flat, full):
        if end - start > LONGEST_DISPLAY:
            raise DocumentSizeError(
                _place(flat, full, start, excerpt=True),
                f"the display that begins here has {end - start} characters",
                f"{LONGEST_DISPLAY} are read",
            )
        lines = lines_of(full.text, *inner, kind)
        first = len(formulas)
        rows = tuple((row, first + i) for i, line in enumerate(lines) for row in line.rows)
        displays.append(_Display(start, end, range(first, first + len(lines)), rows))
        for line in lines:
            row = line.rows[0]
            place = _place(flat, full, row.start)
            low, high = (bisect_left(offsets, o) for o in (row.region, line.rows[-1].end))
            formulas.append(
                Formula(line.text, place, line.label, _named(full.unfollowed[low:high]))
            )
        if max(len(formulas), len(displays)) > MOST_FORMULAS:
            raise DocumentSizeError(
                _place(flat, full, start, excerpt=True),
                f"the document displays more than {MOST_FORMULAS} formulas",
                "that many are read",
            )
    remarks = tuple(_remark(comment, full, displays) for comment in flat.comments)
    return Displayed(tuple(formulas), remarks)


def _refuse(name: str, place: Place) -> TextFile:
    raise IncludedFileError(place, name, "a text that stands in no folder takes nothing in")


def _place(flat: Flat, full: Expanded, offset: int, *, excerpt: bool = False) -> Place:
    _, before = full.weave.origin(offset)
    return flat.place(before, excerpt=excerpt)


def _named(used: tuple[Unfollowed, ...]) -> tuple[tuple[str, str], ...]:
    """Return macros and why they are not followed, each once."""
    return tuple(dict.fromkeys((rf"\{one.name}", one.reason) for one in used))


def _displays(flat: Flat, full: Expanded) -> Iterator[tuple[int, int, tuple[int, int], str]]:
    """Yield where each display starts and ends, where its inside does, and its kind."""
    text, position = full.text, full.body
    while found := OPENING.search(text, position):
        position = found.end()
        name = (found["name"] or "").strip()
        opening = found["bracket"] or found["dollars"]
        if name.removesuffix("*") in ENVIRONMENTS:
            closing = re.compile(
                rf"(?s)(?P<end>\\end\s*\{{{re.escape(name)}\}})"
                rf"|(?P<stop>\\begin\s*\{{{re.escape(name)}\}})|\\[^a-zA-Z]"
            )
            missing = rf"\end{{{name}}}"
        elif opening:
            closing = CLOSING[opening]
            missing = r"\]" if opening == r"\[" else opening
        else:
            continue
        close = next((m for m in closing.finditer(text, position) if m.lastgroup), None)
        if opening == "$":
            position = close.end("end") if close and close["end"] else position
            continue
        if close is None or not close["end"]:
            place = _place(flat, full, found.start(), excerpt=True)
            raise UnendedError(place, found[0], missing)
        inner, kind = _inside(text, position, close.start(), name.removesuffix("*"))
        yield found.start(), close.end(), inner, kind
        position = close.end()


def _inside(text: str, start: int, end: int, kind: str) -> tuple[tuple[int, int], str]:
    """Return where the formulas of a display stand; another one may fill it."""
    if kind in ARGUMENTS and (found := ARGUMENTS[kind].match(text, start, end)):
        start = found.end()
    if kind in ("", "equation", "displaymath"):
        opened = re.compile(r"\s*\\begin\s*\{([^{}\n]*)\}").match(text, start, end)
        name = opened[1].strip() if opened else ""
        if opened and name.removesuffix("*") in ENVIRONMENTS:
            closing = rf"\end{{{name}}}"
            stop = text.find(closing, opened.end(), end)
            if stop >= 0 and not text[stop + len(closing) : end].strip():
                return _inside(text, opened.end(), stop, name.removesuffix("*"))
    return (start, end), kind


def _remark(comment: Comment, full: Expanded, displays: list[_Display]) -> Remark:
    """Return a comment with the formulas that it is about."""
    offset = full.weave.moved(comment.offset)
    index = bisect_left(displays, offset, key=lambda display: display.end)
    formulas = range(0)
    before = displays[index - 1] if index else None
    if before and not comment.alone and full.text.find("\n", before.end, offset) < 0:
        formulas = before.formulas
    elif index < len(displays):
        display = displays[index]
        inside = display.start < offset
        formulas = _row(display, offset, full, comment) if inside else display.formulas
    return Remark(comment.text, comment.place, tuple(formulas))


def _row(display: _Display, offset: int, full: Expanded, comment: Comment) -> range:
    """Return the formula of a display that a comment inside it is about, or all."""
    rows = display.rows
    if not rows:
        return range(0)
    at = min(bisect_left(rows, offset, key=lambda pair: pair[0].end), len(rows) - 1)
    row, number = rows[at]
    if not comment.alone and not full.text[row.region : offset].strip():
        if at == 0:
            return display.formulas
        number = rows[at - 1][1]  # the comment stands behind the row's end
    return range(number, number + 1)
