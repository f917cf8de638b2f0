"""Statements as displayed equations that stay inside the margins.

A chain that fits stands on one line.  A longer one is aligned at its relation signs, its
long sides broken at plus and minus.  A matrix wider than the line is set with its
columns nearer together, else column by column, else entry by entry: equal entries in one
line, zero entries left out (`Display.zeros` says so, and the template words it).
"""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass

from closedform.derivation.step import Matrix, Side, Statement, Symbol
from closedform.document.breaking import filled, pieces
from closedform.document.matrices import ZERO, matrix_box, matrix_height, with_front
from closedform.document.symbols import ANY_ROW, side_box
from closedform.notation.expression import Expression, Product
from closedform.notation.latex.box import EM_PER_LINE, RELATION, Box

__all__ = ["AS_GIVEN", "RELATIONS", "Display", "displayed", "displayed_together", "fits", "narrow"]

WIDEST_LEFT_SIDE = 12.0
"""A left side up to this width, in em, keeps the lines below it indented past it."""

TALLEST_COLUMN = 40.0
TALLEST_MATRIX = 56.0
"""In em; the text of a page is 64 em high."""

KEPT_TOGETHER = 6
"""Rows of one formula up to this number stay on one page."""

AS_GIVEN = frozenset({"matrix", "initial", "J", "real form"})
AS_GIVEN |= {"system matrix", "input matrix", "stacked matrix", "generator matrix"}
"""Statements of what the user gave: their matrices keep their entries as they are."""

MARK = "\t"
"""Stands for the alignment mark until the rows are put together: a matrix has & inside."""

APART = "\v"
"""Ends a row after which something new begins, with a little more space."""

RELATIONS = {
    "=": "=",
    "~": r"\sim",
    "~~": r"\approx",
    "!=": r"\neq",
    "<": "<",
    ">": ">",
    "<=": r"\leq",
    ">=": r"\geq",
    "in": r"\in",
}


@dataclass(frozen=True, slots=True)
class Display:
    """A displayed equation.  `form` is whole, columns or entries; `zeros` says whether
    zero entries were left out."""

    latex: str
    form: str = "whole"
    zeros: bool = False

    def __str__(self) -> str:
        return self.latex


def displayed(statement: Statement, *, label: str = "", by: str = "auto") -> Display:
    """Return the statement as a display, numbered if it has a label.

    `by` is auto, or entries to have a matrix set entry by entry though it would fit.
    Raises ValueError for a relation that is not in `RELATIONS`, and for a matrix too wide
    for the line that no other side gives a name to.
    """
    layout = _laid_out(statement, by)
    number_last = layout.form == "whole"
    latex = _environment(layout.rows, label, number_last=number_last)
    return Display(latex, layout.form, layout.zeros)


def displayed_together(statements: Sequence[Statement], labels: Sequence[str]) -> list[Display]:
    """Return the statements in one display, aligned; each numbered if it has a label.

    If a matrix of one of them has to be taken apart, each is a display of its own.
    """
    layouts = [_laid_out(statement, "auto") for statement in statements]
    if len(layouts) < 2 or any(layout.form != "whole" for layout in layouts):
        pairs = zip(statements, labels, strict=True)
        return [displayed(statement, label=label) for statement, label in pairs]
    rows: list[str] = []
    tags: list[str] = []
    for layout, label in zip(layouts, labels, strict=True):
        relation = layout.relation
        lines = layout.rows
        if len(lines) == 1 and MARK not in lines[0]:
            lines = [lines[0].replace(f" {relation} ", f" {MARK}{relation} ", 1)]
        rows += [*lines[:-1], lines[-1] + APART] if len(lines) > 1 else lines
        tags += ["" for _ in lines[1:]]
        tags.append(label)
    return [Display(_aligned(rows, tags))]


@dataclass(frozen=True, slots=True)
class _Layout:
    rows: list[str]
    relation: str
    form: str = "whole"
    zeros: bool = False


def _laid_out(statement: Statement, by: str) -> _Layout:
    relation = RELATIONS.get(statement.relation)
    if relation is None:
        raise ValueError(f"no relation is written {statement.relation!r}")
    sides = statement.sides
    if statement.says not in AS_GIVEN:
        sides = tuple(with_front(s) if isinstance(s, Matrix) else s for s in sides)
    left = side_box(sides[0]).width
    room = EM_PER_LINE - (left if left <= WIDEST_LEFT_SIDE else 1.0) - RELATION
    for i, matrix in enumerate(sides):
        if not isinstance(matrix, Matrix):
            continue
        low = matrix_height(matrix) <= TALLEST_MATRIX
        if by == "auto" and low and matrix_box(matrix, tight=True).width <= room:
            continue
        others = sides[:i] + sides[i + 1 :]
        if not others or isinstance(others[0], Matrix):
            raise ValueError("a matrix that is taken apart needs a name on another side")
        rows = _chain(others, relation, room) if len(others) > 1 else []
        if by == "auto" and _stands_by_columns(others[0], matrix):
            rows += _columns(others[0], matrix, relation)
            return _Layout(rows, relation, "columns")
        more, zeros = _entries(others[0], matrix, relation)
        return _Layout(rows + more, relation, "entries", zeros)
    return _Layout(_chain(sides, relation, room), relation)


def fits(statement: Statement) -> bool:
    """Say whether the statement can stand whole, no matrix of it taken apart."""
    return displayed(statement).form == "whole"


def narrow(statement: Statement) -> bool:
    """Say whether the statement fits on one line."""
    boxes = [side_box(side) for side in statement.sides]
    return sum(box.width for box in boxes) + RELATION * (len(boxes) - 1) <= EM_PER_LINE


def _environment(rows: list[str], label: str, *, number_last: bool) -> str:
    """Return the rows as equation or align, with the number in the first row or the last."""
    if len(rows) == 1 and MARK not in rows[0]:
        tag = rf"\label{{{label}}}" if label else ""
        star = "" if label else "*"
        return f"\\begin{{equation{star}}}{tag}\n  {rows[0]}\n\\end{{equation{star}}}"
    blank = [""] * (len(rows) - 1)
    return _aligned(rows, [*blank, label] if number_last else [label, *blank])


def _aligned(rows: list[str], labels: list[str]) -> str:
    """Return the rows in align; `MARK` is where they are aligned."""
    star = "" if any(labels) else "*"
    lines: list[str] = []
    ends = _row_ends(rows)
    for row, label, end in zip(rows, labels, ends, strict=True):
        marked = row.replace(MARK, "&") if MARK in row else f"& {row}"
        tag = rf"\label{{{label}}}" if label else r" \notag"
        lines.append(f"  {marked.replace(APART, '')}{'' if star else tag}{end}")
    return f"\\begin{{align{star}}}\n" + "\n".join(lines) + f"\n\\end{{align{star}}}"


def _row_ends(rows: list[str]) -> list[str]:
    r"""Return what ends each row: \\* forbids a page break there."""
    ends: list[str] = []
    begin = 0
    for i, row in enumerate(rows):
        if APART in row or i == len(rows) - 1:
            size = i + 1 - begin
            ends += [r" \\*" if size <= KEPT_TOGETHER else r" \\"] * (size - 1)
            ends.append(r" \\[4pt]" if i < len(rows) - 1 else "")
            begin = i + 1
    return ends


def _matrix_aware(side: Side, room: float) -> list[Box]:
    if isinstance(side, Matrix):
        box = matrix_box(side)
        return [box if box.width <= room else matrix_box(side, tight=True)]
    return pieces(side, room)


def _chain(sides: tuple[Side, ...], relation: str, room: float) -> list[str]:
    """Return the rows of a chain, each with an alignment mark if there are several."""
    boxes = [side_box(side) for side in sides]
    if sum(box.width for box in boxes) + RELATION * (len(boxes) - 1) <= EM_PER_LINE:
        return [f" {relation} ".join(box.latex for box in boxes)]
    if boxes[0].width <= WIDEST_LEFT_SIDE:
        rows = [boxes[0].latex + " "]
        begin, indent = f"{MARK}{relation} ", rf"{MARK}\qquad "
        used, beyond = 0.0, boxes[0].width + 2.0
        opening = True
    else:
        lines = filled(pieces(sides[0], EM_PER_LINE), EM_PER_LINE, EM_PER_LINE - 2)
        rows = [f"{MARK} {lines[0]}", *(rf"{MARK}\qquad {line}" for line in lines[1:])]
        begin, indent = rf"{MARK}\quad {relation} ", rf"{MARK}\qquad\quad "
        used, beyond = room, 3.0
        opening = False
    for side in sides[1:]:
        parts = _matrix_aware(side, room)
        wide = sum(part.width for part in parts)
        if not opening and used + RELATION + wide <= room:
            rows[-1] += f" {relation} " + "".join(part.latex for part in parts)
            used += RELATION + wide
            continue
        lines = filled(parts, room, EM_PER_LINE - beyond)
        if opening:
            rows[-1] += begin + lines[0]
        else:
            rows.append(begin + lines[0])
        rows += [indent + line for line in lines[1:]]
        used = wide if len(lines) == 1 else room
        opening = False
    return rows


def _entry(name: Side, *indices: str) -> Symbol:
    return Symbol("entry", indices, parts=(name,))


def _stands_by_columns(name: Side, matrix: Matrix) -> bool:
    if len(matrix.rows[0]) == 1 or matrix_height(matrix) > TALLEST_COLUMN:
        return False
    entries = [entry for row in matrix.rows for entry in row]
    if 2 * entries.count(ZERO) > len(entries):
        return False
    return all(
        _block_width(name, matrix, j, j + 1) <= EM_PER_LINE for j in range(len(matrix.rows[0]))
    )


def _block(matrix: Matrix, begin: int, end: int) -> Matrix:
    return with_front(Matrix(tuple(row[begin:end] for row in matrix.rows), matrix.front))


def _block_name(name: Side, begin: int, end: int) -> Symbol:
    columns = str(end) if end == begin + 1 else rf"{begin + 1}\ldots {end}"
    return _entry(name, ANY_ROW, columns)


def _block_width(name: Side, matrix: Matrix, begin: int, end: int) -> float:
    label = side_box(_block_name(name, begin, end)).width
    return label + RELATION + matrix_box(_block(matrix, begin, end)).width


def _columns(name: Side, matrix: Matrix, relation: str) -> list[str]:
    """Return rows with as many neighbouring columns in each as fit."""
    rows: list[str] = []
    begin, count = 0, len(matrix.rows[0])
    while begin < count:
        end = begin + 1
        while end < count and _block_width(name, matrix, begin, end + 1) <= EM_PER_LINE:
            end += 1
        label = side_box(_block_name(name, begin, end)).latex
        block = matrix_box(_block(matrix, begin, end)).latex
        rows.append(f"{label} {MARK}{relation} {block}{APART}")
        begin = end
    return rows


def _entries(name: Side, matrix: Matrix, relation: str) -> tuple[list[str], bool]:
    """Return the rows of an entry-by-entry list, and whether zeros are missing in it."""
    places: dict[Expression, list[Side]] = {}
    single = len(matrix.rows[0]) == 1
    for i, row in enumerate(matrix.rows, start=1):
        for j, entry in enumerate(row, start=1):
            indices = (str(i),) if single else (str(i), str(j))
            places.setdefault(entry, []).append(_entry(name, *indices))
    zeros = places.pop(ZERO, None) is not None
    chains: list[list[str]] = []
    for entry, names in places.items():
        value = entry if matrix.front is None else Product((matrix.front, entry))
        room = EM_PER_LINE - side_box(names[0]).width - RELATION
        chain = _chain((*names, value), relation, room)
        if len(chain) == 1:
            chain = [chain[0].replace(f" {relation} ", f" {MARK}{relation} ", 1)]
        chains.append(chain)
    apart = APART if any(len(chain) > 1 for chain in chains) else ""
    return [row for chain in chains for row in [*chain[:-1], chain[-1] + apart]], zeros
