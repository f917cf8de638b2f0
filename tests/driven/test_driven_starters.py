"""The starters that are driven: their records hold at their values and at others."""

from __future__ import annotations

import json
import re
import tomllib
from collections.abc import Mapping
from fractions import Fraction
from functools import cache
from pathlib import Path
from typing import Any

import pytest
from flint import arb, ctx

import closedform
from closedform.document.record import record_text
from closedform.model.driven.model import DrivenModel
from tests.driven.held import check
from tests.driven.told import Told
from tests.driven.typed import Stated
from tests.parametric.admissible import draws
from tests.parametric.driven_record_reader import check_driven_record, check_driven_texts
from tests.parametric.plain_reader import Number, ball_of
from tests.parametric.record_reader import parameter_values

STARTERS = {
    path.stem: path
    for path in sorted((Path(__file__).parents[2] / "templates" / "starters").glob("*.toml"))
    if {"equations", "mass", "inputs"} & set(tomllib.loads(path.read_text(encoding="utf-8")))
}
POINT = re.compile(r"(\w+'*)\((\w+)\) = (.*)")
LATER = (Fraction(1, 7), Fraction(9, 2))


def stated_in(name: str) -> dict[str, Any]:
    return tomllib.loads(STARTERS[name].read_text(encoding="utf-8"), parse_float=str)


@cache
def record_of(name: str) -> Mapping[str, Any]:
    response = closedform.respond(closedform.load(STARTERS[name]))
    proofs = closedform.verify(response)
    assert proofs.holds
    record: Mapping[str, Any] = json.loads(record_text(response, proofs))
    return record


def values_of(mapping: Mapping[str, Any]) -> list[dict[str, Number]]:
    """The values in the file, and some that are drawn."""
    parameters = mapping.get("parameters", {})
    own = {name: Fraction(told["value"]) for name, told in parameters.items()}
    assumed = {name: told.get("assume", "real") for name, told in parameters.items()}
    drawn = draws(assumed, mapping.get("conditions", ()), 3) if parameters else ()
    return [parameter_values(values) for values in (own, *drawn)]


def test_there_are_starters_that_are_driven() -> None:
    assert len(STARTERS) >= 6
    assert all(isinstance(closedform.load(path), DrivenModel) for path in STARTERS.values())


@pytest.mark.parametrize("name", STARTERS)
def test_a_starter_solves_its_equations_at_its_values_and_others(name: str) -> None:
    mapping, record = stated_in(name), record_of(name)
    check_driven_texts(record)
    with ctx.workprec(600):
        for values in values_of(mapping):
            stated = Stated(mapping, values)
            for told in Told.cases(record, values):
                begun = () if "at_points" in mapping else stated.instants[:8]
                check(stated, told.functions, [*begun, *later_than(stated)])
                for text in mapping.get("at_points", ()):
                    holds_at(text, stated, told)
            exact = {key: v for key, v in values.items() if isinstance(v, Fraction)}
            assert check_driven_record(record, exact) >= 1


def later_than(stated: Stated) -> list[Number]:
    """Later instants, within a few periods where something repeats."""
    told = stated.mapping.get("inputs", {}).values()
    periods = [stated.number(one["period"]) for one in told if "period" in one]
    length = min(periods, default=Fraction(1))
    return [stated.start + length * share for share in LATER]


def holds_at(text: str, stated: Stated, told: Told) -> None:
    """A condition such as y(L) = y2."""
    found = POINT.fullmatch(text)
    assert found
    row, at, right = found.groups()
    left = told.values(stated.number(at))[row.replace("'", "_dot")]
    assert abs(left - ball_of(stated.number(right))) < arb("1e-30")
