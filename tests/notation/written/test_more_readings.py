"""More formulas as people write them, read through the one call that other programs use."""

from __future__ import annotations

import json
from collections.abc import Mapping
from functools import cache
from pathlib import Path
from typing import Any

import pytest

from closedform.notation.written import declared_names, meaning_of, reading_of
from closedform.notation.written.tree import Declared, Reading
from tests.notation.written.meaning import alike, made, meant

Item = Mapping[str, Any]
COLLECTION = Path(__file__).with_name("more_notation.json")


@cache
def items() -> tuple[Item, ...]:
    found = json.loads(COLLECTION.read_text(encoding="utf-8"))["items"]
    return tuple({"ambiguous": False, **item} for item in found)


def name_of(item: object) -> str:
    return str(item["id"]) if isinstance(item, Mapping) else "other"


def read(item: Item) -> Reading:
    return reading_of(latex=item.get("latex"), text=item.get("text"), declared=item["declared"])


@pytest.mark.parametrize("item", items(), ids=name_of)
def test_a_formula_means_what_it_says(item: Item) -> None:
    found = meaning_of(
        item["kind"], latex=item.get("latex"), text=item.get("text"), declared=item["declared"]
    )
    assert alike(found, meant(item))


@pytest.mark.parametrize("item", [i for i in items() if i["ambiguous"]], ids=name_of)
def test_a_doubtful_formula_has_its_other_readings_beside_it(item: Item) -> None:
    reading = read(item)
    assert reading.ambiguities
    others = []
    if "alternatives" in item:
        others = [made(item, Reading(statements)) for statements in reading.others]
    for meaning in item.get("alternatives", ()):
        assert any(alike(other, meant(item, meaning)) for other in others)


@pytest.mark.parametrize("item", [i for i in items() if i.get("units")], ids=name_of)
def test_a_unit_is_kept_beside_its_number(item: Item) -> None:
    assert item["units"] in [statement.unit for statement in read(item).statements]


@pytest.mark.parametrize("item", [i for i in items() if i.get("condition")], ids=name_of)
def test_a_condition_is_kept_beside_its_formula(item: Item) -> None:
    assert any(statement.conditions for statement in read(item).statements)


def test_names_may_come_in_anything_that_holds_them() -> None:
    kinds = (list, tuple, set, frozenset, dict.fromkeys)
    found = {Declared(kind(["x", "v"]), parameters=kind(["lamda"])) for kind in kinds}
    assert found == {declared_names({"states": ["v", "x"], "parameters": iter(["lamda"])})}


def test_one_string_is_not_taken_for_several_names() -> None:
    with pytest.raises(TypeError, match="put 'xv' in a list"):
        Declared("xv")  # type: ignore[arg-type]


@pytest.mark.parametrize(
    ("given", "message"),
    [
        ({}, "as latex or as text"),
        ({"latex": "t", "text": "t"}, "as latex or as text"),
        ({"text": "t", "declared": {"state": ["x"]}}, "no role 'state'"),
    ],
)
def test_what_is_asked_for_wrongly_is_told(given: Any, message: str) -> None:
    with pytest.raises(ValueError, match=message):
        reading_of(**given)


def test_the_shape_of_a_matrix_is_used() -> None:
    given = {"states": ["x"], "matrices": {"A": [2, 2]}}
    product = meaning_of(text="A*A", declared=given)
    assert product.shape == (2, 2)
