"""What is said about a checked derivation on a terminal, and as plain text in a pipe."""

from __future__ import annotations

from collections.abc import Iterator, Sequence
from itertools import zip_longest
from pathlib import Path

from rich.cells import cell_len, chop_cells

from closedform.checking.verdict import CheckReport, LineVerdict, Word
from closedform.cli.screen import Line, printable
from closedform.document.checked_words import (
    claimed,
    outcome,
    place_of,
    sentence,
    slip_words,
    tally,
)
from closedform.notation.written.plain_form import plain_written

__all__ = ["check_line", "check_summary"]

LABEL = 17
WIDEST = 100
"""Columns beyond which a line is hard to read, however wide the terminal is."""

NUMBER, SAYS, VERDICT, GAP = 4, 20, 14, 2
LEAST = 24
"""Columns of reasons; where a terminal has fewer left, they stand below."""

STYLES: dict[Word, str] = {"fails": "bold red", "carried": "red", "not read": "bold"}
"""Colour is kept for what is wrong; the words say the same without it."""


def check_summary(report: CheckReport, files: Sequence[Path], width: int) -> list[Line]:
    """Return a table of the lines and their verdicts, and what came of it all.

    No line is longer than `width`, except that a path is never broken.
    """
    room = min(width, WIDEST)
    lines: list[Line] = [((title, "bold"),) for title in _wrapped(report.title, room)]
    for label, text in (("derivation", report.source), ("model", report.model)):
        lines += _labelled(label, [text]) if text else []
    if report.case:
        lines += _labelled("case", _wrapped(report.case, room - LABEL))
    lines.append(())
    lines += _table(report, room)
    lines.append(())
    lines += _labelled("verdicts", _wrapped(tally(report), room - LABEL))
    lines += _labelled("outcome", _wrapped(outcome(report), room - LABEL), _style(report))
    for verdict in report.lines:
        for label, text in _mending(verdict):
            lines += _labelled(label, _wrapped(text, room - LABEL))
    lines += _labelled("written", [str(file) for file in files])
    return [*lines, ()]


def check_line(report: CheckReport, source: str) -> Line:
    """Return one line on a derivation among several, by the name it was given."""
    return ((f"{source}: ", ""), (outcome(report), _style(report)))


def _style(report: CheckReport) -> str:
    return STYLES["fails"] if report.first_wrong else "bold"


def _table(report: CheckReport, room: int) -> Iterator[Line]:
    last = room - NUMBER - SAYS - VERDICT - 3 * GAP
    below = last < LEAST
    says = room - NUMBER - VERDICT - 2 * GAP if below else SAYS
    head = _padded("line", NUMBER) + _padded("what it says", says)
    yield ((head + ("verdict" if below else _padded("verdict", VERDICT) + "reason"), "dim"),)
    for verdict in report.lines:
        reason = _reason(verdict, room - NUMBER - GAP if below else last)
        columns = (
            [f"{verdict.line.number:>{NUMBER}}"],
            _wrapped(claimed(verdict), says),
            _wrapped(_word(verdict), VERDICT),
            [] if below else reason,
        )
        for number, claim, word, why in zip_longest(*columns, fillvalue=""):
            yield (
                (_padded(number, NUMBER) + _padded(claim, says), ""),
                (_padded(word, VERDICT) if why else word, STYLES.get(verdict.verdict, "")),
                (why, ""),
            )
        if below:
            yield from (((" " * (NUMBER + GAP) + text, ""),) for text in reason if text)


def _word(verdict: LineVerdict) -> str:
    if verdict.carried_from is None:
        return verdict.verdict
    return f"{verdict.verdict} from {verdict.carried_from}"


def _reason(verdict: LineVerdict, width: int) -> list[str]:
    texts = [sentence(verdict.reason), *(f"Note: {sentence(note)}" for note in verdict.notes)]
    return [line for text in texts for line in _wrapped(text, width)]


def _mending(verdict: LineVerdict) -> Iterator[tuple[str, str]]:
    """Yield labelled texts on a line that fails: its place, the right form, and the slip."""
    if verdict.verdict != "fails":
        return
    number, slip = verdict.line.number, verdict.slip
    if place := place_of(verdict):
        yield f"place of {number}", place
    if verdict.right is not None:
        yield f"right in {number}", plain_written(verdict.right)
    if slip is not None:
        yield f"slip in {number}", slip_words(slip)
        if slip.mended is not None and slip.mended != verdict.right:
            yield f"mended {number}", plain_written(slip.mended)


def _labelled(label: str, texts: Sequence[str], style: str = "") -> list[Line]:
    return [
        ((f"  {'' if k else label:{LABEL - 2}}", "dim"), (text, style))
        for k, text in enumerate(texts)
    ]


def _padded(text: str, width: int) -> str:
    return text + " " * (width + GAP - cell_len(text))


def _wrapped(text: str, width: int) -> list[str]:
    """Return the text in lines of that many columns at most; wide letters count as two."""
    lines: list[str] = []
    for word in printable(text).split():
        if lines and cell_len(lines[-1]) + 1 + cell_len(word) <= width:
            lines[-1] += f" {word}"
        else:
            lines += chop_cells(word, width)
    return lines or [""]
