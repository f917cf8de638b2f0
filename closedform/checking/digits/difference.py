"""How far a claimed formula is from the true one, told as one certified number."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass
from fractions import Fraction

from flint import acb, arb, ctx

from closedform.algebra.enclosure import ball_of
from closedform.checking.balls.enclosing import Quantities, enclose_written
from closedform.notation.written.tree import Written

__all__ = ["Difference", "largest_difference"]

_BITS = (128, 512, 2048)
_TOLD_BITS = 40
_NO_NAMES = Quantities()


@dataclass(frozen=True, slots=True)
class Difference:
    """The largest difference found: of which pair, at which instant.

    `claimed` and `true` hold the two values, `difference` claimed - true, each to 40 bits and
    more of the largest of them.
    """

    pair: int
    instant: Fraction
    claimed: acb
    true: acb
    difference: acb


def largest_difference(
    pairs: Sequence[tuple[Written, Written]],
    time: str,
    instants: Sequence[Fraction],
    names: Quantities = _NO_NAMES,
) -> Difference | None:
    """Return the largest difference of claimed and true formulas at some instants.

    Instants at which a formula is not finite are passed over.  None is returned where no
    difference is seen at the finest precision, which is no proof that there is none.
    Raises:  NoValueError as `enclose_written` does.
    """
    for bits in _BITS:
        with ctx.workprec(bits):
            found = [
                one for instant in instants for one in _differences(pairs, time, instant, names)
            ]
            largest = max(found, key=lambda one: arb(abs(one.difference).mid()), default=None)
            if largest is not None and _is_seen(largest):
                return largest
    return None


def _differences(
    pairs: Sequence[tuple[Written, Written]], time: str, instant: Fraction, names: Quantities
) -> list[Difference]:
    environment = names.environment({time: ball_of(instant)})
    found = []
    for index, (claimed, true) in enumerate(pairs):
        left, right = (enclose_written(tree, environment) for tree in (claimed, true))
        if left.is_finite() and right.is_finite():
            found.append(Difference(index, instant, left, right, left - right))
    return found


def _is_seen(found: Difference) -> bool:
    """Whether the difference is known to be none of 0, and to enough digits to be told."""
    size = abs(found.difference)
    return not found.difference.contains(0) and size.rel_accuracy_bits() >= _TOLD_BITS
