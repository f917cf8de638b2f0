"""Whole hand derivations of a collection: right ones pass, the first wrong line is found."""

from __future__ import annotations

from typing import Any

import pytest

from closedform.checking.verdict import LineVerdict
from tests.checking.derivations import ITEMS, lines_of, model_of
from tests.checking.hold import held_lines

WRONG = [item for item in ITEMS if item["verdict"] == "wrong"]
EXPECTED = {"wrong": "fails", "carried": "carried"}
NOT_EVIDENT = {("D09", 1)}
"""Lines that do not tell what they say: a bare list of numbers."""


def verdicts(item: dict[str, Any], *, stated: bool = True) -> list[LineVerdict]:
    return held_lines(model_of(item), lines_of(item, stated=stated))


@pytest.mark.parametrize("item", ITEMS, ids=lambda item: item["id"])
@pytest.mark.parametrize("stated", [True, False], ids=["stated", "by left sides"])
def test_every_line_has_its_verdict(item: dict[str, Any], *, stated: bool) -> None:
    for found, line in zip(verdicts(item, stated=stated), item["lines"], strict=True):
        if not stated and (item["id"], found.line.number) in NOT_EVIDENT:
            assert found.verdict == "not read"
        elif line["status"] in EXPECTED:
            assert found.verdict == EXPECTED[line["status"]], (found, line)
        else:
            assert found.passes, (found, line)


def test_slips_are_named() -> None:
    """In four of five derivations at least: here in all."""
    named = [item for item in WRONG if any(v.slip is not None for v in verdicts(item))]
    assert len(named) == len(WRONG)


def test_carried_lines_name_the_slip() -> None:
    for item in WRONG:
        for found in verdicts(item):
            if found.verdict == "carried":
                assert found.carried_from == item["first_wrong"] + 1
