"""What was proved about a response with parameters: of each case, and of all together."""

from __future__ import annotations

from dataclasses import dataclass
from itertools import chain

from closedform.verification.record import Check, VerificationRecord

__all__ = ["CaseRecords"]


@dataclass(frozen=True, slots=True)
class CaseRecords:
    """`whole` is about the cases together: that they cover the domain, and join.

    `cases` has one record for each case of the response, in their order.
    """

    whole: VerificationRecord
    cases: tuple[VerificationRecord, ...]

    @property
    def holds(self) -> bool:
        """Whether everything holds, of every case."""
        return self.whole.holds and all(record.holds for record in self.cases)

    @property
    def refuted(self) -> tuple[Check, ...]:
        """The checks that failed."""
        return tuple(chain(self.whole.refuted, *(record.refuted for record in self.cases)))

    @property
    def left_open(self) -> tuple[Check, ...]:
        """The essential checks that were left open."""
        return tuple(chain(self.whole.left_open, *(record.left_open for record in self.cases)))
