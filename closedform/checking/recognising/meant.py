"""What a line is meant to claim where its letter alone would tell wrongly."""

from __future__ import annotations

from dataclasses import replace

from closedform.algebra.elementary import NotElementaryError
from closedform.checking.claim import Claim
from closedform.checking.errors import NotJudgedError
from closedform.checking.judging.similar import is_block_form
from closedform.checking.standing.setting import Setting
from closedform.checking.values.matrices import ExactMatrix
from closedform.checking.values.scope import Value

__all__ = ["as_meant"]

MOST_OTHERS = 2
"""So many entries of A may be wrong in what is taken for it."""


def as_meant(claim: Claim, setting: Setting) -> Claim:
    """Return a claim of P, by its letter only, as one of A where most entries are those of A.

    The matrix of a Markov chain goes by Q, that of a chain of reactions by K or M.
    """
    if claim.stated or claim.says != "P" or not claim.values:
        return claim
    ground = setting.ground_for(*map(setting.opened, claim.values))
    try:
        value: Value = setting.value(claim.values[-1], ground)
    except (NotJudgedError, NotElementaryError, ArithmeticError):
        return claim
    if not isinstance(value, ExactMatrix) or value.shape != ground.matrix.shape:
        return claim
    pairs = list(zip(value.entries, ground.matrix.entries, strict=True))
    other = sum(not (own - true).is_zero for own, true in pairs)
    nonzero = sum(not true.is_zero for _, true in pairs)
    near = other <= min(MOST_OTHERS, nonzero - MOST_OTHERS - 1)
    if not near or (other and _transforms(value, ground.matrix)):
        return claim
    return replace(claim, says="matrix")


def _transforms(value: ExactMatrix, matrix: ExactMatrix) -> bool:
    """Whether P^-1 A P is in blocks, so that it is a P that happens to be like A."""
    try:
        return is_block_form(value.inverse() @ matrix @ value)
    except ZeroDivisionError:
        return False
