"""The sentences about a checked derivation."""

from __future__ import annotations

from dataclasses import replace

import pytest

from closedform.checking.claim import SourceLine
from closedform.checking.verdict import WORDS, CheckReport, LineVerdict, Word
from closedform.document.checked_words import (
    MEANINGS,
    claimed,
    counts,
    line_name,
    outcome,
    place_of,
    sentence,
    tally,
)
from closedform.errors import Place
from tests.document.checked_samples import CHECKED_SAMPLES, slipped, sound


def report(*found: Word | tuple[Word, int | None]) -> CheckReport:
    lines = []
    for number, item in enumerate(found, start=1):
        word, source = item if isinstance(item, tuple) else (item, None)
        lines.append(LineVerdict(SourceLine(number, "x"), "", word, carried_from=source))
    return CheckReport("r", "R", "r.tex", "r.toml", "", tuple(lines))


OUTCOMES = [
    ((), "there is no line to check"),
    (("holds",), "the one line holds"),
    (("holds", "holds up to scale"), "all 2 lines hold"),
    (("fails",), "line 1 fails"),
    (
        ("holds", "fails", ("carried", 2)),
        "line 2 fails; line 3 is carried from it; the other line holds",
    ),
    (
        ("fails", ("carried", 1), ("carried", 1), ("carried", 1), "holds", "holds"),
        "line 1 fails; lines 2 to 4 are carried from it; the other 2 hold",
    ),
    (
        ("fails", "fails", ("carried", 1), ("carried", 2), ("carried", 1)),
        "lines 1 and 2 fail; lines 3 and 5 are carried from line 1; line 4 is carried from line 2",
    ),
    (
        ("fails", "holds", "fails", "fails", "fails", "not read"),
        "lines 1 and 3 to 5 fail; line 6 was not read; the other line holds",
    ),
    (("fails", ("carried", None)), "line 1 fails; line 2 is carried"),
    (("not read", "not read"), "lines 1 and 2 were not read"),
]


@pytest.mark.parametrize(("found", "said"), OUTCOMES)
def test_the_outcome_names_every_line_that_does_not_hold(
    found: tuple[Word | tuple[Word, int | None], ...], said: str
) -> None:
    assert outcome(report(*found)) == said


def test_the_tally_counts_every_verdict_that_occurs() -> None:
    assert tally(slipped()) == "8 lines: 3 hold, 1 fails, 3 are carried and 1 was not read"
    assert tally(report("holds")) == "1 line: 1 holds"
    assert tally(report()) == "0 lines"


@pytest.mark.parametrize("name", CHECKED_SAMPLES)
def test_the_counts_add_up_to_the_lines(name: str) -> None:
    sample = CHECKED_SAMPLES[name]()
    found = counts(sample)
    assert tuple(found) == WORDS == tuple(MEANINGS)
    assert sum(found.values()) == len(sample.lines)


SENTENCES = [
    ("", ""),
    ("a sign of A", "A sign of A."),
    ("it holds.", "It holds."),
    ("a", "A."),
    ("x1 is no state", "x1 is no state."),
    ("lambda is 2", "lambda is 2."),
    ("the  line\nends", "The line ends."),
    ("Is it so?", "Is it so?"),
]


@pytest.mark.parametrize(("remark", "said"), SENTENCES)
def test_a_remark_becomes_a_sentence_and_names_keep_their_letters(remark: str, said: str) -> None:
    assert sentence(remark) == said


def test_what_a_vector_is_of_is_told_once() -> None:
    verdict = sound().lines[2]
    of = replace(verdict, line=replace(verdict.line, of=" -2 "))
    assert claimed(of) == "eigenvector of -2"
    assert line_name(of) == "line 3: eigenvector of -2"
    assert claimed(verdict) == verdict.says
    value = sound().lines[3]
    assert claimed(replace(value, line=replace(value.line, of="x1"))) == "value x1"
    assert claimed(replace(of, says="")) == ""


def test_a_place_is_a_line_where_that_is_known_and_else_a_key() -> None:
    verdict = sound().lines[0]
    keyed = replace(verdict.line, place=Place("a.toml", "claim[1].text", 7, 9))
    assert place_of(replace(verdict, line=keyed)) == "line 7"
    unplaced = replace(verdict.line, place=Place("a.toml", "claim[1].text"))
    assert place_of(replace(verdict, line=unplaced)) == "claim[1].text"
    labelled = replace(verdict.line, place=Place("a.tex"), label="eq:x")
    assert place_of(replace(verdict, line=labelled)) == "(eq:x)"
