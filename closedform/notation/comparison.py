"""From the text of a condition to the two formulas that it compares."""

from __future__ import annotations

import re
from typing import NamedTuple

from closedform.errors import Place
from closedform.notation.expression import Expression
from closedform.notation.parametric_errors import ComparisonCountError, ComparisonSignError
from closedform.notation.reader import NOWHERE, place_of, read_formula

__all__ = ["Compared", "read_comparison"]

SIGNS = {s: s for s in ("<", "<=", ">", ">=", "!=", "=")} | {
    "==": "=",
    "≤": "<=",
    "≥": ">=",
    "≠": "!=",
}
"""How people write a comparison, and what it is called here."""
SLIPS = {"=<": "<=", "=>": ">=", "<>": "!=", "=!": "!="}
RUN = re.compile("[<>=!≤≥≠]+")


class Compared(NamedTuple):
    """`left` `relation` `right`; the relation is one of < <= > >= != =."""

    left: Expression
    relation: str
    right: Expression


def read_comparison(text: str, *, names: frozenset[str], place: Place = NOWHERE) -> Compared:
    """Return the two formulas that a condition compares, and how.

    `names` and `place` are as for `read_formula`.

    Raises:  ComparisonCountError unless there is one sign of comparison,
             ComparisonSignError for one that is none or stands inside brackets,
             and what `read_formula` raises.

    >>> read_comparison("c == 2", names=frozenset({"c"})).relation
    '='
    """
    runs = list(RUN.finditer(text))
    for run in runs:
        if run[0] not in SIGNS:
            meant = SLIPS.get(run[0])
            advice = f"write '{meant}'" if meant else "the signs are < <= > >= != ="
            raise ComparisonSignError(place_of(text, run.start(), place), run[0], advice)
    if len(runs) != 1:
        at = runs[1].start() if runs else len(text.rstrip())
        raise ComparisonCountError(place_of(text, at, place), len(runs))
    (run,) = runs
    left, right = text[: run.start()], text[run.end() :]
    if left.count("(") > left.count(")") and right.count("(") < right.count(")"):
        advice = "it stands inside brackets; take these away"
        raise ComparisonSignError(place_of(text, run.start(), place), run[0], advice)
    return Compared(
        read_formula(left, names=names, place=place_of(text, 0, place)),
        SIGNS[run[0]],
        read_formula(right, names=names, place=place_of(text, run.end(), place)),
    )
