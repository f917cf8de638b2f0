"""What selects a case: equations, what must not vanish, and the signs of its regimes."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass

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

    First the equations, of the branch and of regimes, then what must not vanish, then the signs
    of the regimes.  None if these contradict each other: then there is no such case.
    """
    field = domain.field
    of_regimes = [c for regime in regimes for c in regime.conditions]
    found = _Found(_equations(domain, branch), branch.domain)
    put: dict[str, Scalar] = {}
    for comparison in of_regimes:
        if comparison.relation == "=":
            found.add(comparison)
            put |= _solved_for_one(field, comparison.element)
    whole = found.inside.narrowed(*of_regimes)
    for exceptional in branch.exceptional:
        if exceptional.fate != "excluded":
            polynomials = [field.substituted(p, put) for p in exceptional.polynomials]
            if not any(polynomials):
                return None
            found.add_not_all_zero(polynomials, whole)
    for comparison in of_regimes:
        found.add(comparison)
    if (branch.equations or of_regimes) and found.inside.contradiction() is not None:
        return None
    return tuple(dict.fromkeys(found.written)), found.inside


@dataclass
class _Found:
    """The conditions written so far, and the domain inside them."""

    written: list[WrittenComparison]
    inside: ParameterDomain

    def add(self, comparison: Comparison) -> None:
        """Add a condition, unless it is implied."""
        if not self.inside.implies(comparison):
            self.written.append(written_comparison(self.inside, comparison))
            self.inside = self.inside.narrowed(comparison)

    def add_not_all_zero(self, polynomials: Sequence[Scalar], whole: ParameterDomain) -> None:
        """Add that at least one of the polynomials is not zero, unless `whole` implies it."""
        field = self.inside.field
        if len(polynomials) == 1:
            if not whole.implies(Comparison(polynomials[0], "!=")):
                self.add(Comparison(polynomials[0], "!="))
            return
        squares = Comparison(sum((p**2 for p in polynomials), field.domain.zero), "!=")
        if not whole.implies(squares):
            shown = [power_of(rational_formula(field, p), 2) for p in polynomials]
            self.written.append(WrittenComparison(sum_of(shown), "!=", ZERO))
            self.inside = self.inside.narrowed(squares)


def _equations(domain: ParameterDomain, branch: Branch) -> list[WrittenComparison]:
    """The equations of a branch, but for those that the whole domain has."""
    written = []
    for equation in branch.equations:
        vanishing = Comparison(equation.polynomial, "=")
        if domain.implies(vanishing):
            continue
        if equation.parameter is None or equation.value is None:
            written.append(written_comparison(domain, vanishing))
        else:
            written.append(written_equation(domain.field, equation.parameter, equation.value))
    return written


def _solved_for_one(field: ParameterField, element: Scalar) -> dict[str, Scalar]:
    """The value of the last parameter in which an equation is linear with a number before it."""
    for name in reversed(field.free):
        slope = field.derivative(element, name)
        if slope and field.number_sign(slope) is not None:
            return {name: field.symbol(name) - element / slope}
    return {}
