"""The true solution, on the intervals to which a line applies."""

from __future__ import annotations

from collections.abc import Callable, Iterator
from dataclasses import replace
from functools import partial
from typing import Protocol

from closedform.algebra.elementary import Element
from closedform.checking.claim import Claim
from closedform.checking.errors import NotJudgedError
from closedform.checking.judging.held import held_against
from closedform.checking.standing.ground import Ground
from closedform.checking.standing.setting import Finding, Setting
from closedform.checking.standing.stretch import Stretch
from closedform.checking.values.exact import applies
from closedform.checking.values.scope import Value
from closedform.checking.values.written_back import written_back
from closedform.notation.written.tree import Range, Symbol, Written

__all__ = ["on_stretches", "solution_tree", "solution_value", "stretches_meant"]


def solution_value(subject: str, ground: Ground, stretch: Stretch) -> Value:
    """Return the true solution of a state, a derivative, an output, or of all states.

    Raises NotJudgedError if the model has nothing of that name.
    """
    if subject == "vector" or ground.facts.has_vector(subject.rstrip("'")):
        value = ground.column(stretch)
        for _ in range(len(subject) - len(subject.rstrip("'"))):
            value = value.mapped(Element.derivative)
        return value
    found = ground.function(subject, stretch)
    if found is None:
        base = subject.rstrip("'")
        found = ground.function(base, stretch)
        if found is None:
            raise NotJudgedError(f"the model has no state, unknown or output called {base}")
        for _ in range(len(subject) - len(base)):
            found = found.derivative()
    return found


def solution_tree(subject: str, ground: Ground) -> Written | None:
    """Return the formula of a solution, None where it has several or none that is written."""
    if len(ground.stretches) != 1:
        return None
    tree = ground.piece_tree(subject, ground.stretches[0])
    if tree is not None and not ground.put_in:
        return tree
    try:
        return written_back(solution_value(subject, ground, ground.stretches[0]))
    except NotJudgedError:
        return None


class SolutionOn(Protocol):
    """The true value of a claim on an interval."""

    def __call__(self, ground: Ground, stretch: Stretch) -> Value:
        """Return it."""


def on_stretches(
    claim: Claim,
    setting: Setting,
    true: SolutionOn,
    right: Callable[[Ground], Written | None],
) -> Finding:
    """Judge the members of a claim on every interval to which the line applies."""
    findings = []
    for stretch in stretches_meant(claim, setting):
        inside = replace(setting, ground=setting.ground.within(stretch))
        findings.append(held_against(claim, inside, partial(true, stretch=stretch), right))
    worst = next((f for f in findings if not f.passes), None)
    if worst is not None:
        return worst
    digits = next((f for f in findings if f.word == "holds to the digits shown"), None)
    return digits or findings[0]


def stretches_meant(claim: Claim, setting: Setting) -> Iterator[Stretch]:
    """Yield the intervals that the conditions beside a line leave; all if there are none."""
    ground = setting.ground
    ranges = [r for statement in claim.statements for r in statement.conditions]
    timed = [r for r in ranges if Symbol(ground.facts.time) in r.members and "→" not in r.signs]
    found = False
    for stretch in ground.stretches:
        if all(_inside(range_, stretch, setting) for range_ in timed):
            found = True
            yield stretch
    if not found:
        raise NotJudgedError("no interval of the solution lies in the range that is stated")


def _inside(range_: Range, stretch: Stretch, setting: Setting) -> bool:
    scope = replace(setting.scope_of(setting.ground), instant=stretch.inside)
    return applies(range_, scope)
