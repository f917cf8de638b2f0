"""Certified numbers compared, at a precision that grows until the comparison can tell.

Balls that do not meet prove two numbers different at any precision; balls that meet say
something only once both are narrow.  So the working precision doubles until one or the
other has happened, or the limit is reached and nothing is claimed.
"""

from __future__ import annotations

from collections.abc import Callable, Iterable, Sequence
from dataclasses import dataclass
from fractions import Fraction

from flint import arb, ctx

from closedform.verification.record import Check, Outcome

__all__ = [
    "AGREED",
    "DIGITS",
    "LIMIT_BITS",
    "PLACES",
    "START_BITS",
    "Finding",
    "Pair",
    "check_of",
    "compared",
    "is_narrow",
    "listed",
]

DIGITS = 30
PLACES = 2 * DIGITS
START_BITS = 256
LIMIT_BITS = 1 << 15
AGREED = f"to {DIGITS} digits, or {PLACES} places after the point,"
"""What `is_narrow` asks for, in words."""

Pair = tuple[arb, arb]
"""A number that was found, and what it has to be."""


@dataclass(frozen=True, slots=True)
class Finding:
    """What came of one comparison; `how` is empty where everything agrees."""

    outcome: Outcome
    how: str = ""


def is_narrow(ball: arb, places: int | None = PLACES) -> bool:
    """Whether a ball settles `DIGITS` significant digits, or else `places` after the point.

    With None only significant digits count.
    """
    if not ball.is_finite():
        return False
    if ball.rad() <= abs(ball.mid()) * arb(10) ** -DIGITS:
        return True
    return places is not None and ball.rad() <= arb(10) ** -places


def compared(
    named: Iterable[str],
    evaluate: Callable[[Sequence[str]], Iterable[Pair]],
    *,
    where: str = "",
    bits: int = START_BITS,
    places: int | None = PLACES,
) -> Finding:
    """Compare numbers by name; `evaluate` encloses those asked for at FLINT's precision.

    Refuted are numbers whose balls do not meet, and those found that still have no finite
    ball at the limit: a root of a negative number, say, has no value at any precision.
    """
    pending = list(named)
    while True:
        with ctx.workprec(bits):
            pairs = list(zip(pending, evaluate(pending), strict=True))
            for name, (found, expected) in pairs:
                both = found.is_finite() and expected.is_finite()
                if both and not found.overlaps(expected):
                    return Finding("refuted", f"{name} differs{where}")
            open_pairs = [
                (name, pair) for name, pair in pairs if not all(is_narrow(b, places) for b in pair)
            ]
        if not open_pairs:
            return Finding("enclosed")
        if bits >= LIMIT_BITS:
            return _at_the_limit(open_pairs, where)
        pending = [name for name, _ in open_pairs]
        bits = min(2 * bits, LIMIT_BITS)


def check_of(
    item: str, findings: Iterable[Finding], agreed: str, *, essential: bool = True
) -> Check:
    """Return the first refutation as a check, else the first that was left open, else `agreed`."""
    left_open: Finding | None = None
    for finding in findings:
        if finding.outcome == "refuted":
            return Check(item, finding.outcome, finding.how, essential)
        if finding.outcome == "not attempted":
            left_open = left_open or finding
    if left_open is not None:
        return Check(item, left_open.outcome, left_open.how, essential)
    return Check(item, "enclosed", agreed, essential)


def listed(times: Iterable[Fraction]) -> str:
    """Return instants for print."""
    return ", ".join(map(str, times))


def _at_the_limit(open_pairs: Sequence[tuple[str, Pair]], where: str) -> Finding:
    for name, (found, _) in open_pairs:
        if not found.is_finite():
            return Finding("refuted", f"{name} has no value{where}, worked to {LIMIT_BITS} bits")
    name, pair = open_pairs[0]
    how = f"{name} is not settled{where} by {LIMIT_BITS} bits"
    radius = max((ball.rad() for ball in pair if ball.is_finite()), default=arb(0))
    known = f": it is known to ± {radius.str(2, radius=False)}" if radius > 0 else ""
    return Finding("not attempted", how + known)
