"""Judging J: similar to A, in blocks, and in the order of the author's P."""

from __future__ import annotations

from closedform.algebra.elementary import NotElementaryError
from closedform.checking.claim import Claim
from closedform.checking.errors import NotJudgedError, UnknownNameError
from closedform.checking.judging.authors_matrices import authors_diagonal, matrix_value, misfit_of
from closedform.checking.judging.compare import has_decimals
from closedform.checking.judging.held import held_against
from closedform.checking.judging.rounded_forms import exact_form
from closedform.checking.judging.similar import is_block_form, is_similar
from closedform.checking.standing.ground import Ground
from closedform.checking.standing.setting import Finding, Setting
from closedform.checking.values.matrices import ExactMatrix
from closedform.checking.values.scope import Value
from closedform.checking.values.written_back import written_back
from closedform.notation.written.tree import Product, Written

__all__ = ["in_authors_order", "is_diagonal", "judge_canonical", "right_products"]


def judge_canonical(claim: Claim, setting: Setting) -> Finding:
    """Judge J: similar to A, in blocks, in any order; with the author's P if that is stated."""

    def right(ground: Ground) -> Written | None:
        form = ground.jordan
        return None if form is None else written_back(form)

    product = next((name for name in claim.names if isinstance(name, Product)), None)
    if product is not None:
        try:
            return held_against(
                claim, setting, lambda ground: matrix_value(product, setting, ground), right
            )
        except UnknownNameError:
            pass
    last: Finding | None = None
    for member in claim.values:
        opened = setting.opened(member)
        ground = setting.ground_for(opened)
        matrix = matrix_value(member, setting, ground)
        misfit = misfit_of(matrix, ground)
        if misfit is not None:
            return misfit
        if has_decimals(opened) and exact_form(matrix, ground) is not None:
            last = _rounded_form(claim, member, setting)
            if not last.passes:
                return last
            continue
        if not is_similar(matrix, ground):
            return Finding("fails", "it is not similar to A", right(ground))
        if not is_block_form(matrix):
            return Finding("fails", "it is similar to A, but not in blocks", right(ground))
        asked = _asked_by_transformation(matrix, claim, setting, ground)
        if asked is not None:
            return Finding("fails", "A P is not P J", written_back(asked))
        last = Finding(
            "holds" if in_authors_order(matrix, setting, ground) else "holds up to order"
        )
    if last is None:
        raise NotJudgedError("no matrix is given")
    return last


def _asked_by_transformation(
    matrix: ExactMatrix, claim: Claim, setting: Setting, ground: Ground
) -> ExactMatrix | None:
    """Return P^-1 A P for the author's P, stated before and right, if J ought to be that.

    None is returned where J is that for some P, and where J and P are of different kinds, the
    one real and the other not, so that they do not belong together.
    """
    asked = [product for product, _ in right_products(setting, ground)]
    stated = [entry.claim.statements for entry in setting.author.entries]
    later = [
        c.values[-1]
        for c in setting.later
        if c.says == "P" and c.values and c.statements not in stated
    ]
    kinds = [p for p in asked if _is_real(p) == _is_real(matrix) and is_block_form(p)]
    if claim.says == "real form":
        kinds = [p for p in kinds if not is_diagonal(p)]
    if not kinds or later or any((p - matrix).is_zero for p in asked):
        return None
    return kinds[0]


def right_products(setting: Setting, ground: Ground) -> list[tuple[ExactMatrix, ExactMatrix]]:
    """Return P^-1 A P and P for every right P without decimals that was stated before."""
    found = []
    for entry in setting.author.all("P"):
        if entry.root is not None or has_decimals(entry.value):
            continue
        try:
            p = matrix_value(entry.value, setting, ground)
            if p.shape == ground.matrix.shape:
                found.append((p.inverse() @ ground.matrix @ p, p))
        except (NotJudgedError, NotElementaryError, ZeroDivisionError):
            continue
    return found


def _is_real(matrix: ExactMatrix) -> bool:
    return all(entry.field.im(entry).is_zero for entry in matrix.entries)


def _rounded_form(claim: Claim, member: Written, setting: Setting) -> Finding:
    """Judge the digits of a canonical form that stands for an exact one."""

    def true(ground: Ground) -> Value:
        form = exact_form(matrix_value(member, setting, ground), ground)
        if form is None:
            raise NotJudgedError("it is not told which form its numbers stand for")
        return form

    return held_against(claim, setting, true, values=(member,))


def in_authors_order(matrix: ExactMatrix, setting: Setting, ground: Ground) -> bool:
    """Whether the diagonal follows the author's list of eigenvalues."""
    own = authors_diagonal(setting, ground)
    if own is None:
        return True
    size = range(ground.size)
    return all((own.rows[k][k] - matrix.rows[k][k]).is_zero for k in size) or any(
        not matrix.rows[k][k].is_zero and not matrix.rows[i][k].is_zero and i > k
        for k in size
        for i in size
    )


def is_diagonal(matrix: ExactMatrix) -> bool:
    """Whether everything beside the diagonal is zero."""
    return all(
        entry.is_zero for i, row in enumerate(matrix.rows) for j, entry in enumerate(row) if i != j
    )
