"""Values at instants: the initial values, and what joins at each switching.

A value is a sum of numbers e^growth cos(angle) and e^growth sin(angle) times columns over K.
It is zero if the columns of equal numbers add up to zero; if they do not, balls are asked.
"""

from __future__ import annotations

from collections.abc import Iterator, Sequence
from dataclasses import replace
from math import factorial

from flint import ctx

from closedform.algebra.field import FieldMatrix, Polynomial, Scalar
from closedform.algebra.root_matrix import RootMatrix
from closedform.algebra.waves import Constant
from closedform.verification.comparison import PLACES, is_narrow
from closedform.verification.driven.constants import settled_constant
from closedform.verification.driven.setting import Setting
from closedform.verification.driven.sums import Key, TimedSum
from closedform.verification.record import Check, Outcome
from closedform.verification.residuals import first_nonzero

__all__ = ["initial_check", "join_check", "value_fault"]

_BITS = 2048


def initial_check(setting: Setting) -> Iterator[Check]:
    """Yield the check that states at the start are those given, or jump there by B · amount."""
    item = "x(start) = x0"
    model, n = setting.model, setting.states
    if model.initial is None:
        return
    given = setting.matrix([[x] for x in model.initial])
    for jet, value in model.stated_initial:
        if jet in model.reduction.jets:
            own = model.initial[model.reduction.jets.index(jet)]
            if not setting.vanishes(setting.put(own - value)):
                yield Check(item, "refuted", f"{jet.text} is another at the start")
                return
    first = setting.wholes[0].after(setting.selecting(range(n)))
    found = [_check_of_value(setting, "x", first, 0, given + setting.blow(0))]
    found += list(_algebraic(setting, given))
    settled = _first_unsettled(item, found)
    if settled is not None:
        yield settled
        return
    told = "every state has the value that is given"
    if setting.strikes(0):
        told += ", moved by B times the amounts of the impulses there"
    yield Check(item, _outcome(found), f"the start was put in: {told}")


def _algebraic(setting: Setting, given: FieldMatrix) -> Iterator[Check]:
    """The value that was stated of an unknown that is no state, before impulses at the start."""
    model, reduction = setting.model, setting.model.reduction
    for jet, value in model.stated_initial:
        if jet in reduction.jets or jet.order or jet.name not in reduction.eliminated:
            continue
        place = reduction.eliminated.index(jet.name)
        if reduction.eliminated_from_states is None:
            continue
        row = setting.matrix([reduction.eliminated_from_states.to_list()[place]])
        inputs = reduction.eliminated_from_inputs
        fed = None if inputs is None else setting.field.matrix([inputs.to_list()[place]])
        expected = setting.matrix([[value]]) - row * given
        yield _check_of_value(setting, jet.text, setting.fed(fed, 1, 0), 0, expected)


def join_check(setting: Setting) -> Iterator[Check]:
    """Yield the check that states are continuous at each switching, or jump by B · amount."""
    if not setting.last:
        return
    item = "joins"
    functions, n = setting.solution.functions, setting.states
    selected = setting.selecting(range(n))
    for k, switch in enumerate(functions.switches, start=1):
        if switch.jump != bool(setting.strikes(k)):
            yield Check(item, "refuted", f"whether instant {k + 1} has an impulse is wrong")
            return
    found = [
        _check_of_value(
            setting,
            f"x at instant {k + 1}",
            (setting.wholes[k] - setting.wholes[k - 1]).after(selected),
            k,
            setting.blow(k),
        )
        for k in range(1, setting.last + 1)
    ]
    yield _first_unsettled(item, found) or Check(
        item,
        _outcome(found),
        f"both pieces were put in at each of {setting.last} instants: the states agree there, or "
        "where an impulse strikes differ by B times its amount",
    )


def _first_unsettled(item: str, found: Sequence[Check]) -> Check | None:
    for outcome in ("refuted", "not attempted"):
        for check in found:
            if check.outcome == outcome:
                return Check(item, check.outcome, check.how)
    return None


def _outcome(found: Sequence[Check]) -> Outcome:
    return "proved" if all(check.outcome == "proved" for check in found) else "enclosed"


def _check_of_value(
    setting: Setting, told: str, function: TimedSum, k: int, expected: FieldMatrix
) -> Check:
    """A function at the k-th instant equals a column over K."""
    row = value_fault(setting, function, k, expected)
    if row is None:
        return Check(told, "proved", "")
    narrow = True
    with ctx.workprec(_BITS):
        for ground in setting.grounds:
            enclose = ground.enclose()
            values = function.enclosure(
                enclose, enclose(setting.instants[k]), setting.named(ground)
            )
            for number, (value, (element,)) in enumerate(
                zip(values, expected.to_list(), strict=True), start=1
            ):
                rest = value - enclose(element)
                if rest.is_finite() and not rest.contains(0):
                    return Check(told, "refuted", f"row {number} of {told} is another")
                narrow &= is_narrow(rest)
    if narrow and setting.grounds:
        return Check(told, "enclosed", f"to {PLACES} places")
    return Check(told, "not attempted", f"row {row} of {told} was not shown to be the one given")


def value_fault(setting: Setting, function: TimedSum, k: int, expected: FieldMatrix) -> int | None:
    """Return a row in which a value was not shown to be the expected one, or None."""
    at = setting.instants[k]
    one = Constant(setting.field.domain.zero, "one", setting.field.domain.zero)
    found: dict[Constant, FieldMatrix] = {one: -expected}
    for key, residues in function.parts.items():
        parts = _value(setting, key, residues, at)
        if parts is None:
            fault = TimedSum(setting.field, function.rows, {key: residues}).fault(setting.vanishes)
            if fault is not None:
                return fault
            continue
        for constant, column in parts:
            for weight, settled in settled_constant(setting.field, constant):
                own = column * weight
                found[settled] = found[settled] + own if settled in found else own
    faults = [first_nonzero(column, setting.vanishes) for column in found.values()]
    return min((fault[0] for fault in faults if fault is not None), default=None)


def _value(
    setting: Setting, key: Key, residues: Sequence[RootMatrix], at: Scalar
) -> list[tuple[Constant, FieldMatrix]] | None:
    """One part at an instant as constants times columns; None where that is not to be had."""
    constant, origin, p = key
    s = at - origin
    if setting.vanishes(s):
        return [(constant, residues[0].trace_form())]
    total = residues[0]
    for j, residue in enumerate(residues[1:], start=1):
        weight = s**j / setting.field.domain.convert(factorial(j))
        total = total + residue.scaled(setting.field.polynomial([weight]))
    if p.degree() == 1:
        growth = constant.growth - p.nth(0) * s
        return [(replace(constant, growth=growth), total.coefficients[0])]
    frequency = _frequency(setting, p)
    if frequency is None or constant.kernel != "one":
        return None
    centre = -p.nth(1) / setting.field.domain.convert(2)
    low, high = total.coefficients
    growth, angle = constant.growth + centre * s, frequency * s
    sine = (low + high * centre) * (setting.field.domain.one / frequency)
    return [
        (replace(constant, growth=growth, kernel="cos", angle=angle), high),
        (replace(constant, growth=growth, kernel="sin", angle=angle), sine),
    ]


def _frequency(setting: Setting, p: Polynomial) -> Scalar | None:
    """The w of p = (x - a)^2 + w^2, if a wave of some input has it."""
    if p.degree() != 2:
        return None
    square = p.nth(0) - p.nth(1) ** 2 / setting.field.domain.convert(4)
    for given in setting.model.inputs:
        for burst in given.signal.bursts:
            for wave in burst.waves:
                own = setting.put(wave.frequency)
                if not setting.vanishes(own) and setting.vanishes(own**2 - square):
                    return own
    return None
