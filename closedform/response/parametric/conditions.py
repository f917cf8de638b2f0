"""Comparisons as they are printed: terms on the side on which they are positive."""

from __future__ import annotations

from dataclasses import dataclass
from typing import Literal

from closedform.algebra.domain import Comparison, ParameterDomain
from closedform.algebra.field import Scalar
from closedform.algebra.parameter_field import ParameterField
from closedform.notation.expression import Expression
from closedform.notation.latex.formula import formula
from closedform.notation.plain import plain
from closedform.notation.rational_formula import rational_formula
from closedform.response.parametric.modes import perfect_root

__all__ = ["WrittenComparison", "written_comparison", "written_equation"]

Sign = Literal["<", ">", "<=", ">=", "!=", "=="]
LATEX_SIGNS = {"<": "<", ">": ">", "<=": r"\le", ">=": r"\ge", "!=": r"\neq", "==": "="}
"""The signs of comparisons as LaTeX."""


@dataclass(frozen=True)
class WrittenComparison:
    """left sign right, in the parameters."""

    left: Expression
    sign: Sign
    right: Expression

    def __str__(self) -> str:
        return f"{plain(self.left)} {self.sign} {plain(self.right)}"

    @property
    def latex(self) -> str:
        """The comparison as LaTeX for a notebook."""
        sides = (formula(side).latex for side in (self.left, self.right))
        return f" {LATEX_SIGNS[self.sign]} ".join(sides)


def written_comparison(domain: ParameterDomain, comparison: Comparison) -> WrittenComparison:
    """Return a comparison without factors whose sign the domain knows, short on both sides.

    The leading parameter stands on the left: c^2 < 4*k*m, not 4*k*m > c^2, where c is
    declared before k; k1 != k2.
    """
    field = domain.field
    element, turned = _undecided_part(domain, comparison)
    relation: Sign = "==" if comparison.relation == "=" else comparison.relation
    if (
        comparison.relation == ">"
        and not turned
        and (root := perfect_root(field, element)) is not None
    ):
        element, relation, turned = root, "!=", False
    single = _of_one_parameter(field, element)
    if single is not None:
        above, below, rising = single
        turned = turned if rising else not turned
        if turned:
            relation = _FLIPPED[relation]
    else:
        above, below = _split(field, element)
        if turned:
            above, below = below, above
        if _comes_first(field, below, above):
            above, below, relation = below, above, _FLIPPED[relation]
    return WrittenComparison(
        rational_formula(field, above), relation, rational_formula(field, below)
    )


_FLIPPED: dict[Sign, Sign] = {">": "<", ">=": "<=", "==": "==", "!=": "!="}


def _of_one_parameter(field: ParameterField, element: Scalar) -> tuple[Scalar, Scalar, bool] | None:
    """For a x + b with numbers a and b, pi among them: x, -b/a, and whether a > 0."""
    names = field.names_in(element)
    if len(names) != 1 or not element.denom.is_ground:
        return None
    (name,) = names
    slope = field.derivative(element, name)
    sign = field.number_sign(slope)
    if sign is None:
        return None
    x = field.symbol(name)
    return x, x - element / slope, sign > 0


def written_equation(field: ParameterField, name: str, value: Scalar) -> WrittenComparison:
    """Return name == value."""
    return WrittenComparison(
        rational_formula(field, field.symbol(name)), "==", rational_formula(field, value)
    )


def _undecided_part(domain: ParameterDomain, comparison: Comparison) -> tuple[Scalar, bool]:
    """The product of the factors that can change sign, and whether the rest is negative."""
    field, strict = domain.field, comparison.relation in (">", ">=")
    parts = field.factored(comparison.element)
    kept, turned = field.domain.one, parts.content < 0
    for polynomial, exponent in parts.factors:
        factor = field.of_polynomial(polynomial)
        sign = domain.sign_of(factor).sign
        odd = exponent % 2 == 1
        if sign == "negative":
            turned ^= odd
        elif sign != "positive":
            if strict and not odd:
                if sign != "nonzero":
                    kept *= factor**2
            elif exponent > 0 or strict:
                kept *= factor
    return kept, turned and strict


def _split(field: ParameterField, element: Scalar) -> tuple[Scalar, Scalar]:
    """A polynomial as a difference of two with positive coefficients."""
    above = below = field.domain.zero
    ring = element.numer.ring
    for monomial, coefficient in element.numer.iterterms():
        term = field.of_polynomial(ring({monomial: abs(coefficient)}))
        if coefficient > 0:
            above += term
        else:
            below += term
    return above, below


def _comes_first(field: ParameterField, left: Scalar, right: Scalar) -> bool:
    """Whether `left` reads better on the left: fewer terms, then the parameter declared first."""

    def key(element: Scalar) -> tuple[object, ...]:
        if field.number_sign(element) is not None:
            return (1, 0, ())
        monomials = element.numer.monoms()
        return (0, len(monomials), tuple(-e for e in monomials[0]))

    return key(left) < key(right)
