"""One number that is wrong: which one, and what it ought to be."""

from __future__ import annotations

from collections.abc import Iterator
from fractions import Fraction
from itertools import islice

from flint import acb, ctx

from closedform.checking.slips import names
from closedform.checking.slips.digit_slips import digit_slip
from closedform.checking.slips.making import times
from closedform.checking.slips.measuring import real
from closedform.checking.slips.rate_places import rate_places
from closedform.checking.slips.rates import rate_slip
from closedform.checking.slips.solving import Place, Solved, simplest, solved
from closedform.checking.slips.spots import Spot
from closedform.checking.slips.trial import BITS, Candidate, Trial
from closedform.checking.slips.wording import part_text, placed, wave_above
from closedform.notation.written.plain_form import plain_written
from closedform.notation.written.tree import (
    Array,
    Literal,
    Negation,
    Product,
    Quotient,
    Sum,
    Written,
    changed,
    walk,
)

__all__ = ["is_bare", "one_number", "same_number"]

MOST_PLACES = 40


def one_number(trial: Trial) -> Iterator[Candidate]:
    """Yield the formula with the right number at one place, the plainest first."""
    if not trial.points:
        return
    if is_bare(trial.tree) and trial.entry is None:
        yield from _bare(trial)
        return
    found = [one for place in islice(_places(trial), MOST_PLACES) for one in solved(trial, place)]
    with ctx.workprec(BITS):
        found.sort(key=_plainness)
    for one in found:
        name, where = _told(trial, one)
        yield Candidate(name, where, one.place.tree(one.written))


def same_number(trial: Trial) -> Iterator[Candidate]:
    """Yield the formula with a number replaced wherever it stands."""
    literals = [n for n in walk(trial.tree) if isinstance(n, Literal)]
    for literal in dict.fromkeys(literals) if trial.points else ():
        if literals.count(literal) > 1:
            for one in solved(trial, _everywhere(trial, literal)):
                name, where = _told(trial, one)
                yield Candidate(name, where, one.place.tree(one.written))


def _bare(trial: Trial) -> Iterator[Candidate]:
    """Yield the right number where the line is a whole number or a fraction, and wrong."""
    with ctx.workprec(BITS):
        right = None if trial.loose else simplest(trial.points[0].true[0])
    if right is not None and is_bare(right) and len(trial.points[0].true) == 1:
        where = f"{plain_written(trial.tree)} ought to be {plain_written(right)}"
        yield Candidate(names.ONE_NUMBER, where, right)


def is_bare(tree: Written) -> bool:
    """Whether a formula is one number by itself, perhaps a fraction, or a power of ten."""
    return all(isinstance(n, Literal | Negation | Quotient) for n in walk(tree))


def _plainness(one: Solved) -> tuple[int, int, Fraction]:
    """Integers first, then fractions and roots; the sign as before; nearer numbers first."""
    kind = {"angle": 0, "exponent": 0, "number": 1, "term": 2}[one.place.kind]
    inside = one.written.operand if isinstance(one.written, Negation) else one.written
    turned = (inside is not one.written) != (one.place.before < 0)
    if isinstance(inside, Literal):
        return (turned, kind, abs(inside.value - abs(one.place.before)))
    return (2 + turned, kind, Fraction(0))


def _places(trial: Trial) -> Iterator[Place]:
    yield from rate_places(trial)
    for spot in trial.spots():
        yield from _at(trial, spot)


def _everywhere(trial: Trial, literal: Literal) -> Place:
    def tree(new: Written) -> Written:
        return changed(trial.tree, lambda n: new if n == literal else None)

    return Place("everywhere", "everywhere", literal.value, tree, literal)


def _at(trial: Trial, spot: Spot) -> Iterator[Place]:
    node = spot.node

    def tree(new: Written) -> Written:
        return trial.changed(spot, new)

    if isinstance(node, Literal):
        what = "" if is_bare(trial.tree) and trial.entry else "a number"
        in_front = all(isinstance(n, Product | Quotient | Negation) for n in spot.above)
        yield Place("number", placed(trial, spot, what), node.value, tree, node, in_front)
        return
    whole = spot.path == trial.start
    is_term = whole or isinstance(spot.outer, Sum | Negation)
    if not is_term or isinstance(node, Negation | Array) or wave_above(spot) or _leads(node):
        return
    if whole and trial.entry is None:
        return

    def scaled(new: Written) -> Written:
        return trial.changed(spot, times(new, node))

    yield Place("term", placed(trial, spot, part_text(node)), Fraction(1), scaled)


def _leads(node: Written) -> bool:
    """Whether a number stands in front already, or is all of it."""
    if isinstance(node, Product):
        return any(isinstance(f, Literal) for f in node.factors)
    return isinstance(node, Quotient) and isinstance(node.numerator, Literal)


def _told(trial: Trial, one: Solved) -> tuple[str, str]:
    place = one.place
    right = plain_written(one.written)
    if place.kind in ("exponent", "angle"):
        return rate_slip(trial, place.kind, place.before, one.value), f"{place.where}: {right} t"
    if place.kind == "term":
        return _general_name(trial, place), f"{place.where}: a factor {right} is missing"
    assert place.literal is not None  # noqa: S101  a number stands there
    printed = plain_written(place.literal)
    name = digit_slip(place.literal, one.written) or _rate_lost(trial, one)
    name = name or _general_name(trial, place)
    where = f"{place.where}: {printed} ought to be {right}"
    return name, where.removeprefix("a number: ").removeprefix(": ")


def _rate_lost(trial: Trial, one: Solved) -> str:
    """Return the name of the slip if a number was to be divided by a rate, as an integral asks."""
    if trial.claim.says not in ("solution", "output") or not trial.ground.truth.drive:
        return ""
    with ctx.workprec(BITS):
        base = trial.setting.ground.sampled()
        rates = [abs(v.enclosure(acb(0), base)) for v in trial.ground.eigenvalues]
        ratio = abs(real(one.place.before) / one.value)
        near = [r for r in rates if abs(r - ratio) < ratio / 10**9 and not r.contains(1)]
    return names.SUBSTITUTION if near else ""


def _general_name(trial: Trial, place: Place) -> str:
    claim = trial.claim
    summed = any(isinstance(n, Sum | Array) for n in walk(trial.tree))
    if place.in_front and summed and claim.says in FUNCTION_KINDS:
        return names.FACTOR
    if claim.says == "characteristic polynomial":
        return names.COEFFICIENT
    if claim.says in ("particular solution", "steady state"):
        return names.PARTICULAR_COEFFICIENT
    if trial.entry is not None and is_bare(trial.tree):
        return names.ENTRY
    return names.ONE_COEFFICIENT if claim.says in FUNCTION_KINDS else names.ONE_NUMBER


FUNCTION_KINDS = ("solution", "output", "exp A", "exp J", "transform", "homogeneous solution")
