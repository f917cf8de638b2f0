"""The published driven models: solved as typed, and held against their sources' solutions."""

from __future__ import annotations

from collections.abc import Mapping
from functools import cache
from typing import Any

import pytest
from flint import arb, ctx

from tests.driven.held import check as hold
from tests.driven.told import Told, record_of_driven
from tests.driven.typed import Stated
from tests.parametric.admissible import draws
from tests.parametric.driven_record_reader import check_driven_record
from tests.parametric.plain_reader import ball_of
from tests.parametric.record_reader import parameter_values
from tests.published.driven_checks import (
    CASES,
    CHECKS,
    ITEMS,
    LATER,
    named,
    points,
)

BITS = 600


@cache
def record_of(identifier: str) -> Mapping[str, Any]:
    return record_of_driven(ITEMS[identifier]["model"])


class RecordAnswer(Told):
    """What one case of a record says."""

    def amplitude(self, name: str) -> arb:
        (term,) = self.case["steady_state"]["sinusoids"][name]["terms"]
        return ball_of(self.number(term["amplitude"]))


@pytest.mark.parametrize(("identifier", "number"), CASES)
def test_the_record_says_the_published_solution(identifier: str, number: int) -> None:
    item, record = ITEMS[identifier], record_of(identifier)
    check = item["checks"][number]
    with ctx.workprec(BITS):
        for values in points(item, check, 4):
            at, known = parameter_values(values), named(item, values)
            for answer in RecordAnswer.cases(record, at):
                CHECKS[check["kind"]](check, answer, known)


@pytest.mark.parametrize("identifier", ITEMS)
def test_the_record_solves_the_equations_at_usual_and_exceptional_values(identifier: str) -> None:
    item, record = ITEMS[identifier], record_of(identifier)
    parameters = item["model"].get("parameters", {})
    tried: list[Any] = list(draws(parameters, (), 4, seed=1)) if parameters else [{}]
    for values in (*tried, *item.get("exceptional", ())):
        assert check_driven_record(record, values) >= 1
        with ctx.workprec(BITS):
            at = parameter_values(values)
            stated = Stated(item["model"], at)
            for told in Told.cases(record, at):
                hold(stated, told.functions, [*stated.instants, *LATER])
