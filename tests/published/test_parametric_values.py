"""The published models with parameters: solved, and held against their sources' formulas."""

from __future__ import annotations

from functools import cache
from typing import Any

import pytest
from flint import arb, ctx

from tests.parametric.admissible import draws
from tests.parametric.plain_reader import Number
from tests.parametric.record_reader import (
    Balls,
    check_conditions,
    check_names,
    check_record,
    covering_cases,
    evaluated_texts,
    parameter_values,
    solution_at,
    transition_at,
)
from tests.parametric.solving import record_of_model, stated
from tests.published.parametric_checks import CASES, CHECKS, ITEMS, named, points

BITS = 600


@cache
def record_of(identifier: str) -> dict[str, Any]:
    item = ITEMS[identifier]
    more = {"conditions": item["conditions"]} if "conditions" in item else {}
    return record_of_model(
        stated(item["states"], item["matrix"], item["initial"], item["parameters"], **more)
    )


class RecordAnswer:
    """The answer that one case of a record gives at values of the parameters."""

    def __init__(self, record: dict[str, Any], case: int, values: dict[str, Number]) -> None:
        self.record, self.case, self.values = record, case, values

    def transition(self, time: Number) -> Balls:
        return transition_at(self.record, self.case, self.values, time)

    def solution(self, time: Number) -> list[arb]:
        return solution_at(self.record, self.case, self.values, time)

    def characteristic(self) -> list[Number]:
        return evaluated_texts(self.record["characteristic_polynomial"], self.values)


@pytest.mark.parametrize(("identifier", "number"), CASES)
def test_the_record_says_the_published_formula(identifier: str, number: int) -> None:
    item, record = ITEMS[identifier], record_of(identifier)
    check = item["checks"][number]
    with ctx.workprec(BITS):
        for values in points(item, check, 4):
            at, known = parameter_values(values), named(item, values)
            for case in covering_cases(record, at):
                CHECKS[check["kind"]](item, check, RecordAnswer(record, case, at), known)


@pytest.mark.parametrize("identifier", ITEMS)
def test_the_record_is_right_at_usual_and_exceptional_values(identifier: str) -> None:
    item, record = ITEMS[identifier], record_of(identifier)
    check_names(record)
    check_conditions(record)
    tried = [*draws(item["parameters"], item.get("conditions", ()), 6, seed=1)]
    for values in (*tried, *item.get("exceptional", ())):
        assert check_record(record, values) >= 1
