"""The exceptional set of an exponential with parameters: where its formulas lose their sense."""

from __future__ import annotations

from collections.abc import Iterator, Sequence
from fractions import Fraction
from functools import reduce
from math import lcm

from closedform.algebra.domain import ParameterDomain
from closedform.algebra.exponential import ExponentialMatrix
from closedform.algebra.factor_structure import FactorStructure
from closedform.algebra.field import Polynomial, Scalar, rational
from closedform.algebra.known_roots import has_known_roots
from closedform.algebra.parameter_field import ParameterField, ParameterPolynomial
from closedform.algebra.polynomial_factors import discriminant_in_last
from closedform.errors import InputError

__all__ = ["RootsUnknownError", "discriminant_of", "exceptional_elements", "roots_unknown"]

MOST_IN_DISCRIMINANT = 4
"""Parameters in the discriminant of a polynomial of degree 4 and more: with five of them that
of a quartic has thousands of terms, and says nothing to a reader."""


class RootsUnknownError(InputError):
    """An irreducible factor of high degree of which it is not known where its roots lie.

    `model` is the name of the model that it is of, empty as long as that is not known.
    """

    def __init__(self, degree: int, parameters: tuple[str, ...], model: str = "") -> None:
        super().__init__(degree, parameters, model)
        self.degree, self.parameters, self.model = degree, parameters, model

    def of(self, model: str) -> RootsUnknownError:
        """Return the same error with the name of the model."""
        return RootsUnknownError(self.degree, self.parameters, model)

    def __str__(self) -> str:
        names = ", ".join(self.parameters)
        whose = f"{self.model}: " if self.model else ""
        return (
            f"{whose}the characteristic polynomial has an irreducible factor of degree "
            f"{self.degree} in which the parameters {names} decide how many roots are real, and "
            "no structure of the model (symmetry, a chain or a star of compartments, springs and "
            "masses) settles it, or whether two of them meet; give some of these parameters as "
            "numbers"
        )


def roots_unknown(field: ParameterField, p: Polynomial) -> RootsUnknownError:
    """Return the error about a factor, with the parameters in it."""
    names = {n for c in p.to_list() for n in field.names_in(c)}
    return RootsUnknownError(int(p.degree()), tuple(n for n in field.parameters if n in names))


def exceptional_elements(
    field: ParameterField,
    exponential: ExponentialMatrix,
    structures: Sequence[FactorStructure | None],
    domain: ParameterDomain,
) -> Iterator[tuple[Scalar, ...]]:
    """Yield groups of polynomials: where all of a group vanish an exponential does not hold.

    They are the irreducible factors of the denominators in coefficients and factors; of the
    discriminant of every factor with roots of their own name (for which p'(lambda) divides),
    unless its structure says where roots meet; and of the constant term of a factor whose
    frequencies divide.  Each comes once; polynomials in pi alone never vanish, and are left out.
    """
    seen: set[Scalar] = set()
    for element in (
        *_denominators(field, exponential, structures),
        *_below_in_factors(field, exponential, domain),
    ):
        for polynomial, _ in field.factored(element).factors:
            made = field.of_polynomial(polynomial)
            if made not in seen and field.number_sign(made) is None:
                seen.add(made)
                yield (made,)
    yield from _meeting_pairs(field, exponential, domain)
    for structure in structures:
        if structure is not None and structure.simple is not None:
            yield from structure.simple.exceptions


def _below_in_factors(
    field: ParameterField, exponential: ExponentialMatrix, domain: ParameterDomain
) -> Iterator[Scalar]:
    """The denominators in the factors, but for those of which it is plain that none vanishes."""
    for term in exponential.terms:
        for c in term.factor.polynomial:
            below = field.of_polynomial(c.denom)
            if not c.denom.is_ground and not domain.sign_of(below).never_zero:
                yield below


def _meeting_pairs(
    field: ParameterField, exponential: ExponentialMatrix, domain: ParameterDomain
) -> Iterator[tuple[Scalar, ...]]:
    """The discriminant of a quadratic factor that has one sign and may be zero.

    The formulas would hold there too; but a sum of terms of one sign vanishes only where all of
    them do, w^2 + u^2 = 0 say, and that is a simpler branch of its own.
    """
    for term in exponential.terms:
        if term.factor.degree != 2:
            continue
        discriminant = term.factor.roots.discriminant
        if domain.sign_of(discriminant).sign in ("nonnegative", "nonpositive"):
            for polynomial, _ in field.factored(discriminant).factors:
                made = field.of_polynomial(polynomial)
                if not domain.sign_of(made).never_zero:
                    yield (made,)


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
        if factor.degree < 3 or has_known_roots(field, factor.p):
            continue  # the roots of an irreducible polynomial in numbers are simple
        if factor.roots.form == "even" and factor.roots.squares is not None:
            yield field.of_polynomial(factor.roots.squares.nth(0).numer)
        if structure is None or structure.simple is None:
            roots = factor.roots
            own = roots.squares if roots.form == "even" and roots.squares is not None else factor.p
            yield field.of_polynomial(discriminant_of(field, own).numer)


def discriminant_of(field: ParameterField, p: Polynomial) -> Scalar:
    """Return the discriminant of a monic polynomial of degree 2 or more, up to a square.

    The square is an even power of a common denominator of the coefficients.
    Raises RootsUnknownError beyond `MOST_IN_DISCRIMINANT` parameters from degree 4 on.
    """
    d = int(p.degree())
    coefficients = p.to_list()
    names = {n for c in coefficients for n in field.names_in(c)}
    if d > 3 and len(names) > MOST_IN_DISCRIMINANT:
        raise roots_unknown(field, p)
    below = reduce(_common_multiple, (c.denom for c in coefficients if c))
    terms: dict[tuple[int, ...], Fraction] = {}
    for power, c in enumerate(reversed(coefficients)):
        cleared = c * field.of_polynomial(below)  # a polynomial over a number
        number = rational(cleared.denom.LC)
        terms |= {(*m, power): rational(n) / number for m, n in cleared.numer.iterterms()}
    numbers = lcm(*(n.denominator for n in terms.values()))
    found = discriminant_in_last({m: n * numbers for m, n in terms.items()})
    ring = below.ring
    return field.of_polynomial(ring.from_dict({m: ring.domain(int(n)) for m, n in found.items()}))


def _common_multiple(f: ParameterPolynomial, g: ParameterPolynomial) -> ParameterPolynomial:
    return f.lcm(g)
