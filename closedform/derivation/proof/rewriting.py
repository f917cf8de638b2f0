"""A matrix of which only the writing is changed for print, held against the one proved."""

from __future__ import annotations

from flint import acb, ctx

from closedform.derivation.proof.evaluation import expressions_in, matrix_at, names_in
from closedform.derivation.proof.finding import Fault, StatementRefutedError, agreeing
from closedform.derivation.step import IMAGINARY_UNIT, Matrix

__all__ = ["require_equal"]

_BITS = 384


def require_equal(rewritten: Matrix, matrix: Matrix) -> None:
    """Compare two matrices of formulas entry by entry, in balls, at one value of every name.

    The values are e^(-sqrt(k)), which no formula of rational numbers relates by chance.

    Raises:  StatementRefutedError if an entry differs, or has no certain value.
    """
    with ctx.workprec(_BITS):
        names = _names_in(rewritten) | _names_in(matrix)
        values = {name: (-acb(k).sqrt()).exp() for k, name in enumerate(sorted(names), start=2)}
        values[IMAGINARY_UNIT.text] = acb(0, 1)
        for finding in agreeing(
            "matrix with its common factor in front",
            matrix_at(rewritten, values),
            matrix_at(matrix, values),
        ):
            if isinstance(finding, Fault) or finding.is_apart or not finding.is_settled:
                raise StatementRefutedError("write-up", str(finding), "it is not what it was")


def _names_in(matrix: Matrix) -> frozenset[str]:
    return frozenset(name for formula in expressions_in(matrix) for name in names_in(formula))
