"""What a rendering put into its document: each display and each formula, with its object.

Templates get mathematics through an instance of `Printed` only, so that it knows all of it.
What it noted is read back from the finished text (`closedform.document.reading`).
"""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass
from dataclasses import field as slot

from closedform.derivation.step import Side, Statement
from closedform.document.beside import displayed_beside
from closedform.document.display import Display, displayed, displayed_together
from closedform.document.latex import cell, decimal, field_latex, inline, mixed
from closedform.document.tables import DecimalTable, decimal_tables
from closedform.document.units import unit_latex

__all__ = ["Printed", "Shown", "ShownTable"]


@dataclass(frozen=True, slots=True)
class Shown:
    """A display and the statements that it sets; one only unless its form is whole."""

    display: Display
    statements: tuple[Statement, ...]


@dataclass(frozen=True, slots=True)
class ShownTable:
    """A table of decimals and the columns of the rows it was made from."""

    table: DecimalTable
    header: tuple[Side, ...]
    rows: tuple[tuple[str, ...], ...]


@dataclass
class Printed:
    """Sets mathematics for templates and notes it.

    `displays` and `tables` are in the order of printing; `formulas` maps what stands between
    dollar signs to its object, `decimals` likewise to the text of the decimal.  `words` are
    units and fields of numbers, which are set as mathematics and say none.
    """

    displays: list[Shown] = slot(default_factory=list)
    tables: list[ShownTable] = slot(default_factory=list)
    formulas: dict[str, Side | Statement | str] = slot(default_factory=dict)
    decimals: dict[str, str] = slot(default_factory=dict)
    words: set[str] = slot(default_factory=set)

    def next_pass(self) -> None:
        """Forget what has a place in the document; it is printed anew.

        Formulas are kept: Jinja works out a filter of a constant just once.
        """
        self.displays.clear()
        self.tables.clear()

    def display(self, statement: Statement, label: str, by: str) -> Display:
        """Return a statement as a display, as `displayed` does."""
        made = displayed(statement, label=label, by=by)
        self.displays.append(Shown(made, (statement,)))
        return made

    def together(self, statements: Sequence[Statement], labels: Sequence[str]) -> list[Display]:
        """Return statements below each other, as `displayed_together` does."""
        return self._shared(displayed_together(statements, labels), statements)

    def beside(self, statements: Sequence[Statement]) -> list[Display]:
        """Return statements beside each other, as `displayed_beside` does."""
        return self._shared(displayed_beside(statements), statements)

    def _shared(self, made: list[Display], statements: Sequence[Statement]) -> list[Display]:
        """Note one display of all statements, or one of each."""
        if len(made) == 1:
            self.displays.append(Shown(made[0], tuple(statements)))
        else:
            pairs = zip(made, statements, strict=True)
            self.displays += [Shown(one, (statement,)) for one, statement in pairs]
        return made

    def math(self, item: Side | Statement | str) -> str:
        """Return mathematics within a line of text, as `inline` does."""
        made = inline(item)
        self.formulas[made] = item
        return made

    def cell(self, item: Side | Statement | str, *, display: bool = False) -> str:
        """Return what stands in a cell of a table, as `cell` does."""
        self._note(item)
        return cell(item, display=display)

    def mixed(self, items: str | list[Side | Statement | str]) -> str:
        """Return a sentence of text and mathematics, as `mixed` does."""
        for item in [items] if isinstance(items, str) else items:
            self._note(item)
        return mixed(items)

    def _note(self, item: Side | Statement | str) -> None:
        if not isinstance(item, str):
            self.math(item)

    def relate(self, *sides: Side) -> str:
        """Return sides joined by equals signs within a line of text."""
        return self.math(Statement("", sides))

    def decimal(self, text: str) -> str:
        """Return a decimal as mathematics, as `decimal` does."""
        if " and " in text:  # two real eigenvalues
            return " and ".join(map(self.decimal, text.split(" and ")))
        made = decimal(text)
        self.decimals[made] = text
        return made

    def unit(self, text: str) -> str:
        """Return a unit as mathematics, as `unit_latex` does."""
        return self._worded(unit_latex(text))

    def field(self, text: str) -> str:
        """Return a field of numbers as mathematics, as `field_latex` does."""
        return self._worded(field_latex(text))

    def _worded(self, made: str) -> str:
        self.words.add(made)
        return made

    def tabled(self, header: Sequence[Side], rows: Sequence[Sequence[str]]) -> list[DecimalTable]:
        """Return a table of decimals cut to the width of the line, as `decimal_tables` does."""
        made = decimal_tables(header, rows)
        for table in made:
            for j in table.places:
                self.math(header[j])
            self.tables.append(
                ShownTable(
                    table,
                    tuple(header[j] for j in table.places),
                    tuple(tuple(row[j] for j in table.places) for row in rows),
                )
            )
        return made
