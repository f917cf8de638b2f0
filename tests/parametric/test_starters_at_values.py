"""The starters with parameters: right in every row of their tables, and at values drawn."""

from __future__ import annotations

import re
import tomllib
from pathlib import Path
from typing import Any

import pytest

import closedform
from closedform.model.parametric import ParametricModel
from tests.parametric.admissible import draws
from tests.parametric.record_reader import check_conditions, check_names, check_record
from tests.parametric.solving import record_of_model
from tests.parametric.table_reader import check_table

STARTERS = {
    path.stem: path
    for path in sorted((Path(__file__).parents[2] / "templates" / "starters").glob("*.toml"))
    if {"parameters", "matrix"} <= set(tomllib.loads(path.read_text(encoding="utf-8")))
}


def rows_of(stated: dict[str, Any], names: tuple[str, ...]) -> list[dict[str, Any]]:
    """Return the rows of [[values]] as the file states them, completed by the parameters'."""
    own = {name: stated["parameters"][name].get("value") for name in names}
    rows = [{**own, **row} for row in stated.get("values", [{}])]
    return [{name: as_text(row[name]) for name in names} for row in rows]


def as_text(number: object) -> str:
    """Return a number of TOML in plain notation, which has no decimals."""
    whole, _, decimals = str(number).partition(".")
    return f"{whole}{decimals}/{10 ** len(decimals)}" if decimals else whole


@pytest.mark.parametrize("name", STARTERS)
def test_a_starter_with_parameters_is_right_at_its_values_and_others(name: str) -> None:
    stated = tomllib.loads(STARTERS[name].read_text(encoding="utf-8"), parse_float=str)
    model = closedform.load(STARTERS[name])
    assert isinstance(model, ParametricModel)
    record = record_of_model(model)
    check_names(record)
    check_conditions(record)
    assert not record["not_covered"]
    names = tuple(record["parameters"])
    outputs = stated.get("outputs", {})
    assumed = {n: stated["parameters"][n].get("assume", "real") for n in names}
    rows = rows_of(stated, names)
    assert rows
    assert check_table(record, outputs_in(outputs, stated)) >= 8 * len(rows)
    for values in (*rows, *draws(assumed, stated.get("conditions", ()), 4)):
        assert check_record(record, values, outputs=outputs_in(outputs, stated)) >= 1


def outputs_in(outputs: dict[str, str], stated: dict[str, Any]) -> dict[str, str]:
    """Return the outputs with re-stated parameters put in."""
    for name, formula in stated.get("substitute", {}).items():
        outputs = {
            key: re.sub(rf"\b{name}\b", f"({formula})", text) for key, text in outputs.items()
        }
    return outputs


def test_there_are_starters_with_parameters() -> None:
    assert len(STARTERS) >= 9
