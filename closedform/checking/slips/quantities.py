"""Slips with single numbers: units, roots and reciprocals, and how they were rounded."""

from __future__ import annotations

from collections.abc import Iterator
from fractions import Fraction

from flint import acb, ctx

from closedform.algebra.elementary import Element, NotElementaryError
from closedform.checking.digits import Judged
from closedform.checking.errors import NotJudgedError
from closedform.checking.judging.compare import compare
from closedform.checking.judging.numbers import QUANTITIES
from closedform.checking.slips import names
from closedform.checking.slips.digit_slips import digit_slip
from closedform.checking.slips.numbers import is_bare
from closedform.checking.slips.solving import to_places
from closedform.checking.slips.trial import BITS, Candidate, Trial
from closedform.checking.values.scope import Value
from closedform.checking.values.written_back import written_back
from closedform.notation.written.plain_form import plain_written
from closedform.notation.written.tree import Literal, Negation, Written, changed, walk

__all__ = ["conversions", "digits", "rounded"]

OUTSIDE = (NotJudgedError, NotElementaryError, ArithmeticError)
SINGLE = (*sorted(QUANTITIES), "value", "initial value", "identity", "definition", "phase")
FEW = 3


def rounded(trial: Trial) -> Iterator[Candidate]:
    """Yield the formula with its decimals rounded as they ought to be, where only that is wrong."""
    if not trial.loose or not trial.points or trial.true is None:
        return
    scope = trial.setting.scope_of(trial.ground)
    opened = trial.setting.opened(trial.tree)
    found = compare(opened, trial.true, scope, trial.ground, approximate=trial.claim.approximate)
    if found.how != "rounding" or found.match is None:
        return
    wrong = found.match.wrong
    spans = {(j.literal.start, j.literal.end, j.literal): j for j in wrong}
    name = names.EARLY_ROUNDING
    if len(wrong) == 1:
        name = _single(wrong[0])

    def change(node: Written) -> Written | None:
        if not isinstance(node, Literal):
            return None
        own = spans.get((node.start, node.end, node))
        return None if own is None else to_places(acb(own.ball), node.last_place)

    texts = [f"{plain_written(j.literal)} ought to be {j.correct}" for j in wrong[:FEW]]
    with ctx.workprec(BITS):
        yield Candidate(name, ", ".join(texts), changed(trial.tree, change), judged_only=True)


def _single(wrong: Judged) -> str:
    """Return the name of the slip in one number that is not rounded right."""
    if wrong.verdict != "off":
        return names.TRUNCATED if wrong.verdict == "truncated" else names.ROUNDING
    with ctx.workprec(BITS):
        right = to_places(acb(wrong.ball), wrong.literal.last_place)
    if right is None or _is_last_digit(wrong.literal, right):
        return names.EARLY_ROUNDING
    return digit_slip(wrong.literal, right) or names.EARLY_ROUNDING


def _is_last_digit(printed: Literal, right: Written) -> bool:
    """Whether two numbers differ by little in their last digit, as rounding on the way makes it."""
    inside = right.operand if isinstance(right, Negation) else right
    if not isinstance(inside, Literal) or inside.last_place != printed.last_place:
        return False
    return abs(inside.value - printed.value) <= MOST_OFF * printed.last_place


MOST_OFF = 3
"""So many units of the last digit are put down to numbers that were rounded on the way."""


def digits(trial: Trial) -> Iterator[Candidate]:
    """Yield the right number where the printed one has digits exchanged or the point moved."""
    printed = _printed(trial.tree)
    if printed is None or not trial.points or len(trial.points[0].true) != 1:
        return
    true = trial.points[0].true[0]
    with ctx.workprec(BITS):
        right = to_places(true, printed.last_place)
        shifted = [
            to_places(true, printed.last_place * Fraction(10) ** k) for k in (-3, -2, -1, 1, 2, 3)
        ]
    for new in (right, *shifted):
        if new is None or isinstance(new, Negation) != isinstance(trial.tree, Negation):
            continue
        inside = new.operand if isinstance(new, Negation) else new
        name = digit_slip(printed, inside)
        if name and (new is right or name == names.DECIMAL_POINT):
            where = f"{plain_written(printed)} ought to be {plain_written(inside)}"
            yield Candidate(name, where, new, judged_only=True)


def _printed(tree: Written) -> Literal | None:
    """Return the number that is the whole formula but for its sign."""
    inside = tree.operand if isinstance(tree, Negation) else tree
    return inside if isinstance(inside, Literal) else None


def conversions(trial: Trial) -> Iterator[Candidate]:
    """Yield the right number where the line has its square, reciprocal, or another unit's."""
    true = trial.true
    if trial.claim.says not in SINGLE or not isinstance(true, Element) or not trial.points:
        return
    if not true.is_constant or true.is_zero:
        return
    found = _wrong(trial, true)
    while True:
        try:
            name, value = next(found)
        except StopIteration:
            return
        except OUTSIDE:
            return
        if trial.equals(value):
            yield Candidate(name, "all of it", right_number(trial, true))


def right_number(trial: Trial, true: Value) -> Written:
    """Return the true number, rounded to the places of the printed one if that is a decimal."""
    printed = [n for n in walk(trial.tree) if isinstance(n, Literal) and n.is_decimal]
    if printed and is_bare(trial.tree) and trial.points:
        value = trial.points[0].true[0]
        with ctx.workprec(BITS):
            places = to_places(value, printed[0].last_place)
        if places is not None and trial.near(places):
            return places
    return written_back(true)


def _wrong(trial: Trial, true: Element) -> Iterator[tuple[str, Element]]:
    """Yield names with the values that slips make of the true one."""
    field, says = true.field, trial.claim.says
    turn, two, log = 2 * field.pi, field.number(2), field.ln(2)
    if says in ("value", "initial value") and trial.claim.at is not None:
        yield names.SIGN_OVERALL, -true
        return
    frequency = says in ("natural frequency", "damped frequency", "identity", "definition")
    if frequency or says == "period":
        yield names.HERTZ if frequency else names.TWO_PI, true / turn
        yield names.RAD_FOR_HERTZ if frequency else names.TWO_PI, true * turn
        yield names.INVERTED, field.one / true
        yield names.INVERTED, turn / true
    yield names.NO_ROOT, true * true
    yield names.INVERTED, field.one / true
    if says == "damping ratio":
        yield names.DAMPING_HALF, true / two
        yield names.DAMPING_DOUBLE, true * two
    if says in ("time constant", "half-life"):
        yield names.HALF_LIFE if says == "time constant" else names.TIME_CONSTANT, true * log
        yield names.HALF_LIFE if says == "time constant" else names.TIME_CONSTANT, true / log
        yield names.TIME_CONSTANT, log / true
    yield from _of_modes(trial, true)
    if says == "phase":
        yield names.RADIAN_AS_DEGREE, true * field.pi / 180
        yield names.DEGREE_AS_RADIAN, true * 180 / field.pi
    yield names.SIGN_OVERALL, -true
    yield names.FACTOR_TWO, true * two
    yield names.FACTOR_TWO, true / two


def _of_modes(trial: Trial, true: Element) -> Iterator[tuple[str, Element]]:
    """Yield other quantities of the modes: the other frequency, the decay rate."""
    field, says = true.field, trial.claim.says
    own = (trial.ground, trial.setting.ground, trial.setting.ground_for(trial.tree))
    ground = next((ground for ground in own if ground.field is field), None)
    for value in ground.eigenvalues if ground is not None else ():
        real, imaginary = field.re(value), field.im(value)
        if imaginary.is_zero:
            continue
        natural = field.sqrt(real * real + imaginary * imaginary)
        if says == "damped frequency":
            yield names.UNDAMPED_FOR_DAMPED, natural
            yield names.SIGN_TERM, field.sqrt(natural * natural + real * real)
        if says == "natural frequency":
            yield names.DAMPED_FOR_UNDAMPED, imaginary
        if says == "damping ratio":
            yield names.NOT_DIVIDED, -real
        return
