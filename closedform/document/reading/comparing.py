"""A display as it is set, held against the statements that it was to set."""

from __future__ import annotations

import re
from collections.abc import Iterator, Sequence
from dataclasses import dataclass

from closedform.derivation.step import Matrix, Statement
from closedform.document.reading.expected import Chain, Expected
from closedform.document.reading.rows import SideTexts
from closedform.document.reading.sides import SideReader
from closedform.document.reading.values import Value, entries_of

__all__ = ["Difference", "chain_unlike", "read_chain", "unlike"]

COLUMNS = re.compile(r"\\cdot (?P<first>[0-9]+)(?:\\ldots (?P<last>[0-9]+))?")
ONE_INDEX = re.compile(r"(?P<row>[0-9]+)")
TWO_INDICES = re.compile(r"(?P<row>[0-9]|[0-9]+(?=,)),?(?P<column>(?<=,)[0-9]+|[0-9])")


@dataclass(frozen=True, slots=True)
class Difference:
    """What is printed otherwise: the LaTeX of it, and in words what is wrong with it."""

    latex: str
    what: str


def read_chain(texts: SideTexts, reader: SideReader) -> Chain:
    """Return a statement as it is set as a chain of normal forms.

    Raises:  UnreadSideError.
    """
    return Chain(tuple(map(reader.read, texts.sides)), texts.relations)


def unlike(
    statements: Sequence[Statement],
    texts: Sequence[SideTexts],
    form: str,
    reader: SideReader,
    expected: Expected,
) -> Difference | None:
    """Return the first difference between statements and how a display sets them, if any.

    `form` is whole, or columns or entries where the one statement has a matrix taken apart.

    Raises:  UnreadSideError if a side is not read.
    """
    if form != "whole":
        return _taken_apart(statements[0], texts, reader, expected)
    for statement, text in zip(statements, texts, strict=False):
        wrong = chain_unlike(expected.statement(statement), text, reader)
        if wrong is not None:
            return wrong
    if len(texts) > len(statements):
        return Difference(_shown(texts[len(statements)]), "nothing was to be printed here")
    if len(texts) < len(statements):
        return Difference("", f"{len(statements) - len(texts)} of {len(statements)} are missing")
    return None


def chain_unlike(chain: Chain, text: SideTexts, reader: SideReader) -> Difference | None:
    """Return what is wrong with one statement as it is set, None if it is the chain wanted.

    Raises:  UnreadSideError if a side is not read.
    """
    read = read_chain(text, reader)
    if len(read.members) != len(chain.members) or read.relations != chain.relations:
        return Difference(_shown(text), "its relation signs are not those of the statement")
    for place, (found, wanted) in enumerate(zip(read.members, chain.members, strict=True)):
        if found != wanted:
            return Difference(text.sides[place], "it is not what was proved")
    return None


def _shown(text: SideTexts) -> str:
    return " = ".join(text.sides)


def _taken_apart(
    statement: Statement, texts: Sequence[SideTexts], reader: SideReader, expected: Expected
) -> Difference | None:
    """Compare a matrix that is set in columns or entry by entry, and the sides beside it."""
    place = next(i for i, side in enumerate(statement.sides) if isinstance(side, Matrix))
    matrix = expected.side(statement.sides[place])
    others = statement.sides[:place] + statement.sides[place + 1 :]
    names = tuple(map(expected.side, others))
    rows = list(texts)
    if len(names) > 1:
        chain = Chain(names, (statement.relation,) * (len(names) - 1))
        wrong = chain_unlike(chain, rows.pop(0), reader)
        if wrong is not None:
            return wrong
    wanted = entries_of(matrix) or ()
    found: dict[tuple[int, int], Value] = {}
    for row in rows:
        if set(row.relations) != {statement.relation}:
            return Difference(_shown(row), "its relation signs are not those of the statement")
        *labels, value = map(reader.read, row.sides)
        for label in labels:
            if not _fill(found, label, names[0], value, wanted):
                return Difference(_shown(row), "it is no part of the matrix, or stands twice")
        for at in sorted(found):
            i, j = at
            if found[at] != wanted[i][j]:
                return Difference(_shown(row), f"entry ({i + 1}, {j + 1}) is not what was proved")
    missing = [(i, j) for i, j in _places(wanted) if (i, j) not in found and wanted[i][j]]
    if missing:
        i, j = missing[0]
        return Difference("", f"entry ({i + 1}, {j + 1}) is missing and is not zero")
    return None


def _places(rows: Sequence[Sequence[Value]]) -> Iterator[tuple[int, int]]:
    return ((i, j) for i, row in enumerate(rows) for j, _ in enumerate(row))


def _fill(
    found: dict[tuple[int, int], Value],
    label: Value,
    name: Value,
    value: Value,
    wanted: Sequence[Sequence[Value]],
) -> bool:
    """Put in what a label names: one entry, or columns; say whether it is one, and new."""
    indices = _indices(label, name)
    if indices is None:
        return False
    new: dict[tuple[int, int], Value] = {}
    if match := COLUMNS.fullmatch(indices):
        first = int(match["first"])
        last = int(match["last"] or first)
        block = entries_of(value)
        if block is None or len(block) != len(wanted) or len(block[0]) != last - first + 1:
            return False
        new = {(i, first - 1 + j): block[i][j] for i, j in _places(block)}
    else:
        new[_entry(indices, single=bool(wanted) and len(wanted[0]) == 1)] = value
    places = set(_places(wanted))
    if any(at in found or at not in places for at in new):
        return False
    found |= new
    return True


def _entry(indices: str, *, single: bool) -> tuple[int, int]:
    """Return the place that the indices of an entry name: 12, or 1,12 with a comma."""
    match = (ONE_INDEX if single else TWO_INDICES).fullmatch(indices)
    if match is None:
        return (-1, -1)
    return (int(match["row"]) - 1, 0 if single else int(match["column"]) - 1)


def _indices(label: Value, name: Value) -> str | None:
    if len(label) != 1:
        return None
    (((_, matrices), coefficient),) = label
    match matrices:
        case (("entry", body, str(indices)),) if body == name and coefficient == 1:
            return indices
    return None
