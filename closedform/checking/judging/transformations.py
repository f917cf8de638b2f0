"""Judging P and its inverse, held against the author's J or eigenvalues."""

from __future__ import annotations

from closedform.algebra.elementary import NotElementaryError
from closedform.checking.claim import Claim
from closedform.checking.errors import NotJudgedError
from closedform.checking.judging.authors_matrices import (
    authors_diagonal,
    authors_matrix,
    matrix_value,
    misfit_of,
)
from closedform.checking.judging.canonical import in_authors_order, is_diagonal
from closedform.checking.judging.compare import has_decimals
from closedform.checking.judging.eigenspaces import (
    eigenvalue_of_vector,
    eigenvectors,
    named_direction,
    rounded_text,
)
from closedform.checking.judging.held import held_against
from closedform.checking.judging.similar import is_block_form, is_similar
from closedform.checking.standing.ground import Ground
from closedform.checking.standing.setting import Finding, Setting
from closedform.checking.values.matrices import ExactMatrix
from closedform.checking.values.scope import Value
from closedform.checking.values.spread import spread
from closedform.checking.values.written_back import written_back
from closedform.notation.written.tree import Written

__all__ = ["judge_inverse", "judge_transformation"]


def judge_transformation(claim: Claim, setting: Setting) -> Finding:
    """Judge P: invertible, and A P = P J for the author's J, before or after the line.

    Without J the order of the author's eigenvalues is asked for, and another one is right up to
    order; without these any order is.
    """
    last: Finding | None = None
    for member in claim.values:
        opened = setting.opened(member)
        ground = setting.ground_for(opened)
        matrix = matrix_value(member, setting, ground)
        misfit = misfit_of(matrix, ground)
        if misfit is not None:
            return misfit
        last = _transformation(matrix, opened, setting, ground)
        if not last.passes:
            return last
    if last is None:
        raise NotJudgedError("no matrix is given")
    return last


def _transformation(
    matrix: ExactMatrix, member: Written, setting: Setting, ground: Ground
) -> Finding:
    try:
        inverse = matrix.inverse()
    except ZeroDivisionError:
        return Finding("fails", "it has no inverse")
    if has_decimals(member):
        finding = _rounded_columns(member, setting, ground)
        if finding is not None:
            return finding
    product = inverse @ ground.matrix @ matrix
    stated = [form for form in _canonical_forms(setting, ground) if is_similar(form, ground)]
    if any((product - form).is_zero for form in stated):
        return Finding("holds", "A P = P J")
    before = any(setting.author.all(says) for says in CANONICAL)
    first = is_block_form(product) and in_authors_order(product, setting, ground)
    if stated and (before or not first):
        turned = "A P is not P J: its columns are in another order than J asks for"
        reason = turned if is_block_form(product) else "A P is not P J"
        return Finding("fails", _columns_text(matrix, ground) or reason)
    if not is_block_form(product):
        if has_decimals(member):
            finding = _rounded_columns(member, setting, ground)
            if finding is not None:
                return finding
        return Finding("fails", _columns_text(matrix, ground) or "P^-1 A P is not in blocks")
    order = authors_diagonal(setting, ground)
    if order is not None and is_diagonal(product) and not (product - order).is_zero:
        return Finding("holds up to order", "its columns are in another order than the eigenvalues")
    return Finding("holds", "P^-1 A P is in blocks")


def _canonical_forms(setting: Setting, ground: Ground) -> list[ExactMatrix]:
    """Return every J and real form that the author states, before or later."""
    claims = [
        *(entry.claim for says in CANONICAL for entry in setting.author.all(says)),
        *(claim for claim in setting.later if claim.says in CANONICAL),
    ]
    found = []
    for claim in claims:
        try:
            matrix = matrix_value(claim.values[-1], setting, ground) if claim.values else None
        except (NotJudgedError, NotElementaryError, ZeroDivisionError):
            continue
        if matrix is not None and matrix.shape == (ground.size, ground.size):
            found.append(matrix)
    return found


CANONICAL = ("J", "real form")


def _rounded_columns(member: Written, setting: Setting, ground: Ground) -> Finding | None:
    """Judge a P with printed decimals column by column, each an eigenvector up to its length."""
    rows = spread(member)
    if rows is None:
        return None
    kernels = [eigenvectors(ground, v) or named_direction(ground, v) for v in ground.eigenvalues]
    if any(len(kernel) != 1 for kernel in kernels) or len(kernels) != ground.size:
        return None
    left, told = list(kernels), []
    for entries in zip(*rows, strict=True):
        found = next(
            (
                (k, text)
                for k in left
                if (text := rounded_text(entries, k, setting, ground)) is not None
            ),
            None,
        )
        if found is None:
            return None
        left.remove(found[0])
        told.append(found[1])
    return Finding("holds to the digits shown", "; ".join(filter(None, told)))


def _columns_text(matrix: ExactMatrix, ground: Ground) -> str:
    """Return which columns are no eigenvectors, where A has a basis of these."""
    if any(root.algebraic != root.geometric for root in ground.truth.eigenvalues):
        return ""
    wrong = [
        k + 1
        for k, entries in enumerate(matrix.columns)
        if eigenvalue_of_vector(entries, ground) is None
    ]
    if not wrong:
        return ""
    listed = ", ".join(map(str, wrong))
    one = len(wrong) == 1
    return f"column {listed} is no eigenvector" if one else f"columns {listed} are no eigenvectors"


def judge_inverse(claim: Claim, setting: Setting) -> Finding:
    """Judge P^(-1) as the inverse of the author's P; without a right one, as that of any P."""

    def true(ground: Ground) -> Value:
        own = authors_matrix("P", setting, ground)
        if own is None:
            raise NotJudgedError("no P is stated whose inverse it is to be")
        return own.inverse()

    stated = setting.author.last("P")
    if stated is not None and stated.root is None:
        return held_against(claim, setting, true, lambda ground: written_back(true(ground)))
    ground = setting.ground_for(*map(setting.opened, claim.values))
    matrix = matrix_value(claim.values[-1], setting, ground)
    if matrix.shape != (ground.size, ground.size):
        return Finding("fails", "it has not the size of A")
    try:
        return _transformation(matrix.inverse(), claim.values[-1], setting, ground)
    except ZeroDivisionError:
        return Finding("fails", "it has no inverse")
