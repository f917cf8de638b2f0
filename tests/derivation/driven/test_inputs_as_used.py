"""One declared input at several arguments, and with its derivative: each use is written up."""

from __future__ import annotations

from pathlib import Path
from typing import Any

import pytest

from closedform.derivation.driven.model_steps import driven_model_step
from closedform.derivation.driven.writing import Writing
from closedform.derivation.step import Statement
from closedform.document.writeup import write_up
from tests.verification.driven.made import stated

AT_REST = {"x": 0}
RAMP = [{"from": "0", "to": "1", "is": "t"}]
HALF_SINE = [{"from": "0", "to": "T", "is": "a*sin(pi*t/T)"}]
PULSE = [{"from": "0", "to": "1/10", "is": "1"}]
OPEN = {name: {"assume": "positive", "value": 2} for name in ("a", "b", "T")}


def used(equation: str, u: Any, *others: str, **more: Any) -> dict[str, Any]:
    """Return a model whose input u stands in its equations as they say."""
    return {"equations": [equation, *others], "inputs": {"u": u}, "initial": AT_REST, **more}


TWICE = {"pieces": [{"from": "0", "to": "1", "is": "1"}], "period": "4"}
USES: dict[str, dict[str, Any]] = {
    "a pulse and its delay": used("x' + x = u(t) + u(t - 1/5)", PULSE),
    "a ramp and its delay": used("x' + x = u(t) + u(t - 1/5)", [{**RAMP[0], "to": "1/10"}]),
    "one delay typed in two ways": used("x' + x = u(t - 1/4) - 3*u(t - 0.25) + u", RAMP),
    "a derivative with jumps, delayed": used("x' + 2*x = u(t) + u'(t - 2) + u'(t)", RAMP),
    "a ramp with its derivative": used(
        "x'' + 2*x' + x = u' + 2*u",
        [*RAMP, {"from": "1", "is": "1"}],
        initial={"x": 0, "x'": 0},
    ),
    "two equations": used(
        "x' + x = u + y", RAMP, "y' + y = u(t - 1/2) + u'", initial={"x": 0, "y": 1}
    ),
    "impulses": used("x' + x = u + 2*u(t - 1)", "delta(t - 1)"),
    "a formula, its delay and its derivative": used(
        "x' + 3*x = u(t) + u(t - 1) + u'(t - 1)", "step(t - 1)*exp(1 - t)"
    ),
    "a period": used("x' + x = u + u(t - 1)", TWICE),
    "a period, never undelayed": used("x' + x = u(t - 1) + u(t - 2)", TWICE),
    "a formula with a period": used("x' + x = u(t) + u(t - 1)", {"is": "sin(pi*t)", "period": "1"}),
    "some periods": used("x' + x = u' + u(t - 1)", {**TWICE, "count": 2}),
    "parameters": used("x' + b*x = u + b*u(t - T) + u'(t-T)", HALF_SINE, parameters=OPEN),
    "impulses with parameters": used(
        "x' + b*x = u + 2*u(t - T)", "a*delta(t - T)", parameters=OPEN
    ),
    "mass and spring over a bump": used(
        "x'' + b*x' + x = b*u' + u",
        HALF_SINE,
        initial={"x": 0, "x'": 0},
        parameters={**OPEN, "b": {"assume": "positive", "value": 1}},
        conditions=["b < 2"],
    ),
}


@pytest.mark.parametrize("use", USES)
def test_each_use_of_an_input_is_written_up(use: str, tmp_path: Path) -> None:
    written = write_up(stated(USES[use], "used"), into=tmp_path)
    assert {file.suffix for file in written.files} == {".tex", ".json"}


def test_pieces_are_printed_for_each_argument_by_itself() -> None:
    step = driven_model_step(Writing(stated(USES["a ramp with its derivative"])))
    inputs = [s.sides[0] for s in step.statements if s.says == "input"]
    assert len(inputs) == len(set(inputs)) == 2


def test_a_formula_is_printed_once_for_all_its_arguments() -> None:
    model = stated(USES["a formula, its delay and its derivative"])
    step = driven_model_step(Writing(model))
    inputs = [s for s in step.statements if s.says == "input"]
    assert inputs == [
        Statement("input", (Writing(model).function("u"), model.inputs[0].definition))
    ]


@pytest.mark.parametrize("use", USES)
def test_no_two_rows_of_the_stacked_model_have_one_name(use: str) -> None:
    states = stated(USES[use]).stacked.states
    assert len(set(states)) == len(states)
