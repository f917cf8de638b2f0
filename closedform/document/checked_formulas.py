r"""What was read, set below a verdict: formulas that break where a line ends.

A formula is a paragraph of pieces, each of which TeX measures (`\piece` in
templates/latex/check.tex.j2): one that is too wide for a line is made smaller, and one that
would be too small to read is printed as typed text instead.  So nothing runs off the page.
"""

from __future__ import annotations

import re
from collections.abc import Iterable, Iterator, Sequence
from itertools import accumulate

from closedform.checking.verdict import LineVerdict
from closedform.document.checked_pieces import Piece, piece, pieces
from closedform.document.units import unit_latex
from closedform.notation.latex.escape import escaped
from closedform.notation.written.plain_form import plain_statement, plain_written
from closedform.notation.written.tree import (
    Array,
    Jet,
    Limit,
    Literal,
    Statement,
    Symbol,
    Written,
    walk,
)

__all__ = ["formula_of", "right_of", "statements_of", "typed"]

SIGNS = {"≈": r"\approx", "≠": r"\neq", "≤": r"\leq", "≥": r"\geq", "→": r"\to", "≡": r"\equiv"}
SIGNS |= {"∝": r"\propto", "=": "=", "<": "<", ">": ">"}

WIDEST_MATRIX = 110
"""Characters of plain notation in a row of a matrix that can be read when it is made smaller."""

TALLEST_MATRIX = 20
MOST_ENTRIES = 60
LONGEST_ENTRY = 32
"""Characters of entries, all of which are set one after the other in a paragraph."""

LONGEST = 8000
"""Characters of plain notation up to which a formula is set as mathematics."""

LONGEST_PIECE = 4000
"""Characters of LaTeX in a piece: TeX cannot measure boxes of any width."""

DEEPEST = 60
"""Groups within each other; TeX has room for 255, and some are its own."""

LONGEST_TYPED = 600
LISTED = r"[\,\cdot\,]"
"""Stands for a matrix whose entries are listed below it."""

NAMES = (Symbol, Jet, Limit)
"""What stands on the left of a line as the name of what it gives."""

SHORT, LINE = 40, 78
"""Characters of a statement that may stand beside another, and of a line in which they do."""

BESIDE = ",\\quad\\allowbreak\n  "

OPENING = re.compile(r"(?P<opens>\{|\\left\b|\\begin\b)|(?P<closes>\}|\\right\b|\\end\b)")


def formula_of(tree: Written) -> str:
    """Return a formula as a paragraph of LaTeX, with the entries of a wide matrix below."""
    content, entries = _set((tree,), (), "")
    return "\n".join([_paragraph(content), *entries])


def right_of(verdict: LineVerdict) -> str:
    """Return the right form of a line as a paragraph, with the author's name for it before it."""
    right, read = verdict.right, verdict.read
    if right is None:
        return ""
    if len(read) != 1 or len(read[0].members) < 2 or not isinstance(read[0].members[0], NAMES):
        return formula_of(right)
    rounded = any(isinstance(node, Literal) and node.is_decimal for node in walk(right))
    members = (read[0].members[0], right)
    return statements_of([Statement(members, ("≈" if rounded else "=",), read[0].unit)])


def statements_of(statements: Iterable[Statement]) -> str:
    """Return statements as they were read: chains, their units, and for when they hold.

    Short ones stand beside each other, as far as a line has room.
    """
    paragraphs: list[str] = []
    beside: list[str] = []
    room = 0
    for statement in statements:
        width = len(plain_statement(statement))
        content, entries = _set(statement.members, statement.relations, _after(statement))
        if beside and (width > SHORT or entries or width > room):
            paragraphs.append(_paragraph(BESIDE.join(beside)))
            beside = []
        room = (room if beside else LINE) - width
        beside.append(content)
        if width > SHORT or entries:
            paragraphs += [_paragraph(content), *entries]
            beside = []
    if beside:
        paragraphs.append(_paragraph(BESIDE.join(beside)))
    return "\n".join(paragraphs)


def _after(statement: Statement) -> str:
    """Return what follows the chain of a statement: its unit, and for when it holds."""
    after = rf"\,{unit_latex(statement.unit)}" if statement.unit else ""
    if statement.conditions:
        ranges = " and ".join(_measured(piece(given)) for given in statement.conditions)
        after += rf"\quad for {ranges}"
    return after


def typed(text: str) -> str:
    """Return text in typewriter letters, the end left out if it is very long."""
    words = " ".join(text.split())
    left = len(words) - LONGEST_TYPED
    more = rf" \textit{{({left} more characters)}}" if left > 0 else ""
    return rf"{{\typed {escaped(words[:LONGEST_TYPED])}}}{more}"


def _set(members: Sequence[Written], relations: Sequence[str], after: str) -> tuple[str, list[str]]:
    """Return a chain for a paragraph, and paragraphs with the entries of wide matrices."""
    plain = [plain_written(member) for member in members]
    if sum(map(len, plain)) > LONGEST:
        later = (f" {sign} {text}" for sign, text in zip(relations, plain[1:], strict=True))
        return typed(plain[0] + "".join(later)) + after, []
    shown: list[Piece] = []
    listed: list[Array] = []
    for sign, member in zip(("", *relations), members, strict=True):
        if isinstance(member, Array) and _is_listed(member):
            listed.append(member)
            own = [Piece(LISTED, "[...]")]
        else:
            own = pieces(member)
        if sign:
            own[0] = own[0].signed(SIGNS[sign], sign)
        shown += own
    return _joined(shown) + after, [text for matrix in listed for text in _entries(matrix)]


def _paragraph(content: str) -> str:
    return f"\\begin{{formula}}\n  {content}%\n\\end{{formula}}"


def _joined(parts: Sequence[Piece]) -> str:
    return "%\n  \\allowbreak ".join(map(_measured, parts))


def _measured(part: Piece) -> str:
    """Return a piece for TeX to measure, or at once as typed text if TeX could not."""
    nested = accumulate(1 if own["opens"] else -1 for own in OPENING.finditer(part.latex))
    if len(part.latex) > LONGEST_PIECE or max(nested, default=0) > DEEPEST:
        return typed(part.plain)
    return rf"\piece{{{part.latex}}}{{{typed(part.plain)}}}"


def _is_listed(matrix: Array) -> bool:
    """Whether the entries of a matrix have to stand below each other."""
    columns = zip(*matrix.rows, strict=False)
    width = sum(max(len(plain_written(entry)) for entry in column) for column in columns)
    return width > WIDEST_MATRIX or len(matrix.rows) > TALLEST_MATRIX


def _entries(matrix: Array) -> Iterator[str]:
    """Yield the entries that are not zero, each a paragraph; or the whole as typed text."""
    column = all(len(row) == 1 for row in matrix.rows)
    found = [
        (str(i) if column else rf"{i}{',' * (max(i, j) > 9)}{j}", entry)
        for i, row in enumerate(matrix.rows, start=1)
        for j, entry in enumerate(row, start=1)
        if not (isinstance(entry, Literal) and entry.value == 0)
    ]
    if len(found) > MOST_ENTRIES:
        yield _paragraph(typed(plain_written(matrix)))
        return
    shown: list[str] = []
    for place, entry in found:
        first, *rest = pieces(entry)
        head = first.after(rf"{LISTED}_{{{place}}} = ", f"[{place}] = ")
        shown.append(_joined([head, *rest]))
    if any(len(plain_written(entry)) > LONGEST_ENTRY for _, entry in found):
        yield from map(_paragraph, shown)
    elif shown:
        yield _paragraph(",\\quad\\allowbreak\n  ".join(shown))
    if len(found) < sum(map(len, matrix.rows)):
        yield "Entries that are not listed are zero.\\par"
