"""Models with parameters of every shape that a derivation has, solved and proved once."""

from __future__ import annotations

from dataclasses import replace
from functools import cache
from typing import Any

from closedform.algebra.branches import Exceptional
from closedform.derivation.parametric import build
from closedform.derivation.parametric.build import derive_cases
from closedform.derivation.step import Derivation, Step
from closedform.model.building import model_from
from closedform.response.parametric.numbers import NumbersAt, numbers_of
from closedform.response.parametric.response import ParametricResponse, respond_in_cases
from closedform.verification.parametric.record import CaseRecords
from closedform.verification.parametric.verify import verify_cases

DIGITS = 6

_OSCILLATOR: dict[str, Any] = {
    "states": ["x", "v"],
    "matrix": [[0, 1], ["-k/m", "-c/m"]],
    "initial": ["x0", "v0"],
    "parameters": {
        "m": {"assume": "positive", "value": 2, "unit": "kg", "meaning": "mass"},
        "c": {"assume": "positive", "value": 8},
        "k": {"assume": "positive", "value": 200},
        "x0": {"assume": "real", "value": "1/100"},
        "v0": {"assume": "real", "value": 0},
    },
}

MODELS: dict[str, dict[str, Any]] = {
    "plain oscillator": _OSCILLATOR,
    "oscillator": {
        **_OSCILLATOR,
        "outputs": {"force": "k*x"},
        "values": [{"label": "light"}, {"label": "critical", "c": 40}],
    },
    "restated oscillator": {
        **_OSCILLATOR,
        "parameters": {
            "m": "positive",
            "k": "positive",
            "c": "positive",
            "omega_n": "positive",
            "zeta": "positive",
            "x0": "real",
            "v0": "real",
        },
        "substitute": {"k": "m*omega_n^2", "c": "2*zeta*m*omega_n"},
        "abbreviations": {"delta": "zeta*omega_n"},
        "conditions": ["zeta < 1"],
    },
    "depot": {
        "states": ["depot", "central", "tissue"],
        "matrix": [["-ka", 0, 0], ["ka", "-k10 - k12", "k21"], [0, "k12", "-k21"]],
        "initial": ["dose", 0, 0],
        "parameters": dict.fromkeys(("ka", "k10", "k12", "k21", "dose"), "positive"),
    },
    "decay": {
        "states": ["n1", "n2", "n3"],
        "matrix": [["-k1", 0, 0], ["k1", "-k2", 0], [0, "k2", "-k3"]],
        "initial": ["n0", 0, 0],
        "parameters": dict.fromkeys(("k1", "k2", "k3", "n0"), "positive"),
    },
    "three compartments": {
        "states": ["x1", "x2", "x3"],
        "matrix": [["-k10 - k12 - k13", "k21", "k31"], ["k12", "-k21", 0], ["k13", 0, "-k31"]],
        "initial": ["dose", 0, 0],
        "parameters": dict.fromkeys(("k10", "k12", "k21", "k13", "k31", "dose"), "positive"),
    },
    "free masses": {
        "states": ["s1", "s2", "u1", "u2"],
        "matrix": [
            [0, 0, 1, 0],
            [0, 0, 0, 1],
            ["-k/m1", "k/m1", 0, 0],
            ["k/m2", "-k/m2", 0, 0],
        ],
        "initial": ["a1", "a2", 0, 0],
        "parameters": {
            "m1": "positive",
            "m2": "positive",
            "k": "positive",
            "a1": "real",
            "a2": "real",
        },
    },
    "held masses": {
        "states": ["s1", "s2", "u1", "u2"],
        "matrix": [
            [0, 0, 1, 0],
            [0, 0, 0, 1],
            ["-(k1 + k2)/m", "k2/m", 0, 0],
            ["k2/m", "-(k2 + k3)/m", 0, 0],
        ],
        "initial": ["a", 0, 0, 0],
        "parameters": {
            "m": "positive",
            "k1": "positive",
            "k2": "positive",
            "k3": "positive",
            "a": "real",
        },
    },
    "letters taken": {
        "states": ["n1", "n2", "p"],
        "matrix": [["-lamda_1", 0, 0], ["lamda_1", "-lamda_2", 0], [0, "lamda_2", "-s"]],
        "initial": ["C", 0, 0],
        "parameters": dict.fromkeys(("lamda_1", "lamda_2", "s", "C"), "positive"),
    },
    "square taken": {
        "states": ["D", "s2", "u1", "u2"],
        "matrix": [
            [0, 0, 1, 0],
            [0, 0, 0, 1],
            ["-(mu + k2)/m", "k2/m", 0, 0],
            ["k2/m", "-(k2 + k3)/m", 0, 0],
        ],
        "initial": ["S", 0, 0, 0],
        "parameters": dict.fromkeys(("m", "mu", "k2", "k3"), "positive") | {"S": "real"},
    },
    "two tanks": {
        "states": ["v1", "v2"],
        "matrix": [["-a", 0], ["a", "-b"]],
        "initial": ["p", "q"],
        "parameters": {"a": "positive", "b": "positive", "p": "nonnegative", "q": "nonnegative"},
    },
}


@cache
def solved(name: str) -> tuple[ParametricResponse, CaseRecords, tuple[NumbersAt, ...]]:
    model = model_from({"title": name.capitalize(), **MODELS[name]}, name=name.replace(" ", "_"))
    response = respond_in_cases(model)
    return response, verify_cases(response), numbers_of(response, digits=DIGITS)


@cache
def derived(name: str) -> Derivation:
    response, records, numbers = solved(name)
    return derive_cases(response, records, digits=DIGITS, numbers=numbers)


def steps_made(name: str) -> tuple[Step, ...]:
    """The steps that are proved, made afresh and not proved yet."""
    response, records, numbers = solved(name)
    return tuple(build._steps(response, records, numbers, DIGITS))


def with_a_gap(response: ParametricResponse) -> ParametricResponse:
    """Return the two tanks of equal rates left out: their branch is said not to be covered."""
    generic = response.branches[0]
    gaps = tuple(
        Exceptional(e.polynomials, "not covered", reason="budget") for e in generic.exceptional
    )
    branch = replace(generic, exceptional=gaps)
    case = replace(response.cases[0], branch=branch)
    return replace(response, branches=(branch,), cases=(case,))
