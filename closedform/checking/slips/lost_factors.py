"""Factors lost on the way: the time in an argument, an exponential; fractions inverted."""

from __future__ import annotations

from collections.abc import Iterator

from closedform.algebra.elementary import Element
from closedform.checking.slips import names
from closedform.checking.slips.making import contains, over, times
from closedform.checking.slips.trial import Candidate, Trial
from closedform.checking.slips.wording import part_text, placed, wave_above
from closedform.checking.written_back import written_back
from closedform.notation.written.tree import (
    EULER,
    Apply,
    Negation,
    Power,
    Quotient,
    Sum,
    Symbol,
    Written,
    walk,
)

__all__ = ["inverted", "missing_times", "missing_waves"]

WAVES = ("sin", "cos", "sinh", "cosh", "exp")


def missing_times(trial: Trial) -> Iterator[Candidate]:
    """Yield the formula with the time put into an exponent or angle, or a term of one."""
    t = Symbol(trial.ground.truth.time)
    for spot in trial.spots():
        node = spot.node
        if contains(node, t):
            continue
        if isinstance(node, Power) and node.base == EULER:
            new: Written = Power(EULER, times(node.exponent, t))
        elif isinstance(node, Apply) and node.function in WAVES:
            new = Apply(node.function, (times(node.arguments[0], t),))
        elif isinstance(spot.outer, Sum) and wave_above(spot) in (*WAVES, "exp"):
            new = times(node, t)
        else:
            continue
        where = placed(trial, spot, part_text(node))
        yield Candidate(names.MISSING_TIME, where, trial.changed(spot, new))


def missing_waves(trial: Trial) -> Iterator[Candidate]:
    """Yield the formula with an exponential or wave of the true one as a factor of one term."""
    if not isinstance(trial.true, Element) or trial.true.is_constant:
        return
    found = [node for node in walk(written_back(trial.true)) if _is_wave(node)]
    for wave in dict.fromkeys(found):
        for spot in trial.spots():
            is_term = spot.path == trial.start or isinstance(spot.outer, Sum | Negation)
            if is_term and not wave_above(spot) and not isinstance(spot.node, Negation):
                where = placed(trial, spot, part_text(spot.node))
                new = trial.changed(spot, times(spot.node, wave))
                yield Candidate(names.MISSING_WAVE, where, new)


def _is_wave(node: Written) -> bool:
    if isinstance(node, Power):
        return node.base == EULER
    return isinstance(node, Apply) and node.function in WAVES


def inverted(trial: Trial) -> Iterator[Candidate]:
    """Yield the formula with one fraction upside down."""
    for spot in trial.spots():
        node = spot.node
        if isinstance(node, Quotient):
            new = over(node.denominator, node.numerator)
            where = placed(trial, spot, part_text(node))
            yield Candidate(names.FRACTION, where, trial.changed(spot, new))
