"""Slips in differentiating, and in putting a particular solution into the equation."""

from __future__ import annotations

from collections.abc import Callable, Iterator

from closedform.algebra.elementary import Element
from closedform.checking.errors import NotJudgedError
from closedform.checking.judging.true_solutions import solution_value
from closedform.checking.slips import names
from closedform.checking.slips.motion import Wrong, where_equal
from closedform.checking.slips.trial import Candidate, Trial
from closedform.checking.standing.stretch import Stretch
from closedform.checking.values.matrices import characteristic_coefficients
from closedform.checking.values.scope import Value

__all__ = ["derivatives", "forced_signs"]


def derivatives(trial: Trial) -> Iterator[Candidate]:
    """Yield the right derivative where the line has one differentiated wrongly."""
    yield from where_equal(trial, _wrong_derivatives)


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
    ground, right = trial.ground, trial.right_in_known_names()
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
