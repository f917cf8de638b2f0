"""From a response to the record of what was proved about it."""

from closedform.verification.record import (
    Check,
    ResponseRefutedError,
    UnprovedError,
    VerificationRecord,
)
from closedform.verification.verify import verify

__all__ = ["Check", "ResponseRefutedError", "UnprovedError", "VerificationRecord", "verify"]
