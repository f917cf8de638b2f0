"""One side of a relation, read from its LaTeX to its normal form."""

from __future__ import annotations

import re

from closedform.document.reading.expected import entry, functions_of, one_sided, residue_sum
from closedform.document.reading.normal import normal
from closedform.document.reading.spelling import BOLD, restored, spelled
from closedform.document.reading.values import Value
from closedform.errors import ClosedformError
from closedform.notation.written.reader import read_latex
from closedform.notation.written.tree import Declared, Jet, Symbol, Written, changed

__all__ = ["SideReader", "UnreadSideError"]

ENTRY = re.compile(r"\\bigl\((?P<body>.*)\\bigr\)_\{(?P<indices>[^{}]*)\}")
ONE_SIDED = re.compile(
    r"(?P<function>.*?)(?:\\left)?\((?P<at>.*)\^\{(?P<sign>[-+])\}(?:\\right)?\)"
)
RESIDUES = re.compile(r"\\sum_\{(?P<over>[^{}]*) = 0\} (?P<body>.*)")


class UnreadSideError(Exception):
    """A side that is no formula that can be read: its text, and why."""

    def __init__(self, text: str, reason: str) -> None:
        super().__init__(text, reason)
        self.text, self.reason = text, reason


class SideReader:
    """Reads sides with the names that a display uses, each text once.

    `declared` has these names as `spelled_name` gives them; `time` is the time as it is.
    """

    def __init__(self, declared: Declared, time: str) -> None:
        self.declared, self.time = declared, time
        self._read: dict[str, Value] = {}
        self._trees: dict[str, Written] = {}

    def read(self, text: str) -> Value:
        """Return the normal form of a side.

        Raises:  UnreadSideError if the text is no single formula.
        """
        if text not in self._read:
            self._read[text] = self._side(text)
        return self._read[text]

    def tree(self, text: str) -> Written | None:
        """Return a side that was read as a formula, None for one that is no plain formula."""
        tree = self._trees.get(text)
        return None if tree is None else changed(tree, _without_mark)

    def _side(self, text: str) -> Value:
        if match := ENTRY.fullmatch(text):
            indices = re.sub(r"\s+", " ", match["indices"]).strip()
            return entry(self.read(match["body"]), indices)
        if match := ONE_SIDED.fullmatch(text):
            return one_sided(self.read(match["function"]), self.read(match["at"]), match["sign"])
        if match := RESIDUES.fullmatch(text):
            return residue_sum(self.read(match["over"]), self.read(match["body"]))
        try:
            reading = read_latex(spelled(text, self.declared), self.declared)
        except ClosedformError as error:
            raise UnreadSideError(text, str(error).partition("\n")[0]) from error
        if len(reading.statements) != 1 or len(reading.statements[0].members) != 1:
            raise UnreadSideError(text, "it is not one formula.")
        tree = functions_of(self.time, restored(reading.statements[0].members[0]))
        self._trees[text] = tree
        return normal(tree)


def _without_mark(node: Written) -> Written | None:
    match node:
        case Symbol(name) if name.startswith(BOLD):
            return Symbol(name.removeprefix(BOLD), bold=True)
        case Jet(name, order, at) if name.startswith(BOLD):
            inner = None if at is None else changed(at, _without_mark)
            return Jet(name.removeprefix(BOLD), order, inner)
    return None
