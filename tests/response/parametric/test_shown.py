"""How a response with parameters shows itself, and the calls that take models of both kinds."""

from __future__ import annotations

import re

import pytest

import closedform
from closedform.algebra.surds import SurdSum
from closedform.model.evaluation import at_values
from closedform.response.parametric.response import ParametricResponse
from closedform.response.response import Response
from closedform.verification.parametric.record import CaseRecords
from tests.response.parametric.solved import MODELS, model, response_to


def test_one_call_takes_models_of_both_kinds() -> None:
    cases = closedform.respond(model("damped"))
    numbers = closedform.respond(closedform.system([[0]], initial=[1]))
    assert isinstance(cases, ParametricResponse)
    assert isinstance(numbers, Response)
    records = closedform.verify(cases)
    assert isinstance(records, CaseRecords)
    assert len(records.cases) == len(cases.cases)
    assert records.holds
    assert isinstance(closedform.verify(numbers), closedform.VerificationRecord)


def test_a_response_prints_case_by_case() -> None:
    lines = str(response_to("damped")).splitlines()
    assert sum(line.startswith("if ") for line in lines) == 3
    assert sum(line.startswith("  x(t) = ") for line in lines) == 3
    assert "  delta = c/(2*m)" in lines
    only = str(response_to("compartments"))
    assert only.startswith("always:\n  x1(t) = ")
    assert "  alpha is root 3, by real part, of the coefficients 1, " in only


@pytest.mark.parametrize("name", MODELS)
def test_a_response_shows_in_a_notebook_with_its_conditions(name: str) -> None:
    response = response_to(name)
    shown = response._repr_latex_()
    assert shown.startswith(r"$\displaystyle ")
    assert shown.endswith("$")
    assert shown.count("$") == 2
    assert shown.count("{") == shown.count("}") + _odd(shown)
    conditions = [c for case in response.cases for c in case.conditions]
    assert len(re.findall(r" (?:<|>|=|\\le|\\ge|\\neq) ", shown)) == len(conditions)
    for case in response.cases:
        assert case.solution._repr_latex_().strip("$") in shown


def _odd(shown: str) -> int:
    """An escaped brace has no partner."""
    return shown.count(r"\{") - shown.count(r"\}")


def test_a_case_gives_formulas_that_show() -> None:
    case = response_to("free masses").cases[0]
    assert str(case.solution).count("\n") == 3
    assert str(case.transition).count("\n") == 3
    assert case.outputs == ()


def test_a_model_at_values_is_the_model_in_numbers() -> None:
    stated = model("damped", title="A spring", times=[1, 2])
    values = {"m": 2, "c": 1, "k": 8, "x0": 3, "v0": 0}
    found = at_values(stated, {n: SurdSum.rational(v) for n, v in values.items()})
    assert found == closedform.system(
        [[0, 1], [-4, "-1/2"]],
        initial=[3, 0],
        states=["x", "v"],
        title="A spring",
        outputs={"force": "8*x"},
        times=[1, 2],
        name="damped",
    )
    with pytest.raises(ZeroDivisionError):
        at_values(stated, {n: SurdSum.rational(0) for n in values})
