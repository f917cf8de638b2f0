"""Columns of printed decimals that stand for a direction: right if some length fits them all."""

from __future__ import annotations

from collections.abc import Sequence
from fractions import Fraction

from flint import acb, arb, ctx, fmpq

from closedform.checking.matrices import ExactMatrix
from closedform.checking.spread import spread
from closedform.notation.written.tree import Literal, Negation, Written

__all__ = ["rounded_direction"]

BITS = 256


def rounded_direction(claimed: Written | Sequence[Written], true: ExactMatrix) -> str | None:
    """Return words for a column of decimals that is a multiple of a true one, rounded; else None.

    Some factor has to exist with which every entry, rounded to the digits shown, is what is
    printed; an entry without decimals has to be met exactly, and fixes the factor.
    """
    rows = spread(claimed) if isinstance(claimed, Written) else tuple((e,) for e in claimed)
    if rows is None or len(rows[0]) != 1 or len(rows) != true.shape[0]:
        return None
    with ctx.workprec(BITS):
        exact = [row[0].enclosure(acb(0), {}) for row in true.rows]
        if not all(value.imag == 0 for value in exact):
            return None
        low, high = -arb("inf"), arb("inf")
        for (entry,), value in zip(rows, exact, strict=True):
            printed = _printed(entry)
            if printed is None:
                return None
            number, half = printed
            if value.real.contains(0):
                if not (abs(number) <= half):
                    return None
                continue
            ends = [_ball(number + half) / value.real, _ball(number - half) / value.real]
            ends.sort(key=lambda end: float(end.mid()))
            low = ends[0] if bool(ends[0] > low) else low
            high = ends[1] if bool(ends[1] < high) else high
        if bool(low > high):
            return None
    return "some length of the vector fits every digit"


def _printed(entry: Written) -> tuple[Fraction, Fraction] | None:
    """Return a printed number and half the worth of its last digit, 0 for an exact one."""
    match entry:
        case Negation(inside):
            found = _printed(inside)
            return None if found is None else (-found[0], found[1])
        case Literal(value, last_place, is_decimal):
            return value, last_place / 2 if is_decimal else Fraction(0)
    return None


def _ball(value: Fraction) -> arb:
    return arb(fmpq(value.numerator, value.denominator))
