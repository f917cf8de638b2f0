"""The right form of what a failing line claims, where its judge does not give one."""

from __future__ import annotations

from collections.abc import Iterator

from closedform.algebra.elementary import Element, NotElementaryError
from closedform.checking.claim import Claim
from closedform.checking.errors import NotJudgedError
from closedform.checking.judging.authors_matrices import authors_diagonal, authors_matrix
from closedform.checking.standing.ground import Ground
from closedform.checking.standing.setting import Finding, Setting
from closedform.checking.values.matrices import ExactMatrix, identity
from closedform.checking.values.written_back import written_back
from closedform.notation.written.tree import Written

__all__ = ["right_form"]

OUTSIDE = (NotJudgedError, NotElementaryError, ArithmeticError)


def right_form(claim: Claim, finding: Finding, setting: Setting) -> Written | None:
    """Return the right form of a claim's value: the judge's, or a P made for the author's J."""
    if finding.right is not None or claim.says != "P" or not claim.values:
        return finding.right
    try:
        matrix = _transformation(setting, setting.ground_for(setting.opened(claim.values[-1])))
        return None if matrix is None else written_back(matrix)
    except OUTSIDE:
        return None


def _transformation(setting: Setting, ground: Ground) -> ExactMatrix | None:
    """Return a P with A P = P J for J of ones above the diagonal, the author's if that is one."""
    own = authors_matrix("J", setting, ground) or authors_diagonal(setting, ground)
    form = own if own is not None and own.shape == ground.matrix.shape else ground.jordan
    if form is None:
        return None
    columns: list[ExactMatrix] = []
    used: list[ExactMatrix] = []
    for chain in _chains(form):
        found = _chain(ground, *chain, used)
        if found is None:
            return None
        used.append(found[0])
        columns += found
    rows = tuple(zip(*(column.entries for column in columns), strict=True))
    matrix = ExactMatrix(ground.field, rows)
    return matrix if (ground.matrix @ matrix - matrix @ form).is_zero else None


def _chains(form: ExactMatrix) -> Iterator[tuple[Element, int]]:
    """Yield the eigenvalue and the length of each block of J."""
    size, at = form.shape[0], 0
    while at < size:
        end = at + 1
        while end < size and not form.rows[end - 1][end].is_zero:
            end += 1
        yield form.rows[at][at], end - at
        at = end


def _chain(
    ground: Ground, value: Element, length: int, used: list[ExactMatrix]
) -> list[ExactMatrix] | None:
    """Return a chain of a length, the eigenvector first, apart from those that are used."""
    shifted = ground.matrix - identity(ground.field, ground.size).scaled(value)
    for last in shifted.power(length).kernel():
        chain = [last]
        for _ in range(length - 1):
            chain.insert(0, shifted @ chain[0])
        if not chain[0].is_zero and _is_new(chain[0], used):
            return chain
    return None


def _is_new(vector: ExactMatrix, used: list[ExactMatrix]) -> bool:
    """Whether a vector does not depend on others."""
    columns = [*used, vector]
    rows = tuple(zip(*(column.entries for column in columns), strict=True))
    return ExactMatrix(vector.field, rows).rank() == len(columns)
