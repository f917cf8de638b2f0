"""Signals as formulas in the time, for those that nobody typed."""

from __future__ import annotations

from fractions import Fraction
from typing import TypeVar

from closedform.algebra.waves import Wave
from closedform.model.driven.numerals import Numerals
from closedform.model.driven.signal import Burst, Signal
from closedform.notation.expression import (
    ONE,
    ZERO,
    Call,
    Expression,
    Name,
    Negation,
    Sum,
    power_of,
    product,
)
from closedform.notation.terms import negated, sum_of

__all__ = ["signal_formula", "since"]

T = TypeVar("T")


def since(instant: T, numerals: Numerals[T], time: str) -> Expression:
    """Return the time that has passed since an instant: t - a."""
    if instant == numerals.arithmetic.number(Fraction(0)):
        return Name(time)
    formula = numerals.formula(instant)
    parts = formula.terms if isinstance(formula, Sum) else (formula,)
    return Sum((Name(time), *map(negated, parts)))


def signal_formula(signal: Signal, numerals: Numerals[T], time: str) -> Expression:
    """Return a signal that does not repeat as a sum of functions, unit steps and impulses."""
    terms = [
        _times(_window(burst, numerals, time), _wave(wave, numerals, time))
        for burst in signal.bursts
        for wave in burst.waves
    ]
    for impulse in signal.impulses:
        strike = Call("delta", since(impulse.at, numerals, time))
        terms.append(_times(numerals.formula(impulse.amount), strike))
    return sum_of(terms) if terms else ZERO


def _window(burst: Burst, numerals: Numerals[T], time: str) -> Expression:
    """What is 1 while a burst is on and 0 else."""
    ends = [
        Call("step", since(instant, numerals, time))
        for instant in (burst.start, burst.end)
        if instant is not None
    ]
    if burst.start is not None and burst.end is not None:
        return Sum((ends[0], Negation(ends[1])))
    if burst.end is not None:
        return Sum((ONE, Negation(ends[0])))
    return ends[0] if ends else ONE


def _wave(wave: Wave, numerals: Numerals[T], time: str) -> Expression:
    later = since(wave.origin, numerals, time)
    factors = [numerals.formula(wave.amount), power_of(later, wave.power)]
    zero = numerals.arithmetic.number(Fraction(0))
    if wave.rate != zero:
        factors.append(Call("exp", _times(numerals.formula(wave.rate), later)))
    if wave.kernel != "one":
        factors.append(Call(wave.kernel, _times(numerals.formula(wave.frequency), later)))
    first, *others = factors
    for other in others:
        first = _times(first, other)
    return first


def _times(one: Expression, other: Expression) -> Expression:
    """The product of two factors, with a minus sign in front of it."""
    if isinstance(one, Negation):
        return negated(_times(one.operand, other))
    if isinstance(other, Negation):
        return negated(_times(one, other.operand))
    return product([one, other])
