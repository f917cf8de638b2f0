"""Values of the parameters of a case, at which its functions and formulas are put to the test."""

from __future__ import annotations

from collections.abc import Callable, Mapping
from dataclasses import dataclass

from flint import arb

from closedform.algebra.field import BaseField
from closedform.algebra.parameter_field import ParameterField
from closedform.response.parametric.case import Case
from closedform.response.parametric.points import border_points, case_points, points_beside
from closedform.response.parametric.response import ParametricResponse
from closedform.verification.driven.sums import Enclose
from closedform.verification.parametric.values import NamesAt

__all__ = ["POINTS", "Ground", "grounds_of"]

POINTS = 3


@dataclass(frozen=True)
class Ground:
    """Values at which formulas are put to the test: `told` says which, empty without parameters.

    `balls` gives a ball for every name in the formulas, at FLINT's current precision.
    """

    field: BaseField
    told: str
    balls: Callable[[], Mapping[str, arb]]

    def enclose(self) -> Enclose:
        """Return what gives a ball for an element of the field."""
        field = self.field
        if not isinstance(field, ParameterField):
            return field.enclose
        known, base = self.balls(), field
        return lambda element: base.enclose_at(element, known)


def grounds_of(response: ParametricResponse, case: Case, count: int = POINTS) -> tuple[Ground, ...]:
    """Return points of a case, on its borders too, or else points where its equations hold."""
    field = response.model.field
    points = case_points(field, case, count) or points_beside(field, case, count)
    return tuple(
        Ground(
            field, f" at {point}" if str(point) else "", NamesAt(response.model, case, point).balls
        )
        for point in (*points, *border_points(field, case))
    )
