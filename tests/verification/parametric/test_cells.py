"""Each cell of a branch, made by the signs that tell its cases apart, has one case."""

from __future__ import annotations

from dataclasses import replace

import pytest

from closedform.algebra.domain import Comparison
from closedform.verification.parametric.cells import cell_fault, part_covered
from tests.verification.parametric.spoiling import KINDS, response_to, with_case


@pytest.mark.parametrize("kind", KINDS)
def test_no_cell_of_a_right_response_is_at_fault(kind: str) -> None:
    response = response_to(kind)
    assert [cell_fault(response, branch) for branch in response.branches] == [None] * len(
        response.branches
    )


@pytest.mark.parametrize(("number", "sign"), [(0, ">"), (1, "="), (2, "<")])
def test_the_cell_without_a_case_is_named(number: int, sign: str) -> None:
    response = response_to("pair")
    cases = tuple(case for case in response.cases if case.number != number)
    fault = cell_fault(replace(response, cases=cases), response.branches[0])
    assert fault is not None
    assert fault.startswith("0 cases of branch 0 apply where ")
    assert fault.endswith(f" {sign} 0")


def test_two_cases_of_one_cell_are_a_fault() -> None:
    response = response_to("pair")
    spoiled = with_case(response, 2, regimes=response.cases[0].regimes)
    fault = cell_fault(spoiled, response.branches[0])
    assert fault is not None
    assert fault.startswith(("2 cases", "0 cases"))


def test_a_branch_that_is_empty_needs_no_case() -> None:
    response = response_to("rates")
    branch = response.branches[1]
    (equation,) = branch.equations
    a = response.model.field.symbol("a")
    empty = replace(branch, domain=branch.domain.narrowed(Comparison(-a, ">")))
    cases = response.cases[:1]
    assert cell_fault(replace(response, cases=cases), empty) is None
    assert cell_fault(replace(response, cases=cases), branch) is not None
    assert equation.parameter == "b"


def test_the_part_covered_is_where_nothing_exceptional_vanishes() -> None:
    response = response_to("rates")
    field = response.model.field
    apart = Comparison(field.symbol("a") - field.symbol("b"), "!=")
    generic, equal = response.branches
    assert part_covered(field, generic) == generic.domain.narrowed(apart)
    assert part_covered(field, equal) == equal.domain
