"""Real pairs with a fast and a slow root: exponentials that can be evaluated, no cosh and sinh."""

from __future__ import annotations

import math
from fractions import Fraction

import pytest

from closedform.model.building import system
from closedform.notation.plain import plain
from closedform.response.response import respond
from closedform.response.sampling import constant_decimal
from closedform.verification.verify import verify


@pytest.mark.parametrize(("damping", "split"), [(3, False), (9, False), (11, True), (5000, True)])
def test_a_pair_is_split_when_its_roots_are_far_apart(damping: int, *, split: bool) -> None:
    response = respond(system([[0, 1], [-1, -damping]], initial=[1, 0]))
    text = plain(response.solution[0])
    assert ("exp(lambda_1*t)" in text) == split
    assert ("sinh" in text) == (not split)
    assert verify(response).holds


def test_a_saddle_keeps_its_hyperbolic_form() -> None:
    response = respond(system([[0, 1], [3, "1/1000"]], initial=[1, 0]))
    assert "cosh" in plain(response.solution[0])


def test_the_formula_of_a_stiff_pair_can_be_evaluated_in_doubles() -> None:
    response = respond(system([["-1e6", 1000], ["0.001", "-0.001"]], initial=[1, 1]))
    names = {c.name: float(constant_decimal(c, 20)) for c in response.closed_forms.constants}
    slow = names["lambda_1"]
    value = names["C1"] * math.exp(slow * 500) + names["C2"] * math.exp(names["lambda_2"] * 500)
    exact = float(response.solution_at(Fraction(500))[0].mid())
    assert value == pytest.approx(exact, rel=1e-9)
