"""Naming a wrong rate: what the exponent or the angular frequency was taken from instead."""

from __future__ import annotations

from collections.abc import Iterator
from fractions import Fraction

from flint import acb, arb, ctx

from closedform.checking.slips import names
from closedform.checking.slips.measuring import real, size
from closedform.checking.slips.trial import BITS, Trial

__all__ = ["rate_slip"]

NEAR = Fraction(1, 400)
EQUAL = Fraction(1, 10**9)
SIMPLE = (2, 3, 4)


def rate_slip(trial: Trial, kind: str, before: Fraction, right: acb) -> str:
    """Return the name of the slip with which a rate was written for the right one."""
    with ctx.workprec(BITS):
        wrong, true = real(before), arb(right.real.mid())
        near = real(NEAR if trial.loose else EQUAL)
        for name, ratio in _ratios(kind, wrong, true):
            if abs(ratio - 1) < near:
                return name
        modes = list(_modes(trial))
        if kind == "angle":
            for natural, damped, _ in modes:
                if _same(wrong, natural, near) and _same(true, damped, near):
                    return names.UNDAMPED_FOR_DAMPED
                if _same(wrong, damped, near) and _same(true, natural, near):
                    return names.DAMPED_FOR_UNDAMPED
            others = [damped for _, damped, _ in modes]
        else:
            others = [abs(growth) for _, _, growth in modes]
        if any(_same(abs(wrong), other, near) for other in others):
            return names.OTHER_RATE
        simple = (wrong / true, true / wrong)
        if kind == "exponent" and not any(
            abs(ratio - k) < near for ratio in simple for k in SIMPLE
        ):
            return names.ONE_NUMBER
    return names.EXPONENT_FACTOR if kind == "exponent" else names.FREQUENCY_FACTOR


def _ratios(kind: str, wrong: arb, true: arb) -> Iterator[tuple[str, arb]]:
    """Yield names with what is 1 if they are right."""
    sign = names.SIGN_EXPONENT if kind == "exponent" else names.SIGN_TERM
    yield sign, -wrong / true
    yield names.TIME_CONSTANT_INVERTED, abs(wrong * true)
    if kind == "exponent":
        yield names.HALF_LIFE, abs(wrong / true) * arb(2).log()
        yield names.HALF_LIFE, abs(wrong / true) / arb(2).log()
        return
    turn = 2 * arb.pi()
    yield names.HERTZ, abs(wrong / true) * turn
    yield names.TWO_PI, abs(wrong / true) / turn
    yield names.NO_ROOT, abs(wrong) / (true * true)
    yield names.ROOT_TOO_MANY, wrong * wrong / abs(true)


def _modes(trial: Trial) -> Iterator[tuple[arb, arb, arb]]:
    """Yield modulus, imaginary and real part of the eigenvalues, as balls."""
    base = trial.ground.sampled()
    for value in trial.ground.eigenvalues:
        ball = value.enclosure(acb(0), base)
        yield abs(ball), abs(ball.imag), ball.real


def _same(one: arb, other: arb, near: arb) -> bool:
    return bool(size(acb(one - other)) <= near * size(acb(other)))
