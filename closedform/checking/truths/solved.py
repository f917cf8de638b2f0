"""From a model to the truth about it: solved, proved, and written as trees."""

from __future__ import annotations

from dataclasses import replace

from closedform.checking.truth import Truth
from closedform.checking.truths.errors import RepeatingInputError
from closedform.checking.truths.in_cases import truths_in_cases
from closedform.checking.truths.in_numbers import truth_in_numbers
from closedform.checking.truths.when_driven import truths_when_driven
from closedform.model.driven.model import DrivenModel
from closedform.model.model import Model
from closedform.model.parametric import ParametricModel
from closedform.notation.plain import plain
from closedform.response.driven.response import respond_driven
from closedform.response.parametric.response import respond_in_cases
from closedform.response.response import respond
from closedform.verification.driven.verify import verify_driven
from closedform.verification.parametric.verify import verify_cases
from closedform.verification.refusal import require_proved
from closedform.verification.verify import verify

__all__ = ["truths_of"]


def truths_of(model: Model | ParametricModel | DrivenModel) -> tuple[Truth, ...]:
    """Return the truth about a model, a `Truth` for each case of its parameters.

    The cases come in the order of the response, generic ones first.

    Raises:  ResponseRefutedError, UnprovedError if the response does not hold;
             RepeatingInputError if an input repeats; ValuesNotCoveredError if the values of
             the model file belong to no case; what `closedform.response.solving.respond` raises.
    """
    units = _units(model)
    return tuple(replace(truth, units=units) for truth in _truths(model))


def _units(model: Model | ParametricModel | DrivenModel) -> dict[str, str]:
    """Return the units that a model file names, of parameters and inputs."""
    found: dict[str, str] = {}
    stacked = model.stacked if isinstance(model, DrivenModel) else model
    if isinstance(model, DrivenModel):
        found |= {given.name: given.unit for given in model.inputs}
    if isinstance(stacked, ParametricModel):
        found |= {given.name: given.unit for given in stacked.parameters}
    return {name: unit for name, unit in found.items() if unit}


def _truths(model: Model | ParametricModel | DrivenModel) -> tuple[Truth, ...]:
    if isinstance(model, Model):
        response = respond(model)
        require_proved(model.name, verify(response))
        return (truth_in_numbers(response),)
    if isinstance(model, ParametricModel):
        in_cases = respond_in_cases(model)
        require_proved(model.name, verify_cases(in_cases))
        return truths_in_cases(in_cases)
    for given in model.inputs:
        if given.signal.repeat is not None:
            raise RepeatingInputError(model.name, plain(given.formula))
    driven = respond_driven(model)
    require_proved(model.name, verify_driven(driven))
    return truths_when_driven(driven)
