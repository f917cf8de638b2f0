"""Spectra of matrices whose Jordan structure is known."""

from __future__ import annotations

from fractions import Fraction

import pytest
from hypothesis import given, settings

from closedform.algebra.field import BaseField
from closedform.algebra.spectrum import Spectrum, polynomial_of_matrix, spectrum_of
from closedform.algebra.surds import SurdSum
from tests.exact import fractions_of
from tests.known_systems import Block, KnownSystem, build
from tests.strategies import known_systems, mixing, partitions

Q = BaseField()


def spectrum(system: KnownSystem) -> Spectrum:
    return spectrum_of(Q, Q.matrix([[Q.scalar(x) for x in row] for row in system.matrix]))


def blocks_of(found: Spectrum) -> dict[tuple[Fraction, ...], tuple[int, ...]]:
    return {fractions_of(f.polynomial): f.blocks for f in found.factors}


@pytest.mark.parametrize("sizes", list(partitions(6)), ids=str)
def test_every_partition_of_six_is_found_as_block_sizes(sizes: tuple[int, ...]) -> None:
    p = (Fraction(1), Fraction(2))
    found = spectrum(build(tuple(Block(p, size) for size in sizes), mixing(6)))
    (factor,) = found.factors
    assert (factor.blocks, factor.multiplicity, factor.index) == (sizes, 6, sizes[0])


@pytest.mark.parametrize("sizes", list(partitions(3)), ids=str)
@pytest.mark.parametrize("p", [(1, 0, 4), (1, 1, -1), (1, 2, 2)], ids=str)
def test_block_sizes_of_a_pair_count_each_root_once(
    p: tuple[int, ...], sizes: tuple[int, ...]
) -> None:
    coefficients = tuple(map(Fraction, p))
    found = spectrum(build(tuple(Block(coefficients, size) for size in sizes), mixing(6)))
    (factor,) = found.factors
    assert (factor.degree, factor.blocks, factor.multiplicity) == (2, sizes, 3)


@given(known_systems(largest=5))
@settings(max_examples=40)
def test_the_structure_is_the_one_built_in(system: KnownSystem) -> None:
    found = spectrum(system)
    assert blocks_of(found) == system.sizes
    assert fractions_of(found.characteristic) == system.characteristic


@given(known_systems(largest=5))
@settings(max_examples=40)
def test_a_matrix_satisfies_its_minimal_polynomial_and_none_below(system: KnownSystem) -> None:
    matrix = Q.matrix([[Q.scalar(x) for x in row] for row in system.matrix])
    found = spectrum(system)
    minimal = found.minimal_polynomial
    characteristic = found.characteristic_polynomial
    assert polynomial_of_matrix(Q, characteristic, matrix).is_zero_matrix
    assert polynomial_of_matrix(Q, minimal, matrix).is_zero_matrix
    for factor in found.factors:
        less = minimal.quo(factor.p)
        assert not polynomial_of_matrix(Q, less, matrix).is_zero_matrix


def test_factors_over_surds_are_finer_than_over_q() -> None:
    """s^2 - 2 is irreducible over Q and splits over Q(sqrt(2))."""
    field = BaseField((2,))
    zero, one = field.domain.zero, field.domain.one
    matrix = field.matrix([[zero, one + one], [one, zero]])
    found = spectrum_of(field, matrix)
    assert [f.degree for f in found.factors] == [1, 1]
    roots = [field.surds(f.roots.centre) for f in found.factors]
    assert roots == [SurdSum.of({2: Fraction(1)}), SurdSum.of({2: Fraction(-1)})]


def test_a_defective_block_over_surds() -> None:
    field = BaseField((3,))
    root3, one = field.scalar(SurdSum.of({3: Fraction(1)})), field.domain.one
    matrix = field.matrix([[root3, one], [one - one, root3]])
    (factor,) = spectrum_of(field, matrix).factors
    assert (factor.degree, factor.blocks) == (1, (2,))


def test_factors_are_ordered_from_slow_to_fast() -> None:
    diagonal = [
        [Q.scalar(x if i == k else 0) for k in range(4)] for i, x in enumerate((-5, 2, 0, -1))
    ]
    found = spectrum_of(Q, Q.matrix(diagonal))
    assert [f.roots.centre for f in found.factors] == [2, 0, -1, -5]


def test_a_polynomial_of_a_matrix_is_the_sum_of_its_powers() -> None:
    matrix = Q.matrix([[Q.scalar(x) for x in row] for row in ((1, 2), (3, 4))])
    p = Q.polynomial([Q.scalar(c) for c in (2, -1, 7)])
    value = polynomial_of_matrix(Q, p, matrix)
    assert value == matrix * matrix * Q.scalar(2) - matrix + Q.identity(2) * Q.scalar(7)
