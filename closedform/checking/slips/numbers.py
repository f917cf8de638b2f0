"""One number that is wrong: which one, and what it ought to be."""

from __future__ import annotations

from collections.abc import Iterator
from fractions import Fraction

from flint import ctx

from closedform.checking.slips import names
from closedform.checking.slips.digit_slips import digit_slip
from closedform.checking.slips.making import times
from closedform.checking.slips.rates import rate_slip
from closedform.checking.slips.solving import Place, Solved, solved
from closedform.checking.slips.spots import Spot
from closedform.checking.slips.trial import BITS, Candidate, Trial
from closedform.checking.slips.wording import part_text, placed, wave_above
from closedform.notation.written.plain_form import plain_written
from closedform.notation.written.tree import (
    EULER,
    Apply,
    Array,
    Literal,
    Negation,
    Power,
    Product,
    Quotient,
    Sum,
    Symbol,
    Written,
    changed,
    walk,
)

__all__ = ["is_bare", "one_number"]

WAVES = ("sin", "cos", "sinh", "cosh", "exp", "tan")


def one_number(trial: Trial) -> Iterator[Candidate]:
    """Yield the formula with the right number at one place, the plainest first."""
    if not trial.points or (is_bare(trial.tree) and trial.entry is None):
        return
    found = [one for place in _places(trial) for one in solved(trial, place)]
    with ctx.workprec(BITS):
        found.sort(key=_plainness)
    for one in found:
        name, where = _told(trial, one)
        yield Candidate(name, where, one.place.tree(one.written))


def is_bare(tree: Written) -> bool:
    """Whether a formula is one number by itself, perhaps a fraction, or a power of ten."""
    return all(isinstance(n, Literal | Negation | Quotient) for n in walk(tree))


def _plainness(one: Solved) -> tuple[int, int, Fraction]:
    """Integers for integers first, then fractions, then roots; smaller ones first."""
    kind = {"number": 0, "angle": 1, "exponent": 1, "term": 2}[one.place.kind]
    inside = one.written.operand if isinstance(one.written, Negation) else one.written
    negative = inside is not one.written
    if isinstance(inside, Literal):
        far = abs(inside.value - one.place.before)
        return (negative, kind, far)
    return (2 + negative, kind, Fraction(0))


def _places(trial: Trial) -> Iterator[Place]:
    yield from _rates(trial)
    for spot in trial.spots():
        yield from _at(trial, spot)


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


def _rates(trial: Trial) -> Iterator[Place]:
    """Yield the exponents and angles that go with the time, equal ones together."""
    t = Symbol(trial.ground.truth.time)
    seen: set[tuple[str, Written]] = set()
    for spot in trial.spots():
        node = spot.node
        if isinstance(node, Power) and node.base == EULER:
            kind, argument = "exponent", node.exponent
        elif isinstance(node, Apply) and node.function in WAVES:
            kind, argument = ("exponent" if node.function == "exp" else "angle"), node.arguments[0]
        else:
            continue
        part = _timed_part(argument, t)
        if part is None or (kind, argument) in seen:
            continue
        seen.add((kind, argument))
        yield _rate_place(trial, kind, argument, part, t)


def _timed_part(argument: Written, t: Symbol) -> Written | None:
    """Return the one term of an argument that has the time in it, if it is a number times t."""
    terms = argument.terms if isinstance(argument, Sum) else (argument,)
    timed = [term for term in terms if any(n == t for n in walk(term))]
    return timed[0] if len(timed) == 1 and coefficient(timed[0], t) is not None else None


def coefficient(term: Written, t: Symbol) -> Fraction | None:
    """Return the rational number that stands before the time in r t, None for anything else."""
    match term:
        case Negation(operand):
            inside = coefficient(operand, t)
            return None if inside is None else -inside
        case Literal(value):
            return value
        case Quotient(above, below):
            one, two = coefficient(above, t), coefficient(below, t)
            return None if one is None or not two else one / two
        case Product(factors):
            total = Fraction(1)
            for factor in factors:
                one = coefficient(factor, t)
                if one is None:
                    return None
                total *= one
            return total
    return Fraction(1) if term == t else None


def _rate_place(trial: Trial, kind: str, argument: Written, part: Written, t: Symbol) -> Place:
    before = coefficient(part, t)
    assert before is not None  # noqa: S101  see _timed_part

    def tree(new: Written) -> Written:
        renewed = changed(argument, lambda n: times(new, t) if n == part else None)

        def change(node: Written) -> Written | None:
            if kind == "exponent" and node == Power(EULER, argument):
                return Power(EULER, renewed)
            if isinstance(node, Apply) and node.arguments == (argument,) and node.function in WAVES:
                return Apply(node.function, (renewed,))
            return None

        return changed(trial.tree, change)

    literals = [n for n in walk(part) if isinstance(n, Literal)]
    text = plain_written(argument)
    where = f"the {kind} {text}" + (f" of entry {trial.entry}" if trial.entry else "")
    return Place(kind, where, before, tree, literals[0] if len(literals) == 1 else None)


def _told(trial: Trial, one: Solved) -> tuple[str, str]:
    place = one.place
    right = plain_written(one.written)
    if place.kind in ("exponent", "angle"):
        return rate_slip(trial, place.kind, place.before, one.value), f"{place.where}: {right} t"
    if place.kind == "term":
        return _general_name(trial, place), f"{place.where}: a factor {right} is missing"
    assert place.literal is not None  # noqa: S101  a number stands there
    printed = plain_written(place.literal)
    name = digit_slip(place.literal, one.written) or _general_name(trial, place)
    where = f"{place.where}: {printed} ought to be {right}"
    return name, where.removeprefix("a number: ").removeprefix(": ")


def _general_name(trial: Trial, place: Place) -> str:
    claim = trial.claim
    if place.in_front and claim.says in FUNCTION_KINDS:
        return names.FACTOR
    if claim.says == "characteristic polynomial":
        return names.COEFFICIENT
    if claim.says in ("particular solution", "steady state"):
        return names.PARTICULAR_COEFFICIENT
    if trial.entry is not None and is_bare(trial.tree):
        return names.ENTRY
    return names.ONE_COEFFICIENT if claim.says in FUNCTION_KINDS else names.ONE_NUMBER


FUNCTION_KINDS = ("solution", "output", "exp A", "exp J", "transform", "homogeneous solution")
