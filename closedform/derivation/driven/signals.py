"""Inputs as functions of the time in print: formulas, pieces with their intervals, impulses."""

from __future__ import annotations

from collections.abc import Sequence
from itertools import pairwise

from closedform.algebra.field import Scalar
from closedform.algebra.waves import Wave
from closedform.derivation.driven.writing import Writing, interval
from closedform.derivation.step import Side, Symbol
from closedform.model.driven.model import Input
from closedform.model.driven.signal import Burst, Signal
from closedform.notation.expression import (
    ONE,
    ZERO,
    Call,
    Expression,
    is_expression,
    operations,
    power_of,
)
from closedform.notation.terms import negated, opened, sum_of
from closedform.response.driven.composition import shifted

__all__ = ["impulses_of", "input_formula", "signal_side", "waves_formula", "waves_in"]

OTHERWISE = Symbol("interval", ("otherwise",))
Piece = tuple[Scalar | None, Scalar | None, Expression]


def waves_formula(writing: Writing, waves: Sequence[Wave]) -> Expression:
    """Return a sum of waves as a formula in the time."""
    terms = [_wave(writing, wave) for wave in waves if wave.amount]
    return opened(sum_of(terms)) if terms else ZERO


def _wave(writing: Writing, wave: Wave) -> Expression:
    t = writing.t
    factors: list[Expression] = [power_of(t, wave.power)] if wave.power else []
    if wave.rate:
        factors.append(Call("exp", writing.term(wave.rate, [t])))
    if wave.kernel != "one":
        factors.append(Call(wave.kernel, writing.term(wave.frequency, [t])))
    formula = writing.term(wave.amount, factors or [ONE])
    return shifted(formula, writing.model.time, writing.element(wave.origin))


def signal_side(writing: Writing, signal: Signal) -> Side:
    """Return what a signal is: a formula, pieces with the intervals they hold in, impulses."""
    parts: list[Side] = []
    pieces = _pieces(writing, signal)
    if len(pieces) == 1 and pieces[0][:2] == (None, None):
        parts.append(pieces[0][2])
    elif pieces:
        parts.append(_cases(writing, pieces))
    blows = impulses_of(writing, signal)
    if blows != ZERO:
        parts.append(blows)
    if not parts:
        return ZERO
    return parts[0] if len(parts) == 1 else Symbol("sum", parts=tuple(parts))


def input_formula(writing: Writing, given: Input) -> Expression:
    """Return how an input is written: a function in an equation by its waves, if shorter."""
    if given.name or given.signal.repeat is not None:
        return given.formula
    side = signal_side(writing, given.signal)
    if is_expression(side) and operations(side) <= operations(given.formula):
        return side
    return given.formula


def waves_in(writing: Writing, column: int, place: int) -> list[Wave]:
    """Return the waves of an input that are on in the interval at a place."""
    model = writing.model
    order = {at: k for k, at in enumerate((model.start, *model.timeline))}
    found: list[Wave] = []
    for burst in model.inputs[column].signal.bursts:
        first = 0 if burst.start is None else order[burst.start]
        last = len(order) if burst.end is None else order[burst.end]
        if first <= place < last:
            found += burst.waves
    return found


def impulses_of(writing: Writing, signal: Signal) -> Expression:
    """Return the sum of amount · delta(t - at)."""
    terms: list[Expression] = []
    for impulse in signal.impulses:
        at = sum_of([writing.t, negated(writing.element(impulse.at))])
        terms.append(writing.term(impulse.amount, [Call("delta", at)]))
    return opened(sum_of(terms)) if terms else ZERO


def _cases(writing: Writing, pieces: Sequence[Piece]) -> Symbol:
    parts: list[Side] = []
    for start, end, formula in pieces:
        bounds = (None if at is None else writing.element(at) for at in (start, end))
        parts += [formula, interval(writing.t, *bounds)]
    if pieces[0][0] is not None or pieces[-1][1] is not None:
        parts += [ZERO, OTHERWISE]
    return Symbol("cases", parts=tuple(parts))


def _pieces(writing: Writing, signal: Signal) -> list[Piece]:
    """The formulas of a signal between the instants at which it is switched, none for zero."""
    if signal.repeat is not None:
        return [(b.start, b.end, waves_formula(writing, b.waves)) for b in signal.bursts]
    model = writing.model
    instants = (model.start, *model.timeline)
    places = {at: k for k, at in enumerate(instants)}

    def first(burst: Burst) -> int:
        return -1 if burst.start is None else places[burst.start]

    def last(burst: Burst) -> int:
        return len(instants) if burst.end is None else places[burst.end]

    marks = sorted({mark for burst in signal.bursts for mark in (first(burst), last(burst))})
    found: list[Piece] = []
    for low, high in pairwise(marks):
        waves = [w for b in signal.bursts if first(b) <= low and high <= last(b) for w in b.waves]
        formula = waves_formula(writing, waves)
        if formula != ZERO:
            start = None if low < 0 else instants[low]
            end = None if high == len(instants) else instants[high]
            found.append((start, end, formula))
    return found
