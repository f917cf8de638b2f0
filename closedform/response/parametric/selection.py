"""What selects a case: equations, what must not vanish, and the signs of its regimes."""

from __future__ import annotations

from collections.abc import Sequence

from closedform.algebra.branches import Branch
from closedform.algebra.domain import Comparison, ParameterDomain
from closedform.algebra.field import Scalar
from closedform.algebra.parameter_field import ParameterField
from closedform.algebra.regimes import Regime
from closedform.response.parametric.conditions import (
    WrittenComparison,
    written_comparison,
    written_equation,
)

__all__ = ["case_conditions"]


def case_conditions(
    domain: ParameterDomain, branch: Branch, regimes: Sequence[Regime]
) -> tuple[tuple[WrittenComparison, ...], ParameterDomain]:
    """Return what selects a case, as printed, and the part of the domain that it selects.

    First the equations of the branch, then what must not vanish, then the regimes.
    """
    field = domain.field
    written: list[WrittenComparison] = []
    inside = branch.domain
    for equation in branch.equations:
        if equation.parameter is None or equation.value is None:
            written.append(written_comparison(domain, Comparison(equation.polynomial, "=")))
        else:
            written.append(written_equation(field, equation.parameter, equation.value))
    apart = [
        Comparison(_together(field, e.polynomials), "!=")
        for e in branch.exceptional
        if e.fate != "excluded"
    ]
    of_regimes = [c for regime in regimes for c in regime.conditions]
    whole = inside.narrowed(*of_regimes)
    for comparison in (*apart, *of_regimes):
        if (whole if comparison in apart else inside).implies(comparison):
            continue
        written.append(written_comparison(inside, comparison))
        inside = inside.narrowed(comparison)
    return tuple(dict.fromkeys(written)), inside


def _together(field: ParameterField, polynomials: Sequence[Scalar]) -> Scalar:
    """An element that vanishes where all the polynomials do: one of them, or a sum of squares."""
    if len(polynomials) == 1:
        return polynomials[0]
    return sum((p**2 for p in polynomials), field.domain.zero)
