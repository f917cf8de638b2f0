"""From a model to the truth about it: solved, proved, and written as trees."""

from __future__ import annotations

from closedform.checking.truth import Truth
from closedform.checking.truths.in_numbers import truth_in_numbers
from closedform.model.driven.model import DrivenModel
from closedform.model.model import Model
from closedform.model.parametric import ParametricModel
from closedform.response.response import respond
from closedform.verification.refusal import require_proved
from closedform.verification.verify import verify

__all__ = ["truths_of"]


def truths_of(model: Model | ParametricModel | DrivenModel) -> tuple[Truth, ...]:
    """Return the truth about a model, a `Truth` for each case of its parameters.

    The cases come in the order of the response, generic ones first.

    Raises:  ResponseRefutedError, UnprovedError if the response does not hold; what
             `closedform.response.solving.respond` raises.
    """
    if isinstance(model, Model):
        response = respond(model)
        require_proved(model.name, verify(response))
        return (truth_in_numbers(response),)
    raise NotImplementedError
