"""Responses with the number pi are proved, and faults in them are found."""

from __future__ import annotations

from dataclasses import replace

import pytest

from closedform.notation import read_formula
from closedform.response.parametric.numbers import numbers_of
from closedform.verification.parametric.numbers import numbers_check
from closedform.verification.parametric.verify import verify_cases
from closedform.verification.parametric.written import formula_check
from tests.parametric.with_pi import MODELS, response_with_pi
from tests.verification.parametric.spoiling import with_case

each_model = pytest.mark.parametrize("name", MODELS)


@each_model
def test_every_check_holds(name: str) -> None:
    records = verify_cases(response_with_pi(name))
    assert records.holds
    found = {c.outcome for r in (records.whole, *records.cases) for c in r.checks}
    assert found <= {"proved", "enclosed"}


def test_another_number_in_the_place_of_pi_is_refuted() -> None:
    response = response_with_pi("numbers")
    case = response.cases[0]
    names = frozenset({"t", "pi"})
    near = read_formula("20*cos(355/113*t)", names=names)
    spoiled = with_case(response, 0, solution=type(case.solution)((*case.solution[:2], near, near)))
    assert formula_check(spoiled, spoiled.cases[0]).outcome == "refuted"


@pytest.mark.parametrize("name", ["numbers", "spring", "lag", "damping"])
def test_decimals_are_those_of_the_exponential(name: str) -> None:
    response = response_with_pi(name)
    (numbers,) = numbers_of(response, digits=6)
    assert numbers_check(response, numbers, digits=6).outcome == "enclosed"


@pytest.mark.parametrize("wrong", ["1.3577", "1.35766", "0", "-1.35765"])
def test_a_wrong_decimal_is_refuted(wrong: str) -> None:
    response = response_with_pi("numbers")
    (numbers,) = numbers_of(response, digits=6)
    rows = (numbers.rows[0], (wrong, *numbers.rows[1][1:]), *numbers.rows[2:])
    check = numbers_check(response, replace(numbers, rows=rows), digits=6)
    assert check.outcome == "refuted"
    assert wrong in check.how
