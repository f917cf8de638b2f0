"""The systems with symbols from public trackers: solved at all values, or said not to be."""

from __future__ import annotations

import re

import pytest
from flint import ctx

from closedform.algebra.regimes import RootsUnknownError
from tests.parametric.admissible import draws
from tests.parametric.record_reader import (
    check_conditions,
    check_names,
    check_record,
    covering_cases,
    parameter_values,
    transition_at,
)
from tests.parametric.solving import record_of_model, stated
from tests.published.real_cases import (
    REAL_CASES,
    UNKNOWN,
    WITH_PARAMETERS,
    assert_is_the_reference,
    time_of,
)

# R16: an equation of two branches is not put together yet.  R43: nine symbols take minutes.
OPEN = ("R43",)
SOLVED = [identifier for identifier in WITH_PARAMETERS if identifier not in OPEN]


@pytest.mark.parametrize("identifier", SOLVED)
def test_a_system_with_symbols_is_solved_and_proved(identifier: str) -> None:
    case = REAL_CASES[identifier]
    record = record_of_model(
        stated(case["states"], case["matrix"], case["initial"], case["parameters"])
    )
    check_names(record)
    check_conditions(record)
    with ctx.workprec(600):
        values = parameter_values(case["reference"]["values"])
        for number in covering_cases(record, values):
            ours = transition_at(record, number, values, time_of(case))
            assert_is_the_reference(ours, case)
    for values in (*draws(case["parameters"], (), 3), *case.get("also_at", ())):
        assert check_record(record, values) >= 1


@pytest.mark.parametrize("identifier", UNKNOWN)
def test_where_the_roots_are_not_known_it_is_said_why(identifier: str) -> None:
    case = REAL_CASES[identifier]
    model = stated(case["states"], case["matrix"], case["initial"], case["parameters"])
    with pytest.raises(RootsUnknownError, match=re.escape(case["unknown"])):
        record_of_model(model)
