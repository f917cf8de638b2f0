"""Exponential polynomials as finite exact objects, and e^(At) by the resolvent.

The object is a matrix of functions

    F(t) = sum over p  sum over roots lambda of p  e^(lambda t)/p'(lambda)
           ( R_0(lambda) + R_1(lambda) t + … + R_(nu-1)(lambda) t^(nu-1)/(nu-1)! )

with p irreducible over K and R_j over L = K[lambda]/(p).  The R_j are unique, so that
two such functions are equal exactly when their R_j are.  Dividing by p'(lambda) keeps
the R_j small: for a simple factor that is all of the spectrum, R_0 is the adjugate.
"""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass
from fractions import Fraction
from math import factorial

from flint import arb, arb_mat

from closedform.algebra.enclosure import value_at
from closedform.algebra.field import BaseField, FieldMatrix, Polynomial
from closedform.algebra.root_matrix import (
    RootMatrix,
    coefficients_low_first,
    series_inverse,
    taylor_at_root,
)
from closedform.algebra.spectrum import Factor, Spectrum
from closedform.algebra.surds import SurdSum

__all__ = ["ExponentialMatrix", "ModalTerm", "exponential_by_resolvent"]


@dataclass(frozen=True)
class ModalTerm:
    """What the roots of one factor contribute: R_0, …, R_(nu-1), none of them missing."""

    factor: Factor
    residues: tuple[RootMatrix, ...]

    def times(self, matrix: FieldMatrix) -> ModalTerm:
        """Return the term with every R_j multiplied from the right."""
        return ModalTerm(self.factor, tuple(r.before(matrix) for r in self.residues))

    def after(self, matrix: FieldMatrix) -> ModalTerm:
        """Return the term with every R_j multiplied from the left."""
        return ModalTerm(self.factor, tuple(r.after(matrix) for r in self.residues))


@dataclass(frozen=True)
class ExponentialMatrix:
    """A matrix of exponential polynomials in t, as the module's text says."""

    field: BaseField
    terms: tuple[ModalTerm, ...]

    @property
    def shape(self) -> tuple[int, int]:
        """The numbers of rows and columns."""
        return self.terms[0].residues[0].shape

    def times(self, matrix: FieldMatrix) -> ExponentialMatrix:
        """Return F(t) · matrix."""
        return ExponentialMatrix(self.field, tuple(term.times(matrix) for term in self.terms))

    def after(self, matrix: FieldMatrix) -> ExponentialMatrix:
        """Return matrix · F(t)."""
        return ExponentialMatrix(self.field, tuple(term.after(matrix) for term in self.terms))

    def at_zero(self) -> FieldMatrix:
        """Return F(0), exactly."""
        total = self.field.zeros(*self.shape)
        for term in self.terms:
            total = total + term.residues[0].trace_form()
        return total

    def exact_entry(self, row: int, column: int, t: SurdSum) -> SurdSum | None:
        """Return an entry at t as a surd sum, or None if it is transcendental.

        At one algebraic t other than 0 an exponential polynomial is a sum of e^(lambda t)
        with algebraic coefficients.  It is transcendental unless those of all lambda other
        than 0 vanish there (the theorem of Lindemann and Weierstrass; A. Baker,
        Transcendental Number Theory, 1975, chapter 1).  They may do so at this t alone, as
        in (t - 1) e^(-t).  Those of the roots of p are a polynomial in lambda of a degree
        below that of p, and vanish at all its roots only if it is zero.
        """
        if t.is_zero:
            return self.field.surds(self.at_zero()[row, column].element)
        total = SurdSum(())
        for term in self.terms:
            entries = [residue.entry(row, column) for residue in term.residues]
            held = [self._at(entries, k, t) for k in range(term.factor.degree)]
            if all(c.is_zero for c in held):
                continue
            if term.factor.degree > 1 or term.factor.roots.centre:
                return None
            total += held[0]
        return total

    def _at(self, entries: Sequence[Polynomial], power: int, t: SurdSum) -> SurdSum:
        """The coefficient of lambda^power in the sum of R_j t^j/j!."""
        total = SurdSum(())
        for j, entry in enumerate(entries):
            weight = t.power(j) * SurdSum.rational(Fraction(1, factorial(j)))
            total += self.field.surds(entry.nth(power)) * weight
        return total

    def enclosure(self, t: arb) -> arb_mat:
        """Return balls for F(t) at FLINT's current precision."""
        total = arb_mat(*self.shape)
        for term in self.terms:
            for power, residue in enumerate(term.residues):
                weights = _trace_weights(term.factor, t, power)
                for weight, matrix in zip(weights, residue.coefficients, strict=True):
                    if not matrix.is_zero_matrix:
                        total = total + self.field.enclose_matrix(matrix) * weight
        return total


def exponential_by_resolvent(
    field: BaseField, matrix: FieldMatrix, spectrum: Spectrum
) -> ExponentialMatrix:
    """Return e^(At) from the resolvent (sI - A)^(-1) modulo each factor, without eigenvectors.

    With mu the minimal polynomial, mu(s) = (s - lambda)^nu g(s) over L, and u_k the Taylor
    coefficients of 1/g at lambda, the spectral projector is
    Z = sum over k < nu of u_k (A - lambda)^k g(A), and the coefficient of
    e^(lambda t) t^j/j! is (A - lambda)^j Z.
    Source:  F. R. Gantmacher, The Theory of Matrices, 1959, volume 1, chapter V.
    """
    mu = spectrum.minimal_polynomial
    powers = [field.identity(matrix.shape[0])]
    for _ in range(int(mu.degree()) - 1):
        powers.append(powers[-1] * matrix)
    terms = tuple(_modal_term(field, matrix, f, mu, powers) for f in spectrum.factors)
    return ExponentialMatrix(field, terms)


def _modal_term(
    field: BaseField,
    matrix: FieldMatrix,
    factor: Factor,
    mu: Polynomial,
    powers: list[FieldMatrix],
) -> ModalTerm:
    p, nu = factor.p, factor.index
    images = [_cofactor_of_matrix(field, p, nu, mu, powers)]
    for _ in range(nu - 1):
        images.append(images[-1].shifted(matrix))
    weights = _residue_weights(field, factor, mu)
    residues = []
    for j in range(nu):
        total = images[j].scaled(weights[0])
        for k in range(1, nu - j):
            total = total + images[j + k].scaled(weights[k])
        residues.append(total)
    return ModalTerm(factor, tuple(residues))


def _cofactor_of_matrix(
    field: BaseField, p: Polynomial, nu: int, mu: Polynomial, powers: list[FieldMatrix]
) -> RootMatrix:
    """Return g(A) over L, where mu(s) = (s - lambda)^nu g(s).

    The coefficients of g are polynomials in lambda over K; synthetic division keeps
    them unreduced, as columns of integers by power of lambda.
    """
    lam = field.polynomial([field.domain.one, field.domain.zero])
    coefficients = [field.polynomial([c]) for c in mu.to_list()]
    for _ in range(nu):
        carry = field.polynomial([field.domain.zero])
        divided = []
        for c in coefficients[:-1]:
            carry = (carry * lam).rem(p) + c
            divided.append(carry)
        coefficients = divided
    d = int(p.degree())
    n = powers[0].shape[0]
    parts = [field.zeros(n, n) for _ in range(d)]
    for power, c in zip(powers, reversed(coefficients), strict=False):
        for k, scalar in enumerate(coefficients_low_first(c, d)):
            if scalar:
                parts[k] = parts[k] + power * scalar
    return RootMatrix(field, p, tuple(parts))


def _residue_weights(field: BaseField, factor: Factor, mu: Polynomial) -> list[Polynomial]:
    """Return p'(lambda) u_k for k < nu, u the Taylor series of 1/g at lambda.

    g has the Taylor coefficients mu^(nu+k)(lambda)/(nu+k)!.  With p itself the minimal
    polynomial, g(lambda) = p'(lambda), and the one weight is 1: nothing is inverted.
    """
    p, nu = factor.p, factor.index
    if mu == p:
        return [field.polynomial([field.domain.one])]
    if nu == 1:
        return [mu.quo(p).rem(p).invert(p)]
    g = taylor_at_root(mu, p, 2 * nu)[nu:]
    derivative = p.diff()
    return [(derivative * u).rem(p) for u in series_inverse(g, p)]


def _trace_weights(factor: Factor, t: arb, power: int) -> list[arb]:
    """Return balls for sum over roots of lambda^k e^(lambda t) t^j/(j! p'(lambda)), k < d."""
    derivative = factor.p.diff().to_list()
    field = factor.roots.field
    balls = [field.enclose(c) for c in derivative]
    weights = [arb(0)] * factor.degree
    scale = arb(1)
    for k in range(1, power + 1):
        scale = scale * t / k  # t**power would have a logarithm, even of a ball around 0
    for root in factor.roots.enclosures():
        if root.imag < 0:
            continue
        slope = value_at(balls, root)
        value = (root * t).exp() / slope
        double = 1 if root.imag == 0 else 2
        for k in range(factor.degree):
            weights[k] = weights[k] + (value.real * double) * scale
            value = value * root
    return weights
