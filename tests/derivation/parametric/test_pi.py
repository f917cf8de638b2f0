"""Derivations of models with the number pi: it is no parameter in print."""

from __future__ import annotations

from functools import cache

import pytest

from closedform.algebra.parameter_field import PI
from closedform.derivation.parametric.build import derive_cases
from closedform.derivation.parametric.reasons import reason_of
from closedform.derivation.step import Derivation, Statement
from closedform.notation.expression import Name
from closedform.response.parametric.numbers import numbers_of
from closedform.verification.parametric.verify import verify_cases
from tests.parametric.with_pi import MODELS, element, response_with_pi


@cache
def derived(name: str) -> Derivation:
    response = response_with_pi(name)
    numbers = numbers_of(response, digits=6)
    return derive_cases(response, verify_cases(response), numbers=numbers)


@pytest.mark.parametrize("name", MODELS)
def test_every_statement_is_proved_and_no_table_lists_pi(name: str) -> None:
    derivation = derived(name)
    assert derivation.checks[-1].item == "statements of the derivation"
    for step in derivation.steps:
        if step.kind == "parameters":
            assert Name(PI) not in [row["name"] for row in step.facts["rows"]]


def test_a_model_in_numbers_and_pi_has_no_parameters_and_no_cases() -> None:
    kinds = [step.kind for step in derived("numbers").steps]
    assert not {"parameters", "cases"} & set(kinds)
    assert "numbers" in kinds


def test_the_sign_of_a_number_in_pi_is_told_by_its_digits() -> None:
    response = response_with_pi("numbers")
    field = response.model.field
    argument = response.domain.sign_of(element(field, "pi^2 - 16"))
    said, *words = reason_of(field, argument)
    assert isinstance(said, Statement)
    assert said.relation == "<"
    assert words == [", by the digits of", Name(PI)]
    assert len(reason_of(field, response.domain.sign_of(element(field, "-pi^2")))) == 1
