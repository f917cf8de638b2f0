"""e^(At) against mpmath's matrix exponential: floating point, in a context of its own.

mpmath's numbers carry no bound.  So where they differ from the result it is asked again
with twice the digits, and only what it then repeats is held against the result.
"""

from __future__ import annotations

from fractions import Fraction
from typing import Any

import mpmath
from flint import arb, arb_mat, ctx

from closedform.algebra.enclosure import ball_of
from closedform.response.response import Response
from closedform.verification.comparison import (
    AGREED,
    DIGITS,
    LIMIT_BITS,
    PLACES,
    START_BITS,
    Finding,
    check_of,
    is_narrow,
    listed,
)
from closedform.verification.record import Check

__all__ = ["LARGEST_FOR_MPMATH", "MOST_DIGITS", "mpmath_check"]

LARGEST_FOR_MPMATH = 12
MOST_DIGITS = 600
_GUARD_DIGITS = 15
_BITS_PER_DIGIT = 4
"""More than log2(10)."""


def mpmath_check(response: Response, times: tuple[Fraction, ...]) -> Check:
    """e^(At) against mpmath's Taylor series, entry by entry.

    Not essential: e^(At) is proved by its equation and initial value.
    """
    item = "e^(At), second opinion"
    if response.matrix.shape[0] > LARGEST_FOR_MPMATH:
        how = f"done up to {LARGEST_FOR_MPMATH} states"
        return Check(item, "not attempted", how, essential=False)
    return check_of(
        item,
        (_finding(response, t) for t in times),
        f"agree with mpmath's matrix exponential {AGREED} at the times {listed(times)}",
        essential=False,
    )


def _finding(response: Response, t: Fraction) -> Finding:
    ours = _own_exponential(response, t)
    if ours is None:
        return Finding("not attempted", f"not settled at time {t} by {LIMIT_BITS} bits")
    # places before the point cost digits: entries may be of very different size
    digits = PLACES + _GUARD_DIGITS + _digits_before_point(response, t, ours)
    before: dict[str, Any] = {}
    while digits <= MOST_DIGITS:
        mp = mpmath.mp.clone()
        mp.dps = digits
        theirs = _their_exponential(mp, response, t, digits)
        apart = {
            f"entry {(i + 1, k + 1)}": theirs[i, k]
            for i in range(theirs.rows)
            for k in range(theirs.cols)
            if not _agree(mp, _number(mp, ours[i, k], digits), theirs[i, k])
        }
        if not apart:
            return Finding("enclosed")
        for name, value in apart.items():
            if name in before and _agree(mp, before[name], value):
                return Finding("refuted", f"{name} differs at time {t}")
        before, digits = apart, 2 * digits
    return Finding(
        "not attempted", f"time {t} asks for {digits} digits; done up to {MOST_DIGITS} digits"
    )


def _own_exponential(response: Response, t: Fraction) -> arb_mat | None:
    """Balls for e^(At) from its exact form, all of them narrow."""
    bits = START_BITS
    while bits <= LIMIT_BITS:
        with ctx.workprec(bits):
            found = response.exponential.enclosure(ball_of(t))
            if all(is_narrow(ball) for ball in found.entries()):
                return found
        bits *= 2
    return None


def _their_exponential(mp: Any, response: Response, t: Fraction, digits: int) -> Any:
    n = response.matrix.shape[0]
    with ctx.workprec(_BITS_PER_DIGIT * (digits + _GUARD_DIGITS)):
        scaled = response.field.enclose_matrix(response.matrix) * ball_of(t)
        entries = [_number(mp, e, digits) for e in scaled.entries()]
    return mp.expm(mp.matrix([entries[i * n : (i + 1) * n] for i in range(n)]), method="taylor")


def _number(mp: Any, ball: arb, digits: int) -> Any:
    return mp.mpf(ball.mid().str(digits + _GUARD_DIGITS, radius=False))


def _agree(mp: Any, left: Any, right: Any) -> bool:
    allowed = max(mp.mpf(10) ** -DIGITS * abs(right), mp.mpf(10) ** -PLACES)
    # each of the two may be off by as much as is allowed
    return bool(abs(left - right) <= 2 * allowed)


def _digits_before_point(response: Response, t: Fraction, ours: arb_mat) -> int:
    with ctx.workprec(64):
        scaled = response.field.enclose_matrix(response.matrix) * ball_of(t)
        largest = arb(1)
        for ball in (*scaled.entries(), *ours.entries()):
            largest = largest.max(abs(ball).upper())
        return int((largest.log() / arb(10).log()).upper().ceil().unique_fmpz() or 0)
