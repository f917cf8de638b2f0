r"""The lines of a hand derivation, from a LaTeX document or from a list of claims.

A LaTeX document, or a fragment of one, is taken as it is: its displayed formulas are the lines,
in their order.  Comments say what the formulas do not::

    % closedform: model = cart.toml, case = 2
    % closedform: says = eigenvector, of = -2
    \[ v = (1, -2) \]
    \[ E = m c^2 \]  % closedform: skip

A comment may say model, title and case, and with one of these `where` for all lines; or, of the
display that it stands before or on the line of: says, of, at, where and skip.  The same can
stand beside the document NAME.tex in NAME.check.toml, which has model, title, case and where,
and a [[line]] with number or label and says, of, at, where or skip for each line.

A TOML file is a list of claims: model, title, case and where, and for each line a [[claim]] with
latex or text, and says, of, at and where.

Two questions were open.  A line that is skipped by a comment has no number; one that is skipped
by NAME.check.toml keeps its number, which stays unused: the author of the notes counts what the
reports show.  And where a comment and the notes say different things of one line, neither wins:
that is an error, since one of them is out of date.
"""

from __future__ import annotations

from dataclasses import dataclass, replace
from pathlib import Path

from closedform.checking.claim import SourceLine
from closedform.checking.source.claims import claimed, noted, stated
from closedform.checking.source.errors import (
    ModelHandedInError,
    NoFormulaError,
    NoModelError,
    SourceFileError,
    StatedTwiceError,
    StrayRemarkError,
)
from closedform.checking.source.files import Folder, demand_file, is_there, model_path, read_text
from closedform.checking.source.remarks import DOCUMENT_KEYS, read_remark
from closedform.checking.source.toml_table import Table, read_table
from closedform.errors import Place
from closedform.notation.documents.displays import Displayed, Formula, displayed_formulas

__all__ = ["NOTES", "Source", "read_source"]

NOTES = ".check.toml"
"""The ending of the file beside a document that says what its lines claim."""
MODEL_KEYS = ("equations", "matrix", "mass", "stiffness", "states", "initial", "at_points")
SETTINGS = (*DOCUMENT_KEYS, "where")

Said = dict[str, tuple[str, Place]]


@dataclass(frozen=True, slots=True)
class Source:
    """A derivation: its lines, and what it is to be held against.

    `path` is as it was given, `model` as it is written in the file, and `model_path` the same
    seen from here.  `title` and `case` are empty if nothing is said; `case` says which case of
    the parameters is meant.  What `where` says of all lines stands in each line that says
    nothing else.
    """

    path: Path
    model: str
    model_path: Path
    title: str
    lines: tuple[SourceLine, ...]
    case: str = ""
    where: str = ""


def read_source(path: Path | str, *, model: Path | str | None = None) -> Source:
    """Return the lines of a file: of a TOML file its claims, of any other its formulas.

    `model` takes the place of the model that the file names, which then needs to name none.

    Raises:  the errors of ``closedform.checking.source.errors`` and of
             ``closedform.notation.documents``; all of them are InputError.
    """
    path = Path(path)
    if path.suffix.lower() == ".toml":
        table = read_table(path, str(path))
        _check_claim_file(table)
        said, lines = _settings(table), claimed(table)
        example = 'model = "FILE.toml" at the top'
    else:
        said, lines = _document(path)
        example = "a comment near the top, % closedform: model = FILE.toml"
    where = said.get("where", ("", Place()))[0]
    if where:
        lines = tuple(line if line.where else replace(line, where=where) for line in lines)
    if model is not None:
        name, found = str(model), Path(model)
        demand_file(found, name)
    else:
        name, place = said.get("model", ("", Place()))
        if not name:
            raise NoModelError(Place(str(path)), example)
        found = model_path(name, path, place)
    title, case = (said.get(key, ("", Place()))[0] for key in ("title", "case"))
    return Source(path, name, found, title, lines, case, where)


def _check_claim_file(table: Table) -> None:
    """Raise an error for a TOML file that is no list of claims."""
    if "claim" not in table.content:
        for key in MODEL_KEYS:
            if key in table.content:
                raise ModelHandedInError(table.place(key), key)
        if "line" in table.content:
            reason = (
                "these are notes about the lines of a LaTeX document; hand in the document, "
                "which lies beside them"
            )
            raise SourceFileError(table.place("line[1]"), reason)
    table.check(table.content, (*SETTINGS, "claim"))


def _settings(table: Table) -> Said:
    """Return what a TOML file says of all lines."""
    return {
        key: (table.text(table.content, key).strip(), table.place(key))
        for key in SETTINGS
        if key in table.content
    }


def _document(path: Path) -> tuple[Said, tuple[SourceLine, ...]]:
    """Return what a document says of all its lines, and the lines."""
    text = read_text(path, str(path))
    displayed = displayed_formulas(text, name=str(path), opener=Folder(path).open)
    said, of_lines = _remarks(displayed)
    kept = [
        (formula, of_line)
        for formula, of_line in zip(displayed.formulas, of_lines, strict=True)
        if "skip" not in of_line
    ]
    lines = tuple(_line(number, *pair) for number, pair in enumerate(kept, 1))
    notes = path.with_name(path.stem + NOTES)
    if is_there(notes):
        table = read_table(notes, str(notes))
        table.check(table.content, (*SETTINGS, "line"))
        for key, (value, place) in _settings(table).items():
            _say(said, key, value, place)
        lines = noted(table, lines)
    if not lines:
        raise NoFormulaError(
            Place(str(path)), r"displayed formulas, such as \[ ... \] or an align environment"
        )
    return said, lines


def _line(number: int, formula: Formula, said: Said) -> SourceLine:
    """Return a displayed formula as a line."""
    trouble = "; ".join(
        f"the macro {name} is not known: {reason}" for name, reason in formula.unfollowed
    )
    what = stated(said)
    return SourceLine(
        number,
        formula.text,
        formula.place,
        says=what.says,
        of=what.of,
        at=what.at,
        where=what.where,
        label=formula.label,
        trouble=trouble,
    )


def _remarks(displayed: Displayed) -> tuple[Said, list[Said]]:
    """Return what comments say of all lines, and of each formula.

    What is said of one row goes before what is said of its display.
    """
    of_all: Said = {}
    of_rows: list[Said] = [{} for _ in displayed.formulas]
    of_displays: list[Said] = [{} for _ in displayed.formulas]
    for remark in displayed.remarks:
        said = read_remark(remark.text, remark.place)
        if any(key in said for key in DOCUMENT_KEYS):
            for key, value in said.items():
                if key not in SETTINGS:
                    raise StrayRemarkError(remark.place)
                _say(of_all, key, value, remark.place)
            continue
        if not remark.formulas:
            raise StrayRemarkError(remark.place)
        target = of_rows if len(remark.formulas) == 1 else of_displays
        for index in remark.formulas:
            for key, value in said.items():
                _say(target[index], key, value, remark.place)
    return of_all, [outer | inner for outer, inner in zip(of_displays, of_rows, strict=True)]


def _say(said: Said, key: str, value: str, place: Place) -> None:
    """Add what is said under a key.

    Raises:  StatedTwiceError if something else was said before.
    """
    if key in said and said[key][0] != value:
        raise StatedTwiceError(place, key, said[key][0], value)
    said.setdefault(key, (value, place))
