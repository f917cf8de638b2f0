"""What was found about each line of a hand derivation, and about all of it."""

from __future__ import annotations

from dataclasses import dataclass
from typing import Literal as OneOf

from closedform.checking.claim import SourceLine
from closedform.notation.written.tree import Statement, Written

__all__ = ["PASSING", "WORDS", "CheckReport", "LineVerdict", "Slip", "Word"]

Word = OneOf[
    "holds",
    "holds up to scale",
    "holds up to order",
    "holds to the digits shown",
    "fails",
    "carried",
    "not read",
]
WORDS: tuple[Word, ...] = (
    "holds",
    "holds up to scale",
    "holds up to order",
    "holds to the digits shown",
    "fails",
    "carried",
    "not read",
)
PASSING = frozenset(WORDS[:4])


@dataclass(frozen=True, slots=True)
class Slip:
    """One change that mends a line, verified: `name` says which slip it undoes.

    `where` says where in the line it is, in words; `mended` is the whole right side after it.
    """

    name: str
    where: str = ""
    mended: Written | None = None


@dataclass(frozen=True, slots=True)
class LineVerdict:
    """The verdict on one line.

    `says` is what the line was taken to claim, as `KINDS` with its subject: "solution x1".
    `reason` is one or two sentences in plain text.  `right` is the right form of the value
    claimed, None where there is none to give or the line holds.  `carried_from` is the number
    of the earlier line that a carried line was worked out from.  `notes` are remarks that do
    not change the verdict: how an ambiguous place was read, for which case it holds.  `read`
    are the statements as they were read, to be shown in reports; empty if the line was not read.
    """

    line: SourceLine
    says: str
    verdict: Word
    reason: str = ""
    right: Written | None = None
    slip: Slip | None = None
    carried_from: int | None = None
    notes: tuple[str, ...] = ()
    read: tuple[Statement, ...] = ()

    @property
    def passes(self) -> bool:
        """Whether the line holds in some permitted sense."""
        return self.verdict in PASSING


@dataclass(frozen=True, slots=True)
class CheckReport:
    """A whole derivation, checked.  `name` is the stem under which reports are filed.

    `source` and `model` are the files as named by the user; `time` is the model's; `case` says
    which case of the parameters the lines were held against, empty if there is one only.
    """

    name: str
    title: str
    source: str
    model: str
    model_title: str
    lines: tuple[LineVerdict, ...]
    time: str = "t"
    case: str = ""

    @property
    def first_wrong(self) -> int | None:
        """The number of the first line that fails, or None."""
        return next((v.line.number for v in self.lines if v.verdict == "fails"), None)

    @property
    def holds(self) -> bool:
        """Whether every line holds in some permitted sense."""
        return all(v.passes for v in self.lines)

    @property
    def unread(self) -> tuple[LineVerdict, ...]:
        """The lines that were not read."""
        return tuple(v for v in self.lines if v.verdict == "not read")

    def all_well(self, *, allow_unread: bool = False) -> bool:
        """Whether this is fit to pass: every line holds, or was not read where that is allowed."""
        return all(v.passes or (allow_unread and v.verdict == "not read") for v in self.lines)
