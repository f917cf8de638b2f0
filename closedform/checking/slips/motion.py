"""Slips with solutions as a whole: initial values, free and forced part."""

from __future__ import annotations

from collections.abc import Callable, Iterator
from itertools import combinations

from closedform.algebra.elementary import Element
from closedform.checking.errors import UNDECIDED, NotJudgedError
from closedform.checking.judging.true_solutions import solution_value
from closedform.checking.slips import names
from closedform.checking.slips.trial import Candidate, Trial
from closedform.checking.standing.ground import Ground
from closedform.checking.standing.stretch import Stretch
from closedform.checking.values.matrices import ExactMatrix, column
from closedform.checking.values.scope import Value

__all__ = ["Wrong", "parts", "where_equal"]

Wrong = tuple[str, str, Value]
"""The name of a slip, where it is, and the value that it leads to."""


def parts(trial: Trial) -> Iterator[Candidate]:
    """Yield the right solution where the line has one with a part left out or twice."""
    for wrong in (_initial_parts, _forced_parts, _without_damping, _steady_parts, _other_states):
        yield from where_equal(trial, wrong)


def where_equal(
    trial: Trial, wrong: Callable[[Trial, Stretch], Iterator[Wrong]]
) -> Iterator[Candidate]:
    """Yield the right form if the member has a value to which one of some slips leads."""
    if trial.claim.says not in ("solution", "output", "value") or trial.true is None:
        return
    right = trial.right_in_known_names()
    if right is None:
        return
    stretches = trial.ground.stretches
    stretch = stretches[0]
    if len(stretches) != 1:
        return
    found = wrong(trial, stretch)
    while True:
        try:
            name, where, value = next(found)
        except StopIteration:
            return
        except UNDECIDED:
            return
        at = _at(trial, value)
        if at is not None and trial.equals(at):
            yield Candidate(name, where, right)


def _at(trial: Trial, value: Value) -> Value | None:
    """Return a wrong solution at the instant of the line, if it claims a value."""
    if trial.claim.says != "value":
        return value
    if trial.claim.at is None:
        return None
    instant = trial.setting.value(trial.claim.at, trial.ground)
    if isinstance(instant, ExactMatrix):
        return None
    if isinstance(value, ExactMatrix):
        return value.mapped(lambda entry: entry.at(instant))
    return value.at(instant)


def _initial_parts(trial: Trial, stretch: Stretch) -> Iterator[Wrong]:
    ground, subject = trial.ground, trial.claim.subject
    initial = ground.initial
    if initial is None:
        return
    true, states = solution_value(subject, ground, stretch), ground.truth.states
    moved, zero = _moved(ground, stretch), ground.field.zero
    given = [k for k in range(len(states)) if not initial.rows[k][0].is_zero]
    for k in given:
        share = column(ground.field, (e if i == k else zero for i, (e,) in enumerate(initial.rows)))
        part = _of(subject, moved @ share, ground)
        velocity = ground.truth.jets[k][1] > 0
        name = names.VELOCITY_DROPPED if velocity else names.INITIAL_DROPPED
        where = f"the initial value of {states[k]}"
        if len(given) > 1:
            yield name, where, _minus(true, part)
        yield names.SIGN_INITIAL, where, _minus(_minus(true, part), part)
    for i, j in combinations(range(len(states)), 2):
        entries = list(initial.entries)
        entries[i], entries[j] = entries[j], entries[i]
        other = column(ground.field, entries) - initial
        where = f"those of {states[i]} and {states[j]}"
        if not other.is_zero:
            exchanged = _plus(true, _of(subject, moved @ other, ground))
            yield names.INITIALS_EXCHANGED, where, exchanged


def _moved(ground: Ground, stretch: Stretch) -> ExactMatrix:
    """Return e^(A (t - t0))."""
    return ground.exponential.mapped(lambda entry: entry.shifted(-stretch.start))


def _forced_parts(trial: Trial, stretch: Stretch) -> Iterator[Wrong]:
    ground, subject = trial.ground, trial.claim.subject
    initial = ground.initial
    if initial is None or not ground.truth.drive:
        return
    true = solution_value(subject, ground, stretch)
    free = _of(subject, _moved(ground, stretch) @ initial, ground)
    yield names.INITIALS_DROPPED, "all initial values", _minus(true, free)
    yield names.FORCED_MISSING, "the forced part", free
    particular = _particular(trial)
    if particular is None:
        return
    rest = _minus(true, particular)
    yield names.PARTICULAR_MISSING, "the particular solution", rest
    yield names.PARTICULAR_TWICE, "the particular solution", _plus(true, particular)
    yield names.FREE_MISSING, "the free part", particular
    yield names.FITTED_ALONE, "the constants", _plus(free, particular)
    yield names.SIGN_FREE, "the free part", _minus(particular, rest)
    yield names.SIGN_PARTICULAR, "the particular solution", _minus(rest, particular)


def _steady_parts(trial: Trial, stretch: Stretch) -> Iterator[Wrong]:
    true = solution_value(trial.claim.subject, trial.ground, stretch)
    limit = true.limit() if isinstance(true, Element) else None
    if isinstance(true, Element) and limit is not None and not limit.is_zero:
        yield names.STEADY_MISSING, "the steady state", true - limit
        yield names.STEADY_TWICE, "the steady state", true + limit
        yield names.SIGN_FREE, "all but the steady state", limit + limit - true


def _other_states(trial: Trial, stretch: Stretch) -> Iterator[Wrong]:
    ground, subject = trial.ground, trial.claim.subject
    for other in ground.truth.solution:
        if other != subject:
            name = names.OTHER_STATE
            if subject.startswith(other + "'"):
                name = names.NOT_DIFFERENTIATED
            yield name, f"it is that of {other}", solution_value(other, ground, stretch)


def _without_damping(trial: Trial, stretch: Stretch) -> Iterator[Wrong]:
    """Yield e^(a t) (C1 f + C2 g) with C2 = x'(0) g-wise, the derivative of the decay left out."""
    ground, subject = trial.ground, trial.claim.subject
    jets = ground.truth.jets
    if len(jets) != 2 or [order for _, order in jets] != [0, 1] or subject != jets[0][0]:
        return
    true = solution_value(subject, ground, stretch)
    particular = _particular(trial) or ground.field.zero
    if not isinstance(true, Element) or not isinstance(particular, Element):
        return
    half = ground.matrix.trace() / 2
    start = stretch.start
    rest = (true - particular).at(start)
    if not half.is_zero:
        sine = ground.exponential.rows[0][1].shifted(-start)
        yield names.C2_DAMPING, "the second constant", true + sine * half * rest


def _particular(trial: Trial) -> Value | None:
    """Return the particular solution: the engine's, the author's, or the steady state."""
    truth, ground, subject = trial.ground.truth, trial.ground, trial.claim.subject
    if not truth.drive:
        return None
    own = trial.setting.author.last("particular solution", subject)
    if own is not None:
        return trial.setting.value(own.value, ground)
    pieces = truth.particular.get(subject, ())
    if len(pieces) == 1:
        return ground.number(pieces[0].formula)
    steady = truth.steady.get(subject)
    if steady is not None:
        return ground.number(steady)
    return _not_free(solution_value(subject, ground, ground.stretches[0]), ground)


def _not_free(value: Value, ground: Ground) -> Value | None:
    """Return the terms whose rate is no eigenvalue."""
    if not isinstance(value, Element):
        return None
    field, total = value.field, value.field.zero
    for rate, offset, power, coefficient in value.terms():
        if rate not in ground.eigenvalues:
            total = total + coefficient * field.t**power * field.exp(rate * field.t + offset)
    return total


def _of(subject: str, whole: ExactMatrix, ground: Ground) -> Value:
    """Return what a column of states means for a subject: a row, or a derivative of one."""
    states = ground.truth.states
    if subject in states:
        return whole.rows[states.index(subject)][0]
    base = subject.rstrip("'")
    if base in states:
        value = whole.rows[states.index(base)][0]
        for _ in range(len(subject) - len(base)):
            value = value.derivative()
        return value
    if subject == "vector" or ground.facts.has_vector(base):
        return whole
    raise NotJudgedError("it is no state")


def _minus(one: Value, other: Value) -> Value:
    return _plus(one, -other)


def _plus(one: Value, other: Value) -> Value:
    match one, other:
        case Element(), Element():
            return one + other
        case ExactMatrix(), ExactMatrix():
            return one + other
    raise NotJudgedError("a number and a column do not go together")
