"""Resonance: refuted where a tone, a multiplicity or an order is another, or is not told of."""

from __future__ import annotations

from dataclasses import replace
from typing import Any

import pytest

from closedform.response.driven.response import respond_driven
from closedform.verification.driven.resonances import resonance_check
from tests.verification.driven.made import response_to, setting_to, stated, with_solution

KINDS: dict[str, dict[str, Any]] = {
    "twice": {
        "equations": ["x1'' + 4*x1 = x2", "x2'' + 4*x2 = u"],
        "inputs": {"u": "t*sin(2*t)"},
        "initial": {"x1": 0, "x1'": 0, "x2": 0, "x2'": 0},
    },
    "where rates meet": {
        "equations": ["x' = -a*x + u"],
        "parameters": dict.fromkeys("ab", "positive"),
        "inputs": {"u": "exp(-b*t)"},
        "initial": {"x": 0},
    },
}
COUNTS = {"twice": [1], "where rates meet": [0, 1]}
each_kind = pytest.mark.parametrize("kind", KINDS)


@each_kind
def test_what_is_told_is_proved_in_each_case(kind: str) -> None:
    response = respond_driven(stated(KINDS[kind]))
    for number, solution in enumerate(response.solutions):
        assert resonance_check(setting_to(response, number)).outcome == "proved"
        assert len(solution.resonances) == COUNTS[kind][number]


@each_kind
@pytest.mark.parametrize("part", ["multiplicity", "order", "input", "none", "twice"])
def test_another_resonance_is_refuted(kind: str, part: str) -> None:
    response = respond_driven(stated(KINDS[kind]))
    number = len(response.solutions) - 1
    (own,) = response.solutions[number].resonances
    wrong = {
        "multiplicity": (replace(own, multiplicity=own.multiplicity + 1),),
        "order": (replace(own, order=own.order - 1),),
        "input": (replace(own, input=own.input + 1),),
        "none": (),
        "twice": (own, own),
    }[part]
    spoiled = with_solution(response, number, resonances=wrong)
    assert resonance_check(setting_to(spoiled, number)).outcome == "refuted"


def test_a_tone_that_is_no_eigenvalue_is_refuted() -> None:
    response = respond_driven(stated(KINDS["where rates meet"]))
    (own,) = response.solutions[1].resonances
    spoiled = with_solution(response, 0, resonances=(own,))
    assert resonance_check(setting_to(spoiled, 0)).outcome == "refuted"
    assert resonance_check(setting_to(response_to("resonance"))).outcome == "proved"
