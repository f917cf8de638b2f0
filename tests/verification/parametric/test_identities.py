"""The exact identities of branches and states, and zero where a relation holds."""

from __future__ import annotations

from dataclasses import replace
from functools import cache

import pytest

import closedform
from closedform.response.parametric.response import ParametricResponse, respond_in_cases
from closedform.verification.parametric.identities import (
    branch_checks,
    state_checks,
    vanishes_on,
)
from tests.verification.parametric.spoiling import KINDS, response_to, with_branch
from tests.verification.tampering import numbers_of, with_number

GENERIC = [
    "A as stated",
    "d/dt e^(At) - A e^(At) = 0",
    "e^(A0) = I",
    "p(A) = 0",
    "eigenvectors and chains",
    "two routes",
    "det e^(At) = e^(tr(A) t)",
]


@cache
def with_relation() -> ParametricResponse:
    """A cubic whose discriminant, in two parameters, is solved for none of them."""
    model = closedform.system(
        matrix=[[0, 1, 0], [0, 0, 1], ["-b", "-a", 0]],
        initial=[1, 0, 0],
        parameters={"a": "negative", "b": "positive"},
    )
    assert isinstance(model, closedform.ParametricModel)
    return respond_in_cases(model)


@pytest.mark.parametrize("kind", KINDS)
def test_every_identity_of_every_branch_is_proved(kind: str) -> None:
    response = response_to(kind)
    for branch in response.branches:
        checks = branch_checks(response, branch)
        assert [check.item for check in checks] == GENERIC
        assert {check.outcome for check in checks} == {"proved"}


@pytest.mark.parametrize("kind", KINDS)
def test_every_identity_of_every_state_is_proved(kind: str) -> None:
    response = response_to(kind)
    items = ["x' - A x = 0", "x(0) = x0", "x = e^(At) x0"]
    for case in response.cases:
        checks = list(state_checks(response, case))
        assert [c.item for c in checks] == items + ["y = C x"] * bool(response.model.outputs)
        assert {check.outcome for check in checks} == {"proved"}


def test_on_a_relation_identities_hold_up_to_its_multiples() -> None:
    response = with_relation()
    kept = [branch for branch in response.branches if branch.relation is not None]
    assert kept
    for branch in kept:
        checks = branch_checks(response, branch)
        assert [c.item for c in checks] == GENERIC[:4]
        assert {check.outcome for check in checks} == {"proved"}
        elsewhere = replace(branch, equations=())
        outcomes = [c.outcome for c in branch_checks(response, elsewhere)[1:3]]
        assert "refuted" in outcomes


def test_factors_that_multiply_to_something_else_on_a_relation_are_refuted() -> None:
    response = with_relation()
    branch = next(b for b in response.branches if b.relation is not None)
    first, *others = branch.spectrum.factors
    c = branch.spectrum.characteristic_polynomial
    wrong = replace(branch.spectrum, characteristic_polynomial=c + first.p)
    check = branch_checks(response, replace(branch, spectrum=wrong))[-1]
    assert (check.item, check.outcome) == ("p(A) = 0", "refuted")
    assert others


def test_a_changed_coefficient_on_a_relation_is_refuted() -> None:
    response = with_relation()
    branch = next(b for b in response.branches if b.relation is not None)
    one = response.model.field.domain.one
    for place, element in numbers_of(branch.exponential):
        wrong = with_number(branch.exponential, place, element + one)
        spoiled = with_branch(response, branch.number, exponential=wrong)
        checks = branch_checks(spoiled, spoiled.branches[branch.number])
        assert "refuted" in {check.outcome for check in checks}


def test_zero_on_a_branch_is_divisible_by_its_relation() -> None:
    response = with_relation()
    generic = response.branches[0]
    branch = next(b for b in response.branches if b.relation is not None)
    field, relation = response.model.field, branch.relation
    a = field.symbol("a")
    assert vanishes_on(branch, field.domain.zero)
    assert vanishes_on(branch, relation * a)
    assert vanishes_on(branch, relation / a)
    assert not vanishes_on(branch, relation + a)
    assert not vanishes_on(generic, relation)
    assert vanishes_on(generic, field.domain.zero)


def test_a_matrix_that_is_not_the_stated_one_names_the_entry() -> None:
    response = response_to("rates")
    spoiled = with_branch(response, 1, matrix=response.matrix)
    (check, *_) = branch_checks(spoiled, spoiled.branches[1])
    assert check.how == "entry (2, 2) of the matrix is not the one stated"
