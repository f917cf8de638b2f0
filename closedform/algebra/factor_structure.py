"""What the structure of a matrix proves about the roots of one factor of its polynomial."""

from __future__ import annotations

from collections.abc import Iterator
from dataclasses import dataclass

from closedform.algebra.domain import ParameterDomain
from closedform.algebra.field import FieldMatrix, Polynomial
from closedform.algebra.graph import edges_of, sides_of
from closedform.algebra.parameter_field import ParameterField
from closedform.algebra.sign_argument import SignArgument
from closedform.algebra.structure import (
    RealSpectrum,
    SimpleSpectrum,
    StableSpectrum,
    real_spectrum,
    simple_spectrum,
    stable_spectrum,
)

__all__ = ["FactorStructure", "structure_of_factor"]


@dataclass(frozen=True)
class FactorStructure:
    """What is proved about the roots of `polynomial`, which divides that of `matrix`.

    `places` are rows of the whole matrix A, in the order of the rows of `matrix`, on
    which the arguments are about.  It is the block of A on these rows or, where
    `squared`, that of A²; then p(lambda) = polynomial(lambda²) is the factor asked about.
    `coefficients` are the signs of its coefficients, highest first.  `simple` is said of
    the roots of `polynomial` alone.
    """

    polynomial: Polynomial
    squared: bool
    places: tuple[int, ...]
    matrix: FieldMatrix
    coefficients: tuple[SignArgument, ...]
    real: RealSpectrum | None
    stable: StableSpectrum | None
    simple: SimpleSpectrum | None

    @property
    def decays(self) -> bool:
        """Whether all roots of `polynomial` have a negative real part."""
        if self.stable is not None and self.coefficients[-1].never_zero:
            return True
        return self.real is not None and self._no_positive_root

    @property
    def negative(self) -> bool:
        """Whether all roots of `polynomial` are real and negative."""
        return self.real is not None and self.decays

    @property
    def _no_positive_root(self) -> bool:
        """Every coefficient is nonnegative, the first and the last positive."""
        signs = [a.values for a in self.coefficients]
        return all(v <= {0, 1} for v in signs) and signs[0] == signs[-1] == {1}


def structure_of_factor(
    field: ParameterField, matrix: FieldMatrix, p: Polynomial, domain: ParameterDomain
) -> FactorStructure | None:
    """Return what is proved about the roots of an irreducible factor p, or None.

    `matrix` is square, p a monic irreducible factor of its characteristic polynomial of
    degree 2 or more.  Of several blocks the one that proves most is taken; an even p is
    asked about through the squares of its roots if that proves more.
    """
    found = list(_candidates(field, matrix, p, domain))
    return max(found, key=_worth, default=None)


def _worth(found: FactorStructure) -> tuple[bool, bool, bool]:
    return found.real is not None, found.negative, found.simple is not None


def _candidates(
    field: ParameterField, matrix: FieldMatrix, p: Polynomial, domain: ParameterDomain
) -> Iterator[FactorStructure]:
    coefficients = p.to_list()
    even = not any(coefficients[1::2]) and p.degree() % 2 == 0
    halved = field.polynomial(coefficients[::2]) if even else None
    for places in _components(matrix):
        block = matrix.extract(places, places)
        if p.degree() > len(places):
            continue
        if halved is not None:
            for side in _squares_of(block):
                square = _square_on(block, side)
                for inner in _components(square):
                    rows = tuple(places[side[k]] for k in inner)
                    part = square.extract(inner, inner)
                    yield from _proved(field, halved, part, rows, domain, squared=True)
        yield from _proved(field, p, block, tuple(places), domain, squared=False)


def _proved(
    field: ParameterField,
    polynomial: Polynomial,
    block: FieldMatrix,
    places: tuple[int, ...],
    domain: ParameterDomain,
    *,
    squared: bool,
) -> Iterator[FactorStructure]:
    if polynomial.degree() > len(places):
        return
    if field.polynomial(block.charpoly()).rem(polynomial):
        return
    real, stable = real_spectrum(block, domain), stable_spectrum(block, domain)
    simple = simple_spectrum(block, domain, equal_leaves_as_one=polynomial.degree() > 1)
    if real is None and stable is None:
        return
    signs = tuple(domain.sign_of(c) for c in polynomial.to_list())
    yield FactorStructure(polynomial, squared, places, block, signs, real, stable, simple)


def _components(matrix: FieldMatrix) -> list[list[int]]:
    """The strongly connected blocks, each with its rows in rising order."""
    return [sorted(block) for block in matrix.scc()]


def _squares_of(block: FieldMatrix) -> tuple[tuple[int, ...], ...]:
    """The sides of a bipartite block without diagonal entries, the smaller one first."""
    rows = block.to_list()
    if any(rows[i][i] for i in range(len(rows))):
        return ()
    sides = sides_of(len(rows), edges_of(rows))
    return () if sides is None else tuple(sorted(sides, key=len))


def _square_on(block: FieldMatrix, side: tuple[int, ...]) -> FieldMatrix:
    """Return the rows and columns of block² that belong to one side."""
    others = [i for i in range(block.shape[0]) if i not in side]
    return block.extract(list(side), others) * block.extract(others, list(side))
