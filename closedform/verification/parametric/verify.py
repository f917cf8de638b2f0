"""From a response with parameters to the record of what was proved about it."""

from __future__ import annotations

from closedform.response.parametric.response import ParametricResponse
from closedform.verification.parametric.conditions import condition_check
from closedform.verification.parametric.cover import cover_check, cover_points_check
from closedform.verification.parametric.defined import defined_check
from closedform.verification.parametric.identities import branch_checks, state_checks
from closedform.verification.parametric.joins import join_check
from closedform.verification.parametric.record import CaseRecords
from closedform.verification.parametric.written import formula_check
from closedform.verification.record import VerificationRecord

__all__ = ["verify_cases"]


def verify_cases(response: ParametricResponse) -> CaseRecords:
    """Return what can be said of a response: of each case, and of the cases together.

    The identities of a branch are proved once and stand in the record of each of its cases.
    Every check is made, whatever came of the others.
    """
    of_branches = {b.number: branch_checks(response, b) for b in response.branches}
    cases = tuple(
        VerificationRecord(
            (
                *of_branches[case.branch.number],
                condition_check(response, case),
                *state_checks(response, case),
                defined_check(response, case),
                formula_check(response, case),
                *join_check(response, case),
            )
        )
        for case in response.cases
    )
    return CaseRecords(
        VerificationRecord((cover_check(response), cover_points_check(response))), cases
    )
