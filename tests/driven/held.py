"""A solution held against equations as typed: inside intervals, at the start, where it jumps.

Around every instant all is a power series.  With s the variable of the Laplace transform, x
from the instant on is the formal sum of x^(k)(instant) / s^(k+1); a derivative multiplies by s
and subtracts what was there before; an impulse is its amount.  Each equation then is one of
Laurent series in 1/s.  It says that the equation holds, that states go on, and that they jump
where something strikes (the initial value theorem, term by term).  Nothing of the package is used.
"""

from __future__ import annotations

from collections.abc import Mapping, Sequence
from fractions import Fraction
from typing import Protocol

from flint import arb, arb_series

from tests.driven.amounts import decimal, factorial, order_of, plus
from tests.driven.series import LENGTH, derivatives, moving, series
from tests.driven.trees import seen
from tests.driven.typed import Line, Stated, Struck
from tests.parametric.plain_reader import Number, ball_of
from tests.parametric.record_reader import DisagreementError

__all__ = ["Functions", "check"]

DIGITS = 30


class Functions(Protocol):
    """What a solution says: the series of each unknown at an instant, seen from before or not."""

    def __call__(self, at: Number, *, before: bool) -> Mapping[str, arb_series]: ...


def check(stated: Stated, told: Functions, instants: Sequence[Number]) -> None:
    """Hold a solution against every equation around instants, and against initial values.

    Raises DisagreementError.
    """
    for at in instants:
        begins = order_of(at, stated.start) == 0
        after = told(at, before=False)
        before = _stated_before(stated) if begins else told(at, before=True)
        for line in stated.lines:
            _hold(stated, line, at, (before, after))


def _stated_before(stated: Stated) -> dict[str, arb_series]:
    """The initial values as series; those of what is algebraic are not asked for."""
    found: dict[str, list[Number]] = {}
    for (name, order), number in sorted(stated.initial.items(), key=lambda item: item[0]):
        found.setdefault(name, []).append(number / factorial(order))
    return {n: arb_series([ball_of(c) for c in cs], LENGTH) for n, cs in found.items()}


def _hold(
    stated: Stated,
    line: Line,
    at: Number,
    sides: tuple[Mapping[str, arb_series], Mapping[str, arb_series]],
) -> None:
    before, after = sides
    orders = [place[1] for place in (*line.of_unknowns, *line.of_inputs)]
    first = max(orders, default=0)
    kept = LENGTH - first
    total, scale = [arb(0)] * (first + kept), arb(1)

    def put(weight: Number, order: int, own: Sequence[arb], past: Sequence[arb], blow: arb) -> None:
        """weight · (derivative of this order); place j is the coefficient of s^(order - j)."""
        nonlocal scale
        laurent = [blow, *own]  # of s^0, s^-1, …
        for k, c in enumerate(laurent):
            place = first - order + k
            if place < len(total):
                total[place] += ball_of(weight) * c
                scale = max(scale, abs(ball_of(weight) * c).upper(), key=float)
        for j, c in enumerate(past):  # s^(order - 1 - j)
            total[first - order + 1 + j] -= ball_of(weight) * c

    for (name, order), weight in line.of_unknowns.items():
        past = derivatives(before[name], order) if order else []
        put(weight, order, derivatives(after[name], LENGTH), past, arb(0))
    for (name, order, delay), weight in line.of_inputs.items():
        then = plus(at, -delay)
        own = derivatives(stated.input_series(name, then), LENGTH)
        past = derivatives(stated.input_series(name, then, before=True), order)
        put(weight, order, own, past, _blow(stated.inputs[name].impulses, then))
    near = {**stated.constants, stated.time: moving(at)}
    rest = derivatives(
        series(seen(line.rest, stated.time, stated.values, at, before=False), near), LENGTH
    )
    put(Fraction(1), 0, rest, [], _blow(line.rest_impulses, at))
    for place, c in enumerate(total):
        if not abs(c) < scale * arb(10) ** -DIGITS * factorial(place):
            raise DisagreementError(
                f"{line.text!r} at {decimal(at):.6g}: term {place} is off by {c.str(12)}"
            )


def _blow(impulses: Sequence[Struck], at: Number) -> arb:
    here = [ball_of(blow.amount) for blow in impulses if order_of(blow.at, at) == 0]
    return sum(here, arb(0))
