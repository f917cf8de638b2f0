"""Models with parameters, or pi, beside a part in numbers whose roots have no short form."""

from __future__ import annotations

from functools import cache
from typing import Any

from closedform.response.parametric.response import ParametricResponse, respond_in_cases
from tests.parametric.with_pi import model_with_pi

__all__ = ["MODELS", "response_at_known_roots"]

TWO_MASSES = [[0, 1, 0, 0], [-30, -1, 10, "1/2"], [0, 0, 0, 1], [10, "1/2", -10, "-1/2"]]


def driven(
    rows: list[list[object]], place: int, square: str, *, gain: object = 1
) -> list[list[object]]:
    """A matrix with two states more: u'' = -square u, and u enters one row."""
    n = len(rows)
    wide = [[*row, gain if k == place else 0, 0] for k, row in enumerate(rows)]
    zeros: list[object] = [0] * n
    return [*wide, [*zeros, 0, 1], [*zeros, f"-({square})", 0]]


MODELS: dict[str, dict[str, Any]] = {
    "two masses": {  # at 50 Hz
        "matrix": driven(TWO_MASSES, 1, "(100*pi)^2"),
        "initial": [0, 0, 0, 0, 0, "100*pi"],
        "times": ["0", "1/5", "1"],
        "name": "two_masses",
    },
    "symbolic input": {
        "matrix": driven(TWO_MASSES, 1, "w^2"),
        "initial": ["q0", 0, 0, 0, 0, "F*w"],
        "parameters": {"w": "positive", "F": "real", "q0": "real"},
        "values": {"w": "3", "F": "2", "q0": "1"},
        "name": "symbolic_input",
    },
    "cubic": {
        "matrix": driven([[0, 1, 0], [0, 0, 1], [-1, -2, -3]], 2, "pi^2"),
        "initial": [0, 0, 0, 1, 0],
        "outputs": {"y": [1, 1, 0, 0, 0]},
        "name": "cubic",
    },
    "compartments": {  # three real roots
        "matrix": driven(
            [["-1/2", "1/4", 0], ["1/2", "-3/4", "1/5"], [0, "1/2", "-2/5"]], 2, "4*pi^2"
        ),
        "initial": ["D", 0, 0, 0, "2*pi"],
        "parameters": {"D": "positive"},
        "name": "compartments",
    },
    "three masses": {  # undamped: the real parts are the mean of all roots
        "matrix": [
            [0, 1, 0, 0, 0, 0],
            [-2, 0, 1, 0, 0, 0],
            [0, 0, 0, 1, 0, 0],
            [1, 0, -3, 0, 2, 0],
            [0, 0, 0, 0, 0, 1],
            [0, 0, 2, 0, -4, 0],
        ],
        "initial": ["q0", 0, 0, 0, 0, 0],
        "parameters": {"q0": "real"},
        "name": "three_masses",
    },
    "tuned to pi": {  # the coefficients of the factor have pi in them
        "matrix": [
            [0, 1, 0, 0],
            ["-2*pi^2", "-1/10", "pi^2", 0],
            [0, 0, 0, 1],
            ["pi^2", 0, "-pi^2", "-1/5"],
        ],
        "initial": [1, 0, 0, 0],
        "name": "tuned",
    },
    "repeated": {  # (p(lambda))^2: a chain of two equal parts
        "matrix": [
            [0, 1, 0, 0, 0, 0],
            [0, 0, 1, 0, 0, 0],
            [-1, -1, -3, 0, 0, 0],
            [0, 0, 0, 0, 1, 0],
            [0, 0, 0, 0, 0, 1],
            ["g", 0, 0, -1, -1, -3],
        ],
        "initial": [1, 0, 0, 0, 0, 0],
        "parameters": {"g": "positive"},
        "name": "repeated",
    },
}


@cache
def response_at_known_roots(name: str) -> ParametricResponse:
    return respond_in_cases(model_with_pi(**MODELS[name]))
