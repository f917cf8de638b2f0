"""Matrices that the author states: P, J, and the diagonal of the eigenvalues."""

from __future__ import annotations

from closedform.algebra.elementary import Element, NotElementaryError
from closedform.checking.errors import NotJudgedError
from closedform.checking.judging.compare import has_decimals
from closedform.checking.judging.rounded_forms import exact_form
from closedform.checking.judging.spectrum import roots_claimed
from closedform.checking.standing.ground import Ground
from closedform.checking.standing.setting import Finding, Setting
from closedform.checking.values.matrices import ExactMatrix, diagonal
from closedform.notation.written.tree import Written

__all__ = ["authors_diagonal", "authors_matrix", "matrix_value", "misfit_of"]


def matrix_value(tree: Written, setting: Setting, ground: Ground) -> ExactMatrix:
    """Return the exact value of what ought to be a matrix.

    Raises NotJudgedError for a number.
    """
    value = setting.value(tree, ground)
    if not isinstance(value, ExactMatrix):
        raise NotJudgedError("a number stands where a matrix is wanted")
    return value


def misfit_of(matrix: ExactMatrix, ground: Ground) -> Finding | None:
    """Return the finding on a matrix that has not the size of A, else None."""
    if matrix.shape == (ground.size, ground.size):
        return None
    rows, columns = matrix.shape
    return Finding("fails", f"it is {rows} by {columns}, the matrix A has {ground.size} rows")


def authors_matrix(says: str, setting: Setting, ground: Ground) -> ExactMatrix | None:
    """Return a matrix that the author states, P, J or another, or None."""
    tree = setting.stated(says)
    if tree is None:
        return None
    try:
        matrix = matrix_value(tree, setting, ground)
        rounded = says in ("J", "real form") and has_decimals(setting.opened(tree))
        form = exact_form(matrix, ground) if rounded else None
    except (NotJudgedError, NotElementaryError, ZeroDivisionError):
        return None
    return matrix if form is None else form


def authors_diagonal(setting: Setting, ground: Ground) -> ExactMatrix | None:
    """Return the diagonal matrix of the author's eigenvalues in their order, if all are listed."""
    entries = setting.author.all("eigenvalues")
    found: list[Element] = []
    for entry in reversed(entries):
        for forms, count in roots_claimed(entry.claim):
            value = setting.value(forms[0], ground)
            if isinstance(value, ExactMatrix):
                return None
            found += [value] * (count or 1)
    return diagonal(ground.field, found) if len(found) == ground.size else None
