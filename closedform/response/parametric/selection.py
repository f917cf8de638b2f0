"""What selects a case: equations, what must not vanish, and the signs of its regimes."""

from __future__ import annotations

from collections.abc import Sequence

from closedform.algebra.branches import Branch
from closedform.algebra.domain import Comparison, ParameterDomain
from closedform.algebra.field import Scalar
from closedform.algebra.parameter_field import ParameterField
from closedform.algebra.regimes import Regime
from closedform.notation.expression import ZERO, power_of
from closedform.notation.rational_formula import rational_formula
from closedform.notation.terms import sum_of
from closedform.response.parametric.conditions import (
    WrittenComparison,
    written_comparison,
    written_equation,
)

__all__ = ["case_conditions"]


def case_conditions(
    domain: ParameterDomain, branch: Branch, regimes: Sequence[Regime]
) -> tuple[tuple[WrittenComparison, ...], ParameterDomain] | None:
    """Return what selects a case, as printed, and the part of the domain that it selects.

    First the equations of the branch, then what must not vanish, then the regimes.  None if
    these contradict each other: then there is no such case.
    """
    field = domain.field
    written: list[WrittenComparison] = []
    inside = branch.domain
    for equation in branch.equations:
        if domain.implies(Comparison(equation.polynomial, "=")):
            continue
        if equation.parameter is None or equation.value is None:
            written.append(written_comparison(domain, Comparison(equation.polynomial, "=")))
        else:
            written.append(written_equation(field, equation.parameter, equation.value))
    of_regimes = [c for regime in regimes for c in regime.conditions]
    whole = inside.narrowed(*of_regimes)
    for exceptional in branch.exceptional:
        if exceptional.fate == "excluded":
            continue
        polynomials = exceptional.polynomials
        squares = sum((p**2 for p in polynomials), field.domain.zero)
        comparison = Comparison(polynomials[0] if len(polynomials) == 1 else squares, "!=")
        if not whole.implies(comparison):
            if len(polynomials) == 1:
                written.append(written_comparison(inside, comparison))
            else:
                written.append(_not_all_zero(field, polynomials))
            inside = inside.narrowed(comparison)
    for comparison in of_regimes:
        if not inside.implies(comparison):
            written.append(written_comparison(inside, comparison))
            inside = inside.narrowed(comparison)
    if (branch.equations or of_regimes) and inside.contradiction() is not None:
        return None
    return tuple(dict.fromkeys(written)), inside


def _not_all_zero(field: ParameterField, polynomials: Sequence[Scalar]) -> WrittenComparison:
    """The sum of the squares is not zero: at least one of the polynomials is not."""
    squares = [power_of(rational_formula(field, p), 2) for p in polynomials]
    return WrittenComparison(sum_of(squares), "!=", ZERO)
