"""Judging Laplace transforms of solutions."""

from __future__ import annotations

from closedform.checking.claim import Claim
from closedform.checking.errors import NotJudgedError
from closedform.checking.judging.held import held_against
from closedform.checking.judging.open_constants import (
    TRANSFORM_NAMES,
    constants_of,
    has_names,
    open_member,
)
from closedform.checking.judging.transforms import laplace_in_pieces
from closedform.checking.judging.true_solutions import solution_value
from closedform.checking.standing.ground import Ground
from closedform.checking.standing.setting import Finding, Setting
from closedform.checking.values.scope import Value
from closedform.checking.values.written_back import written_back
from closedform.notation.written.tree import Symbol, Written, walk

__all__ = ["judge_transform"]


def judge_transform(claim: Claim, setting: Setting) -> Finding:
    """Judge the Laplace transform of a solution from the time 0 on, in pieces or in one."""
    ground = setting.ground
    if not ground.stretches[0].start.is_zero:
        raise NotJudgedError("the transform is held against a solution that begins at 0 only")

    def true(ground: Ground) -> Value:
        values = [solution_value(claim.subject, ground, stretch) for stretch in ground.stretches]
        return laplace_in_pieces(values, ground)

    def prepare(member: Written) -> Written:
        known = ground.facts.names
        names = {n.name for n in walk(member) if isinstance(n, Symbol)} - known
        names -= set(constants)
        if len(names) != 1:
            raise NotJudgedError("it is not told which name is the variable of the transform")
        return setting.renamed(member, names)

    constants = constants_of(claim, setting)
    closed = tuple(v for v in claim.values if not has_names(setting.opened(v), constants))
    if len(closed) < len(claim.values):
        found = open_member(claim, setting, constants, true, prepare)
        if not found.passes or not closed:
            return found
    return held_against(
        claim,
        setting,
        true,
        lambda g: written_back(true(g), TRANSFORM_NAMES),
        prepare=prepare,
        values=closed,
    )
