"""The text of a write-up read back before it is issued: what is printed is what was proved.

The statements of a derivation are proved (`closedform.derivation.proof`), and here each one is
found again in the finished text.  Displays are read in order, none may be missing and none may
be there that was not made from statements; so are tables of decimals.  Formulas in sentences
and cells are read, too, wherever they stand.  What a sentence says of them is not looked at.
"""

from __future__ import annotations

from collections.abc import Sequence
from pathlib import Path

from closedform.derivation.step import Side, Statement
from closedform.document.printed import Printed, Shown
from closedform.document.reading.comparing import Difference, chain_unlike, unlike
from closedform.document.reading.decimals import decimal_value, table_unlike
from closedform.document.reading.errors import DocumentRefutedError
from closedform.document.reading.expected import Chain, Expected
from closedform.document.reading.found import (
    FoundDisplay,
    displays_in,
    formulas_in,
    line_at,
    tables_in,
)
from closedform.document.reading.rows import chain_of, statements_of
from closedform.document.reading.sides import SideReader, UnreadSideError
from closedform.document.reading.vocabulary import Vocabulary
from closedform.document.templating import formulas_of_templates

__all__ = ["display_unlike", "read_back", "reader_for"]


def read_back(text: str, printed: Printed, time: str, *, template: str | Path = "latex") -> None:
    """Read a rendered text and hold it against what was to be printed.

    Raises:  DocumentRefutedError at the first difference, or where something is not read.
    """
    _Back(text, printed, time, template).all()


def reader_for(items: Sequence[Side | Statement | str], time: str) -> SideReader:
    """Return a reader of formulas that knows the names in what is to be printed."""
    return SideReader(Vocabulary(items, time).declared, time)


def display_unlike(found: FoundDisplay, shown: Shown, expected: Expected) -> Difference | None:
    """Return what is wrong with a display, None if it sets what it was made from."""
    reader = reader_for(shown.statements, expected.time)
    texts = statements_of(found.body, aligned=found.aligned)
    try:
        return unlike(shown.statements, texts, shown.display.form, reader, expected)
    except UnreadSideError as error:
        return Difference(error.text, f"it cannot be read: {error.reason}")


class _Back:
    def __init__(self, text: str, printed: Printed, time: str, template: str | Path) -> None:
        self.text, self.printed, self.template = text, printed, template
        self.expected = Expected(time)
        self.places: dict[str, int] = {}
        for body, start in formulas_in(text):
            self.places.setdefault(body.removeprefix(r"\displaystyle "), start)

    def all(self) -> None:
        self.displays()
        self.tables()
        self.formulas()
        self.decimals()

    def refuse(self, place: int, shown: str, latex: str, what: str) -> None:
        line = line_at(self.text, place)
        raise DocumentRefutedError(str(self.template), line, shown, latex, what)

    def place_of(self, latex: str) -> int:
        return self.places.get(latex.strip("$"), 0)

    def displays(self) -> None:
        displays, wanted = displays_in(self.text), self.printed.displays
        for place, found in enumerate(displays):
            if place >= len(wanted):
                self.refuse(found.start, "", found.body, "no statement accounts for it")
            shown = wanted[place]
            wrong = display_unlike(found, shown, self.expected)
            if wrong is not None:
                says = ", ".join(dict.fromkeys(s.says for s in shown.statements))
                self.refuse(found.start, says, wrong.latex, wrong.what)
        if len(displays) < len(wanted):
            says = wanted[len(displays)].statements[0].says
            self.refuse(len(self.text), says, "", "this statement is missing")

    def tables(self) -> None:
        tables, wanted = tables_in(self.text), self.printed.tables
        for place, found in enumerate(tables):
            if place >= len(wanted):
                self.refuse(found.start, "table", "", "no values account for it")
            reader = reader_for(wanted[place].header, self.expected.time)
            try:
                wrong = table_unlike(wanted[place], found, reader, self.expected)
            except UnreadSideError as error:
                wrong = f"{error.text} cannot be read: {error.reason}"
            if wrong:
                self.refuse(found.start, "table", "", wrong)
        if len(tables) < len(wanted):
            self.refuse(len(self.text), "table", "", "a table is missing")

    def formulas(self) -> None:
        self.accounts()
        for latex, item in self.printed.formulas.items():
            reader = reader_for([item], self.expected.time)
            wrong = self.formula_unlike(latex, self.expected.chain(item), reader)
            if wrong is not None:
                self.refuse(self.place_of(latex), "in a sentence", wrong.latex, wrong.what)

    def accounts(self) -> None:
        """Refuse a formula that was neither made from an object nor stands in a template."""
        known = {*self.printed.formulas, *self.printed.decimals, *self.printed.words}
        made = {body for each in known for body, _ in formulas_in(each)}
        strange = [body for body in self.places if body not in made]
        if strange:
            literal = formulas_of_templates(self.template)
            for body in strange:
                if body not in literal:
                    self.refuse(self.places[body], "in a sentence", body, "nothing accounts for it")

    def formula_unlike(self, latex: str, chain: Chain, reader: SideReader) -> Difference | None:
        try:
            return chain_unlike(chain, chain_of(latex.strip("$")), reader)
        except UnreadSideError as error:
            return Difference(error.text, f"it cannot be read: {error.reason}")

    def decimals(self) -> None:
        reader = reader_for([], self.expected.time)
        for latex, text in self.printed.decimals.items():
            value = decimal_value(text)
            if value is None:
                if formulas_in(latex):
                    self.refuse(
                        self.place_of(latex),
                        "decimal",
                        latex,
                        f"it stands for {text!r}, which is no decimal",
                    )
                continue  # words
            wrong = self.formula_unlike(latex, Chain((value,)), reader)
            if wrong is not None:
                self.refuse(self.place_of(latex), "decimal", wrong.latex, wrong.what)
