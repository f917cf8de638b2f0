"""The inputs as they were declared, in certified numbers.

What was solved for are waves and impulses; what a person declared are formulas.  Both are
evaluated at instants inside of every interval, and at the instants themselves.
"""

from __future__ import annotations

from collections.abc import Iterable, Iterator, Sequence
from dataclasses import replace

from flint import arb

from closedform.model.driven.model import Input
from closedform.model.parametric import ParametricModel
from closedform.notation.expression import Call, Expression, Name
from closedform.verification.comparison import AGREED, Finding, Pair, check_of, compared
from closedform.verification.driven.grounds import Ground
from closedform.verification.driven.setting import Setting
from closedform.verification.driven.stepping import wave_value
from closedform.verification.driven.sums import Enclose
from closedform.verification.driven.trees import Moment, impulse_weight, taylor
from closedform.verification.record import Check

__all__ = ["declared_check", "input_value", "moment_at"]

_HIGHEST = 8
"""Derivatives of inputs up to this order; FLINT's series have ten coefficients."""


def declared_check(setting: Setting, places: Iterable[int], intervals: int) -> Iterator[Check]:
    """Yield the check that inputs are the functions of the time that were declared.

    It is made for the inputs at some places, in the first so many intervals.
    """
    given = {
        f"input {k + 1}": (k, setting.model.inputs[k], source)
        for k in places
        if (source := _source(setting.model.inputs[k])) is not None
    }
    if not given or not setting.grounds:
        return
    findings = (
        finding
        for ground in setting.grounds
        for k in range(intervals)
        for finding in (
            _values_finding(setting, ground, k, given),
            _impulses_finding(setting, ground, k, given),
        )
    )
    yield check_of(
        "inputs as declared",
        findings,
        f"formulas of {len(given)} inputs, with their delays and derivatives, agree with the "
        f"waves {AGREED} at two instants of each interval, and with the impulses at each instant",
    )


Source = tuple[Expression, Expression | None, int]
"""A formula in the time, the instant at which it is taken (None: now), and its derivative."""
_Given = dict[str, tuple[int, Input, Source]]


def _source(given: Input) -> Source | None:
    """What an input was declared to be; None where it has pieces."""
    formula = given.formula
    if not given.name:
        return formula, None, 0
    name = formula.text if isinstance(formula, Name) else getattr(formula, "function", "")
    at = formula.argument if isinstance(formula, Call) else None
    order = len(name) - len(name.rstrip("'"))
    if given.definition is None or name.rstrip("'") != given.name or order > _HIGHEST:
        return None
    return given.definition, at, order


def moment_at(setting: Setting, ground: Ground, t: arb) -> Moment:
    """Return an instant with balls for every name that a formula of the model may have."""
    known = dict(ground.balls())
    stacked = setting.model.stacked
    if isinstance(stacked, ParametricModel):
        enclose = ground.enclose()
        for definition in (*stacked.restated, *stacked.abbreviations):
            known[definition.name] = enclose(setting.put(definition.value))
    known["pi"] = arb.pi()
    return Moment(setting.model.time, t, known)


def _taken_at(source: Source, moment: Moment) -> Moment:
    """The moment at which the definition is asked: that of the argument, its slope being 1."""
    _, at, order = source
    t = moment.t if at is None else taylor(at, replace(moment, length=2))[0]
    return replace(moment, t=t, length=order + 2)


def _derivative(source: Source, moment: Moment) -> arb:
    definition, _, order = source
    return taylor(definition, _taken_at(source, moment))[order] * arb(order).fac()


def _values_finding(setting: Setting, ground: Ground, k: int, given: _Given) -> Finding:
    for place in range(2):

        def evaluate(names: Sequence[str], place: int = place) -> Iterator[Pair]:
            enclose = ground.enclose()
            t = setting.inside(k, enclose)[place]
            moment = moment_at(setting, ground, t)
            for name in names:
                number, _, source = given[name]
                yield _derivative(source, moment), input_value(setting, number, k, t, enclose)

        found = compared(given, evaluate, where=f"{ground.told} in interval {k + 1}")
        if found.outcome != "enclosed":
            return found
    return Finding("enclosed")


def input_value(setting: Setting, place: int, k: int, t: arb, enclose: Enclose) -> arb:
    """Return a ball for an input at an instant of an interval, from its waves."""
    return sum((wave_value(w, t, enclose) for w in setting.waves_on(place, k)), arb(0))


def _impulses_finding(setting: Setting, ground: Ground, k: int, given: _Given) -> Finding:
    """The impulses at an instant: those of the formula, or the jump of what is differentiated."""
    asked = {n: g for n, g in given.items() if k or not g[2][2]}

    def evaluate(names: Sequence[str]) -> Iterator[Pair]:
        enclose = ground.enclose()
        moment = moment_at(setting, ground, enclose(setting.instants[k]))
        at = (setting.model.start, *setting.model.timeline)[k]
        for name in names:
            _, own, source = asked[name]
            amounts = [i.amount for i in own.signal.impulses if i.at == at]
            found = sum((enclose(setting.put(a)) for a in amounts), arb(0))
            yield _weight(source, moment), found

    return compared(asked, evaluate, where=f"{ground.told} at instant {k + 1}")


def _weight(source: Source, moment: Moment) -> arb:
    definition, _, order = source
    own = _taken_at(source, moment)
    if not order:
        return impulse_weight(definition, replace(own, side=1))
    after, before = (taylor(definition, replace(own, side=side))[order - 1] for side in (1, -1))
    return (after - before) * arb(order - 1).fac()
