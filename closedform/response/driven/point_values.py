"""Values of exponential polynomials at instants, in a field with the numbers adjoined.

At a root a of p the value at d is e^(ad) R, with R = sum over j of R_j d^j/j!; at a pair
a ± sqrt(D) it is e^(ad) [R_1 C + (R_0 + a R_1) S] with R = R_0 + R_1 lambda, C = cosh(sqrt(D) d)
and S = sinh(sqrt(D) d)/sqrt(D).
"""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass
from math import factorial

from closedform.algebra.adjoined import Adjoined, Recorder
from closedform.algebra.exponential import ExponentialMatrix, ModalTerm
from closedform.algebra.field import BaseField, FieldMatrix, Scalar
from closedform.algebra.root_matrix import RootMatrix
from closedform.algebra.waves import Constant

__all__ = ["HighFactorError", "constant_value", "value_at_instant"]

Numbers = Adjoined | Recorder


@dataclass
class HighFactorError(Exception):
    """A value takes the roots of a factor of degree 3 or more."""

    degree: int


def constant_value(numbers: Numbers, field: BaseField, constant: Constant) -> Scalar:
    """Return e^growth · kernel(angle), an element of the field with the numbers."""
    value = numbers.lift(field.domain.one)
    if constant.growth:
        value = value * numbers.power(constant.growth)
    if constant.kernel != "one":
        cosine, sine = numbers.turn(field.domain.convert(-1), constant.angle)
        value = value * (cosine if constant.kernel == "cos" else sine)
    return value


def value_at_instant(
    numbers: Numbers, weights: Sequence[Scalar], function: ExponentialMatrix, d: Scalar
) -> Scalar:
    """Return the sum of weight · row of a column of functions at d; `weights` may be fewer.

    Raises:  HighFactorError where a factor of degree 3 or more takes part, and d is not 0.
    """
    field = function.field
    rows = function.shape[0]
    zero = field.domain.zero
    row = field.matrix([[*weights, *[zero] * (rows - len(weights))]])
    total = numbers.lift(zero)
    for term in function.terms:
        if not d:
            total = total + numbers.lift(_entry(row, term.residues[0].trace_form()))
            continue
        value = _by_powers(field, term, d)
        parts = [_entry(row, matrix) for matrix in value.coefficients]
        if not any(parts):
            continue
        p = term.factor.p
        if term.factor.degree == 1:
            total = total + numbers.lift(parts[0]) * _power(numbers, field, -p.nth(0) * d)
        elif term.factor.degree == 2:
            low, high = parts
            centre = -p.nth(1) / field.domain.convert(2)
            even, odd = numbers.turn(centre**2 - p.nth(0), d)
            held = numbers.lift(high) * even + numbers.lift(low + high * centre) * odd
            total = total + held * _power(numbers, field, centre * d)
        else:
            raise HighFactorError(term.factor.degree)
    return total


def _power(numbers: Numbers, field: BaseField, exponent: Scalar) -> Scalar:
    return numbers.power(exponent) if exponent else numbers.lift(field.domain.one)


def _entry(row: FieldMatrix, column: FieldMatrix) -> Scalar:
    return (row * column).to_list()[0][0]


def _by_powers(field: BaseField, term: ModalTerm, d: Scalar) -> RootMatrix:
    total = term.residues[0]
    for j, residue in enumerate(term.residues[1:], start=1):
        weight = d**j / field.domain.convert(factorial(j))
        total = total + residue.scaled(field.polynomial([weight]))
    return total
