"""Judging equations between states, outputs, inputs and their derivatives."""

from __future__ import annotations

from collections.abc import Mapping, Sequence
from dataclasses import replace
from itertools import pairwise

from closedform.algebra.elementary import Element
from closedform.checking.claim import Claim
from closedform.checking.errors import NotJudgedError
from closedform.checking.judging.compare import compare, has_decimals
from closedform.checking.judging.true_solutions import stretches_meant
from closedform.checking.standing.ground import Ground
from closedform.checking.standing.setting import Finding, Setting
from closedform.checking.standing.stretch import Stretch
from closedform.checking.values.exact import exact
from closedform.checking.values.matrices import ExactMatrix, column
from closedform.checking.values.scope import Scope, Value
from closedform.checking.values.written_back import written_back
from closedform.checking.verdict import Word
from closedform.notation.written.tree import Jet, Negation, Sum, Symbol, Written, changed, walk

__all__ = ["judge_equation"]


def judge_equation(claim: Claim, setting: Setting) -> Finding:
    """Judge an equation between unknowns, their derivatives and the inputs: one of the model's.

    The derivatives are expressed by the states, x' = A x + B u, and the equation has to hold
    for every state.  One with outputs in it, or with the time, as where an earlier solution was
    put in, may hold along the true solution only.
    """
    ground, note, rounded = setting.ground_for(*map(setting.opened, claim.values)), "", False
    for stretch in stretches_meant(claim, setting):
        inside = ground.within(stretch)
        jets = _jets(inside, stretch, _highest(claim))
        scope = replace(setting.scope_of(inside), jets=jets)
        scope = scope.with_symbols({name: v for (name, order), v in jets.items() if order == 0})
        outputs = _names_outputs(claim, setting)
        if not outputs and _agree(claim, setting, scope):
            continue
        if not outputs and _agree_rounded(claim, setting, scope, inside, jets):
            rounded = True
            continue
        along = outputs or not _has_derivatives(claim) or _names_time(claim, setting)
        if not along or not _agree(claim, setting, setting.scope_of(inside)):
            return Finding("fails", "it does not follow from the model")
        note = "it holds along this solution, not for every state"
    word: Word = "holds to the digits shown" if rounded else "holds"
    return Finding(word, notes=(note,) if note else ())


def _agree(claim: Claim, setting: Setting, scope: Scope) -> bool:
    """Whether the members of a chain have equal values."""
    sides = [exact(setting.opened(member), scope) for member in claim.values]
    return all(_difference(one, other).is_zero for one, other in pairwise(sides))


def _agree_rounded(
    claim: Claim,
    setting: Setting,
    scope: Scope,
    ground: Ground,
    jets: Mapping[tuple[str, int], Value],
) -> bool:
    """Whether the members of a chain, some with decimals, are equal to the digits shown."""
    if not any(has_decimals(member) for member in claim.values):
        return False

    def put(node: Written) -> Written | None:
        value = jets.get((node.name, node.order)) if isinstance(node, Jet) else None
        return written_back(value) if isinstance(value, Element) else None

    scope = scope.with_symbols({n: ground.field.name(n) for n in _free(ground)})
    sides = [changed(setting.opened(member), put) for member in claim.values]
    for one, other in pairwise(sides):
        difference = Sum((one, Negation(other)))
        if not compare(difference, ground.field.zero, scope, ground).passes:
            return False
    return True


def _difference(one: Value, other: Value) -> Value:
    match one, other:
        case Element(), Element():
            return one - other
        case ExactMatrix(), ExactMatrix():
            return one - other
        case ExactMatrix(), Element() if other.is_zero:
            return one
        case Element(), ExactMatrix() if one.is_zero:
            return other
    raise NotJudgedError("a function stands where a column is wanted, or the other way round")


def _names_time(claim: Claim, setting: Setting) -> bool:
    """Whether the time itself occurs, as in a solution that was put in."""
    time = Symbol(setting.ground.facts.time)
    return any(time in walk(setting.opened(member)) for member in claim.values)


def _highest(claim: Claim) -> int:
    """Return the highest order of a derivative that occurs."""
    found = (n.order for v in claim.values for n in walk(v) if isinstance(n, Jet))
    return max(found, default=0)


def _names_outputs(claim: Claim, setting: Setting) -> bool:
    """Whether outputs or eliminated unknowns occur, which no state is free for."""
    truth = setting.ground.truth
    states = {name for name, _ in truth.jets} | set(truth.inputs)
    found = {n.name for v in claim.values for n in walk(v) if isinstance(n, Jet)}
    return bool((found & setting.ground.facts.varying) - states)


def _has_derivatives(claim: Claim) -> bool:
    return any(
        isinstance(node, Jet) and node.order for member in claim.values for node in walk(member)
    )


def _jets(ground: Ground, stretch: Stretch, highest: int) -> dict[tuple[str, int], Value]:
    """Return states as free names, and the derivatives that follow as functions of these.

    `highest` is the order up to which they are wanted.  The column of all states has the names
    that it customarily goes by.
    """
    field, truth = ground.field, ground.truth
    names = _free(ground)
    free = [field.name(name) for name in names]
    drive = ground.drive(stretch)
    rates = []
    for k, row in enumerate(ground.matrix.rows):
        total = drive[k] if drive else field.zero
        for entry, state in zip(row, free, strict=True):
            total = total + entry * state
        rates.append(total)
    along = dict(zip(names, rates, strict=True))
    jets: dict[tuple[str, int], Value] = dict(zip(truth.jets, free, strict=True))
    for name in ground.facts.vector_names:
        jets[name, 0], jets[name, 1] = column(field, free), column(field, rates)
    if highest > 1:
        _add_coordinates(jets, rates, ground)
    for (name, order), rate in zip(truth.jets, rates, strict=True):
        if (name, order + 1) in jets:
            continue
        value = rate
        for above in range(order + 1, highest + 1):
            jets[name, above] = value
            value = _derivative(value, along)
        jets.setdefault((name, order + 1), rate)
    for name in truth.inputs:
        drive_value = ground.input(name, stretch)
        if drive_value is not None:
            jets[name, 0] = drive_value
    return jets


def _add_coordinates(
    jets: dict[tuple[str, int], Value], rates: Sequence[Element], ground: Ground
) -> None:
    """Add the column of coordinates and its derivatives, for M q'' + C q' + K q = F.

    With a second derivative beside it, q is that and not the column of all states.
    """
    places = {jet: k for k, jet in enumerate(ground.truth.jets)}
    names = [name for name, order in ground.truth.jets if order == 0]
    if any((name, 1) not in places for name in names) or len(places) != 2 * len(names):
        return
    free = [ground.field.name(name) for name in _free(ground)]
    columns = (
        [free[places[name, 0]] for name in names],
        [free[places[name, 1]] for name in names],
        [rates[places[name, 1]] for name in names],
    )
    for letter in ground.facts.vector_names:
        for order, entries in enumerate(columns):
            jets[letter, order] = column(ground.field, entries)


def _free(ground: Ground) -> list[str]:
    """Return names for the states, of which nothing is known."""
    return [f"state {k}" for k in range(ground.size)]


def _derivative(value: Element, along: Mapping[str, Element]) -> Element:
    """Return the derivative of a function, linear in the states, along x' = A x + B u."""
    field = value.field
    none = dict.fromkeys(along, field.zero)
    rest = value.substituted(none)
    total = value.derivative()
    for name, rate in along.items():
        total = total + (value.substituted({**none, name: field.one}) - rest) * rate
    return total
