"""The response of a model of either kind: in numbers, or with parameters."""

from __future__ import annotations

from typing import overload

from closedform.model.model import Model
from closedform.model.parametric import ParametricModel
from closedform.response.parametric.response import ParametricResponse, respond_in_cases
from closedform.response.response import Response
from closedform.response.response import respond as respond_in_numbers

__all__ = ["respond"]


@overload
def respond(model: Model) -> Response: ...
@overload
def respond(model: ParametricModel) -> ParametricResponse: ...
@overload
def respond(model: Model | ParametricModel) -> Response | ParametricResponse: ...


def respond(model: Model | ParametricModel) -> Response | ParametricResponse:
    """Return the exact response of a model: e^(At), x(t) and the outputs.

    Of a model with parameters it is that for every value of them, case by case.

    Exact:   no floating-point number takes part.  Nothing is proved yet: see `verify`.
    Raises:  RootsUnknownError where parameters leave open how the roots of a factor lie.
    """
    if isinstance(model, ParametricModel):
        return respond_in_cases(model)
    return respond_in_numbers(model)
