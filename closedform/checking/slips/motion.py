"""Slips with solutions as a whole: initial values, free and forced part, derivatives."""

from __future__ import annotations

from collections.abc import Callable, Iterator

from closedform.algebra.elementary import Element, NotElementaryError
from closedform.checking.errors import NotJudgedError
from closedform.checking.exact import Value
from closedform.checking.ground import Ground, Stretch
from closedform.checking.judge_functions import solution_value
from closedform.checking.matrices import ExactMatrix, characteristic_coefficients, column
from closedform.checking.slips import names
from closedform.checking.slips.trial import Candidate, Trial
from closedform.checking.written_back import written_back

__all__ = ["derivatives", "forced_signs", "parts"]

OUTSIDE = (NotJudgedError, NotElementaryError, ZeroDivisionError)
Wrong = tuple[str, str, Value]
"""The name of a slip, where it is, and the value that it leads to."""


def parts(trial: Trial) -> Iterator[Candidate]:
    """Yield the right solution where the line has one with a part left out or twice."""
    yield from _where_equal(trial, _wrong_parts)


def derivatives(trial: Trial) -> Iterator[Candidate]:
    """Yield the right derivative where the line has one differentiated wrongly."""
    yield from _where_equal(trial, _wrong_derivatives)


def _where_equal(
    trial: Trial, wrong: Callable[[Trial, Stretch], Iterator[Wrong]]
) -> Iterator[Candidate]:
    if trial.claim.says not in ("solution", "output", "value") or trial.true is None:
        return
    right = trial.right or written_back(trial.true)
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
        except OUTSIDE:
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


def _wrong_parts(trial: Trial, stretch: Stretch) -> Iterator[Wrong]:
    ground, subject = trial.ground, trial.claim.subject
    true = solution_value(subject, ground, stretch)
    states, field = ground.truth.states, ground.field
    initial = ground.initial
    if initial is not None:
        moved = ground.exponential.mapped(lambda entry: entry.shifted(-stretch.start))
        zero = field.zero
        shares = [
            column(field, (e if i == k else zero for i, (e,) in enumerate(initial.rows)))
            for k in range(len(states))
        ]
        given = [k for k in range(len(states)) if not initial.rows[k][0].is_zero]
        for k in given:
            share = _of(subject, moved @ shares[k], ground)
            velocity = ground.truth.jets[k][1] > 0
            name = names.VELOCITY_DROPPED if velocity else names.INITIAL_DROPPED
            if len(given) > 1:
                yield name, f"the initial value of {states[k]}", _minus(true, share)
            sign = f"the initial value of {states[k]}"
            yield names.SIGN_INITIAL, sign, _minus(_minus(true, share), share)
        free = _of(subject, moved @ initial, ground)
        if ground.truth.drive:
            forced = _minus(true, free)
            yield names.INITIALS_DROPPED, "all initial values", forced
            yield names.FORCED_MISSING, "the forced part", free
        particular = _particular(trial)
        if particular is not None:
            yield names.PARTICULAR_MISSING, "the particular solution", _minus(true, particular)
            yield names.PARTICULAR_TWICE, "the particular solution", _plus(true, particular)
            yield names.FREE_MISSING, "the free part", particular
            yield names.FITTED_ALONE, "the constants", _plus(free, particular)
        yield from _without_damping(trial, true)
    if isinstance(true, Element):
        limit = true.limit()
        if limit is not None and not limit.is_zero:
            yield names.STEADY_MISSING, "the steady state", true - limit
            yield names.STEADY_TWICE, "the steady state", true + limit
    for other in ground.truth.solution:
        if other != subject and isinstance(true, Element):
            name = names.OTHER_STATE
            if subject.startswith(other + "'"):
                name = names.NOT_DIFFERENTIATED
            yield name, f"it is that of {other}", solution_value(other, ground, stretch)


def _without_damping(trial: Trial, true: Value) -> Iterator[Wrong]:
    """Yield e^(a t) (C1 f + C2 g) with C2 = x'(0) g-wise, the derivative of the decay left out."""
    ground, subject = trial.ground, trial.claim.subject
    jets = ground.truth.jets
    if len(jets) != 2 or [order for _, order in jets] != [0, 1] or subject != jets[0][0]:
        return
    particular = _particular(trial) or ground.field.zero
    if not isinstance(true, Element) or not isinstance(particular, Element):
        return
    half = ground.matrix.trace() / 2
    start = ground.stretches[0].start
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


def _wrong_derivatives(trial: Trial, stretch: Stretch) -> Iterator[Wrong]:
    subject = trial.claim.subject
    if not subject.endswith("'"):
        return
    before = solution_value(subject[:-1], trial.ground, stretch)
    if not isinstance(before, Element):
        return
    field = before.field
    i = field.i
    yield (
        names.PRODUCT_RULE,
        "the exponential is not differentiated",
        _differentiated(before, lambda rate: i * field.im(rate)),
    )
    yield (
        names.PRODUCT_RULE,
        "only the exponential is differentiated",
        _differentiated(before, field.re),
    )
    yield (
        names.SIGN_DERIVATIVE,
        "the derivative of the exponential",
        _differentiated(before, lambda rate: -field.re(rate) + i * field.im(rate)),
    )
    yield (
        names.PRODUCT_RULE,
        "powers of t are not differentiated",
        _differentiated(before, lambda rate: rate, powers=False),
    )
    yield (
        names.CHAIN_RULE,
        "sines and cosines",
        _differentiated(before, lambda rate: field.re(rate) + i * _unit(field.im(rate))),
    )
    yield (
        names.CHAIN_RULE,
        "sines and cosines, exponentials",
        _differentiated(before, lambda rate: _unit(field.re(rate)) + i * _unit(field.im(rate))),
    )
    yield names.NOT_DIFFERENTIATED, "all of it", before


def _unit(value: Element) -> Element:
    sign = value.sign()
    if sign is None:
        raise NotJudgedError("the sign of a rate is not known")
    return value.field.number(sign)


def _differentiated(
    value: Element, factor: Callable[[Element], Element], *, powers: bool = True
) -> Element:
    """Return the sum of c t^k e^(rate t) with `factor` of a rate in the place of the rate."""
    field, total = value.field, value.field.zero
    for rate, offset, power, coefficient in value.terms():
        wave = coefficient * field.exp(rate * field.t + offset)
        total = total + wave * field.t**power * factor(rate)
        if power and powers:
            total = total + wave * field.t ** (power - 1) * power
    return total


def _minus_true(trial: Trial) -> Value:
    return -trial.true if trial.true is not None else trial.ground.field.zero


def forced_signs(trial: Trial) -> Iterator[Candidate]:
    """Yield the right particular solution where the line has that of m, c or k of opposite sign."""
    ground, right = trial.ground, trial.right
    if trial.claim.says not in ("particular solution", "steady state") or right is None:
        return
    jets, own = ground.truth.jets, trial.own()
    if [order for _, order in jets] != [0, 1] or len({name for name, _ in jets}) != 1:
        return
    if not isinstance(own, Element) or trial.claim.subject != jets[0][0] or not ground.truth.drive:
        return
    drive = ground.drive(ground.stretches[-1])
    force = drive[1]
    if len(ground.stretches) != 1 or not drive[0].is_zero or trial.equals(_minus_true(trial)):
        return
    stiffness, damping, one = characteristic_coefficients(ground.matrix)
    rate = own.derivative()
    terms = (rate.derivative() * one, rate * damping, own * stiffness)
    kinds = (
        (1, names.DAMPING_SIGN, "the damping term"),
        (0, names.INERTIA_SIGN, "the inertia term"),
        (2, names.STIFFNESS_SIGN, "the stiffness term"),
    )
    for at, name, where in kinds:
        total = sum((-t if k == at else t for k, t in enumerate(terms)), ground.field.zero)
        if (total - force).is_zero and not terms[at].is_zero:
            yield Candidate(name, where, right)
