"""Models in which several exceptional sets fall together, or hold at the edge of the domain."""

from __future__ import annotations

from fractions import Fraction
from itertools import product
from typing import Any

import pytest

from tests.parametric.admissible import assumed
from tests.parametric.record_reader import check_conditions, check_names, check_record, holds
from tests.parametric.solving import record_of_model, stated

MODELS: dict[str, tuple[list[list[str]], dict[str, str]]] = {
    "a rate meets a pair where the pair meets": (
        [["0", "1", "0"], ["0", "0", "1"], ["-b*w", "-(2*b^2 + w)", "-3*b"]],
        {"b": "positive", "w": "positive"},
    ),
    "a rate and a square that may be 0": (
        [["0", "1", "0"], ["0", "0", "1"], ["-a*w", "-w", "-a"]],
        {"a": "nonnegative", "w": "nonnegative"},
    ),
    "a coupling that may be 0": (
        [["-a", "c"], ["0", "-b"]],
        {"a": "real", "b": "real", "c": "real"},
    ),
    "a stiffness of either sign": ([["0", "1"], ["-k", "-2*d"]], {"k": "real", "d": "real"}),
    "a triple root": (
        [["-a", "1", "0"], ["0", "-b", "1"], ["0", "0", "-a - b"]],
        {"a": "real", "b": "real"},
    ),
}
GRID = tuple(map(Fraction, (0, 1, 2, 4, "1/2", -1, -2, -4)))


@pytest.mark.parametrize("name", MODELS)
def test_every_point_of_a_grid_is_covered_rightly(name: str) -> None:
    matrix, parameters = MODELS[name]
    n = len(matrix)
    states = [f"x{i + 1}" for i in range(n)]
    record = record_of_model(stated(states, matrix, ["1"] * n, parameters))
    check_names(record)
    check_conditions(record)
    assert not record["not_covered"]
    tried = 0
    for numbers in product(GRID, repeat=len(parameters)):
        values: dict[str, Any] = dict(zip(parameters, numbers, strict=True))
        if all(holds(text, values) for text in assumed(parameters)):
            assert check_record(record, values, times=(Fraction(3, 4),)) >= 1
            tried += 1
    assert tried > 10
