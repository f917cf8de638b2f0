"""Which steps a derivation has, and in which order they rest on one another."""

from __future__ import annotations

import pytest

import closedform
from closedform.derivation.build import derive
from closedform.verification import verify
from tests.derivation.values import derivation_of
from tests.response.systems import KINDS, fresh, response_to

START = ["model", "characteristic_polynomial", "eigenvalues"]
RESULTS = ["solution", "outputs"]
END = ["values", "verification", "cautions"]
FORM = ["eigenvectors", "jordan_form", "exponential_of_form", "transition"]
REAL = ["eigenvectors", "jordan_form", "real_form", "exponential_of_form", "transition"]
STEPS = {
    "one state": FORM,
    "single": ["eigenvectors", *FORM],
    "circular": REAL,
    "hyperbolic": FORM,
    "defective": FORM,
    "defective circular pair": REAL,
    "defective hyperbolic pair": FORM,
    "even quartic": ["resolvent", "transition"],
    "named cubic": ["named_roots", "resolvent"],
    "named quartic": ["named_roots", "resolvent"],
    "surd entries": FORM,
    "nilpotent": FORM,
    "mixed": ["eigenvectors", *REAL],
}


@pytest.mark.parametrize("kind", KINDS)
def test_each_kind_has_its_steps(kind: str) -> None:
    kinds = [step.kind for step in derivation_of(response_to(kind)).steps]
    abbreviations = ["abbreviations"] if kind.startswith("named") else []
    assert kinds == [*START, *STEPS[kind], *RESULTS, *abbreviations, *END]


@pytest.mark.parametrize("kind", KINDS)
def test_a_step_rests_on_steps_before_it(kind: str) -> None:
    seen: set[str] = set()
    for step in derivation_of(response_to(kind)).steps:
        assert set(step.rests_on) <= seen, step.kind
        seen.add(step.kind)


@pytest.mark.parametrize("kind", KINDS)
def test_a_derivation_is_the_same_every_time(kind: str) -> None:
    one, two = (derive(r, verify(r)) for r in (fresh(kind), fresh(kind)))
    assert one == two


def test_without_outputs_there_is_no_step_for_them() -> None:
    response = closedform.respond(closedform.system([[-1]], initial=[1]))
    assert "outputs" not in [step.kind for step in derivation_of(response).steps]


def test_the_title_is_the_models() -> None:
    assert derivation_of(response_to("mixed")).title == "mixed"
