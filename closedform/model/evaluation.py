"""A model with parameters at values of these: a model in numbers."""

from __future__ import annotations

from collections.abc import Mapping

from closedform.algebra.field import Scalar
from closedform.algebra.surds import SurdSum
from closedform.model.model import Model, Output
from closedform.model.parametric import ParametricModel

__all__ = ["at_values"]


def at_values(model: ParametricModel, values: Mapping[str, SurdSum]) -> Model:
    """Return the model with exact values in the place of all its parameters.

    Raises ZeroDivisionError where an entry is not defined there.
    """

    def number(element: Scalar) -> SurdSum:
        return model.field.exact_at(element, values)

    return Model(
        name=model.name,
        title=model.title,
        states=model.states,
        matrix=tuple(tuple(number(entry) for entry in row) for row in model.matrix),
        initial=tuple(number(entry) for entry in model.initial),
        outputs=tuple(
            Output(output.name, tuple(number(weight) for weight in output.weights))
            for output in model.outputs
        ),
        times=model.times,
        time=model.time,
        summary=model.summary,
    )
