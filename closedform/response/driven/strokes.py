"""How often something has struck, and what the strokes so far add to a solution."""

from __future__ import annotations

from dataclasses import dataclass

from closedform.algebra.field import Scalar
from closedform.notation.expression import Expression, Name, number
from closedform.notation.terms import negated, sum_of
from closedform.response.by_mode import ModePart

__all__ = ["ENDLESS", "ONCE", "Count", "Struck", "UnwrittenSumError"]


class UnwrittenSumError(ValueError):
    """A repeated pair, whose sum over periods is not written."""

    def __init__(self, part: ModePart) -> None:
        super().__init__(part)
        self.part = part


@dataclass(frozen=True, slots=True)
class Count:
    """How often a stroke has come: n - less, a fixed number, or ever since (neither is given)."""

    name: str | None = None
    less: int = 0
    fixed: int | None = None

    @property
    def endless(self) -> bool:
        """Whether the stroke has always come."""
        return self.name is None and self.fixed is None

    @property
    def formula(self) -> Expression:
        """The number of strokes.  Raises ValueError if it is not finite."""
        if self.fixed is not None:
            return number(self.fixed)
        if self.name is None:
            raise ValueError("there is no first stroke")
        whole = Name(self.name)
        return sum_of([whole, negated(number(self.less))]) if self.less else whole


ENDLESS = Count()
ONCE = Count(fixed=1)


@dataclass(frozen=True, slots=True)
class Struck:
    """What strokes that came `count` times add: constant · the part, in the time since the last.

    That is variable + shift, and with `counted` another period for each one in `n`, for a
    stroke that came once.  `resonant` says that the pair of the part repeats with the period.
    """

    part: ModePart
    constant: Expression | None
    shift: Scalar
    count: Count
    counted: bool = False
    resonant: bool = False
