"""To what a free response tends, where it tends to anything."""

from __future__ import annotations

from collections.abc import Sequence

from closedform.algebra.domain import ParameterDomain
from closedform.algebra.exponential import ExponentialMatrix
from closedform.algebra.field import BaseField, FieldMatrix, Scalar
from closedform.algebra.hurwitz import hurwitz_tests

__all__ = ["limit_of"]


def limit_of(
    field: BaseField,
    matrix: FieldMatrix,
    function: ExponentialMatrix,
    domain: ParameterDomain | None = None,
) -> Sequence[Scalar] | None:
    """Return the limit of a sum of e^(lambda t) t^j over the eigenvalues of A, entry by entry.

    Shapes:  `matrix` A is n x n, `function` r x 1; r elements of the field.  `domain` says
    what is known of parameters.  None unless every eigenvalue that is not 0 has a negative
    real part, and e^(0 t) has no power of t beside it.
    """
    if not {test.manner for test in hurwitz_tests(field, matrix, domain)} <= {"decays", "rests"}:
        return None
    found = [field.domain.zero] * function.shape[0]
    for term in function.terms:
        if term.factor.degree > 1 or term.factor.p.nth(0):
            continue
        constant, *others = term.residues
        rows = range(len(found))
        if any(not r.entry(row, 0).is_zero for r in others for row in rows):
            return None
        found = [constant.entry(row, 0).nth(0) for row in rows]
    return found
