"""The spectrum of a matrix over K: characteristic polynomial, factors, multiplicity, index."""

from __future__ import annotations

from dataclasses import dataclass
from functools import cached_property, reduce
from itertools import pairwise

from closedform.algebra.field import BaseField, FieldMatrix, Polynomial, Scalar
from closedform.algebra.roots import RootSet, arrangement, root_set

__all__ = ["Factor", "Spectrum", "block_sizes", "polynomial_of_matrix", "spectrum_of"]


@dataclass(frozen=True)
class Factor:
    """An irreducible monic factor p of the characteristic polynomial.

    `blocks` are the sizes of the Jordan blocks that belong to each single root of p,
    largest first; `roots` says how the roots are told apart and shown.
    """

    p: Polynomial
    blocks: tuple[int, ...]
    roots: RootSet

    @property
    def degree(self) -> int:
        """The number of roots of p."""
        return int(self.p.degree())

    @property
    def has_short_roots(self) -> bool:
        """Whether the roots are written without names: one in K, or a pair a ± sqrt(D)."""
        return self.roots.form in {"single", "quadratic"}

    @property
    def multiplicity(self) -> int:
        """The algebraic multiplicity of each root."""
        return sum(self.blocks)

    @property
    def index(self) -> int:
        """The size of the largest Jordan block: the multiplicity in the minimal polynomial."""
        return self.blocks[0]

    @property
    def polynomial(self) -> tuple[Scalar, ...]:
        """The coefficients of p, highest first."""
        return tuple(self.p.to_list())


@dataclass(frozen=True)
class Spectrum:
    """The factored characteristic polynomial of a matrix, slowest factor first."""

    field: BaseField
    characteristic_polynomial: Polynomial
    factors: tuple[Factor, ...]

    @property
    def characteristic(self) -> tuple[Scalar, ...]:
        """The coefficients of det(lambda I - A), highest first."""
        return tuple(self.characteristic_polynomial.to_list())

    @cached_property
    def minimal_polynomial(self) -> Polynomial:
        """The monic polynomial of least degree that A satisfies: the product of p^index."""
        return reduce(lambda f, g: f * g, (f.p**f.index for f in self.factors))


def spectrum_of(field: BaseField, matrix: FieldMatrix) -> Spectrum:
    """Return the spectrum of a square matrix over the field.

    The characteristic polynomial is factored over K; the Jordan block sizes of a
    repeated factor p follow from the ranks of the powers of p(A) (F. R. Gantmacher,
    The Theory of Matrices, 1959, volume 1, chapter VI).
    """
    characteristic = field.polynomial(matrix.charpoly())
    _, factored = characteristic.factor_list()
    factors = []
    for part, multiplicity in factored:
        p = part.monic()
        blocks = (1,) if multiplicity == 1 else block_sizes(field, matrix, p, multiplicity)
        factors.append(Factor(p, blocks, root_set(field, p)))
    return Spectrum(
        field, characteristic, tuple(sorted(factors, key=lambda f: arrangement(f.roots)))
    )


def polynomial_of_matrix(field: BaseField, p: Polynomial, matrix: FieldMatrix) -> FieldMatrix:
    """Return p(A) by Horner's rule."""
    unit = field.identity(matrix.shape[0])
    first, *rest = p.to_list()
    value = unit * first
    for c in rest:
        value = value * matrix + unit * c
    return value


def block_sizes(
    field: BaseField, matrix: FieldMatrix, p: Polynomial, multiplicity: int
) -> tuple[int, ...]:
    """The number of blocks of size >= k is (rank B^(k-1) - rank B^k)/d for B = p(A)."""
    n, d = matrix.shape[0], int(p.degree())
    base = polynomial_of_matrix(field, p, matrix)
    power, ranks = base, [n, base.rank()]
    while n - ranks[-1] < multiplicity * d:
        power = power * base
        ranks.append(power.rank())
    at_least = [(high - low) // d for high, low in pairwise(ranks)]
    sizes = [
        size
        for size in range(len(at_least), 0, -1)
        for _ in range(at_least[size - 1] - (at_least[size] if size < len(at_least) else 0))
    ]
    return tuple(sizes)
