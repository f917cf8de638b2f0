"""The parts of a solution: free and forced, what inputs sustain, what joins at a switching."""

from __future__ import annotations

from collections.abc import Iterator, Sequence

from closedform.algebra.field import Polynomial
from closedform.response.driven.functions import Interval
from closedform.verification.driven.equations import rows_residuals, state_residuals
from closedform.verification.driven.identities import Residual, identity_check
from closedform.verification.driven.setting import Setting
from closedform.verification.driven.sums import TimedSum
from closedform.verification.record import Check

__all__ = [
    "free_forced_check",
    "intervals_check",
    "is_of_inputs",
    "jump_check",
    "sustained_check",
    "switch_check",
]


def intervals_check(setting: Setting) -> Check:
    """The intervals follow one another from the start on, and miss no switching."""
    item = "intervals"
    model, functions = setting.model, setting.solution.functions
    instants = setting.instants
    known = {model.start, *model.timeline}
    for given in model.inputs:
        signal = given.signal
        ends = [e for burst in signal.bursts for e in (burst.start, burst.end) if e is not None]
        for at in (*ends, *(impulse.at for impulse in signal.impulses)):
            if at not in known:
                return Check(item, "refuted", f"{at} is missing among the instants")
    expected = tuple(zip(instants, (*instants[1:], None), strict=True))
    for told, intervals in (("solution", functions.intervals), ("forced part", functions.forced)):
        if _ends(intervals) != expected:
            return Check(item, "refuted", f"the intervals of the {told} are others")
    if functions.sustained and _ends(functions.sustained) != expected:
        return Check(item, "refuted", "the intervals of what is sustained are others")
    if tuple(switch.at for switch in functions.switches) != instants[1:]:
        return Check(item, "refuted", "the solution is switched at other instants")
    number = setting.out_of_order()
    if number is not None:
        how = f"it was not decided whether instant {number + 1} comes after the one before"
        return Check(item, "not attempted", how)
    return Check(
        item,
        "proved",
        "they begin at the start, follow one another without gaps, and end at every instant "
        "at which an input is switched or strikes; each instant was shown to come after the one "
        "before",
    )


def _ends(intervals: Sequence[Interval]) -> tuple[tuple[object, object], ...]:
    return tuple((i.start, i.end) for i in intervals)


def free_forced_check(setting: Setting) -> Check:
    """Free and forced make the whole, and the free part is that of the initial values."""
    functions, model, n = setting.solution.functions, setting.model, setting.states
    free = setting.total(functions.free)

    def residuals() -> Iterator[Residual]:
        yield from state_residuals(setting, "x' = A x of the free part", free, 0, driven=False)
        yield from rows_residuals(setting, free, 0, driven=False)
        if model.initial is not None:
            start = setting.matrix([[x] for x in model.initial])
            own = free.after(setting.selecting(range(n)))
            yield Residual("e^(A(t - start)) x0", 0, own - setting.freed(start, 0))
        for k, (interval, whole) in enumerate(zip(functions.forced, setting.wholes, strict=True)):
            forced = setting.total(interval.summands)
            yield Residual("free + forced", k, whole - free - forced)

    return identity_check(
        setting,
        "free + forced = x",
        residuals(),
        "the free part solves the equations without inputs from the initial values, and with the "
        "forced part makes the solution, coefficient by coefficient, in each interval",
    )


def switch_check(setting: Setting) -> Iterator[Check]:
    """Yield the check that the form with unit steps is that of the pieces."""
    functions = setting.solution.functions
    if not functions.switches:
        return

    def residuals() -> Iterator[Residual]:
        total = setting.wholes[0]
        for k, switch in enumerate(functions.switches, start=1):
            total = total + setting.total(switch.summands)
            yield Residual("the sum of what has joined", k, total - setting.wholes[k])

    yield identity_check(
        setting,
        "unit steps and pieces",
        residuals(),
        "the first piece, and all that has joined at a switching, make the piece of each interval",
    )


def sustained_check(setting: Setting) -> Check:
    """What inputs sustain solves the equations and has only the exponents of the inputs."""
    functions = setting.solution.functions
    item = "sustained by the inputs"
    if functions.sustained and functions.held != functions.sustained[-1].summands:
        return Check(item, "refuted", "what is held is not what is sustained in the last interval")
    sustained = functions.sustained or ()
    own = [p for p in setting.factors if is_of_inputs(setting, p)]

    def residuals() -> Iterator[Residual]:
        for k, interval in enumerate(sustained):
            function = setting.total(interval.summands)
            yield from state_residuals(setting, "x' = A x + B u", function, k)
            yield from rows_residuals(setting, function, k)
            others = {key: r for key, r in function.parts.items() if key[2] not in own}
            rest = TimedSum(setting.field, function.rows, others)
            yield Residual("exponents other than those of the inputs", k, rest)

    return identity_check(
        setting,
        item,
        residuals(),
        "put into the state form in each interval: every coefficient is zero, and so are those "
        "of exponents that the inputs do not have",
    )


def jump_check(setting: Setting) -> Check:
    """The states are what is sustained, the free part, and free responses to every h_j so far."""
    functions, n = setting.solution.functions, setting.states
    selected = setting.selecting(range(n))
    free = setting.total(functions.free)

    def started(j: int) -> TimedSum:
        total = setting.nothing(n)
        for constant, column in functions.jumps[j]:
            total = total + setting.freed(column, j, constant)
        return total

    def residuals() -> Iterator[Residual]:
        begun = setting.nothing(n)
        for k in range(len(functions.jumps)):
            begun = begun + started(k)
            sustained = setting.total(functions.sustained[k].summands)
            rest = (setting.wholes[k] - sustained - free).after(selected)
            yield Residual("the sum of the free responses", k, rest - begun)

    return identity_check(
        setting,
        "jumps h",
        residuals(),
        "the solution is what the inputs sustain, the free response, and the free responses to "
        "the jumps h of all instants so far, coefficient by coefficient",
    )


def is_of_inputs(setting: Setting, p: Polynomial) -> bool:
    """Return whether the roots of a factor are exponents of a wave of some input.

    An input may be at rest just then: a response to another one, made of exponents of any, is
    sustained all the same.
    """
    one, field = setting.field.domain.one, setting.field
    for wave in setting.driven_by:
        q = field.polynomial([one, -wave.rate])
        if not setting.vanishes(wave.frequency):
            q = q**2 + field.polynomial([wave.frequency**2])
        same = q.degree() == p.degree()
        if same and all(setting.vanishes(c) for c in (q - p).to_list()):
            return True
    return False
