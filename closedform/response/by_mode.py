"""A function taken apart by the real modes in it, each with the formula of its part."""

from __future__ import annotations

from dataclasses import dataclass
from typing import Literal

from closedform.notation.expression import Expression

__all__ = ["ByMode", "ModePart"]


@dataclass(frozen=True, slots=True)
class ModePart:
    """The part of a function that belongs to e^(rate t), or e^(rate t) cos/sin or cosh/sinh.

    `power` is the highest power of t in it.
    """

    rate: Expression
    kind: Literal["real", "circular", "hyperbolic"]
    frequency: Expression | None
    power: int
    formula: Expression


ByMode = tuple[tuple[tuple[ModePart, ...], ...], ...]
"""The entries of a matrix of functions, each taken apart."""
