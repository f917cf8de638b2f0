"""What the names in a formula mean when its exact value is worked out."""

from __future__ import annotations

from collections.abc import Callable, Mapping
from dataclasses import dataclass, replace
from dataclasses import field as dataclass_field

from closedform.algebra.elementary import Element, ElementaryField
from closedform.checking.values.matrices import ExactMatrix

__all__ = ["HELD", "Scope", "Value"]

Value = Element | ExactMatrix
HELD = "held time"
"""The name of the time where an integral over another variable holds it."""


@dataclass(frozen=True)
class Scope:
    """What names mean where a formula is evaluated.

    `symbols` are numbers and matrices, `jets` functions of time by (name, order).  Where steps
    and pieces occur, the value is that on the interval in which `instant` lies.
    `exponential` gives e^(Mt) for a constant matrix M.
    """

    field: ElementaryField
    time: str
    symbols: Mapping[str, Value] = dataclass_field(default_factory=dict)
    jets: Mapping[tuple[str, int], Value] = dataclass_field(default_factory=dict)
    instant: Element | None = None
    exponential: Callable[[ExactMatrix], ExactMatrix] | None = None
    size: int | None = None
    moment: Callable[[str, int, Element | None], Value | None] | None = None
    """Value of a function of time at an instant, on whichever interval; None is infinity."""
    in_pieces: bool = False
    """Whether the functions have other formulas on other intervals."""

    def with_symbols(self, more: Mapping[str, Value]) -> Scope:
        """Return the scope with further names, which win over its own."""
        return replace(self, symbols={**self.symbols, **more})
