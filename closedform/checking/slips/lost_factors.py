"""Factors lost on the way: the time in an argument, an exponential; fractions inverted."""

from __future__ import annotations

from collections.abc import Iterator

from closedform.algebra.elementary import Element
from closedform.checking.slips import names
from closedform.checking.slips.making import (
    contains,
    exponent_of,
    exponential,
    over,
    times,
    without,
)
from closedform.checking.slips.trial import Candidate, Trial
from closedform.checking.slips.wording import part_text, placed, wave_above
from closedform.checking.values.written_back import written_back
from closedform.notation.written.tree import (
    EULER,
    Apply,
    Negation,
    Power,
    Product,
    Quotient,
    Sum,
    Symbol,
    Written,
    walk,
)

__all__ = [
    "extra_names",
    "inverted",
    "missing_names",
    "missing_times",
    "missing_waves",
    "other_arguments",
    "unexplained",
]

MOST_NAMES = 6
WAVES = ("sin", "cos", "sinh", "cosh")


def missing_times(trial: Trial) -> Iterator[Candidate]:
    """Yield the formula with the time put into an exponent or angle, or a term of one."""
    t = Symbol(trial.ground.truth.time)
    for spot in trial.spots():
        node = spot.node
        if contains(node, t):
            continue
        exponent = exponent_of(node)
        if exponent is not None:
            new = exponential(times(exponent, t), node)
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
            if not is_term or wave_above(spot) or isinstance(spot.node, Negation):
                continue
            if not any(_is_wave(n) and type(n) is type(wave) for n in walk(spot.node)):
                where = placed(trial, spot, part_text(spot.node))
                new = trial.changed(spot, times(spot.node, wave))
                yield Candidate(names.MISSING_WAVE, where, new)


def _is_wave(node: Written) -> bool:
    if isinstance(node, Power):
        return node.base == EULER
    return isinstance(node, Apply) and node.function in WAVES


def missing_names(trial: Trial) -> Iterator[Candidate]:
    """Yield the formula with a parameter, or the variable, as a factor more, or divided by one."""
    known = [*trial.setting.ground.truth.parameters][:MOST_NAMES]
    if trial.claim.says == "characteristic polynomial":
        known += unexplained(trial)
    for spot in trial.spots():
        node, wave = spot.node, wave_above(spot)
        whole = spot.path == trial.start or isinstance(spot.outer, Sum | Negation | Apply)
        is_term = whole or (wave == "exp" and not isinstance(spot.outer, Product))
        for name in known if is_term and not isinstance(node, Negation) else ():
            for new in (times(Symbol(name), node), over(node, Symbol(name))):
                where = placed(trial, spot, f"{part_text(node)}, {name}")
                yield Candidate(names.FACTOR_LEFT_OUT, where, trial.changed(spot, new))


def extra_names(trial: Trial) -> Iterator[Candidate]:
    """Yield the formula with one factor less."""
    for spot in trial.spots():
        if isinstance(spot.node, Product):
            for k, factor in enumerate(spot.node.factors):
                if isinstance(factor, Symbol | Power):
                    where = placed(trial, spot, part_text(factor))
                    new = trial.changed(spot, without(spot.node.factors, k))
                    yield Candidate(names.FACTOR_TOO_MANY, where, new)


def unexplained(trial: Trial) -> list[str]:
    """Return the names that the model does not explain, such as the variable of a polynomial."""
    found = {n.name for n in walk(trial.setting.opened(trial.tree)) if isinstance(n, Symbol)}
    return sorted(found - trial.ground.facts.names)


def other_arguments(trial: Trial) -> Iterator[Candidate]:
    """Yield the formula with the argument of another of its waves or exponentials in one."""
    t = Symbol(trial.ground.truth.time)
    waves = [
        node.arguments[0]
        for node in walk(trial.back(trial.tree))
        if isinstance(node, Apply) and node.function in WAVES and contains(node, t)
    ]
    exponents = [x for n in walk(trial.back(trial.tree)) if (x := exponent_of(n)) is not None]
    for spot in trial.spots():
        node, own = spot.node, exponent_of(spot.node)
        if own is not None:
            for other in dict.fromkeys(exponents):
                new = trial.changed(spot, exponential(other, node))
                yield Candidate(names.OTHER_RATE, placed(trial, spot, part_text(node)), new)
        elif isinstance(node, Apply) and node.function in WAVES:
            for other in dict.fromkeys(waves):
                new = trial.changed(spot, Apply(node.function, (other,)))
                yield Candidate(names.FREQUENCY_FACTOR, placed(trial, spot, part_text(node)), new)


def inverted(trial: Trial) -> Iterator[Candidate]:
    """Yield the formula with one fraction upside down."""
    for spot in trial.spots():
        node = spot.node
        if isinstance(node, Quotient):
            new = over(node.denominator, node.numerator)
            where = placed(trial, spot, part_text(node))
            yield Candidate(names.FRACTION, where, trial.changed(spot, new))
