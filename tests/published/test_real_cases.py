"""Systems with which users of a general library met trouble are answered, or clearly refused."""

from __future__ import annotations

import re
from typing import Any

import pytest
from flint import acb, acb_mat, arb, ctx

import closedform
from closedform.notation.errors import UndeclaredNameError
from tests.parametric.solving import stated as with_parameters
from tests.published.formulas import ball
from tests.published.real_cases import (
    NUMERIC,
    REAL_CASES,
    REFUSED,
    Case,
    assert_is_the_reference,
    time_of,
)


def complex_ball(text: str) -> acb:
    """Return a reference such as "0.25 - 1.5*I" as a ball."""
    return ball(re.sub(r"(\d)e([+-])", r"\1E\2", text))


def stated(case: Case) -> Any:
    if case["parameters"]:
        return with_parameters(case["states"], case["matrix"], case["initial"], case["parameters"])
    return closedform.system(case["matrix"], initial=case["initial"], states=case["states"])


@pytest.mark.parametrize("identifier", REAL_CASES)
def test_a_reference_is_the_exponential_of_its_matrix(identifier: str) -> None:
    """By ball arithmetic, without the package; complex entries too."""
    case = REAL_CASES[identifier]
    values, time = case["reference"]["values"], time_of(case)
    with ctx.workprec(400):
        at = acb(arb(time.numerator) / time.denominator)
        rows = [[ball(e.replace("^", "**"), values) * at for e in row] for row in case["matrix"]]
        exact = acb_mat(rows).exp().tolist()
        theirs = [[complex_ball(e) for e in row] for row in case["reference"]["transition"]]
        largest = max(abs(entry).upper() for row in theirs for entry in row)
        for row, their_row in zip(exact, theirs, strict=True):
            for entry, their in zip(row, their_row, strict=True):
                assert abs(entry - their) <= largest * arb("1e-18")


@pytest.mark.parametrize("identifier", NUMERIC)
def test_a_system_of_numbers_is_solved_and_proved(identifier: str) -> None:
    case = REAL_CASES[identifier]
    response = closedform.respond(stated(case))
    with ctx.workprec(400):
        assert_is_the_reference(response.transition_at(time_of(case), 40), case)
    assert closedform.verify(response).holds


@pytest.mark.parametrize("identifier", REFUSED)
def test_complex_entries_are_refused_by_name_and_place(identifier: str) -> None:
    with pytest.raises(UndeclaredNameError, match=r"matrix\[\d\]\[\d\].*the name 'I'"):
        stated(REAL_CASES[identifier])


@pytest.mark.parametrize("identifier", REAL_CASES)
def test_a_case_says_where_it_is_from_and_what_happened(identifier: str) -> None:
    case = REAL_CASES[identifier]
    assert case["tracker"]
    assert case["happened"]
    assert not {"e", "I"} & set(case["parameters"])
    assert set(case["parameters"]) == set(case["reference"]["values"])
