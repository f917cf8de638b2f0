"""Whether a driven model is asymptotically stable: what its own eigenvalues do, not the inputs'."""

from __future__ import annotations

from dataclasses import dataclass
from typing import Literal

from closedform.algebra.field import Scalar
from closedform.algebra.hurwitz import HurwitzTest

__all__ = ["Stability", "Verdict"]

Verdict = Literal["stable", "not stable", "undecided"]
"""stable: asymptotically, every free response decays.  undecided: nothing is said."""


@dataclass(frozen=True)
class Stability:
    """The verdict on the eigenvalues of A in one case, factor by factor.

    `characteristic` are the coefficients of det(sI - A), highest first, with the equations
    of the case put in; its factors over the field have a test each, in `factors`.  The
    verdict is "stable" where every factor decays, "not stable" where one does not, whatever
    the others do, and "undecided" else.  `condition` is that of the case, in plain notation.
    """

    verdict: Verdict
    characteristic: tuple[Scalar, ...]
    factors: tuple[HurwitzTest, ...]
    condition: str = "true"

    @property
    def reasons(self) -> tuple[HurwitzTest, ...]:
        """The tests on which the verdict rests: all, or those that fail, or those left open."""
        if self.verdict == "stable":
            return self.factors
        wanted = ("undecided",) if self.verdict == "undecided" else ("grows", "persists", "rests")
        found = tuple(test for test in self.factors if test.manner in wanted)
        held = tuple(test for test in self.factors if test.manner == "oscillates")
        return found if self.verdict == "undecided" else found + held
