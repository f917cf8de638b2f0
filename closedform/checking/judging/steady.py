"""Judging steady states and steady motions."""

from __future__ import annotations

from closedform.algebra.elementary import Element
from closedform.checking.claim import Claim
from closedform.checking.errors import NotJudgedError
from closedform.checking.judging.held import held_against
from closedform.checking.judging.true_solutions import solution_value
from closedform.checking.standing.ground import Ground
from closedform.checking.standing.setting import Finding, Setting
from closedform.checking.values.matrices import column
from closedform.checking.values.scope import Value
from closedform.checking.values.written_back import written_back
from closedform.notation.written.tree import Written

__all__ = ["judge_steady"]


def judge_steady(claim: Claim, setting: Setting) -> Finding:
    """Judge a steady state: the limit, or what persists when the free response has died away."""

    def true(ground: Ground) -> Value:
        names = ground.truth.states if _is_vector(claim, ground) else (claim.subject,)
        values = [_steady_value(name, ground) for name in names]
        return column(ground.field, values) if _is_vector(claim, ground) else values[0]

    def right(ground: Ground) -> Written | None:
        try:
            return written_back(true(ground))
        except NotJudgedError:
            return None

    finding = held_against(claim, setting, true, right)
    if finding.passes or not finding.pairs:
        return finding
    return finding


def _is_vector(claim: Claim, ground: Ground) -> bool:
    return claim.subject == "vector" or ground.facts.has_vector(claim.subject)


def _steady_value(name: str, ground: Ground) -> Element:
    tree = ground.truth.steady.get(name)
    if tree is not None:
        return ground.number(tree)
    last = ground.stretches[-1]
    value = solution_value(name, ground, last)
    limit = value.limit() if isinstance(value, Element) else None
    if limit is None:
        raise NotJudgedError(f"{name or 'the model'} has no steady state that is known")
    return limit
