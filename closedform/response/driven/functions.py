"""The driven solution as functions: which columns are on in which interval.

Where no switching happens the solution is a particular response to the waves that are on,
and for every instant so far (the start, and each switching) a free response to the jump
that the particular response and the impulses leave there:

    x(t) = sum over waves P(t - origin) w + sum over instants a_j of e^(A (t - a_j)) h_j
    h_j  = impulses - (change of the sum of P at a_j);  at the start it is x0 - sum of P.
"""

from __future__ import annotations

from dataclasses import dataclass

from closedform.algebra.exponential import ExponentialMatrix
from closedform.algebra.field import Scalar
from closedform.algebra.waves import Constant, ConstantColumns

__all__ = ["DrivenFunctions", "Interval", "Summand", "Switch"]


@dataclass(frozen=True, slots=True)
class Summand:
    """constant · (the column at `place`)(t - origin)."""

    place: int
    origin: Scalar
    constant: Constant


@dataclass(frozen=True, slots=True)
class Interval:
    """The solution between two instants, `end` None for ever after: the sum of summands."""

    start: Scalar
    end: Scalar | None
    summands: tuple[Summand, ...]


@dataclass(frozen=True, slots=True)
class Switch:
    """What joins the solution at an instant; the summands vanish before it.

    `jump` says whether a state jumps: an impulse strikes.
    """

    at: Scalar
    summands: tuple[Summand, ...]
    jump: bool


@dataclass(frozen=True)
class DrivenFunctions:
    """The solution of a driven model, and its parts, by columns of functions.

    Shapes:  `columns` is r x c: a row for each of the model's `rows`, a column for each
    function that occurs.  `intervals` follow one another without gaps; the first holds up to
    the first switching, and `switches` tell what joins at each, so that
    x = first interval + sum over switches of step(t - at) · (its summands).
    `free` is the response to the initial values alone, `forced` the rest, in the same
    intervals.  `held` are the parts of the last interval that the waves still on sustain;
    `sustained` are these in each interval.  `jumps` are h_j of all instants, n x 1, the
    initial values left out of the first.  `steady` and `transient` add up to the last
    interval: what does not decay, and what does; None unless the model is stable.
    """

    columns: ExponentialMatrix
    intervals: tuple[Interval, ...]
    switches: tuple[Switch, ...]
    free: tuple[Summand, ...]
    forced: tuple[Interval, ...]
    held: tuple[Summand, ...]
    sustained: tuple[Interval, ...] = ()
    jumps: tuple[ConstantColumns, ...] = ()
    steady: tuple[Summand, ...] | None = None
    transient: tuple[Summand, ...] | None = None
