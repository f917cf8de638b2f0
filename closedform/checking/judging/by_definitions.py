"""Wrong roots, vectors and members that agree by way of what an earlier wrong line states."""

from __future__ import annotations

from collections.abc import Sequence

from closedform.algebra.elementary import Element
from closedform.checking.claim import Claim
from closedform.checking.judging.by_matrices import (
    DEGREE,
    as_far_as_known,
    diagonals,
    of_quantities,
)
from closedform.checking.judging.compare import compare
from closedform.checking.judging.derived import Derived, stated_matrices
from closedform.checking.judging.spectrum import polynomial_of, roots_claimed
from closedform.checking.standing.ground import SPECTRAL, Ground
from closedform.checking.standing.setting import Setting
from closedform.checking.values.matrices import ExactMatrix, identity
from closedform.notation.written.tree import Symbol, Written, walk

__all__ = ["by_definitions", "by_functions", "roots_of_polynomial", "vector_of_eigenvalue"]


def roots_of_polynomial(claim: Claim, setting: Setting, ground: Ground) -> int | None:
    """Return the root if all listed eigenvalues solve the author's wrong polynomial."""
    listed = [form for forms, _ in roots_claimed(claim) for form in forms[-1:]]
    for own in as_far_as_known(of_quantities(setting, ground)) if ground.size == DEGREE else ():
        if own.root is not None:
            true = [own.value.rows[k][k] for k in range(DEGREE)]
            if all(_is_one_of(form, true, claim, setting, ground) for form in listed):
                return own.root
    for entry in setting.author.all("characteristic polynomial"):
        if entry.root is None:
            continue
        polynomial = polynomial_of(entry, setting, ground)
        values = [setting.value(forms[-1], ground) for forms, _ in roots_claimed(claim)]
        if polynomial is not None and all(
            isinstance(value, Element) and polynomial.substituted({SPECTRAL: value}).is_zero
            for value in values
        ):
            return entry.root
    for matrix in stated_matrices("matrix", setting, ground):
        if matrix.root is not None:
            unit = identity(ground.field, ground.size)
            values = [setting.value(forms[-1], ground) for forms, _ in roots_claimed(claim)]
            if all(
                isinstance(v, Element) and (matrix.value - unit.scaled(v)).determinant().is_zero
                for v in values
            ):
                return matrix.root
    return None


def _is_one_of(
    form: Written, values: list[Element], claim: Claim, setting: Setting, ground: Ground
) -> bool:
    opened, scope = setting.opened(form), setting.scope_of(ground)
    return any(
        compare(opened, value, scope, ground, approximate=claim.approximate).passes
        for value in values
    )


def vector_of_eigenvalue(claim: Claim, setting: Setting, ground: Ground) -> int | None:
    """Return the root if a vector satisfies all but one row of (A - lambda I) v = 0.

    That is how a vector is worked out from an eigenvalue that is none.
    """
    vector = setting.value(claim.values[-1], ground)
    if not isinstance(vector, ExactMatrix):
        return None
    if vector.shape[1] != 1:
        vector = vector.transposed
    if vector.is_zero or vector.shape[0] != ground.size:
        return None
    unit = identity(ground.field, ground.size)
    matrices = [Derived(ground.matrix), *stated_matrices("matrix", setting, ground)]
    for matrix in matrices:
        for own in diagonals(setting, ground):
            for k in range(ground.size):
                image = (matrix.value - unit.scaled(own.value.rows[k][k])) @ vector
                zeros = sum(entry.is_zero for entry in image.entries)
                root = matrix.joined(image, own).root
                if root is not None and zeros >= ground.size - (own.root is not None):
                    return root
    return None


def by_functions(claim: Claim, setting: Setting, ground: Ground) -> int | None:
    """Return the root if the members agree once the author's own functions stand in them."""
    found = [setting.author.solution_in(value) for value in claim.values]
    roots = [root for _, root in found if root is not None]
    if not roots or len(found) < 2:
        return None
    members = [member for member, _ in found]
    return min(roots) if _agree(members, claim, setting, ground) else None


def by_definitions(claim: Claim, setting: Setting, ground: Ground) -> int | None:
    """Return the root if the members agree with one another, by way of a wrong definition."""
    roots = setting.author.definition_roots
    used = {n.name for v in claim.values for n in walk(v) if isinstance(n, Symbol)}
    found = [roots[name] for name in sorted(used & set(roots))]
    if not found or len(claim.values) < 2:
        return None
    return min(found) if _agree(claim.values, claim, setting, ground) else None


def _agree(members: Sequence[Written], claim: Claim, setting: Setting, ground: Ground) -> bool:
    """Whether all members of a claim are equal to its first one."""
    first, scope = setting.value(members[0], ground), setting.scope_of(ground)
    return all(
        compare(setting.opened(m), first, scope, ground, approximate=claim.approximate).passes
        for m in members[1:]
    )
