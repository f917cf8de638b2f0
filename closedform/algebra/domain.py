"""The values that parameters may take, and what follows from them: signs, with the reason.

A domain is a finite set of conditions, each a rational function of the parameters
compared with 0.  Signs are decided by arguments that a reader can follow: a condition,
terms of one sign, squares, factors.  Where none of them applies the answer is "unknown";
it is never a guess.
"""

from __future__ import annotations

from dataclasses import dataclass
from typing import Literal

from closedform.algebra.field import Scalar
from closedform.algebra.parameter_field import ParameterField

__all__ = ["Comparison", "ParameterDomain", "Relation", "Sign"]

Relation = Literal[">", ">=", "!=", "="]
Sign = Literal["positive", "negative", "nonnegative", "nonpositive", "nonzero", "zero", "unknown"]


@dataclass(frozen=True)
class Comparison:
    """`element` compared with 0 by `relation`; x < 0 is stated as -x > 0."""

    element: Scalar
    relation: Relation


@dataclass(frozen=True)
class ParameterDomain:
    """All points of the field's parameters at which every condition holds."""

    field: ParameterField
    conditions: tuple[Comparison, ...]
