"""The known systems are what they say, by means that share nothing with the package."""

from __future__ import annotations

from fractions import Fraction
from itertools import pairwise

import pytest
from flint import arb_mat, ctx, fmpq_mat, fmpq_poly
from hypothesis import given

from tests.known_systems import (
    Coefficients,
    KnownSystem,
    fmpq_matrix,
    highest_first,
    polynomial,
    polynomial_at,
)
from tests.strategies import (
    IRREDUCIBLE,
    KINDS,
    every_system,
    irreducibles,
    known_systems,
    structures,
)

SMALL = [pytest.param(s, id=f"{n}: {name}") for n in range(1, 5) for name, s in every_system(n)]


def sizes_by_rank(matrix: fmpq_mat, p: Coefficients) -> tuple[int, ...]:
    """Return the block sizes at p: the ranks of powers of p(A) count the larger blocks."""
    base = polynomial_at(polynomial(p), matrix)
    ranks, power = [matrix.nrows()], base
    while len(ranks) < 2 or ranks[-1] != ranks[-2]:
        ranks.append(power.rank())
        power *= base
    longer = [(above - below) // (len(p) - 1) for above, below in pairwise(ranks)]
    return tuple(sum(count > i for count in longer) for i in range(longer[0]))


def assert_structure_is_as_stated(system: KnownSystem) -> None:
    matrix = fmpq_matrix(system.matrix)
    assert abs(fmpq_matrix(system.similarity).det()) == 1
    assert highest_first(matrix.charpoly()) == system.characteristic
    least = fmpq_poly([1])
    for p, sizes in system.sizes.items():
        assert sizes_by_rank(matrix, p) == sizes
        least *= polynomial(p) ** sizes[0]
    assert matrix.minpoly() == least


def assert_exponential_is_as_stated(system: KnownSystem, time: Fraction) -> None:
    ours = system.transition(time)
    with ctx.workprec(600):
        theirs = arb_mat(fmpq_matrix(system.matrix) * time.numerator / time.denominator).exp()
        for i, row in enumerate(ours):
            for j, entry in enumerate(row):
                assert entry.overlaps(theirs[i, j])
                assert entry.rad() < 1e-60


@pytest.mark.parametrize("system", SMALL)
def test_every_small_system_has_its_stated_structure(system: KnownSystem) -> None:
    assert_structure_is_as_stated(system)
    assert_exponential_is_as_stated(system, Fraction(7, 5))


@given(known_systems())
def test_a_random_system_has_its_stated_structure(system: KnownSystem) -> None:
    assert_structure_is_as_stated(system)


@given(known_systems())
def test_a_random_system_has_its_stated_exponential(system: KnownSystem) -> None:
    assert_exponential_is_as_stated(system, Fraction(2, 3))


@pytest.mark.parametrize("degree", range(1, 7))
def test_polynomials_taken_for_irreducible_are(degree: int) -> None:
    fixed = [tuple(map(Fraction, p)) for p in IRREDUCIBLE.get(degree, ())]
    pools = [p for pool in KINDS.values() for p in pool if len(p) == degree + 1]
    for p in fixed + pools:
        assert [m for _, m in polynomial(p).factor()[1]] == [1]


@pytest.mark.parametrize("degree", range(1, 7))
def test_polynomials_drawn_are_irreducible(degree: int) -> None:
    @given(irreducibles(degree))
    def holds(p: Coefficients) -> None:
        assert len(p) == degree + 1
        assert [m for _, m in polynomial(p).factor()[1]] == [1]

    holds()


def test_the_count_of_structures_is_that_of_partitions() -> None:
    rational_only = [s for s in structures(4) if all(kind == "rational" for kind, _ in s)]
    assert len(rational_only) == 14  # multisets of partitions with total 4
    assert len(set(structures(4))) == len(list(structures(4)))
