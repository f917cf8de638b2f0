"""The terms of an entry add up to the entry of e^(At), with the names for what they stand."""

from __future__ import annotations

from fractions import Fraction

import pytest
from flint import arb, ctx

from closedform.algebra.parameter_field import ParameterField
from closedform.response.parametric.mode_terms import KERNELS, terms_of
from closedform.response.parametric.points import case_points
from closedform.response.parametric.response import ParametricResponse
from closedform.verification.parametric.values import NamesAt, enclosed_matrix, exponential_at
from tests.response.parametric.functions import value_at
from tests.response.parametric.solved import MODELS, response_to


def writing_field(response: ParametricResponse, number: int) -> ParameterField:
    names = [n for mode in response.cases[number].modes for n in mode.names]
    return ParameterField(parameters=(*response.model.field.parameters, *names))


@pytest.mark.parametrize("name", MODELS)
def test_the_terms_of_every_entry_add_up_to_the_exponential(name: str) -> None:
    ctx.prec = 300
    response = response_to(name)
    field, n = response.model.field, len(response.model.states)
    for case in response.cases:
        writing = writing_field(response, case.number)
        (point,) = case_points(field, case, 1)
        known = NamesAt(response.model, case, point).balls()
        matrix = enclosed_matrix(field, response.matrix, point.balls())
        expected = exponential_at(matrix, Fraction(1, 3))
        at = {**known, "t": arb(1) / 3}
        for i in range(n):
            for k in range(n):
                terms = terms_of(field, writing, case.modes, case.branch.exponential, i, k)
                found = value_at(writing, terms, at)
                assert found.is_finite()
                assert found.overlaps(expected[i, k])


@pytest.mark.parametrize("name", MODELS)
def test_terms_are_real_functions_of_their_regime_and_none_is_zero(name: str) -> None:
    response = response_to(name)
    for case in response.cases:
        writing = writing_field(response, case.number)
        kinds = {sign for mode in case.modes for sign in (mode.regime.kind, *mode.regime.signs)}
        allowed = {None}
        allowed |= (
            set(KERNELS["circular"]) if kinds & {"circular", "quartet", "root and pair"} else set()
        )
        allowed |= set(KERNELS["hyperbolic"]) if "hyperbolic" in kinds else set()
        for i, _ in enumerate(response.model.states):
            terms = terms_of(
                response.model.field, writing, case.modes, case.branch.exponential, i, 0
            )
            assert all(term.amount for term in terms)
            assert {term.kernel for term in terms} <= allowed


def test_an_entry_that_is_zero_has_no_terms() -> None:
    response = response_to("depot")
    case = response.cases[0]
    writing = writing_field(response, 0)
    assert terms_of(response.model.field, writing, case.modes, case.branch.exponential, 0, 1) == []
