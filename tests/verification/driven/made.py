"""Driven models to prove, and ways to spoil their responses in one known place."""

from __future__ import annotations

from collections.abc import Iterator
from dataclasses import replace
from functools import cache
from itertools import chain
from typing import Any

from closedform.errors import Place
from closedform.model.driven.building import driven_model
from closedform.model.driven.model import DrivenModel
from closedform.model.source import Source
from closedform.model.statement import heading_of
from closedform.response.driven.functions import DrivenFunctions, Summand
from closedform.response.driven.response import DrivenResponse, respond_driven
from closedform.verification.driven.setting import Setting, setting_of
from closedform.verification.driven.steady import phasor_checks, steady_checks
from closedform.verification.driven.verify import driven_checks, exact_checks

__all__ = [
    "KINDS",
    "moved",
    "refuted",
    "response_to",
    "setting_to",
    "stated",
    "summands_of",
    "with_functions",
    "with_model",
    "with_solution",
]

KINDS: dict[str, dict[str, Any]] = {
    "pulse and blow": {
        "equations": ["2*x'' + x' + 5*x = F - 3*u(t - 1) + 6*cos(3*t)", "z = x' + 2*F"],
        "inputs": {
            "F": [{"from": "1", "to": "4", "is": "2*(t - 1)*exp(-(t - 1)/2)"}],
            "u": "3*delta(t - 1) + sin(2*t + 1)",
        },
        "initial": {"x": 1, "x'": "-1/2"},
        "outputs": {"power": "x' + 3*z - F"},
    },
    "resonance": {
        "states": ["x", "v"],
        "matrix": [[0, 1], [-9, 0]],
        "input_matrix": [[0], [1]],
        "inputs": {"F": "6*cos(3*t) - t*sin(3*t)"},
        "initial": [0, 1],
    },
    "ramp to a tank": {
        "equations": ["a*x' + x = q"],
        "parameters": {**dict.fromkeys(("a", "T1", "T2"), "positive"), "r": "real"},
        "conditions": ["T1 < T2"],
        "inputs": {"q": [{"from": "T1", "to": "T2", "is": "r*(t - T1)"}]},
        "initial": {"x": "r"},
    },
    "rates that may meet": {
        "equations": ["x1' = -a*x1 + u", "x2' = a*x1 - b*x2"],
        "parameters": dict.fromkeys(("a", "b", "c"), "positive"),
        "inputs": {"u": "exp(-c*t) + delta(t - 2)"},
        "initial": {"x1": 1, "x2": 0},
        "outputs": {"rate": "a*x1 - b*x2"},
    },
}
"""Typed equations with a delay, an eliminated unknown and outputs; a wave at an eigenvalue;
switching at parameters; cases in which exponents meet."""


def stated(mapping: dict[str, Any], name: str = "model") -> DrivenModel:
    """Return the driven model that a mapping states."""
    source, whole = Source(Place()), {"title": "A model", **mapping}
    return driven_model(whole, heading_of(whole, name, source), source)


@cache
def response_to(kind: str) -> DrivenResponse:
    return respond_driven(stated(KINDS[kind]))


def setting_to(response: DrivenResponse, number: int = 0) -> Setting:
    return setting_of(response, response.solutions[number])


def refuted(response: DrivenResponse, number: int = 0, *, exact: bool = False) -> dict[str, str]:
    """Return the checks that one case fails, each with how; of all, or of those of functions."""
    setting = setting_to(response, number)
    checks = driven_checks(response, response.solutions[number])
    if exact:
        checks = chain(exact_checks(setting), steady_checks(setting), phasor_checks(setting))
    return {check.item: check.how for check in checks if check.outcome == "refuted"}


# --- parts put in the place of others ------------------------------------------------------


def with_model(response: DrivenResponse, **fields: Any) -> DrivenResponse:
    """Change the model, also where the solutions hold it; nothing is solved anew."""
    model = replace(response.model, **fields)
    solutions = tuple(replace(solution, model=model) for solution in response.solutions)
    return replace(response, model=model, solutions=solutions)


def with_solution(response: DrivenResponse, number: int = 0, **fields: Any) -> DrivenResponse:
    solutions = list(response.solutions)
    solutions[number] = replace(solutions[number], **fields)
    return replace(response, solutions=tuple(solutions))


def with_functions(response: DrivenResponse, number: int = 0, **fields: Any) -> DrivenResponse:
    functions = replace(response.solutions[number].functions, **fields)
    return with_solution(response, number, functions=functions)


def summands_of(functions: DrivenFunctions) -> Iterator[tuple[int, int, Summand]]:
    """Yield summands of the intervals, eight or so of them: interval, place, summand."""
    found = [
        (k, place, summand)
        for k, interval in enumerate(functions.intervals)
        for place, summand in enumerate(interval.summands)
    ]
    yield from found[:: max(1, len(found) // 8)]


def moved(functions: DrivenFunctions, k: int, place: int, *others: Summand) -> DrivenFunctions:
    """Put others in the place of one summand of an interval, or none."""
    intervals = list(functions.intervals)
    own = intervals[k].summands
    summands = (*own[:place], *others, *own[place + 1 :])
    intervals[k] = replace(intervals[k], summands=summands)
    return replace(functions, intervals=tuple(intervals))
