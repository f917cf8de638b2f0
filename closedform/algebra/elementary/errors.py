"""What lies outside the exact algebra."""

from __future__ import annotations

from closedform.errors import ClosedformError

__all__ = ["NotElementaryError"]


class NotElementaryError(ClosedformError):
    """Something has no exact value in the elementary algebra; `reason` says what and why.

    It is never raised for a wrong formula: it says that nothing was decided.
    """

    def __init__(self, reason: str) -> None:
        super().__init__(reason)
        self.reason = reason

    def __str__(self) -> str:
        return f"outside the exact algebra: {self.reason}"
