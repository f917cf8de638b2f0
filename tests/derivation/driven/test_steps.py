"""What the derivation of a driven model tells, and in which order."""

from __future__ import annotations

import pytest

from closedform.derivation.driven.build import derive_driven
from closedform.derivation.driven.proof.statements import PROVERS
from closedform.derivation.driven.writing import Writing
from closedform.derivation.parametric.proof.ground import said_in
from closedform.derivation.step import LAMBDA, Step, Symbol
from closedform.verification.record import VerificationRecord
from tests.derivation.driven.models import MODELS, derived, proved, solved
from tests.verification.driven.made import stated

OWN = {
    "driven_model",
    "state_form",
    "input_system",
    "driven_transition",
    "particular",
    "conditions_at_points",
    "jumps",
    "driven_solution",
    "split",
    "resonance",
    "stability",
    "steady",
    "transient",
    "substitution",
    "periodic",
    "period_substitution",
    "joins",
    "driven_values",
    "driven_numbers",
}


def step_of(name: str, kind: str) -> Step:
    return next(step for step in derived(name).steps if step.kind == kind)


def test_every_kind_of_step_is_made_by_some_model() -> None:
    kinds = {step.kind for name in MODELS for step in derived(name).steps}
    assert kinds >= OWN


def test_every_prover_is_asked_by_some_model() -> None:
    said = {
        s.statement.says
        for name in MODELS
        for step in derived(name).steps
        for s in said_in(step, len(solved(name).solutions))
    }
    assert set(PROVERS) <= said


@pytest.mark.parametrize("name", MODELS)
def test_the_order_is_that_of_an_argument(name: str) -> None:
    kinds = [step.kind for step in derived(name).steps]
    order = ["driven_model", "characteristic_polynomial", "driven_transition", "driven_solution"]
    found = [kinds.index(kind) for kind in order if kind in kinds]
    assert found == sorted(found)
    assert kinds[0] == "driven_model"
    assert kinds[-2:] == ["verification", "cautions"]


@pytest.mark.parametrize("name", MODELS)
def test_the_last_checks_are_those_of_what_is_printed(name: str) -> None:
    last = derived(name).checks[-2:]
    assert [check.item for check in last] == [
        "statements on the matrix and its exponential",
        "statements of the derivation",
    ]
    assert {check.outcome for check in last} == {"enclosed"}


def test_nothing_is_derived_from_what_is_not_proved() -> None:
    with pytest.raises(ValueError, match="proved"):
        derive_driven(solved("resonance"), VerificationRecord(()))


def test_records_of_the_other_kind_are_refused() -> None:
    with pytest.raises(TypeError):
        derive_driven(solved("mount"), proved("resonance"))
    with pytest.raises(TypeError):
        derive_driven(solved("resonance"), proved("mount"))


def test_an_undamped_tone_of_the_model_is_called_resonance() -> None:
    (row,) = step_of("resonance", "resonance").facts["rows"]  # type: ignore[misc]
    assert (row["order"], row["damped"], row["multiplicity"]) == (2, False, 1)


def test_resonance_is_named_in_the_case_in_which_it_is() -> None:
    steps = derived("spring without a damper").steps
    told = [step for step in steps if step.kind == "resonance"]
    assert len(told) == 1
    assert told[0].facts["cases"] == (1,)


def test_the_stacked_matrix_has_a_hat_and_the_models_own_has_none() -> None:
    polynomial = step_of("frame", "characteristic_polynomial").statements[0]
    assert polynomial.sides[1] == Symbol("determinant", argument=LAMBDA, letter="A_hat")
    own = step_of("frame", "stability").statements[0].sides[0]
    assert isinstance(own, Symbol)
    assert own.letter == "A"


def test_a_model_without_waves_has_no_stacked_matrix() -> None:
    kinds = {step.kind for step in derived("doses").steps}
    assert "input_system" not in kinds
    statement = step_of("doses", "characteristic_polynomial").statements[0]
    assert all(getattr(side, "letter", "") != "A_hat" for side in statement.sides)


def test_cases_that_read_alike_are_told_once() -> None:
    steps = derived("mount").steps
    assert len([step for step in steps if step.kind == "particular"]) == 1
    assert len([step for step in steps if step.kind == "driven_solution"]) == 3


def test_a_letter_that_the_model_uses_is_no_jump() -> None:
    mapping = {
        "equations": ["A*h' = q - K*h"],
        "parameters": {"A": "positive", "K": "positive", "h_0": "real"},
        "inputs": {"q": "1"},
        "initial": {"h": "h_0"},
    }
    writing = Writing(stated(mapping))
    assert writing.jump("h", 0) == Symbol("scalar", ("0",), None, "j")
    assert writing.jump("b", 1) == Symbol("scalar", ("1",), None, "b")
    assert Writing(solved("resonance").model).letter("h") == "h"
