"""Models in which the number pi occurs, made by hand; and some that engineers meet."""

from __future__ import annotations

from collections.abc import Mapping, Sequence
from functools import cache
from typing import Any

from closedform.algebra.domain import Comparison, ParameterDomain
from closedform.algebra.field import Scalar
from closedform.algebra.parameter_field import PI, ParameterField
from closedform.algebra.surds import SurdSum
from closedform.errors import Place
from closedform.model.parameters import assumed
from closedform.model.parametric import (
    Assumption,
    Parameter,
    ParametricModel,
    ParametricOutput,
    ValueSet,
)
from closedform.notation import read_formula
from closedform.notation.exact import exact_value
from closedform.notation.rational import rational_value
from closedform.response.parametric.response import ParametricResponse, respond_in_cases

__all__ = ["MODELS", "element", "field_with_pi", "model_with_pi", "response_with_pi"]


def field_with_pi(*names: str) -> ParameterField:
    """The field of some parameters and pi."""
    return ParameterField(parameters=(*names, PI))


def element(field: ParameterField, text: object) -> Scalar:
    formula = read_formula(str(text), names=frozenset(field.parameters))
    return rational_value(formula, field, Place())


def _number(text: str) -> SurdSum:
    return exact_value(read_formula(text, names=frozenset()), Place())


def model_with_pi(
    matrix: Sequence[Sequence[object]],
    initial: Sequence[object],
    *,
    parameters: Mapping[str, Assumption] | None = None,
    conditions: Sequence[str] = (),
    outputs: Mapping[str, Sequence[object]] | None = None,
    values: Mapping[str, str] | None = None,
    times: Sequence[str] = (),
    name: str = "driven",
) -> ParametricModel:
    """A model with pi in its field; each of `conditions` is an element that is positive."""
    declared = parameters or {}
    field = field_with_pi(*declared)
    given = {n: _number(text) for n, text in (values or {}).items()}
    known = [found[1] for n, a in declared.items() if (found := assumed(n, a, field.symbol(n)))]
    known += [Comparison(element(field, c), ">") for c in conditions]
    return ParametricModel(
        name=name,
        title="A driven model",
        states=tuple(f"x{k}" for k in range(1, len(matrix) + 1)),
        field=field,
        parameters=tuple(Parameter(n, a, given.get(n)) for n, a in declared.items()),
        domain=ParameterDomain(field, tuple(known)),
        matrix=tuple(tuple(element(field, e) for e in row) for row in matrix),
        initial=tuple(element(field, e) for e in initial),
        outputs=tuple(
            ParametricOutput(n, tuple(element(field, w) for w in weights))
            for n, weights in (outputs or {}).items()
        ),
        values=ValueSet("", tuple(given.items())) if given else None,
        times=tuple(map(_number, times)),
    )


MODELS: dict[str, dict[str, Any]] = {
    "numbers": {  # x'' + 16 x = 20 cos(pi t)
        "matrix": [[0, 1, 0, 0], [-16, 0, 1, 0], [0, 0, 0, 1], [0, 0, "-pi^2", 0]],
        "initial": [0, 0, 20, 0],
        "times": ["0", "1/2", "1", "2"],
        "name": "numbers",
    },
    "lag": {  # T y' + y = K sin(100 pi t)
        "matrix": [["-1/T", "K/T", 0], [0, 0, 1], [0, "-(100*pi)^2", 0]],
        "initial": ["y0", 0, "100*pi"],
        "parameters": {"K": "positive", "T": "positive", "y0": "real"},
        "values": {"K": "2", "T": "1/100", "y0": "1"},
        "name": "lag",
    },
    "spring": {  # m x'' + k x = F cos(2 pi f t)
        "matrix": [[0, 1, 0, 0], ["-k/m", 0, "1/m", 0], [0, 0, 0, 1], [0, 0, "-4*pi^2*f^2", 0]],
        "initial": [0, 0, "F", 0],
        "parameters": {"k": "positive", "m": "positive", "f": "positive", "F": "real"},
        "values": {"k": "100", "m": "2", "f": "2", "F": "sqrt(2)"},
        "outputs": {"force": ["k", 0, 0, 0]},
        "name": "spring",
    },
    "pulse": {  # x'' + w^2 x = sin(pi t/T)
        "matrix": [[0, 1, 0, 0], ["-w^2", 0, 1, 0], [0, 0, 0, 1], [0, 0, "-pi^2/T^2", 0]],
        "initial": [0, 0, 0, "pi/T"],
        "parameters": {"w": "positive", "T": "positive"},
        "name": "pulse",
    },
    "stiff": {  # x'' + k x = cos(pi t), k > 20
        "matrix": [[0, 1, 0, 0], ["-k", 0, 1, 0], [0, 0, 0, 1], [0, 0, "-pi^2", 0]],
        "initial": [0, 0, 1, 0],
        "parameters": {"k": "positive"},
        "conditions": ["k - 20"],
        "name": "stiff",
    },
    "damping": {  # x'' + c x' + pi^2 x = 0: its regimes part at c = 2 pi
        "matrix": [[0, 1], ["-pi^2", "-c"]],
        "initial": [1, 0],
        "parameters": {"c": "positive"},
        "values": {"c": "1"},
        "name": "damping",
    },
}


@cache
def response_with_pi(name: str) -> ParametricResponse:
    return respond_in_cases(model_with_pi(**MODELS[name]))
