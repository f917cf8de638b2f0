"""A collection of formulas as people write them, read and held against their meanings."""

from __future__ import annotations

from collections.abc import Mapping
from typing import Any

import pytest
import sympy

from closedform.notation.written.reader import read_latex
from closedform.notation.written.tree import Reading
from closedform.notation.written.typed_reader import read_typed
from tests.notation.written.meaning import alike, declared_of, items, made, meant

Item = Mapping[str, Any]
CLEAR = [item for item in items() if not item["ambiguous"]]
DECIDED = frozenset({"L230", "L249"})
"""A declared name stands in the place of its customary meaning, which nobody hesitates about."""
DOUBTFUL = [item for item in items() if item["ambiguous"]]
UNDECIDED = DECIDED | {"L145", "L264"}
"""Items whose other reading is only described, or is a number with a unit."""


def name_of(item: Item) -> str:
    return str(item["id"])


def reading_of(item: Item) -> Reading:
    declared = declared_of(item)
    if "text" in item:
        return read_typed(item["text"], declared)
    return read_latex(item["latex"], declared)


@pytest.mark.parametrize("item", CLEAR, ids=name_of)
def test_what_is_clear_means_what_it_says(item: Item) -> None:
    assert alike(made(item, reading_of(item)), meant(item))


@pytest.mark.parametrize("item", DOUBTFUL, ids=name_of)
def test_what_is_doubtful_is_read_in_the_usual_way_first(item: Item) -> None:
    reading = reading_of(item)
    assert alike(made(item, reading), meant(item))
    assert reading.ambiguities or name_of(item) in DECIDED


@pytest.mark.parametrize(
    ("item", "other"),
    [
        (item, other)
        for item in DOUBTFUL
        for other in item.get("alternatives", ())
        if name_of(item) not in UNDECIDED
    ],
    ids=lambda value: name_of(value) if isinstance(value, dict) else "other",
)
def test_the_other_reading_is_among_the_others(item: Item, other: str) -> None:
    found = [made(item, Reading(statements)) for statements in reading_of(item).others]
    assert any(alike(one, meant(item, other)) for one in found)


@pytest.mark.parametrize("item", [i for i in items() if i.get("units")], ids=name_of)
def test_a_printed_unit_is_kept_beside_its_number(item: Item) -> None:
    assert item["units"] in [statement.unit for statement in reading_of(item).statements]


@pytest.mark.parametrize(
    "item", [i for i in CLEAR if i.get("relation") and i["kind"] == "equation"], ids=name_of
)
def test_a_rounded_claim_says_so(item: Item) -> None:
    relations = [sign for statement in reading_of(item).statements for sign in statement.relations]
    assert "≈" in relations


def test_what_means_something_else_is_told_apart() -> None:
    """The comparison itself can fail: no two readings of these are alike."""
    told = [item for item in CLEAR if "text" in item and item["kind"] == "expr"]
    meanings = [made(item, reading_of(item)) for item in told]
    same = [
        (name_of(a), name_of(b))
        for k, (a, left) in enumerate(zip(told, meanings, strict=True))
        for b, right in zip(told[:k], meanings[:k], strict=True)
        if alike(left, right)
    ]
    assert same == []
    assert not alike(sympy.Integer(1), sympy.Integer(2))
