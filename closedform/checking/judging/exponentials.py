"""Judging e^(At), e^(Jt) and the resolvent."""

from __future__ import annotations

from closedform.algebra.elementary import Element
from closedform.checking.claim import Claim
from closedform.checking.errors import NotJudgedError
from closedform.checking.judging.authors_matrices import (
    authors_diagonal,
    authors_matrix,
    matrix_value,
)
from closedform.checking.judging.canonical import right_products
from closedform.checking.judging.held import held_against
from closedform.checking.judging.open_constants import TRANSFORM_NAMES, constants_of, open_member
from closedform.checking.judging.similar import is_block_form, is_similar
from closedform.checking.standing.ground import SPECTRAL, Ground
from closedform.checking.standing.setting import Finding, Setting
from closedform.checking.values.exponential import matrix_exponential
from closedform.checking.values.matrices import ExactMatrix, identity
from closedform.checking.values.scope import Value
from closedform.checking.values.written_back import written_back
from closedform.notation.written.tree import Array, Symbol, Written, walk

__all__ = ["judge_block_exponential", "judge_resolvent", "judge_transition"]


def judge_transition(claim: Claim, setting: Setting) -> Finding:
    """Judge e^(At), or its value at an instant."""

    def true(ground: Ground) -> Value:
        if claim.at is None:
            return ground.transition
        instant = setting.value(claim.at, ground)
        if isinstance(instant, ExactMatrix):
            raise NotJudgedError("a matrix stands where an instant is wanted")
        return ground.transition.mapped(lambda entry: entry.at(instant))

    constants = constants_of(claim, setting)
    if constants and claim.at is None:
        return open_member(claim, setting, constants, true, lambda member: member)

    def right(ground: Ground) -> Written | None:
        rows = ground.truth.transition
        if claim.at is not None:
            return written_back(true(ground))
        if ground.scope.symbols == setting.ground.scope.symbols and rows is not None:
            return Array(rows)
        return written_back(ground.transition)

    return held_against(claim, setting, true, right)


def judge_block_exponential(claim: Claim, setting: Setting) -> Finding:
    """Judge e^(Jt), for the author's J if that is right.

    Without a J that is similar to A, the line has to be the exponential of a matrix in
    blocks that is.
    """

    def own(ground: Ground) -> ExactMatrix | None:
        for says in ("J", "real form"):
            entry = setting.author.last(says)
            if entry is not None and entry.root is not None:
                asked = [product for product, _ in right_products(setting, ground)]
                return asked[0] if asked else None
            found = authors_matrix(says, setting, ground)
            if found is not None and found.shape == ground.matrix.shape:
                return found if is_similar(found, ground) else None
        return None

    def true(ground: Ground) -> Value:
        matrix = own(ground)
        if matrix is None:
            raise NotJudgedError("no J is stated")
        return matrix_exponential(matrix, ground.eigenvalues)

    if own(setting.ground) is not None:
        return held_against(claim, setting, true, lambda ground: written_back(true(ground)))
    return _any_block_exponential(claim, setting)


def _any_block_exponential(claim: Claim, setting: Setting) -> Finding:
    ground = setting.ground_for(*map(setting.opened, claim.values))
    value = matrix_value(claim.values[-1], setting, ground)
    if value.shape != (ground.size, ground.size):
        return Finding("fails", "it has not the size of A")
    rate = value.mapped(Element.derivative).mapped(lambda e: e.at(ground.field.zero))
    diagonal = authors_diagonal(setting, ground) or ground.jordan
    if is_similar(rate, ground) and is_block_form(rate):
        found = matrix_exponential(rate, ground.eigenvalues)
        if (found - value).is_zero:
            return Finding("holds")
        return Finding("fails", "it is no exponential", written_back(found))
    right = None
    if diagonal is not None:
        right = written_back(matrix_exponential(diagonal))
    return Finding("fails", "it is not the exponential of a form of A in blocks", right)


def judge_resolvent(claim: Claim, setting: Setting) -> Finding:
    """Judge (s I - A)^(-1), whatever its variable is called."""

    def true(ground: Ground) -> Value:
        unit = identity(ground.field, ground.size)
        return (unit.scaled(ground.field.name(SPECTRAL)) - ground.matrix).inverse()

    def prepare(member: Written) -> Written:
        names = {n.name for n in walk(member) if isinstance(n, Symbol)}
        return setting.renamed(member, names - setting.ground.facts.names - {"A"})

    return held_against(
        claim, setting, true, lambda g: written_back(true(g), TRANSFORM_NAMES), prepare=prepare
    )
