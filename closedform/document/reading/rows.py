"""The statements of a displayed equation as it is set: its rows taken apart into sides.

What is read here is the layout of our own displays: rows aligned at their relation signs, a
long side going on in the next row behind a quad, short statements beside each other with a
double quad between.  The sides themselves are read by `closedform.notation.written`.
"""

from __future__ import annotations

import re
from dataclasses import dataclass

__all__ = ["RELATION_WORDS", "SideTexts", "chain_of", "statements_of"]

RELATION_WORDS = {
    "=": "=",
    "<": "<",
    ">": ">",
    r"\leq": "<=",
    r"\le": "<=",
    r"\geq": ">=",
    r"\ge": ">=",
    r"\neq": "!=",
    r"\ne": "!=",
    r"\sim": "~",
    r"\approx": "~~",
    r"\in": "in",
}
"""What a relation sign is in the words of a `Statement`."""

TOKEN = re.compile(r"\\(?:[A-Za-z]+\*?|.)|[^\\]", re.DOTALL)
ROW_END = re.compile(r"\\\\\*?\s*(?:\[[^\]]*\])?")
LABEL = re.compile(r"\\label\{[^{}]*\}|\\notag\b|\\nonumber\b|\\nopagebreak\b")
OPENING = re.compile(r"(?:\s|&|\\q?quad\b|\{\})+")
OPENS, CLOSES = frozenset({"{", r"\begin"}), frozenset({"}", r"\end"})
"""What keeps a row end, and a mark between statements, inside; brackets may go over rows."""


@dataclass(frozen=True, slots=True)
class SideTexts:
    """A statement as set: the LaTeX of its sides and the words of its relations.

    `start` is where it begins in the text of the display.
    """

    sides: tuple[str, ...]
    relations: tuple[str, ...]
    start: int = 0


def statements_of(body: str, *, aligned: bool) -> list[SideTexts]:
    """Return the statements inside an environment, in order.

    In an aligned one a row that begins with a relation or a quad goes on with the one before;
    in others a double quad stands between two statements.
    """
    found: list[tuple[str, int]] = []
    for text, start in _rows(_without_labels(body)):
        if not aligned:
            found += [part for part in _cut(text, start, r"\qquad") if part[0].strip()]
        elif found and _continues(text):
            before, begin = found[-1]
            found[-1] = _joined(before, OPENING.sub("", text, count=1)), begin
        elif text.strip():
            found.append((text, start))
    return [chain_of(text, start) for text, start in found]


def chain_of(text: str, start: int = 0) -> SideTexts:
    """Return the sides of one statement, cut at the relation signs outside all brackets."""
    sides, relations = [""], []
    for piece, depth in _tokens(text, brackets=True):
        if depth == 0 and piece == "&":
            continue
        if depth == 0 and piece in RELATION_WORDS:
            relations.append(RELATION_WORDS[piece])
            sides.append("")
        else:
            sides[-1] += piece
    lead = len(text) - len(text.lstrip())
    return SideTexts(tuple(map(_tidy, sides)), tuple(relations), start + lead)


def _tidy(side: str) -> str:
    return re.sub(
        r"\s+", " ", OPENING.sub("", side, count=1) if OPENING.match(side) else side
    ).strip()


def _without_labels(body: str) -> str:
    # as many blanks as before, so that places stay
    return LABEL.sub(lambda match: " " * len(match.group()), body)


def _tokens(text: str, *, brackets: bool = False) -> list[tuple[str, int]]:
    """Return tokens with the number of groups, and of brackets, that are open around each."""
    opens = OPENS | {"("} if brackets else OPENS
    closes = CLOSES | {")"} if brackets else CLOSES
    found: list[tuple[str, int]] = []
    depth = 0
    for piece in TOKEN.findall(text):
        depth -= piece in closes
        found.append((piece, max(depth, 0)))
        depth += piece in opens
    return found


def _rows(body: str) -> list[tuple[str, int]]:
    """Return the rows of an environment with their places, cut at the line ends outside others."""
    found: list[tuple[str, int]] = []
    begin = place = 0
    for piece, depth in _tokens(body):
        if depth == 0 and piece == r"\\" and place >= begin:
            found.append((body[begin:place], begin))
            end = ROW_END.match(body, place)
            begin = end.end() if end else place + len(piece)
        place += len(piece)
    return [*found, (body[begin:], begin)]


def _cut(text: str, start: int, mark: str) -> list[tuple[str, int]]:
    found: list[tuple[str, int]] = []
    begin = place = 0
    for piece, depth in _tokens(text):
        if depth == 0 and piece == mark:
            found.append((text[begin:place], start + begin))
            begin = place + len(piece)
        place += len(piece)
    return [*found, (text[begin:], start + begin)]


def _continues(row: str) -> bool:
    """Whether a row goes on with the statement of the row before it."""
    opening = OPENING.match(row)
    if opening is None:
        return False
    quad = "&" in opening.group() and "quad" in opening.group()
    first = TOKEN.match(row, opening.end())
    return quad or (first is not None and first.group() in RELATION_WORDS)


def _joined(before: str, after: str) -> str:
    """Return two rows as one; a number that was broken between its digits is one again."""
    left = before.rstrip()
    close = left[-1:].isdigit() and (after[:1].isdigit() or after[:1] == "/")
    return left + after if close else f"{left} {after}"
