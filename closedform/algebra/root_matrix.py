"""Matrices over L = K[lambda]/(p): entries are polynomials in a root lambda of p.

One such matrix stands for its conjugates at all roots of p at once.  It is held by
its coefficients M_0 + M_1 lambda + … + M_(d-1) lambda^(d-1), each a matrix over K, so
that products with K-matrices run at the speed of the matrix library.
"""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass
from functools import reduce
from operator import add

from sympy.polys.domains import QQ

from closedform.algebra.field import BaseField, FieldMatrix, Polynomial, Scalar

__all__ = [
    "RootMatrix",
    "coefficients_low_first",
    "series_inverse",
    "series_product",
    "taylor_at_root",
]

_FEW = 6
"""Beyond this degree over Q a product with an element of L is made as one of matrices."""


def coefficients_low_first(polynomial: Polynomial, length: int) -> list[Scalar]:
    """Return the coefficients of 1, lambda, … padded with zeros to `length`."""
    coefficients: list[Scalar] = polynomial.to_list()[::-1]
    return coefficients + [polynomial.dom.zero] * (length - len(coefficients))


@dataclass(frozen=True)
class RootMatrix:
    """M(lambda) = sum of `coefficients[k]` lambda^k, reduced modulo the monic `modulus`.

    Shapes:  len(coefficients) = deg(modulus), all coefficients of one shape.
    """

    field: BaseField
    modulus: Polynomial
    coefficients: tuple[FieldMatrix, ...]

    @staticmethod
    def constant(field: BaseField, modulus: Polynomial, matrix: FieldMatrix) -> RootMatrix:
        """Return a matrix over K as one over L."""
        zero = field.zeros(*matrix.shape)
        return RootMatrix(field, modulus, (matrix, *[zero] * (modulus.degree() - 1)))

    @staticmethod
    def reduced(
        field: BaseField, modulus: Polynomial, coefficients: Sequence[FieldMatrix]
    ) -> RootMatrix:
        """Return the matrix with these coefficients, lowest first, reduced modulo p.

        At least one coefficient is needed; missing ones are zero.
        """
        d = modulus.degree()
        work = list(coefficients)
        work += [field.zeros(*work[0].shape)] * (d - len(work))
        tail = coefficients_low_first(modulus, d + 1)[:d]
        while len(work) > d:
            top = work.pop()
            if not top.is_zero_matrix:
                for k, c in enumerate(tail, start=len(work) - d):
                    if c:
                        work[k] = work[k] - top * c
        return RootMatrix(field, modulus, tuple(work))

    @property
    def shape(self) -> tuple[int, int]:
        """The numbers of rows and columns."""
        rows, columns = self.coefficients[0].shape
        return rows, columns

    @property
    def is_zero(self) -> bool:
        """Whether every entry is zero in L, which is decided exactly."""
        return all(c.is_zero_matrix for c in self.coefficients)

    def __add__(self, other: RootMatrix) -> RootMatrix:
        pairs = zip(self.coefficients, other.coefficients, strict=True)
        return RootMatrix(self.field, self.modulus, tuple(a + b for a, b in pairs))

    def __sub__(self, other: RootMatrix) -> RootMatrix:
        pairs = zip(self.coefficients, other.coefficients, strict=True)
        return RootMatrix(self.field, self.modulus, tuple(a - b for a, b in pairs))

    def __matmul__(self, other: RootMatrix) -> RootMatrix:
        """Return the matrix product over L."""
        d = len(self.coefficients)
        work = [self.field.zeros(self.shape[0], other.shape[1])] * (2 * d - 1)
        for i, left in enumerate(self.coefficients):
            if left.is_zero_matrix:
                continue
            for k, right in enumerate(other.coefficients):
                if not right.is_zero_matrix:
                    work[i + k] = work[i + k] + left * right
        return RootMatrix.reduced(self.field, self.modulus, work)

    def after(self, matrix: FieldMatrix) -> RootMatrix:
        """Return matrix · M(lambda) for a matrix over K."""
        return RootMatrix(self.field, self.modulus, tuple(matrix * c for c in self.coefficients))

    def before(self, matrix: FieldMatrix) -> RootMatrix:
        """Return M(lambda) · matrix for a matrix over K."""
        return RootMatrix(self.field, self.modulus, tuple(c * matrix for c in self.coefficients))

    def times_root(self) -> RootMatrix:
        """Return lambda · M(lambda)."""
        zero = self.field.zeros(*self.shape)
        return RootMatrix.reduced(self.field, self.modulus, (zero, *self.coefficients))

    def scaled(self, factor: Polynomial) -> RootMatrix:
        """Return factor(lambda) · M(lambda) for an element of L given as a polynomial."""
        d = len(self.coefficients)
        if factor.degree() <= 0:
            c = factor.nth(0)
            return RootMatrix(self.field, self.modulus, tuple(m * c for m in self.coefficients))
        if d > _FEW and self.field.domain == QQ:
            return self._scaled_at_once(factor)
        work = [self.field.zeros(*self.shape)] * (2 * d - 1)
        for i, c in enumerate(coefficients_low_first(factor.rem(self.modulus), d)):
            if c:
                for k, m in enumerate(self.coefficients):
                    work[i + k] = work[i + k] + m * c
        return RootMatrix.reduced(self.field, self.modulus, work)

    def _scaled_at_once(self, factor: Polynomial) -> RootMatrix:
        """The same as one product of matrices, which FLINT makes with whole numbers."""
        field, (rows, columns), d = self.field, self.shape, len(self.coefficients)
        multiples, power = [], factor.rem(self.modulus)
        root = field.polynomial([field.domain.one, field.domain.zero])
        for _ in range(d):
            multiples.append(coefficients_low_first(power, d))
            power = (power * root).rem(self.modulus)
        entries = [[e for row in m.to_list() for e in row] for m in self.coefficients]
        product = (field.matrix(multiples).transpose() * field.matrix(entries)).to_list()
        made = [
            field.matrix([flat[i : i + columns] for i in range(0, rows * columns, columns)])
            for flat in product
        ]
        return RootMatrix(field, self.modulus, tuple(made))

    def shifted(self, matrix: FieldMatrix) -> RootMatrix:
        """Return (matrix - lambda I) · M(lambda) for a square matrix over K."""
        return self.after(matrix) - self.times_root()

    def trace_form(self) -> FieldMatrix:
        """Return the sum of M(lambda)/p'(lambda) over the roots of p: a matrix over K.

        By Euler's formula the sum of lambda^k/p'(lambda) is 0 for k < d - 1 and 1 for
        k = d - 1 (J.-P. Serre, Local Fields, 1979, chapter III, section 6).
        """
        return self.coefficients[-1]

    def entry(self, row: int, column: int) -> Polynomial:
        """Return one entry as a polynomial in lambda."""
        return self.field.polynomial([c[row, column].element for c in reversed(self.coefficients)])


def taylor_at_root(polynomial: Polynomial, modulus: Polynomial, length: int) -> list[Polynomial]:
    """Return f^(k)(lambda)/k! in L for k < length: the Taylor coefficients of f at a root of p."""
    result, derivative = [], polynomial
    for k in range(length):
        result.append(derivative.rem(modulus))
        derivative = derivative.diff().quo_ground(polynomial.dom.convert(k + 1))
    return result


def series_product(
    left: Sequence[Polynomial], right: Sequence[Polynomial], modulus: Polynomial
) -> list[Polynomial]:
    """Return the product of two power series over L, both cut off at the length of `left`."""
    return [
        _total([left[i] * right[k - i] for i in range(k + 1)]).rem(modulus)
        for k in range(len(left))
    ]


def series_inverse(series: Sequence[Polynomial], modulus: Polynomial) -> list[Polynomial]:
    """Return the inverse of a power series over L, cut off at its length.

    The first coefficient is not zero in L.
    """
    first = series[0].invert(modulus)
    inverse = [first]
    for k in range(1, len(series)):
        total = _total([series[i] * inverse[k - i] for i in range(1, k + 1)])
        inverse.append((-(total.rem(modulus)) * first).rem(modulus))
    return inverse


def _total(summands: Sequence[Polynomial]) -> Polynomial:
    return reduce(add, summands)
