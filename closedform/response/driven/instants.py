"""Instants at which a driven solution is shown: some in each interval, and beyond the last."""

from __future__ import annotations

from fractions import Fraction
from functools import cmp_to_key
from itertools import pairwise

from flint import arb, ctx

from closedform.algebra.enclosure import decimal_order, exact_end
from closedform.algebra.field import BaseField, Scalar
from closedform.algebra.surds import SurdSum
from closedform.response.driven.in_field import InField
from closedform.response.sampling import suitable_times

__all__ = ["suitable_instants"]

_MOST_HALVED = 4
"""With up to so many intervals that end, the middle of each is shown, too."""
_PERIODS = (0, 1, 4, 9)
"""The periods of an input that are shown, from 0: the first two in each of their parts."""
_MOST_PERIODS = 100
"""Up to so many periods the end of the last one is shown, too: each of them is added up."""
_BITS = 256


def suitable_instants(solution: InField) -> tuple[SurdSum, ...]:
    """Return instants from the start on: each switching, what lies between, and some after.

    After the last switching they are those that suit the eigenvalues: see `suitable_times`.
    Of inputs that repeat the first two periods are shown so, and two later ones, and the end
    of a number of them that is not too large.
    An instant with the number pi in it is not shown; one soon after it is.
    """
    field = solution.field
    starts = _in_order(field, [i.start for i in solution.parts[0].intervals] + _periods(solution))
    found: list[SurdSum] = []
    halved = len(starts) - 1 <= _MOST_HALVED
    for low, high in pairwise(starts):
        length = high - low
        shares = (0, Fraction(1, 2)) if halved else (0,)
        found += [_shown(field, low, length, share) for share in shares]
    steps = suitable_times(solution.roots)
    if len(starts) > 1:
        steps = steps[: len(steps) - (1 if halved else 2)]
    last = starts[-1]
    begun = _shown(field, last, field.scalar(steps[1]), 0)
    found += [begun + step for step in steps]
    return tuple(found)


def _periods(solution: InField) -> list[Scalar]:
    """The instants of the periods that are shown of inputs that repeat, and their ends."""
    field, found = solution.field, []
    for part in solution.parts[1:]:
        if part.period is None:
            continue
        *starts, _ = (own.start for own in part.intervals)
        shown = [k for k in _PERIODS if part.count is None or k < part.count]
        for k in shown:
            inside = starts if k in _PERIODS[:2] else starts[:1]
            found += [at + part.period * field.scalar(k) for at in inside]
        if part.count is not None and part.count <= _MOST_PERIODS:
            found.append(starts[0] + part.period * field.scalar(part.count))
    return found


def _in_order(field: BaseField, instants: list[Scalar]) -> list[Scalar]:
    """Instants in rising order, each once."""

    def compared(a: Scalar, b: Scalar) -> int:
        return field.sign(a - b)

    found = sorted(instants, key=cmp_to_key(compared))
    return [at for k, at in enumerate(found) if k == 0 or field.sign(at - found[k - 1]) > 0]


def _shown(field: BaseField, start: Scalar, length: Scalar, share: Fraction | int) -> SurdSum:
    """The instant at a share of an interval; a rational one close by where it has pi in it."""
    at = start + length * field.scalar(Fraction(share))
    exact = field.number(at)
    if exact is not None:
        return exact
    with ctx.workprec(_BITS):
        unit = Fraction(10) ** (decimal_order(exact_end(field.enclose(length).lower())) - 2)
        above = exact_end((field.enclose(at) / _ball(unit)).ceil().mid())
    return SurdSum.rational(above * unit)


def _ball(value: Fraction) -> arb:
    return arb(value.numerator) / value.denominator
