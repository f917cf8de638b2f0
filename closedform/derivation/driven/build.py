"""From a proved driven response to its derivation."""

from __future__ import annotations

from collections.abc import Sequence

from closedform.derivation.driven.cases import in_cases
from closedform.derivation.driven.single import in_numbers
from closedform.derivation.step import Derivation
from closedform.response.driven.numbers import DrivenNumbersAt
from closedform.response.driven.response import DrivenResponse
from closedform.response.parametric.response import ParametricResponse
from closedform.verification.parametric.record import CaseRecords
from closedform.verification.record import VerificationRecord

__all__ = ["derive_driven"]


def derive_driven(
    response: DrivenResponse,
    records: VerificationRecord | CaseRecords,
    *,
    digits: int = 6,
    numbers: Sequence[DrivenNumbersAt] | None = None,
) -> Derivation:
    """Return the derivation of a driven response whose records hold.

    `numbers` are the results at the values that the model gives for its parameters, if it
    gives any.  Every statement in it is proved once more as it will be printed: those about
    the stacked matrix as those of any matrix are, the others against the motion that ball
    arithmetic follows from instant to instant.

    Raises:  ValueError if the records do not hold: nothing is derived from what is not proved;
             StatementRefutedError if a step states what does not hold;
             UnprovedError if it states what the proof does not settle.
    """
    if not records.holds:
        raise ValueError("only a response that was proved is derived")
    stacked = response.stacked
    if isinstance(stacked, ParametricResponse):
        if not isinstance(records, CaseRecords):
            raise TypeError("a response with parameters has records for its cases")
        return in_cases(response, stacked, records, digits, numbers or ())
    if isinstance(records, CaseRecords):
        raise TypeError("a response without parameters has one record")
    return in_numbers(response, stacked, records, digits)
