"""Published results, written down as an author would: they pass, and with one change they fail."""

from __future__ import annotations

from typing import Any

import pytest

from tests.published.published_derivations import ITEMS, as_printed, changed, origin

NAMES = [f"{item['file'].removesuffix('.json')}:{item['id']}" for item in ITEMS]


@pytest.mark.parametrize("item", ITEMS, ids=NAMES)
def test_what_is_published_passes(item: dict[str, Any]) -> None:
    told = {v.line.text: (v.verdict, v.says, v.reason) for v in as_printed(item) if not v.passes}
    assert told == {}


@pytest.mark.parametrize("item", ITEMS, ids=NAMES)
def test_with_one_change_it_fails(item: dict[str, Any]) -> None:
    told = {
        line["changed"]: (line["change"], verdict.verdict, verdict.says, verdict.reason)
        for line, verdict in changed(item)
        if verdict.verdict != "fails"
    }
    assert told == {}


def test_nothing_passes_as_a_definition_or_without_a_kind() -> None:
    claimed = {v.says.split(" ")[0] for item in ITEMS for v in as_printed(item)}
    assert not claimed & {"definition", "identity", ""}


def test_the_source_of_every_line_is_told_as_in_the_item_it_comes_from() -> None:
    for item in ITEMS:
        told = origin(item)
        assert [item[key] for key in ("source", "seen_at", "scope")] == [
            told[key] for key in ("source", "seen_at", "scope")
        ]


def test_there_are_enough_lines_and_each_change_is_one() -> None:
    lines = [line for item in ITEMS for line in item["lines"]]
    assert len(lines) >= 90
    assert len({item["id"] for item in ITEMS if "memory" not in item["scope"]}) >= 40
    for line in lines:
        assert line["latex"] != line["changed"]
        assert line["change"]
