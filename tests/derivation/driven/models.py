"""Driven models whose derivations have, together, every kind of step and of statement."""

from __future__ import annotations

from functools import cache
from typing import Any

from closedform.derivation.driven.build import derive_driven
from closedform.derivation.step import Derivation
from closedform.response.driven.numbers import driven_numbers_of
from closedform.response.driven.response import DrivenResponse, respond_driven
from closedform.verification.driven.verify import verify_driven
from closedform.verification.parametric.record import CaseRecords
from closedform.verification.record import VerificationRecord
from tests.verification.driven.made import KINDS, stated

__all__ = ["DIGITS", "MODELS", "derived", "proved", "solved"]

DIGITS = 6

MODELS: dict[str, dict[str, Any]] = {
    **KINDS,
    "rates that may meet": {**KINDS["rates that may meet"], "outputs": {"rate": "a*x1"}},
    "frame": {
        "states": ["x1", "x2"],
        "mass": [[2, 0], [0, 1]],
        "damping": [[1, "-1/2"], ["-1/2", "1/2"]],
        "stiffness": [[30, -10], [-10, 10]],
        "input_matrix": [[1], [0]],
        "inputs": {"F": "4*sin(3*t)"},
        "initial": {"x1": 0, "x1'": 0, "x2": 0, "x2'": 1},
    },
    "mount": {
        "equations": ["m*x'' + c*x' + k*x = F"],
        "parameters": {
            "m": {"assume": "positive", "value": "200", "unit": "kg", "meaning": "mass"},
            "c": {"assume": "positive", "value": "400"},
            "k": {"assume": "positive", "value": "80000"},
            "w": {"assume": "positive", "value": "15"},
        },
        "inputs": {"F": {"is": "100*sin(w*t)", "unit": "N", "meaning": "force"}},
        "initial": {"x": 0, "x'": 0},
    },
    "spring without a damper": {
        "equations": ["m*x'' + k*x = F*cos(w*t)"],
        "parameters": dict.fromkeys(("m", "k", "w", "F"), "positive"),
        "initial": {"x": 0, "x'": 0},
    },
    "third order": {
        "equations": ["y''' + 4*y'' + 6*y' + 3*y = u"],
        "inputs": {"u": "step(t - 1)"},
        "initial": {"y": 1, "y'": 0, "y''": 0},
    },
    "source switched off": {
        "equations": ["i_R = (v_s - v_C)/R", "C*v_C' = i_R"],
        "parameters": {
            **{n: {"assume": "positive", "value": v} for n, v in (("R", "1000"), ("C", "0.001"))},
            **{n: {"assume": "positive", "value": v} for n, v in (("U", "5"), ("T_1", "2"))},
        },
        "inputs": {"v_s": "U*(step(t) - step(t - T_1))"},
        "initial": {"v_C": 0},
    },
    "doses": {
        "equations": ["q' = -k*q + u"],
        "parameters": {
            n: {"assume": "positive", "value": v} for n, v in (("k", "0.2"), ("D", "9"), ("T", "8"))
        },
        "inputs": {"u": {"is": "D*delta(t)", "period": "T"}},
        "initial": {"q": 1},
    },
    "floor that shakes": {
        "equations": ["x'' + 2*x' + 5*x = 2*y' + 5*y"],
        "inputs": {"y": "3*sin(4*t)"},
        "initial": {"x": 0, "x'": 0},
    },
    "five pulses": {
        "equations": ["x'' + 4*x = F"],
        "inputs": {
            "F": {"pieces": [{"from": "0", "to": "1", "is": "2"}], "period": "2", "count": 5}
        },
        "initial": {"x": 0, "x'": 0},
    },
    "string plucked again and again": {
        "equations": ["x'' + w^2*x = F"],
        "parameters": dict.fromkeys(("w", "T"), "positive"),
        "inputs": {"F": {"is": "delta(t)", "period": "T"}},
        "initial": {"x": 0, "x'": 0},
    },
    "string held at both ends": {
        "equations": ["y'' + w^2*y = 0"],
        "parameters": {"w": "positive", "L": "positive"},
        "inputs": {},
        "at_points": ["y(0) = 0", "y(L) = 1"],
    },
    "string along an axis": {
        "equations": ["y'' + w^2*y = 0"],
        "time": "z",
        "parameters": {"w": "positive", "L": "positive"},
        "inputs": {},
        "at_points": ["y(0) = 0", "y(L) = 1"],
    },
    "rod between two walls": {
        "equations": ["y'' + b*y' - a^2*y = 0"],
        "parameters": dict.fromkeys(("a", "b", "L"), "positive"),
        "inputs": {},
        "at_points": ["y(L) = 1", "y(2*L) = 0"],
    },
    "shaft that whirls, clamped at one end": {
        "equations": ["w'''' - w = 1"],
        "inputs": {},
        "at_points": ["w(0) = 0", "w'(0) = 0", "w(1) = 0", "w''(1) = 0"],
    },
    "held while it is struck": {
        "equations": ["x'' + x = u"],
        "inputs": {"u": "delta(t) + step(t - 1)"},
        "at_points": ["x(0) = 0", "x(3) = 1"],
    },
    "held at two instants": {
        "equations": ["x'' + 3*x' + 2*x = 4"],
        "inputs": {},
        "at_points": ["x(0) = 0", "x(1) = 2"],
    },
}


@cache
def solved(name: str) -> DrivenResponse:
    return respond_driven(stated(MODELS[name], name.replace(" ", "_")))


@cache
def proved(name: str) -> VerificationRecord | CaseRecords:
    return verify_driven(solved(name))


@cache
def derived(name: str) -> Derivation:
    numbers = driven_numbers_of(solved(name), digits=DIGITS)
    return derive_driven(solved(name), proved(name), digits=DIGITS, numbers=numbers)
