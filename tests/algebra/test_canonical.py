"""Chains step down to eigenvectors, span the space, and have duals on the other side."""

from __future__ import annotations

from fractions import Fraction

import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from closedform.algebra.canonical import JordanForm, jordan_form
from closedform.algebra.field import BaseField, base_field
from closedform.algebra.root_matrix import RootMatrix
from closedform.algebra.spectrum import polynomial_of_matrix, spectrum_of
from closedform.algebra.surds import SurdSum
from closedform.errors import Place
from closedform.model.entries import number_from
from closedform.model.source import Source
from tests.known_systems import KnownSystem
from tests.response.systems import KINDS
from tests.strategies import known_systems

Q = BaseField()


def form_of(rows: list[list[object]]) -> tuple[JordanForm, object]:
    source = Source(Place())
    numbers = [[number_from(x, "matrix", source) for x in row] for row in rows]
    field = base_field(x for row in numbers for x in row)
    matrix = field.matrix([[field.scalar(x) for x in row] for row in numbers])
    return jordan_form(field, matrix, spectrum_of(field, matrix)), matrix


def form_of_known(system: KnownSystem) -> tuple[JordanForm, object]:
    return form_of([list(row) for row in system.matrix])


def assert_chains_are_chains(form: JordanForm, matrix: object) -> None:
    for chain in form.chains:
        below = None
        for vector in chain.vectors:
            image = vector.shifted(matrix)
            assert (image if below is None else image - below).is_zero
            below = vector
        assert not chain.vectors[0].is_zero


def assert_left_chains_are_dual(form: JordanForm) -> None:
    """w_i v_k = delta_ik in L, and 0 between chains of one factor."""
    for left, rows in zip(form.chains, form.left_chains, strict=True):
        assert len(rows) == left.size
        for right in form.chains:
            if right.factor.p != left.factor.p:
                continue
            for i, row in enumerate(rows):
                for k, vector in enumerate(right.vectors):
                    product = row @ vector
                    if left is right and i == k:
                        one = form.field.identity(1)
                        product = product - RootMatrix.constant(form.field, left.factor.p, one)
                    assert product.is_zero


def assert_left_chains_step_up(form: JordanForm, matrix: object) -> None:
    """w_i (A - lambda) = w_(i+1), and the last one is a left eigenvector."""
    for chain, rows in zip(form.chains, form.left_chains, strict=True):
        for i, row in enumerate(rows):
            image = row.before(matrix) - row.times_root()
            if i + 1 < chain.size:
                image = image - rows[i + 1]
            assert image.is_zero


@pytest.mark.parametrize("kind", KINDS)
def test_chains_and_their_duals_of_every_kind(kind: str) -> None:
    form, matrix = form_of(KINDS[kind])
    assert_chains_are_chains(form, matrix)
    assert_left_chains_are_dual(form)
    assert_left_chains_step_up(form, matrix)
    assert form.basis.rank() == matrix.shape[0]


@given(known_systems(largest=5))
@settings(max_examples=40)
def test_chains_of_random_structures(system: KnownSystem) -> None:
    form, matrix = form_of_known(system)
    sizes: dict[tuple[Fraction, ...], list[int]] = {}
    for chain in form.chains:
        key = tuple(Fraction(int(c.numerator), int(c.denominator)) for c in chain.factor.polynomial)
        sizes.setdefault(key, []).append(chain.size)
    assert {p: tuple(s) for p, s in sizes.items()} == system.sizes
    assert_chains_are_chains(form, matrix)
    assert_left_chains_are_dual(form)
    assert_left_chains_step_up(form, matrix)


@given(known_systems(largest=5))
@settings(max_examples=25)
def test_generators_are_what_the_basis_starts_with(system: KnownSystem) -> None:
    form, matrix = form_of_known(system)
    column = 0
    for chain in form.chains:
        p_power = chain.factor.p**chain.size
        assert (polynomial_of_matrix(Q, p_power, matrix) * chain.generator).is_zero_matrix
        vector = chain.generator
        for _ in range(chain.size * chain.factor.degree):
            assert form.basis[:, column].to_dense() == vector
            vector, column = matrix * vector, column + 1
    assert column == system.order


@given(known_systems(largest=4), st.integers(0, 5))
@settings(max_examples=30)
def test_coordinates_along_the_chain_give_powers_of_a_on_the_generator(
    system: KnownSystem, power: int
) -> None:
    """A^k u = sum over the roots of the coordinates times the vectors."""
    form, matrix = form_of_known(system)
    for chain in form.chains:
        vector = chain.generator
        for _ in range(power):
            vector = matrix * vector
        slope = chain.factor.p.diff()
        total = form.field.zeros(system.order, 1)
        for coordinate, v in zip(chain.coordinates(power), chain.vectors, strict=True):
            total = total + v.scaled((coordinate * slope).rem(chain.factor.p)).trace_form()
        assert total == vector


def plain_vectors(rows: list[list[object]]) -> list[list[list[list[SurdSum]]]]:
    """Vectors by chain; entries as coefficients of 1, lambda, …"""
    form, _ = form_of(rows)
    return [
        [
            [
                [form.field.surds(c[i, 0].element) for c in vector.coefficients]
                for i in range(vector.shape[0])
            ]
            for vector in chain.vectors
        ]
        for chain in form.chains
    ]


def whole(*numbers: int) -> list[SurdSum]:
    return [SurdSum.rational(n) for n in numbers]


@pytest.mark.parametrize(
    ("rows", "expected"),
    [
        # Entries by hand: 1 where a 1 can stand, without common factors, mostly positive.
        ([[-2]], [[[whole(1)]]]),
        ([[-3, 1], [1, -3]], [[[whole(1), whole(1)]], [[whole(1), whole(-1)]]]),
        ([[0, 1], [-6, -5]], [[[whole(1), whole(-2)]], [[whole(1), whole(-3)]]]),
        ([[0, 1], [-5, -2]], [[[whole(1, 0), whole(0, 1)]]]),
        ([[0, 1], [-1, -2]], [[[whole(1), whole(-1)], [whole(1), whole(0)]]]),
        ([[1, 0], [0, 1]], [[[whole(1), whole(0)]], [[whole(0), whole(1)]]]),
        (
            [["1/1000", 1000], [0, "1/7"]],
            [[[whole(7000000), whole(993)]], [[whole(1), whole(0)]]],
        ),
    ],
    ids=str,
)
def test_vectors_are_short_to_print(
    rows: list[list[object]], expected: list[list[list[list[SurdSum]]]]
) -> None:
    found = plain_vectors(rows)
    if len(found) == 1 and len(found[0]) == 2:  # a chain: any generalised vector may be chosen
        assert found[0][0] in (expected[0][0], [[-x for x in e] for e in expected[0][0]])
        numbers = [x for vector in found[0] for entry in vector for x in entry]
        assert all(abs(x.as_fraction()) <= 1 for x in numbers)
    else:
        assert found == expected


@given(known_systems(largest=5))
@settings(max_examples=40)
def test_vectors_are_whole_and_have_no_common_factor(system: KnownSystem) -> None:
    from math import gcd

    form, _ = form_of_known(system)
    for chain in form.chains:
        numbers = [
            Fraction(int(x.numerator), int(x.denominator))
            for vector in chain.vectors
            for c in vector.coefficients
            for row in c.to_list()
            for x in row
            if x
        ]
        assert all(x.denominator == 1 for x in numbers)
        assert gcd(*(int(x) for x in numbers)) == 1
        assert 2 * sum(x < 0 for x in numbers) <= len(numbers)
