"""The response of a model of any kind: in numbers, with parameters, driven."""

from __future__ import annotations

from typing import overload

from closedform.model.driven.model import DrivenModel
from closedform.model.model import Model
from closedform.model.parametric import ParametricModel
from closedform.response.driven.response import DrivenResponse, respond_driven
from closedform.response.parametric.response import ParametricResponse, respond_in_cases
from closedform.response.response import Response
from closedform.response.response import respond as respond_in_numbers

__all__ = ["respond"]


@overload
def respond(model: Model) -> Response: ...
@overload
def respond(model: ParametricModel) -> ParametricResponse: ...
@overload
def respond(model: DrivenModel) -> DrivenResponse: ...
@overload
def respond(
    model: Model | ParametricModel | DrivenModel,
) -> Response | ParametricResponse | DrivenResponse: ...


def respond(
    model: Model | ParametricModel | DrivenModel,
) -> Response | ParametricResponse | DrivenResponse:
    """Return the exact response of a model: e^(At), x(t) and the outputs.

    Of a model with parameters it is that for every value of them, case by case; of a driven
    model the solution in each interval, free and forced.

    Exact:   no floating-point number takes part.  Nothing is proved yet: see `verify`.
    Raises:  RootsUnknownError where parameters leave open how the roots of a factor lie.
    """
    match model:
        case DrivenModel():
            return respond_driven(model)
        case ParametricModel():
            return respond_in_cases(model)
        case Model():
            return respond_in_numbers(model)
