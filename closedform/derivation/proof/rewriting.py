"""A matrix of which only the writing is changed for print, held against the one proved."""

from __future__ import annotations

from flint import acb, ctx

from closedform.derivation.proof.evaluation import expressions_in, matrix_at
from closedform.derivation.proof.finding import (
    Comparison,
    Fault,
    StatementRefutedError,
    agreeing,
)
from closedform.derivation.step import IMAGINARY_UNIT, Matrix
from closedform.notation.expression import names_in

__all__ = ["require_equal"]

_FIRST_BITS = 384
_MOST_BITS = 1 << 14


def require_equal(rewritten: Matrix, matrix: Matrix) -> None:
    """Compare two matrices of formulas entry by entry, in balls, at one value of every name.

    The values are e^(-sqrt(k)), which no formula of rational numbers relates by chance.

    Raises:  StatementRefutedError if an entry differs, or has no value;
             UnprovedError if it is not settled.
    """
    bits = _FIRST_BITS
    while True:
        with ctx.workprec(bits):
            wide = _wide(rewritten, matrix)
        if not wide:
            return
        if bits >= _MOST_BITS:
            break
        bits = min(2 * bits, _MOST_BITS)
    for comparison in wide:
        if comparison.has_no_value:
            raise StatementRefutedError("write-up", str(comparison), "it has no value")
    from closedform.verification.record import Check, UnprovedError  # loads all of the algebra

    how = f"not settled by {bits} bits"
    raise UnprovedError("write-up", tuple(Check(str(c), "not attempted", how) for c in wide))


def _wide(rewritten: Matrix, matrix: Matrix) -> list[Comparison]:
    """Return the entries that FLINT's current precision does not settle."""
    names = _names_in(rewritten) | _names_in(matrix)
    values = {name: (-acb(k).sqrt()).exp() for k, name in enumerate(sorted(names), start=2)}
    values[IMAGINARY_UNIT.text] = acb(0, 1)
    wide = []
    for finding in agreeing(
        "matrix with its common factor in front",
        matrix_at(rewritten, values),
        matrix_at(matrix, values),
    ):
        if isinstance(finding, Fault) or finding.is_apart:
            raise StatementRefutedError("write-up", str(finding), "it is not what it was")
        if not finding.is_settled:
            wide.append(finding)
    return wide


def _names_in(matrix: Matrix) -> frozenset[str]:
    return frozenset(name for formula in expressions_in(matrix) for name in names_in(formula))
