"""Equations as typed, solved for the highest derivatives and integrated by Taylor's method.

From the balances that `typed` reads: in every interval from the values that a solution has at
its beginning, in 30 digits.  Nothing of the package is used.
"""

from __future__ import annotations

from collections.abc import Mapping
from fractions import Fraction
from typing import Any

import mpmath
from flint import arb, arb_series, ctx

from tests.driven.series import constant, derivatives, moving, series
from tests.driven.typed import Stated
from tests.parametric.plain_reader import Number, ball_of

__all__ = ["reached"]

DIGITS = 30
Jet = tuple[str, int]


def reached(
    stated: Stated, begun: Number, values: Mapping[str, arb_series], until: Number
) -> dict[Jet, arb]:
    """The unknowns and their derivatives at an instant, from the lower ones at an earlier one.

    Nothing is switched and nothing strikes between.
    """
    orders = stated.orders
    jets = [(name, k) for name, order in sorted(orders.items()) for k in range(order)]
    highest = sorted(orders.items())
    with mpmath.workdps(DIGITS + 5):
        mass = mpmath.matrix(len(stated.lines), len(highest))
        for i, line in enumerate(stated.lines):
            for j, place in enumerate(highest):
                mass[i, j] = _mpf(line.of_unknowns.get(place, Fraction(0)))

        solving = mass**-1

        def top(t: Any, known: Mapping[Jet, Any]) -> dict[Jet, Any]:
            right = mpmath.matrix(len(stated.lines), 1)
            for i, line in enumerate(stated.lines):
                total = -_forcing(stated, i, arb(t))
                for place, weight in line.of_unknowns.items():
                    if place in known:
                        total -= _mpf(weight) * known[place]
                right[i] = total
            solved = solving * right
            return {place: solved[j] for j, place in enumerate(highest)}

        def slopes(t: Any, x: Any) -> list[Any]:
            known = dict(zip(jets, x, strict=True))
            known |= top(t, known)
            return [known[name, k + 1] for name, k in jets]

        start = [_mpf(derivatives(values[name], k + 1)[k]) for name, k in jets]
        found = mpmath.odefun(slopes, _mpf(begun), start)(_mpf(until))
        known = dict(zip(jets, found, strict=True))
        known |= top(_mpf(until), known)
        return {jet: arb(x) for jet, x in known.items()}


def _forcing(stated: Stated, i: int, t: arb) -> Any:
    """What inputs and functions of the time add to the left of an equation.

    Taylor's method takes differences, for which it raises the precision many times.
    """
    line = stated.lines[i]
    with ctx.workprec(mpmath.mp.prec + 30):
        total = arb(0)
        for (name, order, delay), weight in line.of_inputs.items():
            own = stated.input_series(name, t - ball_of(delay))
            total += ball_of(weight) * derivatives(own, order + 1)[order]
        near = {name: constant(number) for name, number in stated.values.items()}
        total += series(line.rest, {**near, stated.time: moving(t)})[0]
        mantissa, exponent = total.mid().man_exp()
        return mpmath.ldexp(mpmath.mpf(int(mantissa)), int(exponent))


def _mpf(number: Number) -> Any:
    if isinstance(number, Fraction):
        return mpmath.mpf(number.numerator) / number.denominator
    return mpmath.mpf(number.mid().str(45, radius=False))
