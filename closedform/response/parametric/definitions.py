"""The definitions of named quantities as formulas."""

from __future__ import annotations

from fractions import Fraction

from closedform.algebra.domain import ParameterDomain
from closedform.algebra.field import Scalar
from closedform.algebra.surds import drawn_out
from closedform.notation.expression import (
    Call,
    Expression,
    Negation,
    Quotient,
    number,
    operations,
    power_of,
    product,
)
from closedform.notation.rational_formula import rational_formula, weighted_rational
from closedform.notation.terms import negated, sum_of
from closedform.response.parametric.quantities import (
    Definition,
    ResidueDefinition,
    RootDefinition,
    SquareRoot,
    SumOfRoots,
    Value,
)

__all__ = ["definition_formula", "square_root_formula"]


def definition_formula(domain: ParameterDomain, definition: Definition) -> Expression | None:
    """Return the shortest formula of a definition; None for a root of a polynomial.

    `domain` is over the writing field, and says which factors may leave a square root.
    """
    match definition:
        case Value(value):
            return rational_formula(domain.field, value)
        case SquareRoot(square):
            return square_root_formula(domain, square)
        case SumOfRoots(total, last, sign, rooted):
            inside = _root_of_quadratic(domain, total, last, sign)
            return Call("sqrt", inside) if rooted else inside
        case RootDefinition() | ResidueDefinition():
            return None


def square_root_formula(domain: ParameterDomain, square: Scalar) -> Expression:
    """Return sqrt(square): what has a known sign is drawn out of the root where that is short."""
    field = domain.field
    outside, inside = _drawn_out(domain, square)
    whole: Expression = Call("sqrt", rational_formula(field, square))
    if inside == 1:
        return rational_formula(field, outside)
    root = Call("sqrt", rational_formula(field, inside))
    return min(whole, weighted_rational(field, outside, [root], []), key=operations)


def _drawn_out(domain: ParameterDomain, square: Scalar) -> tuple[Scalar, Scalar]:
    """Return (o, i) with square = o^2 i, o > 0 and i a polynomial without known squares."""
    field = domain.field
    parts = field.factored(square)
    number_out, number_in = _rational_root(parts.content)
    outside, inside = field.scalar(number_out), field.scalar(number_in)
    for polynomial, exponent in parts.factors:
        factor = field.of_polynomial(polynomial)
        sign = domain.sign_of(factor).sign
        if sign not in ("positive", "negative"):
            inside *= factor**exponent
            continue
        half = exponent // 2  # rounded down, so that no factor is left below
        outside *= (factor if sign == "positive" or half % 2 == 0 else -factor) ** half
        if exponent % 2:
            inside *= factor
    return outside, inside


def _rational_root(value: Fraction) -> tuple[Fraction, Fraction]:
    """Return (r, m) with value = r^2 m, m an integer without square factors, as far as known."""
    size = abs(value)
    whole, rest = drawn_out(size.numerator * size.denominator)
    return Fraction(whole, size.denominator), Fraction(rest if value > 0 else -rest)


def _root_of_quadratic(
    domain: ParameterDomain, total: Scalar, last: Scalar, sign: int
) -> Expression:
    """(S ± sqrt(S^2 - 4 P))/2, or (M ± sqrt(M^2 - 4 P d^2))/(2 d) with S = M/d, d > 0."""
    field = domain.field
    forms = [_over(domain, total, last, sign, field.domain.one)]
    d = field.of_polynomial(total.denom) if total else field.domain.one
    if domain.sign_of(d).sign == "positive":
        if d != 1:
            forms.append(_over(domain, total * d, last * d**2, sign, d))
        forms.append(_half_over(domain, total * d / field.scalar(2), last * d**2, sign, d))
    return min(forms, key=operations)


def _half_over(
    domain: ParameterDomain, half: Scalar, last: Scalar, sign: int, below: Scalar
) -> Expression:
    """(h ± sqrt(h^2 - P))/d, which is shorter where h has no fraction: (2 + sqrt(2))/q."""
    field = domain.field
    root = square_root_formula(domain, half**2 - last)
    above = sum_of([rational_formula(field, half), root if sign > 0 else Negation(root)])
    return above if below == 1 else Quotient(above, rational_formula(field, below))


def _over(
    domain: ParameterDomain, total: Scalar, last: Scalar, sign: int, below: Scalar
) -> Expression:
    field = domain.field
    gap = total**2 - field.scalar(4) * last
    roots = [square_root_formula(domain, gap)]
    written = rational_formula(field, total)
    if total:
        four = rational_formula(field, field.scalar(4) * last)
        roots.append(Call("sqrt", sum_of([power_of(written, 2), negated(four)])))
    root = min(roots, key=operations)
    above = sum_of([written, root if sign > 0 else Negation(root)]) if total else root
    return Quotient(above, product([number(2), rational_formula(field, below)]))
