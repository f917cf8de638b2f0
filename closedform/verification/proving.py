"""The proof of a response of any kind: in numbers, with parameters, driven."""

from __future__ import annotations

from typing import overload

from closedform.response.driven.response import DrivenResponse
from closedform.response.parametric.response import ParametricResponse
from closedform.response.response import Response
from closedform.verification.driven.verify import verify_driven
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
def verify(
    response: Response | ParametricResponse | DrivenResponse,
) -> VerificationRecord | CaseRecords: ...


def verify(
    response: Response | ParametricResponse | DrivenResponse,
) -> VerificationRecord | CaseRecords:
    """Return what can be said of a response: exact identities, then certified comparisons.

    Of a response with parameters it is said case by case.  Every check is made, whatever
    came of the others; `holds` says that nothing was refuted or left open.
    """
    match response:
        case DrivenResponse():
            return verify_driven(response)
        case ParametricResponse():
            return verify_cases(response)
        case Response():
            return verify_numbers(response)
