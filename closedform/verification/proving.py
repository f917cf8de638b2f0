"""The proof of a response of either kind: in numbers, or with parameters."""

from __future__ import annotations

from typing import overload

from closedform.response.parametric.response import ParametricResponse
from closedform.response.response import Response
from closedform.verification.parametric.record import CaseRecords
from closedform.verification.parametric.verify import verify_cases
from closedform.verification.record import VerificationRecord
from closedform.verification.verify import verify as verify_numbers

__all__ = ["verify"]


@overload
def verify(response: Response) -> VerificationRecord: ...
@overload
def verify(response: ParametricResponse) -> CaseRecords: ...
@overload
def verify(response: Response | ParametricResponse) -> VerificationRecord | CaseRecords: ...


def verify(response: Response | ParametricResponse) -> VerificationRecord | CaseRecords:
    """Return what can be said of a response: exact identities, then certified comparisons.

    Of a response with parameters it is said case by case.  Every check is made, whatever
    came of the others; `holds` says that nothing was refuted or left open.
    """
    if isinstance(response, ParametricResponse):
        return verify_cases(response)
    return verify_numbers(response)
