"""Numbers only for the equations that are referred to, and references only to what is there.

A document is rendered twice.  The first pass notes which labels are asked for and which
equations and sections are printed; the second sets labels and references by that.
"""

from __future__ import annotations

from collections.abc import Sequence

from closedform.derivation.step import Statement
from closedform.document.display import Display
from closedform.document.printed import Printed

__all__ = ["References"]


class References:
    """Labels asked for and labels set, of the pass before and of this one.

    `printed` is what this pass has put into the document.
    """

    def __init__(self) -> None:
        self.printed = Printed()
        self.asked_before: frozenset[str] = frozenset()
        self.set_before: frozenset[str] = frozenset()
        self.asked: set[str] = set()
        self.set: set[str] = set()

    def next_pass(self) -> None:
        """Keep what this pass has found and begin the next."""
        self.asked_before, self.set_before = frozenset(self.asked), frozenset(self.set)
        self.asked, self.set = set(), set()
        self.printed.next_pass()

    def display(self, statement: Statement, label: str = "", by: str = "auto") -> Display:
        """Return the statement as a display, numbered if some sentence refers to `label`."""
        name = f"eq:{label}"
        if not label or name in self.set:
            return self.printed.display(statement, "", by)
        self.set.add(name)
        return self.printed.display(statement, name if name in self.asked_before else "", by)

    def displays(self, statements: Sequence[Statement], label: str = "") -> list[Display]:
        """Return the statements below each other, in one display if no matrix is taken apart.

        They are numbered, as ``label 1``, ``label 2`` and so on, if one is referred to.
        """
        names = [f"eq:{label} {k}" for k in range(1, len(statements) + 1)]
        fresh = [name for name in names if label and name not in self.set]
        self.set.update(fresh)
        labels = [name if name in fresh and name in self.asked_before else "" for name in names]
        return self.printed.together(statements, labels)

    def cite(self, label: str, words: str) -> str:
        """Return the words and, if that equation is printed, its number."""
        return words + self._reference(f"eq:{label}", r"~\eqref", "")

    def section(self, kind: str) -> str:
        """Return the label of the section that begins here."""
        name = f"sec:{kind}"
        if name in self.set:
            return ""
        self.set.add(name)
        return rf"\label{{{name}}}" if name in self.asked_before else ""

    def refer(self, kind: str, otherwise: str = "") -> str:
        """Return a reference to a section, or `otherwise` if it is not printed."""
        return self._reference(f"sec:{kind}", r"Section~\ref", otherwise)

    def _reference(self, name: str, command: str, otherwise: str) -> str:
        self.asked.add(name)
        return f"{command}{{{name}}}" if name in self.set_before else otherwise
