"""A function taken apart by the real modes in it, each with its exact amounts."""

from __future__ import annotations

from dataclasses import dataclass
from typing import Literal

from closedform.algebra.parameter_field import ParameterField
from closedform.notation.expression import Expression
from closedform.response.modes import Contribution
from closedform.response.parametric.terms import Term

__all__ = ["ByMode", "ModePart", "TermsOfMode"]


@dataclass(frozen=True, slots=True)
class TermsOfMode:
    """Terms that share a rate and a frequency, over the field in which a case is written."""

    writing: ParameterField
    terms: tuple[Term, ...]


@dataclass(frozen=True, slots=True)
class ModePart:
    """The part of a function that belongs to e^(rate t), or e^(rate t) cos/sin or cosh/sinh.

    `power` is the highest power of t in it; `exact` are the amounts.
    """

    rate: Expression
    kind: Literal["real", "circular", "hyperbolic"]
    frequency: Expression | None
    power: int
    exact: Contribution | TermsOfMode


ByMode = tuple[tuple[tuple[ModePart, ...], ...], ...]
"""The entries of a matrix of functions, each taken apart."""
