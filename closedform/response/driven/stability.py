"""Whether a driven model is asymptotically stable: what its own eigenvalues do, not the inputs'."""

from __future__ import annotations

from collections.abc import Callable
from dataclasses import dataclass
from typing import Literal

from closedform.algebra.domain import ParameterDomain
from closedform.algebra.field import Scalar
from closedform.algebra.hurwitz import HurwitzTest, hurwitz_tests
from closedform.model.driven.model import DrivenModel

__all__ = ["Stability", "Verdict", "stability_of"]

Verdict = Literal["stable", "not stable", "undecided"]
"""stable: asymptotically, every free response decays.  undecided: nothing is said."""


@dataclass(frozen=True)
class Stability:
    """The verdict on the eigenvalues of A in one case, factor by factor.

    `characteristic` are the coefficients of det(sI - A), highest first, with the equations
    of the case put in; its factors over the field have a test each, in `factors`.  The
    verdict is "stable" where every factor decays, "not stable" where one does not, whatever
    the others do, and "undecided" else."""

    verdict: Verdict
    characteristic: tuple[Scalar, ...]
    factors: tuple[HurwitzTest, ...]

    @property
    def reasons(self) -> tuple[HurwitzTest, ...]:
        """The tests on which the verdict rests: all, or those that fail, or those left open."""
        if self.verdict == "stable":
            return self.factors
        passed = ("decays",) if self.verdict == "undecided" else ("decays", "undecided")
        return tuple(test for test in self.factors if test.manner not in passed)

    @property
    def marginal(self) -> bool:
        """Whether no root has a positive real part, but some of them none that is negative.

        These are 0 or imaginary; free responses stay bounded if none of them is repeated.
        """
        manners = {test.manner for test in self.factors}
        return manners <= {"decays", "rests", "oscillates"} and manners != {"decays"}


def stability_of(
    model: DrivenModel,
    domain: ParameterDomain | None,
    put: Callable[[Scalar], Scalar] = lambda element: element,
) -> Stability:
    """Return the verdict on A = `model.reduction.matrix`, where `domain` holds.

    `domain` is that of a branch of parameters, None without these; `put` puts its equations
    into elements.
    Exact:   see `closedform.algebra.hurwitz`.
    """
    field = model.field
    rows = model.reduction.matrix.to_list()
    matrix = field.matrix([[put(e) for e in row] for row in rows])
    tests = hurwitz_tests(field, matrix, domain)
    manners = {test.manner for test in tests}
    verdict: Verdict = "not stable"
    if manners <= {"decays"}:
        verdict = "stable"
    elif manners <= {"decays", "undecided"}:
        verdict = "undecided"
    return Stability(verdict, tuple(field.polynomial(matrix.charpoly()).to_list()), tests)
