"""The search for the exact numbers behind the printed ones of a single formula."""

from __future__ import annotations

from collections.abc import Iterator, Sequence
from dataclasses import dataclass
from fractions import Fraction
from itertools import combinations, islice

from flint import acb, arb, ctx

from closedform.algebra.enclosure import ball_of
from closedform.checking.balls.enclosing import Quantities
from closedform.checking.digits.equations import Equations, compared
from closedform.checking.digits.instants import Between, Samples, exact_rates, points
from closedform.checking.digits.newton import CERTAIN_BITS, certified, determined, refined
from closedform.checking.digits.rounding import Judged, judged
from closedform.checking.digits.slopes import Plan
from closedform.checking.digits.unknowns import (
    Unknown,
    apart,
    numbered,
    significant_digits,
    tied,
)
from closedform.notation.written.tree import Literal, Written

__all__ = ["Setting", "found_numbers", "is_rounding"]

_BITS = (256, 768)
_MORE_POINTS = 4
_MOST_CHOICES, _MOST_TRIED = 60, 12
_TIES = (Fraction(0), None, Fraction(1, 50), Fraction(1, 3))
"""Shares within which rates may be one; None is what rounding leaves open."""
_NEAR_SHARE = 20
_ROUNDING_PLACES = 300
_ROUNDING_AT_LEAST = 3
_ROUNDING_SHARE = 50


@dataclass(frozen=True, slots=True)
class Setting:
    """What the names of formulas are: variables with their ranges, and known quantities."""

    variables: Sequence[str]
    names: Quantities
    between: Between
    samples: Samples


def found_numbers(
    claimed: Written, true: Written, setting: Setting, *, integers: bool, pair: int
) -> tuple[Judged, ...] | None:
    """Return the judgement of each printed number of a claimed formula; None if nothing fits.

    Of several ways to fit one is returned in which all numbers are right, if there is any,
    and else one whose numbers are near.
    """
    formula, unknowns = numbered(claimed, integers=integers)
    for bits in _BITS:
        with ctx.workprec(bits):
            names, count = setting.names, len(unknowns) + _MORE_POINTS
            trees = (claimed, true)
            places = points(
                trees, setting.variables, names, count, setting.between, setting.samples
            )
            rates = exact_rates(true, setting.variables, names, setting.between, setting.samples)
            search = _Search(unknowns, compared(formula, true, names, places), rates, pair)
            found = search.as_printed()
            if found is not None:
                return found
            for groups in _ties(unknowns):
                found = search.tying(groups)
                if found is not None:
                    return found
            if not search.is_unproved:
                return None
    return None


def is_rounding(found: Judged) -> bool:
    """Whether a number is right, or so near that rounding on the way may have put it off.

    So it is within 3 units of the last place, or within 2 % of the value and 300 units.
    """
    if found.verdict == "right":
        return True
    off = found.deviation
    unit = ball_of(found.literal.last_place)
    near = off * _ROUNDING_SHARE < abs(found.ball) and off < _ROUNDING_PLACES * unit
    return bool(off < _ROUNDING_AT_LEAST * unit) or bool(near)


def _ties(unknowns: Sequence[Unknown]) -> list[tuple[tuple[int, ...], ...]]:
    """The ways to take several printed numbers for one, the likely ones first."""
    ways = [tied(unknowns, within) for within in _TIES]
    return list(dict.fromkeys((*ways, apart(unknowns))))


def _better(
    one: tuple[Judged, ...] | None, other: tuple[Judged, ...] | None
) -> tuple[Judged, ...] | None:
    if one is None or other is None:
        return other if one is None else one
    return min(one, other, key=_fault)


def _fault(found: tuple[Judged, ...]) -> tuple[int, int]:
    wrong = [j for j in found if j.verdict != "right"]
    return sum(not is_rounding(j) for j in wrong), len(wrong)


class _Search:
    """One formula at one precision; `is_unproved` once a solution could not be certified."""

    def __init__(
        self,
        unknowns: Sequence[Unknown],
        values: tuple[tuple[Plan, acb], ...],
        rates: Sequence[arb],
        pair: int,
    ) -> None:
        self._unknowns = unknowns
        self._literals = [unknown.literal for unknown in unknowns]
        self._pairs = values
        self._rates = rates
        self._pair = pair
        self.is_unproved = False

    def as_printed(self) -> tuple[Judged, ...] | None:
        """The judgement if the formula holds with the numbers as they stand."""
        exact = [ball_of(literal.value) for literal in self._literals]
        each = Equations(tuple((i,) for i in range(len(exact))), self._pairs)
        return self._judged(each, exact) if each.at(exact).holds(CERTAIN_BITS) else None

    def tying(self, groups: tuple[tuple[int, ...], ...]) -> tuple[Judged, ...] | None:
        """The best judgement with one unknown for each group of numbers; None without any."""
        system = Equations(groups, self._pairs)
        finest = [
            min((self._literals[i] for i in g), key=lambda one: one.last_place) for g in groups
        ]
        printed = [ball_of(literal.value).mid() for literal in finest]
        scale = [ball_of(literal.last_place) for literal in finest]
        everything = range(len(groups))
        nearer = [self._nearer(group, value) for group, value in zip(groups, printed, strict=True)]
        solution = refined(system, nearer, scale, everything)
        if solution is None and nearer != printed:
            solution = refined(system, printed, scale, everything)
        if solution is None:
            return None
        best: tuple[Judged, ...] | None = None
        for free, others in islice(_choices(system, solution, scale, finest), _MOST_TRIED):
            fixed = printed if others is None else others
            start = [solution[i] if i in free else fixed[i] for i in everything]
            moved = start if start == solution else refined(system, start, scale, free)
            balls = None if moved is None else certified(system, moved, free)
            if balls is None:
                self.is_unproved = self.is_unproved or moved is not None
                continue
            for i in set(everything).difference(free) if others is None else ():
                balls[i] = ball_of(finest[i].value)
            best = _better(best, self._judged(system, balls))
            if best is not None and _fault(best) == (0, 0):
                break
        return best

    def _nearer(self, group: tuple[int, ...], printed: arb) -> arb:
        """The rate of the true formula that a printed rate is near to, to begin with.

        Two modes with nearly the same rate leave least squares a valley too flat to follow.
        """
        if len(self._unknowns[group[0]].role) < 2 or not self._rates:
            return printed
        nearest = min(self._rates, key=lambda rate: arb(abs(rate - printed)))
        return nearest if abs(nearest - printed) * _NEAR_SHARE < printed else printed

    def _judged(self, system: Equations, balls: Sequence[arb]) -> tuple[Judged, ...]:
        found = {
            i: judged(self._literals[i], ball, self._pair)
            for group, ball in zip(system.groups, balls, strict=True)
            for i in group
        }
        return tuple(found[i] for i in sorted(found))


def _choices(
    system: Equations, solution: Sequence[arb], scale: Sequence[arb], literals: Sequence[Literal]
) -> Iterator[tuple[list[int], Sequence[arb] | None]]:
    """Yield sets of unknowns that the equations determine once the others are fixed.

    The first are the decimals with most digits.  Another set has no fewer decimals, and each
    of its numbers at most one digit fewer: 0.5 is no rounding of 0.503 beside 1.273.  The
    others are fixed as printed, or at last, if all have about as many digits, at the values
    that come with the set: 1.41 and 1.41 are right in a sum that is to be 2.828.
    """
    ranks = [(literal.is_decimal, significant_digits(literal)) for literal in literals]
    order = sorted(range(len(literals)), key=ranks.__getitem__, reverse=True)
    first, idle = determined(system, solution, scale, order)
    yield first, None
    matter = [i for i in order if i not in idle]
    if len(matter) == len(first):
        return

    def near(one: int, other: int) -> bool:
        return ranks[one][0] == ranks[other][0] and ranks[one][1] >= ranks[other][1] - 1

    for chosen in islice(combinations(matter, len(first)), _MOST_CHOICES):
        if list(chosen) != first and all(map(near, chosen, first)):
            independent, _ = determined(system, solution, scale, chosen)
            if len(independent) == len(first):
                yield list(chosen), None
    if all(near(i, matter[0]) for i in matter):
        yield first, solution
