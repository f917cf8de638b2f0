"""Judging the solution of a state or an output, or of all states as a column."""

from __future__ import annotations

from dataclasses import replace

from closedform.algebra.elementary import NotElementaryError
from closedform.checking.claim import Claim, Group
from closedform.checking.errors import NotJudgedError
from closedform.checking.judging.free_solutions import judge_general
from closedform.checking.judging.open_constants import constants_of
from closedform.checking.judging.transformed import judge_transform
from closedform.checking.judging.true_solutions import on_stretches, solution_tree, solution_value
from closedform.checking.standing.setting import Finding, Setting
from closedform.notation.written.tree import Jet, Transform

__all__ = ["judge_solution"]


def judge_solution(claim: Claim, setting: Setting) -> Finding:
    """Judge the solution of a state or output, or of all states as a column.

    With constants of integration that nothing defines it is judged as the general solution.
    """
    found = _inverse_transforms(claim, setting)
    if found is not None:
        return found
    constants = constants_of(claim, setting)
    if constants:
        return judge_general(claim, setting, constants)
    return on_stretches(
        claim,
        setting,
        lambda ground, stretch: solution_value(claim.subject, ground, stretch),
        lambda ground: solution_tree(claim.subject, ground),
    )


def _inverse_transforms(claim: Claim, setting: Setting) -> Finding | None:
    """Return what is wrong with members that are inverse transforms; None if nothing is.

    What stands in the braces has to be the transform of the function, as far as it is judged.
    """
    for member in claim.values:
        match member:
            case Transform(body, back=True) if not isinstance(body, Jet):
                group = Group((), (body,))
                inside = replace(claim, says="transform", groups=(group,))
                try:
                    finding = judge_transform(inside, setting)
                except (NotJudgedError, NotElementaryError):
                    continue
                if not finding.passes:
                    reason = "what is transformed back is not the transform"
                    return replace(finding, reason=f"{reason}: {finding.reason}".rstrip(": "))
    return None
