"""Claims typed in a TOML file, and notes typed beside a LaTeX document."""

from __future__ import annotations

from collections.abc import Mapping, Sequence
from dataclasses import dataclass, replace
from typing import Any

from closedform.checking.claim import SourceLine
from closedform.checking.source.errors import (
    ClaimFormulaError,
    LineReferenceError,
    NoFormulaError,
    SourceFileError,
    SourceValueError,
    StatedTwiceError,
)
from closedform.checking.source.toml_table import Table
from closedform.checking.source.words import kind_of
from closedform.errors import Place

__all__ = ["Stated", "claimed", "noted", "stated"]

STATED = ("says", "of", "at", "where")
MOST_CLAIMS = 5_000


@dataclass(frozen=True, slots=True)
class Stated:
    """What is said of a line, as in `SourceLine`; `says` is a word of KINDS or empty."""

    says: str = ""
    of: str = ""
    at: str = ""
    where: str = ""


def stated(said: Mapping[str, tuple[str, Place]]) -> Stated:
    """Return what is said of a line; what ``eigenvector of -2`` is of goes to `of`.

    Raises:  UnknownKindError, StatedTwiceError.
    """
    values = {key: said[key][0].strip() for key in STATED if key in said}
    says, of = "", values.get("of", "")
    if "says" in values:
        place = said["says"][1]
        says, subject = kind_of(values["says"], place)
        if subject and of not in ("", subject):
            raise StatedTwiceError(place, "of", of, subject)
        of = of or subject
    return Stated(says, of, values.get("at", ""), values.get("where", ""))


def _said(table: Table, row: Mapping[str, Any], within: str) -> dict[str, tuple[str, Place]]:
    return {
        key: (table.text(row, key, within), table.place(within + key))
        for key in STATED
        if key in row
    }


def claimed(table: Table) -> tuple[SourceLine, ...]:
    """Return the lines of a claim file.

    Raises:  NoFormulaError, ClaimFormulaError, SourceKeyError, SourceValueError,
             UnknownKindError, SourceFileError for too many of them.
    """
    rows = table.rows("claim")
    if not rows:
        raise NoFormulaError(Place(table.name), "a [[claim]] with latex = '...' for each line")
    if len(rows) > MOST_CLAIMS:
        reason = f"the file has {len(rows)} claims, and at most {MOST_CLAIMS} are read; split it"
        raise SourceFileError(table.place("claim"), reason)
    lines = []
    for number, row in enumerate(rows, 1):
        within = f"claim[{number}]."
        table.check(row, ("latex", "text", *STATED), within)
        formulas = {key: table.text(row, key, within) for key in ("latex", "text") if key in row}
        given = [key for key in formulas if formulas[key].strip()]
        if len(given) != 1:
            raise ClaimFormulaError(table.place(within[:-1]), len(given))
        key = given[0]
        place = table.place(within + key)
        if key == "latex" and not table.is_as_typed(within + key, formulas[key]):
            raise SourceValueError(
                place,
                "a text in which a backslash and a letter mean a control character",
                "text in single quotation marks, as in latex = '\\theta',",
            )
        said = stated(_said(table, row, within))
        line = SourceLine(number, formulas[key], place, typed=key == "text")
        lines.append(replace(line, says=said.says, of=said.of, at=said.at, where=said.where))
    return tuple(lines)


def noted(table: Table, lines: Sequence[SourceLine]) -> tuple[SourceLine, ...]:
    """Return the lines of a document with what the notes beside it say of them.

    A [[line]] names a line by `number` or `label`.  One that it skips is left out, and its
    number stays unused, so that the numbers of the notes remain those of the reports.

    Raises:  LineReferenceError, StatedTwiceError, SourceKeyError, SourceValueError,
             UnknownKindError.
    """
    found = {line.number: line for line in lines}
    labels: dict[str, int] = {}
    for line in reversed(lines):
        labels[line.label] = line.number
    skipped: set[int] = set()
    seen: dict[int, str] = {}
    for index, row in enumerate(table.rows("line"), 1):
        within = f"line[{index}]."
        table.check(row, ("number", "label", *STATED, "skip"), within)
        number = _number(table, row, within, found, labels)
        if number in seen:
            reason = f"the same line is named by {seen[number][:-1]}; write one [[line]] for it"
            raise LineReferenceError(table.place(within[:-1]), reason)
        seen[number] = within
        skip = row.get("skip", False)
        if not isinstance(skip, bool):
            raise SourceValueError(table.place(f"{within}skip"), "something else", "true or false")
        if skip:
            skipped.add(number)
        said = stated(_said(table, row, within))
        line = found[number]
        found[number] = replace(
            line,
            says=_one(table, f"{within}says", line.says, said.says),
            of=_one(table, f"{within}of", line.of, said.of),
            at=_one(table, f"{within}at", line.at, said.at),
            where=_one(table, f"{within}where", line.where, said.where),
        )
    return tuple(line for number, line in found.items() if number not in skipped)


def _one(table: Table, key: str, before: str, now: str) -> str:
    """Return what is said in two places, or in one."""
    if before and now and before != now:
        raise StatedTwiceError(table.place(key), key.partition(".")[2], before, now)
    return before or now


def _number(
    table: Table,
    row: Mapping[str, Any],
    within: str,
    lines: Mapping[int, SourceLine],
    labels: Mapping[str, int],
) -> int:
    """Return the number of the line that a note names."""
    if ("number" in row) == ("label" in row):
        reason = 'a [[line]] names its line once: by number = 3 or by label = "eq:x"'
        raise LineReferenceError(table.place(within[:-1]), reason)
    if "label" in row:
        label = table.text(row, "label", within)
        if not label or label not in labels:
            reason = f"no displayed formula has the label '{label[:60]}'"
            raise LineReferenceError(table.place(f"{within}label"), reason)
        return labels[label]
    number = row["number"]
    if isinstance(number, bool) or not isinstance(number, int) or number not in lines:
        reason = f"there is no line {str(number)[:20]}; the lines are 1 to {len(lines)}"
        raise LineReferenceError(table.place(f"{within}number"), reason)
    return number
