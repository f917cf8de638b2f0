"""The base field K in which a model is solved: Q, or Q with square roots adjoined.

Elements, polynomials and matrices over K are those of SymPy's polys layer (a `Domain`
element, `DMP`, `DomainMatrix`), which computes with FLINT's types over Q.
"""

from __future__ import annotations

from collections.abc import Iterable, Sequence
from dataclasses import dataclass
from fractions import Fraction
from functools import cached_property, lru_cache
from math import gcd
from typing import Any

from flint import arb, arb_mat, ctx, fmpq
from sympy import Integer, sqrt
from sympy.polys.densebasic import dup_strip
from sympy.polys.domains import QQ
from sympy.polys.matrices import DomainMatrix
from sympy.polys.polyclasses import DMP

from closedform.algebra.enclosure import ball_of
from closedform.algebra.surds import SurdSum
from closedform.errors import InputError

__all__ = [
    "BaseField",
    "FieldMatrix",
    "Polynomial",
    "Scalar",
    "TooManyRootsError",
    "base_field",
    "rational",
]

MOST_ROOTS = 5
"""Square roots of one model, independent of each other: k of them make a field of degree 2^k.

A 3 x 3 matrix that mixes them all took 0.2 s with three, 2.8 s with four, 23 s with five.
"""

Scalar = Any
"""An element of K."""
Polynomial = Any
"""A polynomial in one variable over K (SymPy's DMP)."""
FieldMatrix = Any
"""A dense matrix over K (SymPy's DomainMatrix)."""


class TooManyRootsError(InputError):
    """The numbers of a model need more independent square roots than are computed with.

    `radicands` are independent, and one more than `limit`; there may be others.
    """

    def __init__(self, radicands: tuple[int, ...], limit: int) -> None:
        super().__init__(radicands, limit)
        self.radicands, self.limit = radicands, limit

    def __str__(self) -> str:
        roots = ", ".join(f"sqrt({d})" for d in self.radicands)
        return (
            f"the numbers of the model hold the independent square roots {roots}; exact "
            f"arithmetic takes up to {self.limit} of them, as each doubles the work; give some "
            "of these numbers as decimals or fractions"
        )


@dataclass(frozen=True)
class BaseField:
    """Q(sqrt(d_1), …, sqrt(d_k)) for independent squarefree `radicands` (none: Q itself)."""

    radicands: tuple[int, ...] = ()

    @cached_property
    def domain(self) -> Any:
        """The SymPy domain whose elements are the scalars of this field."""
        if not self.radicands:
            return QQ
        return QQ.algebraic_field(*(sqrt(Integer(d)) for d in self.radicands))

    @property
    def encloses_only(self) -> bool:
        """Whether FLINT knows the elements by balls only, and not as rational numbers."""
        return bool(self.radicands)

    @cached_property
    def _basis(self) -> dict[int, Scalar]:
        """Each squarefree product of the radicands, and its square root in the domain."""
        roots: dict[int, Scalar] = {1: self.domain.one}
        for d in self.radicands:
            root = self.domain.from_sympy(sqrt(Integer(d)))
            for free, product in list(roots.items()):
                common = gcd(free, d)  # sqrt(free) sqrt(d) is `common` times a root
                roots[_free_of(free, d)] = product * root / self.domain.convert(common)
        return roots

    @cached_property
    def _powers(self) -> tuple[SurdSum, ...]:
        """The powers of the primitive element, lowest first, as surd sums.

        SymPy's primitive element is a sum of integer multiples of the adjoined roots.
        """
        parts = self.domain.ext.as_expr().as_coefficients_dict().items()
        theta = SurdSum.of({int(root**2): Fraction(int(c)) for root, c in parts})
        return tuple(theta.power(k) for k in range(2 ** len(self.radicands)))

    def scalar(self, value: SurdSum | Fraction | int) -> Scalar:
        """Return a number as an element of the field.  Raises KeyError if it is not in it."""
        if not isinstance(value, SurdSum):
            return self.domain.convert(QQ(Fraction(value).numerator, Fraction(value).denominator))
        total = self.domain.zero
        for radicand, coefficient in value.terms:
            total += self._basis[radicand] * self.scalar(coefficient)
        return total

    def surds(self, element: Scalar) -> SurdSum:
        """Return an element as a sum of rational multiples of square roots."""
        if not self.radicands:
            return SurdSum.rational(rational(element))
        total = SurdSum(())
        for power, coefficient in zip(self._powers, reversed(element.to_list()), strict=False):
            total += power * SurdSum.rational(rational(coefficient))
        return total

    def number(self, element: Scalar) -> SurdSum | None:
        """Return an element as `surds` does, or None where it is no such sum."""
        return self.surds(element)

    def rational_parts(self, element: Scalar) -> list[tuple[int, int, int]]:
        """Return (numerator, denominator, radicand) for every term of an element."""
        if not self.radicands:
            numerator = int(element.numerator)
            return [(numerator, int(element.denominator), 1)] if numerator else []
        return [(c.numerator, c.denominator, d) for d, c in self.surds(element).terms]

    def enclose(self, element: Scalar) -> arb:
        """Return a ball that holds the element, at FLINT's current precision."""
        if isinstance(element, fmpq):
            return arb(element)
        return ball_of(self.surds(element))

    def enclose_matrix(self, matrix: FieldMatrix) -> arb_mat:
        """Return balls that hold the entries, at FLINT's current precision."""
        rows, columns = matrix.shape
        return arb_mat(rows, columns, [self.enclose(e) for row in matrix.to_list() for e in row])

    def sign(self, element: Scalar) -> int:
        """Return -1, 0 or 1: zero is decided in the field, the sign by refined enclosures."""
        if not element:
            return 0
        bits = 64
        while True:
            with ctx.workprec(bits):
                ball = self.enclose(element)
            if not ball.contains(0):
                return 1 if ball > 0 else -1
            bits *= 2

    def polynomial(self, coefficients: Iterable[Scalar]) -> Polynomial:
        """Return the polynomial with these coefficients, highest first."""
        return DMP(dup_strip(list(coefficients)), self.domain, 0)

    def inverse_modulo(self, p: Polynomial, q: Polynomial) -> Polynomial:
        """Return the inverse of q modulo p.  Raises ZeroDivisionError if they share a root.

        What is left of Euclid's algorithm is a number, by which its cofactor is divided: with
        pi and square roots in the field the number 1 has many forms, and SymPy's own inverse
        knows one of them.
        """
        return _inverse_modulo(self, p, q)

    def matrix(self, rows: Sequence[Sequence[Scalar]]) -> FieldMatrix:
        """Return the dense matrix with these rows (at least one row and column)."""
        return DomainMatrix(
            [list(row) for row in rows], (len(rows), len(rows[0])), self.domain
        ).to_dense()

    def identity(self, n: int) -> FieldMatrix:
        """Return the n x n unit matrix."""
        return DomainMatrix.eye(n, self.domain).to_dense()

    def zeros(self, rows: int, columns: int) -> FieldMatrix:
        """Return the zero matrix of this shape."""
        return DomainMatrix.zeros((rows, columns), self.domain).to_dense()


def base_field(numbers: Iterable[SurdSum]) -> BaseField:
    """Return the smallest of these fields that holds all the numbers.

    A radicand is adjoined only when its class modulo squares is not a product of
    classes already there.  Raises TooManyRootsError beyond `MOST_ROOTS` radicands.
    """
    radicands = sorted({d for number in numbers for d, _ in number.terms} - {1})
    chosen: list[int] = []
    spanned = {1}
    for d in radicands:
        if d not in spanned:
            chosen.append(d)
            if len(chosen) > MOST_ROOTS:
                raise TooManyRootsError(tuple(chosen), MOST_ROOTS)
            spanned |= {_free_of(s, d) for s in spanned}
    return BaseField(tuple(chosen))


def _free_of(a: int, b: int) -> int:
    """The squarefree part of a product of two squarefree numbers, with nothing factored."""
    common = gcd(a, b)
    return (a // common) * (b // common)


def rational(element: Scalar) -> Fraction:
    """Return a rational scalar, of whichever number type SymPy was set up with."""
    return Fraction(int(element.numerator), int(element.denominator))


@lru_cache(maxsize=256)
def _inverse_modulo(field: BaseField, p: Polynomial, q: Polynomial) -> Polynomial:
    cofactor, left = q.rem(p).half_gcdex(p)
    if left.degree():
        raise ZeroDivisionError(f"{q} has no inverse modulo {p}")
    return cofactor * (field.domain.one / left.nth(0))
