"""Environments of LaTeX: matrices, cases, and statements in lines."""

from __future__ import annotations

from lark import Token

from closedform.notation.written.grammar import token
from closedform.notation.written.latex_commands import LatexCommands
from closedform.notation.written.macros import MATRICES, SPACES, SYSTEMS
from closedform.notation.written.written_errors import StopError, UnknownEnvironmentError

__all__ = ["LatexSource"]

CASES = frozenset({"cases", "dcases", "rcases", "numcases", "drcases"})
ORDERS = frozenset({"<", "≤", ">", "≥", "≠"})
TRAILING = frozenset({"COMMA", "SEMI", "PERIOD", "SPACE", "COLON"})

Cell = tuple[int, int]


class LatexSource(LatexCommands):
    """Reads the raw tokens of one text in full."""

    def environment(self, at: int, end: int, out: list[Token]) -> int:  # noqa: ARG002  as it is declared
        """Add the environment that begins at an index."""
        raw, close = self.raws[at], self.partners[at]
        if raw.text in MATRICES:
            cells = [[self.sequence(*cell) for cell in row] for row in self.rows(at + 1, close)]
            if any(_equates(cell) for row in cells for cell in row):
                out += self.lines(cells, close)
            else:
                out += self.matrix(at, cells)
        elif raw.text in CASES:
            out += self.pieces(at + 1, close) or self.system(at + 1, close, raw.text)
        elif raw.text in SYSTEMS:
            out += self.system(at + 1, close, raw.text)
        else:
            raise StopError(UnknownEnvironmentError, raw.start, raw.end, raw.text)
        return close + 1

    def rows(self, at: int, end: int) -> list[list[Cell]]:
        """Return the bounds of the cells of an environment, row by row; empty rows are left out."""
        rows: list[list[Cell]] = [[]]
        first = index = at
        while index < end:
            raw = self.raws[index]
            if raw.kind in ("{", "begin"):
                index = self.partners[index]
            elif raw.kind in ("&", "row"):
                rows[-1].append((first, index))
                first = index + 1
                if raw.kind == "row":
                    rows.append([])
            index += 1
        rows[-1].append((first, end))
        return [row for row in rows if any(self.filled(*cell) for cell in row)]

    def filled(self, at: int, end: int) -> bool:
        """Tell whether anything is seen between two indices."""
        return any(
            raw.kind not in "{}"
            and not (raw.kind == "command" and (raw.text in SPACES or raw.text in _UNSEEN))
            for raw in self.raws[at:end]
        )

    def matrix(self, at: int, rows: list[list[list[Token]]]) -> list[Token]:
        """Return the tokens of a matrix of the tokens of its cells."""
        raw, close = self.raws[at], self.raws[self.partners[at]]
        out = [token("MATRIX_OPEN", MATRICES[raw.text], raw.start, raw.end)]
        if not rows:
            self.stop(raw, "the matrix is empty")
        width = max(_width(row) for row in rows)
        for number, row in enumerate(rows):
            if number:
                out.append(token("ROW", "", out[-1].end_pos or 0, out[-1].end_pos or 0))
            for column, cell in enumerate(row[: max(width, _width(row))]):
                if column:
                    out.append(token("COLUMN", "", out[-1].end_pos or 0, out[-1].end_pos or 0))
                inside = _trimmed(cell)
                if not inside:
                    self.stop(raw, "an entry of the matrix is missing; write a zero")
                out += inside
        out.append(token("MATRIX_CLOSE", "", close.start, close.end))
        return out

    def system(self, at: int, end: int, name: str) -> list[Token]:
        """Return the tokens of statements in lines; signs of alignment are left out."""
        rows = [[self.sequence(*cell) for cell in row] for row in self.rows(at, end)]
        if name not in ("eqnarray", "IEEEeqnarray"):
            return self.lines(rows, end, joined=name in ("multline", "multlined"))
        return self.lines([[[t for cell in row for t in cell]] for row in rows], end)

    def lines(
        self, rows: list[list[list[Token]]], close: int, *, joined: bool = False
    ) -> list[Token]:
        """Return the tokens of the cells of lines; every other & parts two statements."""
        out: list[Token] = []
        for number, row in enumerate(rows):
            for column, cell in enumerate(row):
                if column and column % 2 == 0 and out:
                    out.append(token("SPACE", 2, out[-1].end_pos or 0, out[-1].end_pos or 0))
                out += cell
            at = out[-1].end_pos or 0 if out else 0
            if number < len(rows) - 1:
                out.append(token("ROW_END", "joined" if joined else "", at, at))
        end = self.raws[close].end if close < len(self.raws) else 0
        out.append(token("ROW_END", "", end, end))
        return out

    def braced(self, at: int, end: int) -> list[Token]:
        r"""Return the tokens of \\left\\{ array \\right. if its second column holds conditions."""
        while at < end and self.raws[at].kind == "command" and self.raws[at].text in SPACES:
            at += 1
        if at >= end or self.raws[at].kind != "begin" or self.partners[at] != end - 1:
            return []
        if self.raws[at].text not in {*MATRICES, *CASES, *SYSTEMS}:
            return []
        return self.pieces(at + 1, end - 1)

    def pieces(self, at: int, end: int) -> list[Token]:
        """Return the tokens of a piecewise value, or nothing if the lines are statements."""
        lines = [[self.sequence(*cell) for cell in row] for row in self.rows(at, end)]
        rows = [
            row[:1] + [cell for cell in row[1:] if cell]
            if row[0]
            else [cell for cell in row if cell]
            for row in lines
        ]
        if any(_equates(row[0]) or _goes_on(row[1:2]) for row in rows):
            return []
        parted = [_parted(row) for row in rows]
        if not any(condition for _, condition in parted):
            return []
        first, last = self.raws[at - 1], self.raws[end]
        out = [token("CASES_OPEN", "", first.start, first.end)]
        for number, (value, condition) in enumerate(parted):
            place = out[-1].end_pos or 0
            if number:
                out.append(token("ROW", "", place, place))
            out += _trimmed(value)
            if condition:
                out.append(token("COLUMN", "", place, place))
                out += _conditions(condition)
        out.append(token("CASES_CLOSE", "", last.start, last.end))
        return out


_UNSEEN = frozenset({"hline", "label", "tag", "nonumber", "notag", "cline", "vspace", "hspace"})


def _equates(tokens: list[Token]) -> bool:
    """Tell whether there is an equals sign outside brackets."""
    depth = 0
    for part in tokens:
        depth += part.type.endswith("OPEN") - part.type.endswith("CLOSE")
        if depth == 0 and part.type == "REL" and part.value in ("=", "≈"):
            return True
    return False


def _goes_on(cells: list[list[Token]]) -> bool:
    """Tell whether a cell goes on with an equation that the cell before it began."""
    first = next((part for cell in cells for part in cell if part.type != "SPACE"), None)
    return first is not None and first.type == "REL" and first.value in ("=", "≈")


def _width(row: list[list[Token]]) -> int:
    """Return the number of cells of a row, without empty ones at its end."""
    return max((k for k, cell in enumerate(row, 1) if _trimmed(cell)), default=0)


def _trimmed(tokens: list[Token]) -> list[Token]:
    """Return tokens without punctuation and spaces around."""
    first, last = 0, len(tokens)
    while first < last and tokens[first].type == "SPACE":
        first += 1
    while last > first and tokens[last - 1].type in TRAILING:
        last -= 1
    return tokens[first:last]


def _parted(row: list[list[Token]]) -> tuple[list[Token], list[Token]]:
    """Return the value and the condition of a line of cases."""
    if len(row) > 1:
        return row[0], [part for cell in row[1:] for part in cell]
    for index, part in enumerate(row[0]):
        if part.type == "WORD":
            return row[0][:index], row[0][index:]
    orders = [k for k, part in enumerate(row[0]) if part.type == "REL" and part.value in ORDERS]
    marks = [k for k, part in enumerate(row[0]) if part.type in ("COMMA", "SPACE")]
    if orders and (before := [k for k in marks if k < orders[0]]):
        return row[0][: before[-1]], row[0][before[-1] :]
    return row[0], []


def _conditions(tokens: list[Token]) -> list[Token]:
    """Return the tokens of conditions: words between them as AND, words before them left out."""
    out: list[Token] = []
    depth = 0
    for part in _trimmed(tokens):
        if part.type == "WORD" and part.value == "otherwise":
            return [token("OTHERWISE", "", part.start_pos or 0, part.end_pos or 0)]
        depth += part.type == "OPEN"
        depth -= part.type == "CLOSE"
        if depth == 0 and part.type in ("WORD", "IMPLIES", "COMMA"):
            if out and out[-1].type != "AND" and part.value != "for":
                out.append(token("AND", "", part.start_pos or 0, part.end_pos or 0))
        elif part.type not in ("SPACE", "SEMI", "PERIOD"):
            out.append(part)
    compared = any(part.type == "REL" for part in out)
    whole = len(out) > 2 and out[0].type == "OPEN" and out[-1].type == "CLOSE"
    return out[1:-1] if whole and compared and _wraps(out) else out


def _wraps(tokens: list[Token]) -> bool:
    """Tell whether the bracket that begins tokens ends them."""
    depth = 0
    for index, part in enumerate(tokens):
        depth += part.type.endswith("OPEN") - part.type.endswith("CLOSE")
        if depth == 0:
            return index == len(tokens) - 1
    return False
