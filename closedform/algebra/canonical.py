"""Eigenvectors, generalised chains and the Jordan form, one factor of the spectrum at a time.

For each irreducible factor p the space ker p(A)^nu is split into cyclic pieces
u, Au, A^2 u, … by linear algebra over K alone.  The chain of a root lambda follows from
its generator u: the vector at the top is q(A)^j u with p(s) = (s - lambda) q(s), and
(A - lambda) leads down to the eigenvector.  P^(-1) is never computed over a field that
holds all eigenvalues at once; its rows are the chains of the other side, each in its
own L (F. R. Gantmacher, The Theory of Matrices, 1959, volume 1, chapter VII).
"""

from __future__ import annotations

from collections.abc import Iterator, Sequence
from dataclasses import dataclass, replace
from fractions import Fraction
from functools import cached_property, reduce
from math import comb, gcd, lcm
from operator import add
from typing import Any

from closedform.algebra.field import BaseField, FieldMatrix, Polynomial, Scalar
from closedform.algebra.root_matrix import (
    RootMatrix,
    series_inverse,
    series_product,
    taylor_at_root,
)
from closedform.algebra.spectrum import Factor, Spectrum, polynomial_of_matrix

__all__ = ["JordanChain", "JordanForm", "jordan_form"]

_LARGEST_TO_POLISH = 12


@dataclass(frozen=True)
class JordanChain:
    """One Jordan chain for every root of a factor.

    `vectors` are v_1, …, v_size over L with (A - lambda) v_1 = 0, (A - lambda) v_(k+1) = v_k.
    `generator` is u over K with p(A)^size u = 0, and v_size = tau(A - lambda) Z u, where
    Z u is the part of u that belongs to lambda and `tau` the list of coefficients of tau.
    """

    factor: Factor
    generator: FieldMatrix
    vectors: tuple[RootMatrix, ...]
    tau: tuple[Polynomial, ...]

    @property
    def size(self) -> int:
        """The number of vectors, which is the size of the Jordan block."""
        return len(self.vectors)

    def coordinates(self, power: int) -> tuple[Polynomial, ...]:
        """Return the coordinates of A^power u along v_1, …, v_size, in L.

        A^power Z u = (lambda + N)^power tau(N)^(-1) v_size with N = A - lambda.
        """
        p = self.factor.p
        return tuple(reversed(series_product(self._shifted(power), self._inverse_tau, p)))

    def scaled_coordinates(self, power: int) -> tuple[Polynomial, tuple[Polynomial, ...]]:
        """Return (s, c) with s · coordinates(power) = c and s not zero in L.

        For a single vector s is tau, so that nothing is inverted: over a field of rational
        functions that is most of the work.
        """
        if self.size == 1:
            return self.tau[0], (self._shifted(power)[0],)
        one = self.vectors[0].field.polynomial([self.vectors[0].field.domain.one])
        return one, self.coordinates(power)

    def _shifted(self, power: int) -> list[Polynomial]:
        """The series of (lambda + N)^power in N, cut off at the size."""
        field = self.vectors[0].field
        lam = field.polynomial([field.domain.one, field.domain.zero])
        return [
            (lam ** max(power - k, 0))
            .mul_ground(field.domain.convert(comb(power, k)))
            .rem(self.factor.p)
            for k in range(self.size)
        ]

    @cached_property
    def _inverse_tau(self) -> list[Polynomial]:
        return series_inverse(list(self.tau), self.factor.p)


@dataclass(frozen=True)
class JordanForm:
    """A complete set of chains; `basis` has the columns u, Au, … of every chain in turn."""

    field: BaseField
    chains: tuple[JordanChain, ...]
    basis: FieldMatrix

    @cached_property
    def left_chains(self) -> tuple[tuple[RootMatrix, ...], ...]:
        """The rows of P^(-1): for each chain the w_1, …, w_size over L with w_i v_k = delta_ik."""
        inverse = self.basis.inv()
        left, offset = [], 0
        for chain in self.chains:
            p = chain.factor.p
            count = chain.size * chain.factor.degree
            rows = [
                RootMatrix.constant(self.field, p, inverse[k, :].to_dense())
                for k in range(offset, offset + count)
            ]
            columns = [chain.coordinates(k) for k in range(count)]
            left.append(
                tuple(
                    _total(
                        [row.scaled(column[i]) for row, column in zip(rows, columns, strict=True)]
                    )
                    for i in range(chain.size)
                )
            )
            offset += count
        return tuple(left)


def jordan_form(field: BaseField, matrix: FieldMatrix, spectrum: Spectrum) -> JordanForm:
    """Return chains that span the whole space, with vectors scaled to be short to print."""
    chains = tuple(
        chain
        for factor in spectrum.factors
        for chain in _chains_of_factor(field, matrix, spectrum, factor)
    )
    columns = []
    for chain in chains:
        vector = chain.generator
        for _ in range(chain.size * chain.factor.degree):
            columns.append(vector)
            vector = matrix * vector
    return JordanForm(field, chains, columns[0].hstack(*columns[1:]))


def _chains_of_factor(
    field: BaseField, matrix: FieldMatrix, spectrum: Spectrum, factor: Factor
) -> list[JordanChain]:
    if factor.multiplicity == 1:
        generators = _simple_generators(field, matrix, spectrum, factor)
        return [_shortest(_chain(field, matrix, factor, u, 1) for u in generators)]
    base = polynomial_of_matrix(field, factor.p, matrix)
    powers = [field.identity(matrix.shape[0])]
    for _ in range(factor.index):
        powers.append(powers[-1] * base)
    chains: list[JordanChain] = []
    socle: FieldMatrix | None = None
    for size in sorted(set(factor.blocks), reverse=True):
        wanted = factor.blocks.count(size)
        kernel = powers[size].nullspace().transpose().to_dense()
        candidates = [
            _chain(field, matrix, factor, kernel[:, k].to_dense(), size)
            for k in range(kernel.shape[1])
        ]
        if matrix.shape[0] <= _LARGEST_TO_POLISH:
            candidates.sort(key=_chain_weight)
        for chain in candidates:
            if not wanted:
                break
            extended = _with_socle(matrix, factor, powers[size - 1] * chain.generator, socle)
            if extended.rank() == extended.shape[1]:
                socle = extended
                chains.append(chain)
                wanted -= 1
    return chains


def _with_socle(
    matrix: FieldMatrix, factor: Factor, image: FieldMatrix, socle: FieldMatrix | None
) -> FieldMatrix:
    """Append image, A image, … to the columns found so far in ker p(A)."""
    columns = [image]
    for _ in range(factor.degree - 1):
        columns.append(matrix * columns[-1])
    new = columns[0].hstack(*columns[1:])
    return new if socle is None else socle.hstack(new)


def _simple_generators(
    field: BaseField, matrix: FieldMatrix, spectrum: Spectrum, factor: Factor
) -> Iterator[FieldMatrix]:
    """Yield vectors of ker p(A) for a simple factor: images of unit vectors under (c/p)(A).

    They all give the same eigenvectors up to scale in L; with p of degree 3 and more the
    scale is kept, so a few are offered to choose from.
    """
    n = matrix.shape[0]
    cofactor = spectrum.characteristic_polynomial.quo(factor.p).to_list()
    offered = 0
    for i in range(n):
        unit = field.identity(n)[:, i].to_dense()
        image = unit * cofactor[0]
        for c in cofactor[1:]:
            image = matrix * image + unit * c
        if not image.is_zero_matrix:
            yield image
            offered += 1
            if n > _LARGEST_TO_POLISH or (factor.degree <= 2 and offered == 1):
                return


def _chain(
    field: BaseField, matrix: FieldMatrix, factor: Factor, generator: FieldMatrix, size: int
) -> JordanChain:
    """Return the chain below q(A)^size u, then scaled to be short."""
    p = factor.p
    top = RootMatrix.constant(field, p, generator)
    for _ in range(size):
        top = _quotient_of_matrix(matrix, p, top)
    vectors = [top]
    for _ in range(size - 1):
        vectors.append(vectors[-1].shifted(matrix))
    q = taylor_at_root(p, p, size + 1)[1:]
    tau = [field.polynomial([field.domain.one])]
    tau += [field.polynomial([field.domain.zero])] * (size - 1)
    for _ in range(size):
        tau = series_product(tau, q, p)
    chain = JordanChain(factor, generator, tuple(reversed(vectors)), tuple(tau))
    scales = _scales(chain) if matrix.shape[0] <= _LARGEST_TO_POLISH else iter(())
    return _shortest([_primitive(chain), *(_primitive(_scaled(chain, s)) for s in scales)])


def _quotient_of_matrix(matrix: FieldMatrix, p: Polynomial, vector: RootMatrix) -> RootMatrix:
    """Return q(A) v for q(s) = p(s)/(s - lambda), by synthetic division."""
    total = coefficient = vector
    for c in p.to_list()[1:-1]:
        coefficient = coefficient.times_root() + vector.scaled(vector.field.polynomial([c]))
        total = total.after(matrix) + coefficient
    return total


def _scales(chain: JordanChain) -> Iterator[Polynomial]:
    """Yield factors in L that turn one entry of the eigenvector into 1, if L is small."""
    p, eigenvector = chain.factor.p, chain.vectors[0]
    rational = chain.factor.degree == 1 and not eigenvector.field.radicands
    if chain.factor.degree > 2 or rational:  # a rational scale is found by `_primitive`
        return
    for i in range(eigenvector.shape[0]):
        entry = eigenvector.entry(i, 0)
        if not entry.is_zero:
            yield entry.invert(p)


def _scaled(chain: JordanChain, scale: Polynomial) -> JordanChain:
    return replace(
        chain,
        vectors=tuple(v.scaled(scale) for v in chain.vectors),
        tau=tuple((c * scale).rem(chain.factor.p) for c in chain.tau),
    )


def _primitive(chain: JordanChain) -> JordanChain:
    """Scale by a rational number: whole coefficients without common factor, most of them > 0."""
    field = chain.vectors[0].field
    parts = [
        part
        for vector in chain.vectors
        for matrix in vector.coefficients
        for row in matrix.to_list()
        for element in row
        for part in field.rational_parts(element)
    ]
    content = gcd(*(n for n, _, _ in parts))
    denominator = lcm(*(d for _, d, _ in parts))
    negative = sum(n < 0 for n, _, _ in parts)
    turn = 2 * negative > len(parts) or (2 * negative == len(parts) and parts[0][0] < 0)
    if content == denominator == 1 and not turn:
        return chain
    scale = Fraction(-denominator if turn else denominator, content)
    return _scaled(chain, field.polynomial([field.scalar(scale)]))


def _shortest(chains: Iterator[JordanChain] | Sequence[JordanChain]) -> JordanChain:
    return min(chains, key=_chain_weight)


def _chain_weight(chain: JordanChain) -> int:
    field = chain.vectors[0].field
    return sum(
        _digits(field, element) + (3 * power if element else 0)
        for vector in chain.vectors
        for power, matrix in enumerate(vector.coefficients)
        for row in matrix.to_list()
        for element in row
    )


def _digits(field: BaseField, element: Scalar) -> int:
    """Count the characters that a scalar takes when printed, roughly."""
    return sum(
        len(str(abs(n))) + 2 * (d != 1) + 2 * (radicand != 1) + (n < 0)
        for n, d, radicand in field.rational_parts(element)
    )


def _total(summands: Sequence[Any]) -> Any:
    return reduce(add, summands)
