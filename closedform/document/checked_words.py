"""What is said about a checked derivation, in the same words wherever it is said."""

from __future__ import annotations

from collections.abc import Iterable, Sequence

from closedform.checking.verdict import WORDS, CheckReport, LineVerdict, Slip, Word

__all__ = [
    "MEANINGS",
    "claimed",
    "counts",
    "line_name",
    "outcome",
    "place_of",
    "sentence",
    "slip_sentence",
    "slip_words",
    "tally",
]

MEANINGS: dict[Word, str] = {
    "holds": "What the line claims is true of the model, exactly.",
    "holds up to scale": "True but for a factor other than zero, which the claim leaves open, as "
    "an eigenvector does.",
    "holds up to order": "The values are right; their order, which the claim leaves open, is "
    "another.",
    "holds to the digits shown": "The printed decimals are the exact values, rounded to the "
    "digits shown; this is certified, not estimated.",
    "fails": "The line is not true of the model, and no earlier line that fails accounts for it.",
    "carried": "The line is not true of the model, but follows from an earlier line that fails: "
    "it contains no slip of its own.",
    "not read": "The line could not be read, or what it claims could not be decided. Nothing is "
    "said about it.",
}
"""What each verdict says, for a reader who has not met it."""

OPENERS = (
    "a all an as at both column columns each entries entry every for from half in it its line "
    "lines neither no none not nothing of on one only row rows several some that the there these "
    "they this to two what where which with without"
)
OPENING_WORDS = frozenset(OPENERS.split())
"""Words that a remark begins with and that are no names of quantities."""

VERBS: dict[Word, tuple[str, str]] = {
    "holds": ("holds", "hold"),
    "holds up to scale": ("holds up to scale", "hold up to scale"),
    "holds up to order": ("holds up to order", "hold up to order"),
    "holds to the digits shown": ("holds to the digits shown", "hold to the digits shown"),
    "fails": ("fails", "fail"),
    "carried": ("is carried", "are carried"),
    "not read": ("was not read", "were not read"),
}


def counts(report: CheckReport) -> dict[Word, int]:
    """Return how many lines have each verdict, every verdict in its order."""
    found = [verdict.verdict for verdict in report.lines]
    return {word: found.count(word) for word in WORDS}


def tally(report: CheckReport) -> str:
    """Return how many lines there are, and how many have each verdict that occurs.

    As in: 9 lines: 4 hold, 1 holds up to scale, 1 fails and 3 are carried.
    """
    total = len(report.lines)
    parts = [
        f"{count} {VERBS[word][count != 1]}" for word, count in counts(report).items() if count
    ]
    return f"{total} {'line' if total == 1 else 'lines'}{': ' if parts else ''}{_listed(parts)}"


def outcome(report: CheckReport) -> str:
    """Return which lines are wrong and what came of them, without a capital or a full stop.

    As in: line 4 fails; lines 5 to 7 are carried from it.
    """
    if not report.lines:
        return "there is no line to check"
    failing = _numbers(report, "fails")
    parts = [f"{_lines(failing)} {VERBS['fails'][len(failing) != 1]}"] if failing else []
    sources = sorted({v.carried_from or 0 for v in report.lines if v.verdict == "carried"})
    for source in sources:
        own = [
            v.line.number
            for v in report.lines
            if v.verdict == "carried" and (v.carried_from or 0) == source
        ]
        whence = f" from {'it' if failing == [source] else f'line {source}'}" if source else ""
        parts.append(f"{_lines(own)} {VERBS['carried'][len(own) != 1]}{whence}")
    unread = _numbers(report, "not read")
    if unread:
        parts.append(f"{_lines(unread)} {VERBS['not read'][len(unread) != 1]}")
    good = sum(verdict.passes for verdict in report.lines)
    if good and parts:
        parts.append("the other line holds" if good == 1 else f"the other {good} hold")
    elif good:
        parts.append("the one line holds" if good == 1 else f"all {good} lines hold")
    return "; ".join(parts)


def sentence(text: str) -> str:
    """Return a remark as a sentence: with a full stop, and a capital if it begins with a word.

    What may be a name keeps its letters: x1 is not X1.

    >>> sentence("it belongs to x1"), sentence("x1 is no eigenvalue.")
    ('It belongs to x1.', 'x1 is no eigenvalue.')
    """
    words = " ".join(text.split())
    if words.partition(" ")[0].strip(",;:") in OPENING_WORDS:
        words = words[0].upper() + words[1:]
    return words if not words or words.endswith((".", "!", "?")) else f"{words}."


def line_name(verdict: LineVerdict) -> str:
    """Return the name of a line in a report: its number and what it claims, if that is known."""
    claim = claimed(verdict)
    return f"line {verdict.line.number}" + (f": {claim}" if claim else "")


def claimed(verdict: LineVerdict) -> str:
    """Return what a line claims, and of what, where its author says so: eigenvector of -2."""
    of = verdict.line.of.strip()
    if not verdict.says or not of or of in verdict.says.split():
        return verdict.says
    return f"{verdict.says} of {of}"


def slip_words(slip: Slip) -> str:
    """Return what the slip is and where, in words."""
    return f"{slip.name}, {slip.where}" if slip.where else slip.name


def slip_sentence(slip: Slip) -> str:
    """Return the words on a slip as a sentence: all but a unit in front gets a capital.

    >>> slip_sentence(Slip("rounded too early")), slip_sentence(Slip("rad/s for hertz"))
    ('Rounded too early.', 'rad/s for hertz.')
    """
    words = slip_words(slip)
    first = words.partition(" ")[0].strip(",").replace("-", "")
    return sentence(words[0].upper() + words[1:] if first.isalpha() else words)


def place_of(verdict: LineVerdict) -> str:
    """Return where the line stands in its file: a line, or a key; and its label, if it has one."""
    place, label = verdict.line.place, verdict.line.label
    where = place.key or "" if place.line is None else f"line {place.line}"
    return f"{where} ({label})".lstrip() if label else where


def _numbers(report: CheckReport, word: Word) -> list[int]:
    return [v.line.number for v in report.lines if v.verdict == word]


def _lines(numbers: Sequence[int]) -> str:
    """Return numbers of lines with their noun, three and more in a row as first to last."""
    runs: list[list[int]] = []
    for number in numbers:
        if runs and number == runs[-1][-1] + 1:
            runs[-1].append(number)
        else:
            runs.append([number])
    texts: list[str] = []
    for run in runs:
        texts += [f"{run[0]} to {run[-1]}"] if len(run) > 2 else map(str, run)
    return f"{'line' if len(numbers) == 1 else 'lines'} {_listed(texts)}"


def _listed(items: Iterable[str]) -> str:
    words = list(items)
    return " and ".join(words) if len(words) < 3 else f"{', '.join(words[:-1])} and {words[-1]}"
