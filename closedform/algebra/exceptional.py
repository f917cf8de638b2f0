"""The exceptional set of an exponential with parameters: where its formulas lose their sense."""

from __future__ import annotations

from collections.abc import Iterator, Sequence

from closedform.algebra.exponential import ExponentialMatrix
from closedform.algebra.factor_structure import FactorStructure
from closedform.algebra.field import Polynomial, Scalar
from closedform.algebra.parameter_field import ParameterField

__all__ = ["discriminant_of", "exceptional_elements"]


def exceptional_elements(
    field: ParameterField,
    exponential: ExponentialMatrix,
    structures: Sequence[FactorStructure | None],
) -> Iterator[tuple[Scalar, ...]]:
    """Yield groups of polynomials: where all of a group vanish an exponential does not hold.

    They are the irreducible factors of the denominators in the coefficients; of the
    discriminant of every factor with roots of their own name (for which p'(lambda) divides),
    unless its structure says where roots meet; and of the constant term of a factor whose
    frequencies divide.  Each comes once.
    """
    seen: set[Scalar] = set()
    for element in _denominators(field, exponential, structures):
        for polynomial, _ in field.factored(element).factors:
            made = field.of_polynomial(polynomial)
            if made not in seen:
                seen.add(made)
                yield (made,)
    for structure in structures:
        if structure is not None and structure.simple is not None:
            yield from structure.simple.exceptions


def _denominators(
    field: ParameterField,
    exponential: ExponentialMatrix,
    structures: Sequence[FactorStructure | None],
) -> Iterator[Scalar]:
    for term in exponential.terms:
        for residue in term.residues:
            for matrix in residue.coefficients:
                for row in matrix.to_list():
                    for element in row:
                        if element and not element.denom.is_ground:
                            yield field.of_polynomial(element.denom)
    for term, structure in zip(exponential.terms, structures, strict=True):
        factor = term.factor
        if factor.degree < 3:
            continue
        if factor.roots.form == "even" and factor.roots.squares is not None:
            yield field.of_polynomial(factor.roots.squares.nth(0).numer)
        if structure is None or structure.simple is None:
            roots = factor.roots
            own = roots.squares if roots.form == "even" and roots.squares is not None else factor.p
            yield field.of_polynomial(discriminant_of(field, own).numer)


def discriminant_of(field: ParameterField, p: Polynomial) -> Scalar:
    """Return the discriminant of a monic polynomial of degree 2 or more."""
    if p.degree() == 2:
        return p.nth(1) ** 2 - field.scalar(4) * p.nth(0)
    return p.discriminant()
