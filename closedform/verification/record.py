"""What was proved about a response, and by which means."""

from __future__ import annotations

from dataclasses import dataclass
from typing import Literal

from closedform.errors import InputError, RefutedError

__all__ = ["Check", "Outcome", "ResponseRefutedError", "UnprovedError", "VerificationRecord"]

Outcome = Literal["proved", "enclosed", "refuted", "not attempted"]

_MOST_TOLD = 3
"""How many open checks an error tells of; it keeps all of them."""


@dataclass(frozen=True, slots=True)
class Check:
    """One identity: what it says, what came of it, and how that was found.

    `proved` is exact arithmetic, `enclosed` certified numerics; `how` names the entry
    in which a refuted identity fails, or the reason why one was not attempted.  A check
    that is not `essential` may stay open: what it says is proved by another one already.
    """

    item: str
    outcome: Outcome
    how: str
    essential: bool = True


@dataclass(frozen=True, slots=True)
class VerificationRecord:
    """All checks of one response, in a fixed order."""

    checks: tuple[Check, ...]

    @property
    def holds(self) -> bool:
        """Whether nothing was refuted, something was proved, and nothing essential is open."""
        outcomes = {check.outcome for check in self.checks}
        return "refuted" not in outcomes and "proved" in outcomes and not self.left_open

    @property
    def refuted(self) -> tuple[Check, ...]:
        """The checks that failed."""
        return tuple(check for check in self.checks if check.outcome == "refuted")

    @property
    def left_open(self) -> tuple[Check, ...]:
        """The essential checks that were not attempted, or settled nothing."""
        return tuple(
            check for check in self.checks if check.essential and check.outcome == "not attempted"
        )


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


class UnprovedError(InputError):
    """The proof of a response or its derivation came to no end; nothing is issued from it.

    Nothing was found wrong, so that this is no refutation.  It is the model, or what was
    asked of it, that is beyond the precision of the proof, and to change these helps: the
    same branch as for a number that no precision settles.
    """

    def __init__(self, model: str, left_open: tuple[Check, ...]) -> None:
        super().__init__(model, left_open)
        self.model, self.left_open = model, left_open

    def __str__(self) -> str:
        told = [f"{check.item}: {check.how}" for check in self.left_open[:_MOST_TOLD]]
        if len(self.left_open) > _MOST_TOLD:
            told.append(f"and {len(self.left_open) - _MOST_TOLD} more")
        return (
            f"{self.model}: the result could not be proved, so no write-up is issued; nothing in "
            f"it was found wrong. Left open: {'; '.join(told)}. As a rule the numbers of the model "
            "or its instants are too extreme for this proof, or its parameters leave too much "
            "open: ask for less extreme numbers, change the time unit of the model, or narrow the "
            "parameters by assumptions and conditions, or give some of them as numbers."
        )
