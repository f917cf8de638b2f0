"""JUnit XML: well-formed whatever is in it, and counted as servers count."""

from __future__ import annotations

import re
from xml.etree import ElementTree as ET

import pytest
from hypothesis import given
from hypothesis import strategies as st

from closedform.checking.claim import SourceLine
from closedform.checking.verdict import CheckReport, LineVerdict
from closedform.document.checked_junit import junit_text
from tests.document.checked_samples import CHECKED_SAMPLES, slipped


def parsed(text: str) -> ET.Element:
    assert text.startswith('<?xml version="1.0" encoding="UTF-8"?>\n')
    return ET.fromstring(text.encode("utf-8"))  # noqa: S314 - our own text


@pytest.mark.parametrize("name", CHECKED_SAMPLES)
@pytest.mark.parametrize("allow_unread", [False, True])
def test_the_counts_are_those_of_the_test_cases(name: str, *, allow_unread: bool) -> None:
    report = CHECKED_SAMPLES[name]()
    text = junit_text(report, allow_unread=allow_unread)
    whole = parsed(text)
    (suite,) = whole
    for element in (whole, suite):
        for key, tag in (("failures", "failure"), ("errors", "error"), ("skipped", "skipped")):
            assert int(element.get(key, "")) == len(suite.findall(f"testcase/{tag}"))
        assert int(element.get("tests", "")) == len(suite) == len(report.lines)
    wrong = sum(int(suite.get(key, "")) for key in ("failures", "errors"))
    assert (wrong == 0) == report.all_well(allow_unread=allow_unread)
    assert not re.search("[\x00-\x09\x0b-\x1f\x7f-\x9f]", text)
    assert "timestamp" not in text
    assert "time=" not in text


def test_each_line_is_a_case_with_its_verdict() -> None:
    (suite,) = parsed(junit_text(slipped()))
    cases = list(suite)
    assert [case.get("name") for case in cases[2:5]] == [
        "line 3",
        "line 4: eigenvalues",
        "line 5: eigenvector v1",
    ]
    assert {case.get("classname") for case in cases} == {"tanks"}
    assert len(cases[0]) == 0
    (failure,) = cases[3]
    assert failure.tag == "failure"
    assert failure.get("type") == "fails"
    assert failure.get("message", "").startswith("fails: The first eigenvalue is -1, not 1.")
    assert "notes/tanks.tex, line 26, column 3" in str(failure.text)
    assert "right: {-1, -4}" in str(failure.text)
    assert "slip: a sign was lost, before 5 in the numerator" in str(failure.text)
    (carried,) = cases[4]
    assert carried.get("type") == "carried"
    assert carried.get("message", "").startswith("carried from line 4: ")
    (unread,) = cases[7]
    assert unread.tag == "error"
    assert unread.get("type") == "not read"


def test_lines_that_need_not_be_read_are_skipped() -> None:
    (suite,) = parsed(junit_text(slipped(), allow_unread=True))
    (skipped,) = suite[7]
    assert skipped.tag == "skipped"
    assert skipped.get("message", "").startswith("not read: The sign \\overset")


@given(st.text(st.characters(), max_size=30))
def test_any_text_at_all_makes_well_formed_xml(text: str) -> None:
    line = LineVerdict(SourceLine(1, text), text, "fails", text, notes=(text,))
    parsed(junit_text(CheckReport(text, text, text, text, text, (line,))))
