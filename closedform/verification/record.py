"""What was proved about a response, and by which means."""

from __future__ import annotations

from dataclasses import dataclass
from typing import Literal

from closedform.errors import RefutedError

__all__ = ["Check", "Outcome", "ResponseRefutedError", "VerificationRecord"]

Outcome = Literal["proved", "enclosed", "refuted", "not attempted"]


@dataclass(frozen=True, slots=True)
class Check:
    """One identity: what it says, what came of it, and how that was found.

    `proved` is exact arithmetic, `enclosed` certified numerics; `how` names the entry
    in which a refuted identity fails, or the reason why one was not attempted.
    """

    item: str
    outcome: Outcome
    how: str


@dataclass(frozen=True, slots=True)
class VerificationRecord:
    """All checks of one response, in a fixed order."""

    checks: tuple[Check, ...]

    @property
    def holds(self) -> bool:
        """Whether nothing was refuted and something was proved."""
        outcomes = {check.outcome for check in self.checks}
        return "refuted" not in outcomes and "proved" in outcomes

    @property
    def refuted(self) -> tuple[Check, ...]:
        """The checks that failed."""
        return tuple(check for check in self.checks if check.outcome == "refuted")


class ResponseRefutedError(RefutedError):
    """A response failed its own proof; nothing is issued from it."""

    def __init__(self, model: str, refuted: tuple[Check, ...]) -> None:
        super().__init__(model, refuted)
        self.model, self.refuted = model, refuted

    def __str__(self) -> str:
        found = "; ".join(f"{check.item}: {check.how}" for check in self.refuted)
        return (
            f"{self.model}: the result failed its own proof, so no write-up is issued. {found}. "
            "This is a fault of the program, not of the model; please report it with the model."
        )
