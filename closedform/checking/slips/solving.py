"""Which number ought to stand at a place: solved for from the true value."""

from __future__ import annotations

from collections.abc import Callable, Iterator
from dataclasses import dataclass, replace
from fractions import Fraction

from flint import acb, arb, ctx

from closedform.checking.slips.making import ZERO, number, over, times
from closedform.checking.slips.measuring import distance, largest, real, size
from closedform.checking.slips.trial import BITS, Trial
from closedform.notation.written.tree import PI, Apply, Literal, Symbol, Written, walk

__all__ = ["Place", "Solved", "simplest", "solved", "to_places"]

SOUGHT = "sought number"
"""A name that no reader gives: it has a space in it."""
MOST_STEPS = 14
LARGEST_DENOMINATOR = 400
LARGEST_OF_PI = 60
FINE = Fraction(1, 10**14)


@dataclass(frozen=True)
class Place:
    """A place for a number: `tree` is the formula with another formula there.

    `kind` is number, term (a factor in front of a term), exponent or angle (the rate of all
    equal exponents or angles).  `before` is the number that stands there, 1 if none does.
    `in_front` says that it is a factor of the whole.
    """

    kind: str
    where: str
    before: Fraction
    tree: Callable[[Written], Written]
    literal: Literal | None = None
    in_front: bool = False


@dataclass(frozen=True)
class Solved:
    """A number that is right at a place, exactly or as a ball: how it is to be written."""

    place: Place
    written: Written
    value: acb


def solved(trial: Trial, place: Place) -> Iterator[Solved]:
    """Yield the number with which the formula is the true one, if there is one that is plain.

    Rational numbers of small denominators, their roots and multiples of pi are plain.  In a
    formula with decimals the number is rounded to the places of the printed one.
    """
    with ctx.workprec(BITS):
        value = _root(trial, place)
        if value is None:
            return
        forms = list(_forms(trial, place, value))
    for form in dict.fromkeys(forms):
        zero = form == ZERO and not (place.kind == "number" and trial.entry is not None)
        if not zero:
            yield Solved(place, form, value)


def _forms(trial: Trial, place: Place, value: acb) -> Iterator[Written]:
    """Yield how a number may be written, the plainest first."""
    exact = simplest(value)
    if exact is not None:
        yield exact
    if not trial.loose:
        return
    if place.literal is not None and place.literal.is_decimal:
        rounded = to_places(value, place.literal.last_place)
        if rounded is not None:
            yield rounded
        return
    near = _near_integer(value)
    if near is not None:
        yield near
    places = [n.last_place for n in walk(trial.tree) if isinstance(n, Literal) and n.is_decimal]
    rounded = to_places(value, min(places)) if places and place.literal is None else None
    if rounded is not None:
        yield rounded


def simplest(value: acb) -> Written | None:
    """Return a plain formula of a real number, None if it has none."""
    if size(acb(value.imag)) > real(FINE) * size(value) + arb(1) / 10**20:
        return None
    exact = _rational(value.real)
    if exact is not None:
        return number(exact)
    square = _rational(value.real * value.real)
    if square is not None and square < 10**4:
        root: Written = Apply("sqrt", (number(square),))
        return root if value.real > 0 else times(number(-1), root)
    turns = _rational(value.real / arb.pi())
    if turns is not None and turns.denominator <= LARGEST_OF_PI:
        return times(number(turns), PI)
    parts = _rational(value.real * arb.pi())
    if parts is not None and parts.denominator <= LARGEST_OF_PI:
        return over(number(parts), PI)
    return None


def to_places(value: acb, last_place: Fraction) -> Written | None:
    """Return a real number rounded to a last place."""
    if size(acb(value.imag)) > size(value) * real(Fraction(1, 10**6)):
        return None
    whole = (value.real.mid() / real(last_place) + arb(1) / 2).floor().unique_fmpz()
    if whole is None or whole == 0:
        return None
    printed = Literal(abs(int(whole)) * last_place, last_place, is_decimal=last_place < 1)
    return printed if whole > 0 else times(number(-1), printed)


def _near_integer(value: acb) -> Written | None:
    whole = (value.real.mid() + arb(1) / 2).floor().unique_fmpz()
    if whole is None or not 0 < abs(int(whole)) < 1000:
        return None
    near = size(value - int(whole)) < real(Fraction(1, 50)) * abs(int(whole))
    return number(int(whole)) if near else None


def _rational(value: arb) -> Fraction | None:
    man, exp = value.mid().man_exp()
    exact = Fraction(int(man)) * Fraction(2) ** int(exp)
    near = exact.limit_denominator(LARGEST_DENOMINATOR)
    if abs(near.numerator) > 10**6 or abs(near - exact) > FINE * max(
        abs(exact), Fraction(1, 10**6)
    ):
        return None
    return near


def _root(trial: Trial, place: Place) -> acb | None:
    """Solve for the number by secants, at the entry and point where it matters first."""
    shares = {"exponent": (1, Fraction(1, 4), 4), "term": (1,)}.get(
        place.kind, (1, Fraction(2, 5), Fraction(9, 5))
    )
    starts = [place.before * share for share in shares]
    if place.kind == "exponent" and place.before:
        starts.append(1 / place.before)
    for start in starts:
        found = _root_from(trial, place, start)
        if found is not None and _fits(trial, place, found):
            return found
    return None


def _root_from(trial: Trial, place: Place, start: Fraction) -> acb | None:
    tree = trial.setting.opened(place.tree(Symbol(SOUGHT)))
    first = acb(real(start))
    step = (size(first) / 64).max(arb(1) / 64 if start == 0 else arb(0))
    best: tuple[int, int] | None = None
    moved = arb(0)
    for k in range(len(trial.points)):
        one, two = _values(trial, tree, first, k), _values(trial, tree, first + step, k)
        if one is None or two is None:
            return None
        for j, (a, b) in enumerate(zip(one, two, strict=True)):
            share = size(a - b) / (largest(trial.points[k].true) + arb(1) / 10**30)
            if share > moved * 3:
                best, moved = (k, j), share
    if best is None or not moved > arb(1) / 10**9:
        return None
    return _secant(trial, tree, best, first, first + step)


def _secant(trial: Trial, tree: Written, at: tuple[int, int], x: acb, y: acb) -> acb | None:
    k, j = at
    target = trial.points[k].true[j]

    def miss(value: acb) -> acb | None:
        found = _values(trial, tree, value, k)
        return None if found is None else (found[j] - target).mid()

    fx, fy = miss(x), miss(y)
    for _ in range(MOST_STEPS):
        if fx is None or fy is None or size(fy - fx) == 0:
            break
        x, y, fx = y, (y - fy * (y - x) / (fy - fx)).mid(), fy
        if not y.is_finite() or size(y) > arb(10) ** 9:
            return None
        if size(y - x) <= size(y) / arb(2) ** (BITS - 20):
            return y
        fy = miss(y)
    done = size(y - x) <= (size(y) + arb(1) / 1000) * real(FINE) / 100
    return y if done or (fy is not None and size(fy) == 0) else None


def _values(trial: Trial, tree: Written, value: acb, at: int) -> tuple[acb, ...] | None:
    point = trial.points[at]
    found = trial.value_opened(tree, replace(point, names={**point.names, SOUGHT: value}))
    return None if found is None else tuple(entry.mid() for entry in found)


def _fits(trial: Trial, place: Place, value: acb) -> bool:
    tree = trial.setting.opened(place.tree(Symbol(SOUGHT)))
    for k, point in enumerate(trial.points):
        found = _values(trial, tree, value, k)
        limit = Fraction(1, 40) if trial.loose else Fraction(1, 10**11)
        scale = largest(point.true) + arb(1) / 10**30
        if found is None or distance(found, point.true) > scale * real(limit):
            return False
    return True
