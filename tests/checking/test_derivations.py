"""Whole hand derivations of a collection: right ones pass, the first wrong line is found."""

from __future__ import annotations

from functools import cache
from typing import Any

import pytest

from closedform.checking.verdict import LineVerdict
from tests.checking.derivations import ITEMS, lines_of, model_of
from tests.checking.hold import held_lines

WRONG = [item for item in ITEMS if item["verdict"] == "wrong"]
EXPECTED = {"wrong": "fails", "carried": "carried"}
NOT_EVIDENT = {("D09", 1), ("E09", 1), ("E21", 3)}
"""Lines that do not tell what they say: a bare list of numbers, a bare matrix."""


@cache
def verdicts_by_name(name: str, *, stated: bool) -> list[LineVerdict]:
    item = next(item for item in ITEMS if item["id"] == name)
    return held_lines(model_of(item), lines_of(item, stated=stated))


def verdicts(item: dict[str, Any], *, stated: bool = True) -> list[LineVerdict]:
    return verdicts_by_name(item["id"], stated=stated)


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


@pytest.mark.parametrize("item", WRONG, ids=lambda item: item["id"])
def test_slip_is_named_and_carried_lines_lead_to_it(item: dict[str, Any]) -> None:
    first = item["first_wrong"] + 1
    for found in verdicts(item):
        if found.verdict == "carried":
            assert found.carried_from == first
        assert (found.slip is not None) == (found.line.number == first), found
