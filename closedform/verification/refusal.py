"""Nothing is issued from a response that was not proved."""

from __future__ import annotations

from closedform.verification.parametric.record import CaseRecords
from closedform.verification.record import (
    ResponseRefutedError,
    UnprovedError,
    VerificationRecord,
)

__all__ = ["require_proved"]


def require_proved(model: str, verification: VerificationRecord | CaseRecords) -> None:
    """Return if everything holds that was to be proved of a model's response.

    Raises:  ResponseRefutedError if anything was refuted, UnprovedError if anything
             essential was left open.
    """
    if verification.left_open and not verification.refuted:
        raise UnprovedError(model, verification.left_open)
    if not verification.holds:
        raise ResponseRefutedError(model, verification.refuted)
