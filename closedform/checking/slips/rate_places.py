"""The rates in a formula: the numbers with which the time goes in exponents and angles."""

from __future__ import annotations

from collections.abc import Iterator
from fractions import Fraction

from flint import acb, arb, ctx

from closedform.checking.balls.enclosing import NoValueError, enclose_written
from closedform.checking.slips.making import ONE, contains, exponent_of, times
from closedform.checking.slips.solving import Place
from closedform.checking.slips.spots import Spot, spots
from closedform.checking.slips.trial import BITS, Trial
from closedform.notation.written.plain_form import plain_written
from closedform.notation.written.tree import (
    EULER,
    Apply,
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

__all__ = ["rate_places"]

WAVES = ("sin", "cos", "sinh", "cosh", "tan")


def rate_places(trial: Trial) -> Iterator[Place]:
    """Yield the rates of exponentials and waves, equal ones together, then each by itself."""
    found = [(spot, wave) for spot in spots(trial.tree) if (wave := _wave(spot.node)) is not None]
    waves = [wave for _, wave in found]
    for wave in dict.fromkeys(waves):
        yield from _place(trial, wave, None)
    for spot, wave in found:
        if waves.count(wave) > 1:
            yield from _place(trial, wave, spot)


def _wave(node: Written) -> tuple[str, Written] | None:
    """Return whether a node is an exponential or a wave, and its argument."""
    exponent = exponent_of(node)
    if exponent is not None:
        return "exponent", exponent
    if isinstance(node, Apply) and node.function in WAVES:
        return "angle", node.arguments[0]
    return None


def _place(trial: Trial, wave: tuple[str, Written], spot: Spot | None) -> Iterator[Place]:
    kind, argument = wave
    t = Symbol(trial.ground.truth.time)
    part = _timed_part(argument, t)
    core = None if part is None else _core(part, t)
    if part is None or core is None:
        return
    before = _rate(trial, part, core, t)
    if before is None:
        return

    def tree(new: Written) -> Written:
        renewed = changed(argument, lambda n: times(new, core) if n == part else None)

        def change(node: Written) -> Written | None:
            if _wave(node) != wave:
                return None
            return Power(EULER, renewed) if isinstance(node, Power) else _applied(node, renewed)

        if spot is not None:
            return trial.changed(spot, change(spot.node) or spot.node)
        return changed(trial.tree, change)

    literals = [n for n in walk(part) if isinstance(n, Literal)]
    where = f"the {kind} {plain_written(argument)}"
    where += f" of entry {trial.entry}" if trial.entry else ""
    yield Place(kind, where, before, tree, literals[0] if len(literals) == 1 else None)


def _applied(node: Written, argument: Written) -> Written | None:
    return Apply(node.function, (argument,)) if isinstance(node, Apply) else None


def _timed_part(argument: Written, t: Symbol) -> Written | None:
    """Return the one term of an argument that has the time in it."""
    terms = argument.terms if isinstance(argument, Sum) else (argument,)
    timed = [term for term in terms if contains(term, t)]
    return timed[0] if len(timed) == 1 else None


def _core(part: Written, t: Symbol) -> Written | None:
    """Return the factor with the time in it: t itself, or t - a."""
    match part:
        case Negation(operand):
            return _core(operand, t)
        case Quotient(above, below):
            return None if contains(below, t) else _core(above, t)
        case Product(factors):
            timed = [factor for factor in factors if contains(factor, t)]
            return _core(timed[0], t) if len(timed) == 1 else None
    return part


def _rate(trial: Trial, part: Written, core: Written, t: Symbol) -> Fraction | None:
    """Return the number before the time, as a binary fraction where it is a root."""
    ratio = changed(trial.setting.opened(part), lambda n: ONE if n == core else None)
    if contains(ratio, t):
        return None
    with ctx.workprec(BITS):
        try:
            value = enclose_written(ratio, trial.names)
        except (NoValueError, ArithmeticError):
            return None
        return _fraction(value)


def _fraction(value: acb) -> Fraction | None:
    real: arb = value.real.mid()
    if not real.is_finite() or real == 0:
        return None
    man, exp = real.man_exp()
    exact = Fraction(int(man)) * Fraction(2) ** int(exp)
    near = exact.limit_denominator(10**6)
    return near if abs(near - exact) < Fraction(1, 10**15) else exact
