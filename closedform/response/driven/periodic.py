"""Inputs that repeat: the response in the n-th period, and the periodic steady state.

One period by itself, switched on at its start and off at its end, leaves a jump h_e of the
state at each of its instants a_e, and after these the free responses f_e(t - a_e).  All periods
up to the n-th together are sums over k of f_e(theta + k T), which each real mode of f_e
makes a finite geometric sum: with q = e^(rate T)

    sum over k = 0 … n-1 of f(theta + k T)
        = f(theta) (1 - q^n)/(1 - q)                        for f = c e^(rate t),
        = [f_0 - q^2 f_-1 - f_n + q^2 f_(n-1)]/(1 - s + q^2)  for a pair, or t e^(rate t),
        = n f(theta),  or  n (f_0 + f_(n-1))/2              for a constant, or a line,

where f_k = f(theta + k T) and s = 2 q cos(frequency T), 2 q cosh(frequency T) or 2 q: then
f_(k+1) - s f_k + q^2 f_(k-1) = 0 for every k.  Where all modes decay, q^n goes to zero and
what is left is periodic: it is the response (I - e^(AT))^(-1) starts each period with.
"""

from __future__ import annotations

from collections.abc import Callable
from dataclasses import dataclass, replace
from functools import cmp_to_key

from closedform.algebra.exponential import ExponentialMatrix
from closedform.algebra.field import FieldMatrix, Scalar
from closedform.algebra.waves import Constant
from closedform.errors import Place
from closedform.model.driven.instants import order_in
from closedform.model.driven.model import DrivenModel, Input
from closedform.model.driven.signal import Burst, Repeat, Signal
from closedform.response.driven.assembly import driven_functions, rows_matrix
from closedform.response.driven.functions import DrivenFunctions

__all__ = [
    "Blow",
    "PeriodFunctions",
    "one_period",
    "period_functions",
    "repeating",
    "without_repeats",
]

Put = Callable[[Scalar], Scalar]


@dataclass(frozen=True, slots=True)
class Blow:
    """constant · (the column at `place` of the parted functions)(t - at), from `at` on.

    `step` counts the instants of the period: 0 is its start, the last one its end.
    """

    step: int
    at: Scalar
    constant: Constant
    place: int


@dataclass(frozen=True)
class PeriodFunctions:
    """One period by itself: its functions as those of a driven model, and the jumps it leaves.

    `single` is the response to the first period alone, from rest; `blows` are the free
    responses to its jumps, by the columns of `parted` (r x c).
    """

    repeat: Repeat
    single: DrivenFunctions
    blows: tuple[Blow, ...]
    parted: ExponentialMatrix


def repeating(model: DrivenModel) -> tuple[Repeat, ...]:
    """Return the ways in which inputs of a model repeat, each once."""
    found = (given.signal.repeat for given in model.inputs)
    return tuple(dict.fromkeys(repeat for repeat in found if repeat is not None))


def without_repeats(model: DrivenModel) -> DrivenModel:
    """Return the model with nothing in the place of the inputs that repeat."""
    return replace(
        model,
        inputs=tuple(
            given if given.signal.repeat is None else replace(given, signal=Signal())
            for given in model.inputs
        ),
    )


def one_period(model: DrivenModel, repeat: Repeat) -> DrivenModel:
    """Return the model from rest, driven by the first period of the inputs that repeat so."""
    end = repeat.start + repeat.period
    inputs = tuple(_first_period(given, repeat, end) for given in model.inputs)
    instants = {
        at
        for given in inputs
        for burst in given.signal.bursts
        for at in (burst.start, burst.end)
        if at is not None
    }
    instants |= {impulse.at for given in inputs for impulse in given.signal.impulses}
    zero = model.field.domain.zero
    key = cmp_to_key(order_in(model.field, model.domain, Place()).compared)
    return replace(
        model,
        inputs=inputs,
        start=repeat.start,
        initial=(zero,) * len(model.names),
        conditions=(),
        timeline=(*sorted(instants - {repeat.start, end}, key=key), end),
    )


def period_functions(
    model: DrivenModel,
    repeat: Repeat,
    exponential: ExponentialMatrix,
    *,
    put: Put = lambda element: element,
    relation: Scalar | None = None,
) -> PeriodFunctions:
    """Return the functions of one period, as `driven_functions` does for a whole model."""
    one = one_period(model, repeat)
    single = driven_functions(one, exponential, put=put, relation=relation)
    rows = rows_matrix(model, put)
    found: list[FieldMatrix] = []
    blows = []
    for step, (at, jump) in enumerate(zip((one.start, *one.timeline), single.jumps, strict=True)):
        for constant, column in jump:
            if column not in found:
                found.append(column)
            blows.append(Blow(step, put(at), constant, found.index(column)))
    size, n, field = exponential.shape[0], len(model.names), model.field
    starts = found or [field.zeros(n, 1)]
    below = [[field.domain.zero] * len(starts) for _ in range(size - n)]
    beside = [[column[i, 0].element for column in starts] for i in range(n)]
    parted = exponential.times(field.matrix([*beside, *below])).after(rows)
    return PeriodFunctions(repeat, single, tuple(blows), parted)


def _first_period(given: Input, repeat: Repeat, end: Scalar) -> Input:
    if given.signal.repeat != repeat:
        return replace(given, signal=Signal())
    bursts = tuple(
        Burst(
            burst.waves,
            None if burst.start == repeat.start else burst.start,
            end if burst.end is None else burst.end,
        )
        for burst in given.signal.bursts
    )
    return replace(given, signal=Signal(bursts, given.signal.impulses))
