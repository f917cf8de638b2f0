"""Reading a line: its formula, and what its author states beside it."""

from __future__ import annotations

from dataclasses import dataclass, replace

from closedform.checking.claim import SourceLine
from closedform.checking.standing.facts import Facts
from closedform.notation.errors import quoted
from closedform.notation.written.reader import read_latex
from closedform.notation.written.tree import (
    IMAGINARY,
    Identity,
    Jet,
    Product,
    Reading,
    Statement,
    Symbol,
    Written,
    changed,
    walk,
)
from closedform.notation.written.typed_reader import read_typed
from closedform.notation.written.written_errors import NotReadError

__all__ = ["ReadLine", "read_line"]


@dataclass(frozen=True, slots=True)
class ReadLine:
    """A line as read; `reading` is None if it was not, and `trouble` says why.

    `of` and `at` are the eigenvalue and the instant that the author states, if formulas.
    """

    line: SourceLine
    reading: Reading | None
    trouble: str = ""
    of: Written | None = None
    at: Written | None = None


def read_line(line: SourceLine, facts: Facts) -> ReadLine:
    """Return a line as read with the names of a model."""
    if line.trouble:
        return ReadLine(line, None, line.trouble)
    read = read_typed if line.typed else read_latex
    try:
        reading = read(line.text, facts.declared, place=line.place)
    except NotReadError as error:
        return ReadLine(line, None, error.paragraph)
    reading = replace(
        reading,
        statements=tuple(_with_current(one, facts) for one in reading.statements),
        others=tuple(tuple(_with_current(one, facts) for one in other) for other in reading.others),
    )
    whose = line.of if line.says in VECTORS else ""
    of, at = _number(_stated(whose, facts)), _stated(line.at, facts)
    for key, text, found in (("of", whose, of), ("at", line.at, at)):
        if text.strip() and found is None:
            trouble = (
                f"what is said under '{key}' is not one formula that can be read: {quoted(text)}"
            )
            return ReadLine(line, None, trouble)
    return ReadLine(line, reading, "", of, at)


def _with_current(statement: Statement, facts: Facts) -> Statement:
    """Return a statement with i or i(t) on its left as a name: nobody says what the unit is."""
    first, *rest = statement.members
    if not rest or any(IMAGINARY in walk(member) for member in rest):
        return statement
    if first == IMAGINARY:
        return replace(statement, members=(Symbol("i"), *rest))
    if first == Product((IMAGINARY, Symbol(facts.time))):
        return replace(statement, members=(Jet("i"), *rest))
    return statement


VECTORS = ("eigenvector", "generalized eigenvector")


def _stated(text: str, facts: Facts) -> Written | None:
    """Return what an author states beside a line, LaTeX or typed; None if it is not one formula."""
    if not text.strip():
        return None
    read = read_latex if "\\" in text else read_typed
    try:
        reading = read(text, facts.declared)
    except NotReadError:
        return None
    if len(reading.statements) != 1:
        return None
    return reading.statements[0].members[-1]


def _number(tree: Written | None) -> Written | None:
    """Return an eigenvalue that is stated beside a line: I in it is the imaginary unit."""
    if tree is None:
        return None
    return changed(tree, lambda node: IMAGINARY if isinstance(node, Identity) else None)
