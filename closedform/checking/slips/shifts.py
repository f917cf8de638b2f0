"""Slips with responses that begin late, and with one name for another."""

from __future__ import annotations

from collections.abc import Iterator

from closedform.checking.slips import names
from closedform.checking.slips.lost_factors import unexplained
from closedform.checking.slips.making import ONE, contains, negated, times
from closedform.checking.slips.spots import Spot
from closedform.checking.slips.trial import Candidate, Trial
from closedform.checking.slips.wording import part_text, placed
from closedform.checking.values.written_back import written_back
from closedform.notation.written.tree import (
    Apply,
    Negation,
    Product,
    Sum,
    Symbol,
    Written,
    changed,
    walk,
)

__all__ = ["delays", "other_names"]

MOST_NAMES = 12
FREQUENCIES = ({"omega_n", "omega_0"}, {"omega_d"})


def delays(trial: Trial) -> Iterator[Candidate]:
    """Yield the formula with t - a for t, or t for t - a, in one term; with a step more or less."""
    ground, time = trial.ground, Symbol(trial.ground.truth.time)
    starts = [s.start for s in ground.stretches if not s.start.is_zero]
    if not starts or trial.claim.says not in ("solution", "output", "steady state", "value"):
        return
    for start in starts:
        late = Sum((time, negated(written_back(start))))
        for spot in trial.spots():
            if not _is_part(spot):
                continue
            if contains(spot.node, time):
                new = _put(spot.node, time, late)
                yield Candidate(names.NOT_DELAYED, _where(trial, spot), trial.changed(spot, new))
                new = _put(spot.node, late, time)
                yield Candidate(names.DELAYED, _where(trial, spot), trial.changed(spot, new))
            step = times(spot.node, Apply("step", (late,)))
            yield Candidate(names.STEP_MISSING, _where(trial, spot), trial.changed(spot, step))
            if isinstance(spot.node, Apply) and spot.node.function == "step":
                yield Candidate(names.STEP_TOO_MANY, _where(trial, spot), trial.changed(spot, ONE))


def _where(trial: Trial, spot: Spot) -> str:
    return placed(trial, spot, part_text(spot.node))


def _is_part(spot: Spot) -> bool:
    if isinstance(spot.node, Apply) and spot.node.function == "step":
        return True
    return not spot.above or isinstance(spot.outer, Sum | Negation | Product)


def _put(tree: Written, old: Written, new: Written) -> Written:
    """Return a formula with one part for another, but not inside a step."""

    def change(node: Written) -> Written | None:
        if isinstance(node, Apply) and node.function == "step":
            return node
        return new if node == old else None

    return changed(tree, change)


def other_names(trial: Trial) -> Iterator[Candidate]:
    """Yield the formula with another name of a number in one place, or everywhere."""
    setting = trial.setting
    known = [*setting.ground.truth.parameters, *setting.author.definitions][:MOST_NAMES]
    if trial.claim.says == "characteristic polynomial":
        known += unexplained(trial)
    used = {n.name for n in walk(trial.tree) if isinstance(n, Symbol)} & set(known)
    for spot in trial.spots():
        if isinstance(spot.node, Symbol) and spot.node.name in known:
            for name in known:
                if name != spot.node.name:
                    where = placed(trial, spot, f"{name}, not {spot.node.name}")
                    new = trial.changed(spot, Symbol(name))
                    yield Candidate(_name(spot.node.name, name), where, new)
    for one in sorted(used):
        for name in known:
            if name != one:
                tree = _with_name(trial.tree, one, name)
                yield Candidate(_name(one, name), f"{name}, not {one}", tree)


def _with_name(tree: Written, one: str, other: str) -> Written:
    """Return a formula with another name in the place of one."""
    return changed(tree, lambda node: Symbol(other) if node == Symbol(one) else None)


def _name(wrong: str, right: str) -> str:
    if wrong in FREQUENCIES[0] and right in FREQUENCIES[1]:
        return names.UNDAMPED_FOR_DAMPED
    if wrong in FREQUENCIES[1] and right in FREQUENCIES[0]:
        return names.DAMPED_FOR_UNDAMPED
    return names.OTHER_NAME
