"""Models with parameters and values for them: inside of cases, on their borders, and near."""

from __future__ import annotations

from collections.abc import Mapping
from functools import cache
from typing import Any

import closedform
from closedform.response.parametric.response import ParametricResponse, respond_in_cases

__all__ = ["MODELS", "VALUES", "model", "response_to"]

NEAR = "1/1000000000000"
Values = Mapping[str, str]


def positive(names: str, reals: str = "") -> dict[str, str]:
    return dict.fromkeys(names.split(), "positive") | dict.fromkeys(reals.split(), "real")


MODELS: dict[str, dict[str, Any]] = {
    "damped": {
        "states": ["x", "v"],
        "matrix": [[0, 1], ["-k/m", "-c/m"]],
        "initial": ["x0", "v0"],
        "parameters": positive("m k", "x0 v0") | {"c": "nonnegative"},
        "outputs": {"force": "k*x"},
    },
    "restated": {
        "states": ["x", "v"],
        "matrix": [[0, 1], ["-k/m", "-c/m"]],
        "initial": ["x0", 0],
        "parameters": positive("m k omega_n", "x0") | {"c": "nonnegative", "zeta": "nonnegative"},
        "substitute": {"k": "m*omega_n^2", "c": "2*m*zeta*omega_n"},
        "outputs": {"force": "k*x"},
    },
    "depot": {
        "matrix": [["-ka", 0, 0], ["ka", "-(k10+k12)", "k21"], [0, "k12", "-k21"]],
        "initial": ["D", 0, 0],
        "parameters": positive("ka k10 k12 k21 D"),
    },
    "compartments": {
        "matrix": [["-(k10+k12+k13)", "k21", "k31"], ["k12", "-k21", 0], ["k13", 0, "-k31"]],
        "initial": ["D", 0, 0],
        "parameters": positive("k10 k12 k21 k13 k31 D"),
    },
    "decay": {
        "matrix": [["-k1", 0, 0], ["k1", "-k2", 0], [0, "k2", "-k3"]],
        "initial": ["N0", 0, 0],
        "parameters": positive("k1 k2 k3 N0"),
        "outputs": {"activity": "k1*x1 + k2*x2 + k3*x3"},
    },
    "circuit": {
        "states": ["i_L", "u"],
        "matrix": [["-R/L", "-1/L"], ["1/C", 0]],
        "initial": ["i0", "u0"],
        "parameters": positive("L C", "i0 u0") | {"R": "nonnegative"},
    },
    "masses": {
        "matrix": [
            [0, 0, 1, 0],
            [0, 0, 0, 1],
            ["-(k1+k2)/m1", "k2/m1", 0, 0],
            ["k2/m2", "-(k2+k3)/m2", 0, 0],
        ],
        "initial": ["a", "b", 0, 0],
        "parameters": positive("k1 k2 k3 m1 m2", "a b"),
    },
    "free masses": {
        "matrix": [[0, 0, 1, 0], [0, 0, 0, 1], ["-k/m1", "k/m1", 0, 0], ["k/m2", "-k/m2", 0, 0]],
        "initial": ["a", "b", "u", "w"],
        "parameters": positive("k m1 m2", "a b u w"),
    },
    "even quartic": {
        "matrix": [
            ["-Delta", "G", 0, "G"],
            ["G", "omega_m", "G", 0],
            [0, "-G", "Delta", "-G"],
            ["-G", 0, "-G", "-omega_m"],
        ],
        "initial": [1, 0, 0, 0],
        "parameters": positive("omega_m") | {"Delta": "nonzero", "G": "nonzero"},
    },
    "symmetric": {
        "matrix": [["-(g1+h)", "h", 0], ["h", "-2*h", "h"], [0, "h", "-(g2+h)"]],
        "initial": ["T", 0, 0],
        "parameters": positive("g1 g2 h", "T"),
    },
    "apart": {
        "matrix": [["-a", 0, 0], [0, "-b", 0], [0, 0, 0]],
        "initial": ["p", "q", "r"],
        "parameters": positive("a b", "p q r"),
        "outputs": {"difference": "x1 - x2", "rest": "x2 + x3"},
    },
}


def rows(names: str, *values: str) -> list[Values]:
    return [dict(zip(names.split(), row.split(), strict=True)) for row in values]


VALUES: dict[str, list[Values]] = {
    "damped": rows(
        "m c k x0 v0",
        "1 1/2 4 1 2",
        "1 4 4 1 2",
        "1 5 4 1 2",
        "1 0 4 1 0",
        f"1 4+{NEAR} 4 1 2",
        f"1 4-{NEAR} 4 1 2",
        "sqrt(2) sqrt(3) 4 1 -1",
        "sqrt(2) sqrt(8) sqrt(2) 0 1",
    ),
    "restated": rows(
        "m omega_n zeta x0", "1 2 0 1", "2 2 1/2 1", "1 2 1 1", "1 2 3 1", f"1 2 1-{NEAR} 1"
    ),
    "depot": rows(
        "ka k10 k12 k21 D",
        "1 2 3 4 1",
        "2 1 1 1 3",
        "3/2 1 1/6 1 3",
        "3 1 4/3 1 3",
        f"3 1 4/3+{NEAR} 1 3",
    ),
    "compartments": rows(
        "k10 k12 k21 k13 k31 D", "1 2 3 4 5 2", "1 1 1 1 1 2", f"1 1 1 1 1+{NEAR} 2"
    ),
    "decay": rows(
        "k1 k2 k3 N0",
        "1 2 3 5",
        "1 1 2 5",
        "1 2 1 5",
        "1 2 2 5",
        "1 1 1 5",
        f"1 1+{NEAR} 2 5",
        f"1+{NEAR} 1 1 5",
        f"1 1+{NEAR} 1-{NEAR} 5",
    ),
    "circuit": rows("R L C i0 u0", "0 1 1 1 2", "1 1 1 1 2", "2 1 1 1 2", "3 1 1 1 2"),
    "masses": rows("k1 k2 k3 m1 m2 a b", "1 2 3 1 2 1 2", f"1 {NEAR} 1 1 1 1 2", "1 1 1 1 1 1 1"),
    "free masses": rows("k m1 m2 a b u w", "1 1 2 1 2 3 -1"),
    "even quartic": rows(
        "Delta G omega_m",
        "1 1/10 1",
        "1 1 1",
        "-1 1 1",
        "-1 1/2 1",
        "1 1/10 2",
        "-4 1 1",
        "4 15/8 1",
        f"-4 1 1+{NEAR}",
    ),
    "symmetric": rows("g1 g2 h T", "1 2 3 1", "1 1 3 1", f"1 1+{NEAR} 1 1"),
    "apart": rows("a b p q r", "1 1 2 2 1/3", "1 1 2 3 sqrt(2)", "sqrt(2) 1 2 3 0"),
}


def model(name: str, **more: Any) -> closedform.ParametricModel:
    """Return a model; `more` are further keys of `closedform.system`."""
    made = closedform.system(**{**MODELS[name], **more}, name=name.replace(" ", "_"))
    assert isinstance(made, closedform.ParametricModel)
    return made


@cache
def response_to(name: str) -> ParametricResponse:
    """Return the response of a model with its rows of values, solved once."""
    return respond_in_cases(model(name, values=VALUES[name]))
