"""Matrices over L = K[lambda]/(p) obey the laws of polynomial arithmetic modulo p."""

from __future__ import annotations

from fractions import Fraction
from typing import Any

import pytest
from flint import acb, ctx, fmpq, fmpq_poly
from hypothesis import given
from hypothesis import strategies as st

from closedform.algebra.field import BaseField, rational
from closedform.algebra.root_matrix import RootMatrix, coefficients_low_first, taylor_at_root
from closedform.algebra.surds import SurdSum
from tests.strategies import IRREDUCIBLE

Q = BaseField()
MODULI = [(1, 3), (1, 0, 1), (1, 2, 5), *IRREDUCIBLE[3], *IRREDUCIBLE[4], IRREDUCIBLE[5][0]]
Entries = list[list[fmpq_poly]]


def over_q(coefficients: tuple[int, ...]) -> Any:
    return Q.polynomial([Q.scalar(c) for c in coefficients])


def plain(coefficients: tuple[int, ...]) -> fmpq_poly:
    return fmpq_poly(list(reversed(coefficients)))


def as_plain(polynomial: Any) -> fmpq_poly:
    """A polynomial of the package as one of FLINT's."""
    numbers = [rational(c) for c in reversed(polynomial.to_list())]
    return fmpq_poly([fmpq(c.numerator, c.denominator) for c in numbers])


def root_matrix(p: tuple[int, ...], rows: Entries) -> RootMatrix:
    """The matrix with these entries, built coefficient by coefficient."""
    length = max(len(p) - 1, *(entry.length() for row in rows for entry in row))
    coefficients = [
        Q.matrix([[Q.scalar(Fraction(int(e[k].p), int(e[k].q))) for e in row] for row in rows])
        for k in range(length)
    ]
    return RootMatrix.reduced(Q, over_q(p), coefficients)


def entries_of(matrix: RootMatrix) -> Entries:
    rows, columns = matrix.shape
    return [[as_plain(matrix.entry(i, k)) for k in range(columns)] for i in range(rows)]


polynomials = st.lists(st.fractions(-4, 4, max_denominator=3), min_size=1, max_size=7).map(
    lambda cs: fmpq_poly([fmpq(c.numerator, c.denominator) for c in cs])
)


def squares(n: int = 2) -> st.SearchStrategy[Entries]:
    row = st.lists(polynomials, min_size=n, max_size=n)
    return st.lists(row, min_size=n, max_size=n)


moduli = st.sampled_from(MODULI)


def product(left: Entries, right: Entries, p: fmpq_poly) -> Entries:
    return [
        [
            sum((left[i][j] * right[j][k] for j in range(len(right))), fmpq_poly([0])) % p
            for k in range(len(right[0]))
        ]
        for i in range(len(left))
    ]


@given(moduli, squares(), squares())
def test_sums_and_products_are_those_of_polynomials_modulo_p(
    p: tuple[int, ...], left: Entries, right: Entries
) -> None:
    a, b, modulus = root_matrix(p, left), root_matrix(p, right), plain(p)
    pairs = [
        (
            a + b,
            [
                [(x + y) % modulus for x, y in zip(r, s, strict=True)]
                for r, s in zip(left, right, strict=True)
            ],
        ),
        (
            a - b,
            [
                [(x - y) % modulus for x, y in zip(r, s, strict=True)]
                for r, s in zip(left, right, strict=True)
            ],
        ),
        (a @ b, product(left, right, modulus)),
    ]
    for ours, theirs in pairs:
        assert entries_of(ours) == theirs
        assert len(ours.coefficients) == len(p) - 1


@given(moduli, squares(), squares(), squares())
def test_the_product_is_associative_and_distributes(
    p: tuple[int, ...], one: Entries, two: Entries, three: Entries
) -> None:
    a, b, c = (root_matrix(p, rows) for rows in (one, two, three))
    assert (((a @ b) @ c) - (a @ (b @ c))).is_zero
    assert ((a @ (b + c)) - (a @ b + a @ c)).is_zero


@given(moduli, squares(), polynomials)
def test_scaling_multiplies_every_entry(
    p: tuple[int, ...], rows: Entries, factor: fmpq_poly
) -> None:
    numbers = [factor[k] for k in range(factor.length())] or [fmpq(0)]
    scale = Q.polynomial([Q.scalar(Fraction(int(c.p), int(c.q))) for c in reversed(numbers)])
    ours = root_matrix(p, rows).scaled(scale)
    assert entries_of(ours) == [[(e * factor) % plain(p) for e in row] for row in rows]


@given(moduli, squares(), squares())
def test_a_shift_subtracts_the_root_from_the_diagonal(
    p: tuple[int, ...], rows: Entries, constants: Entries
) -> None:
    numbers = [[fmpq_poly([entry[0]]) for entry in row] for row in constants]
    matrix = Q.matrix(
        [[Q.scalar(Fraction(int(e[0].p), int(e[0].q))) for e in row] for row in numbers]
    )
    x = fmpq_poly([0, 1])
    shifted = [[e - x if i == k else e for k, e in enumerate(r)] for i, r in enumerate(numbers)]
    m = root_matrix(p, rows)
    assert entries_of(m.shifted(matrix)) == product(shifted, rows, plain(p))
    assert entries_of(m.after(matrix)) == product(numbers, rows, plain(p))
    assert entries_of(m.before(matrix)) == product(rows, numbers, plain(p))
    assert entries_of(m.times_root()) == [[(x * e) % plain(p) for e in row] for row in rows]


@given(moduli, squares())
def test_the_trace_form_is_the_sum_over_the_roots(p: tuple[int, ...], rows: Entries) -> None:
    form = root_matrix(p, rows).trace_form()
    with ctx.workprec(300):
        roots = [z for z, _ in plain(p).complex_roots()]
        slope = plain(p).derivative()
        for i, row in enumerate(rows):
            for k, entry in enumerate(row):
                total = sum((acb_at(entry, z) / acb_at(slope, z) for z in roots), acb(0))
                ours = rational(form[i, k].element)
                assert total.overlaps(acb(fmpq(ours.numerator, ours.denominator)))
                assert total.rad() < 1e-60


def acb_at(p: fmpq_poly, z: acb) -> acb:
    value = acb(0)
    for c in reversed(p.coeffs()):
        value = value * z + c
    return value


@given(moduli, polynomials)
def test_taylor_coefficients_are_derivatives_over_factorials(
    p: tuple[int, ...], f: fmpq_poly
) -> None:
    numbers = [Fraction(int(f[k].p), int(f[k].q)) for k in reversed(range(f.length()))]
    ours = taylor_at_root(Q.polynomial([Q.scalar(c) for c in numbers]), over_q(p), 4)
    derivative, factorial = f, 1
    for k, found in enumerate(ours):
        assert as_plain(found) == (derivative / factorial) % plain(p)
        derivative, factorial = derivative.derivative(), factorial * (k + 1)


def test_a_zero_is_found_after_reduction_only() -> None:
    """lambda^2 + 1 is not the zero polynomial, but zero in Q[lambda]/(lambda^2 + 1)."""
    modulus = (1, 0, 1)
    assert root_matrix(modulus, [[fmpq_poly([1, 0, 1])]]).is_zero
    assert not root_matrix(modulus, [[fmpq_poly([1, 0, 2])]]).is_zero


@pytest.mark.parametrize("length", [1, 3, 5])
def test_coefficients_are_padded(length: int) -> None:
    assert coefficients_low_first(over_q((7,)), length) == [7] + [0] * (length - 1)


def test_the_inverse_of_a_root_over_surds() -> None:
    """With lambda^2 = sqrt(2): lambda · (lambda sqrt(2)/2) = 1."""
    field = BaseField((2,))
    root2 = field.scalar(SurdSum.of({2: Fraction(1)}))
    one, zero = field.domain.one, field.domain.zero
    p = field.polynomial([one, zero, -root2])
    lam = RootMatrix(field, p, (field.zeros(1, 1), field.identity(1)))
    inverse = lam.scaled(field.polynomial([root2 / (one + one)]))
    assert (lam @ inverse - RootMatrix.constant(field, p, field.identity(1))).is_zero


@given(
    st.lists(st.integers(-4, 4), min_size=7, max_size=11),
    st.lists(st.fractions(-3, 3, max_denominator=5), min_size=2, max_size=14),
    st.integers(0, 2**20),
)
def test_products_modulo_large_polynomials(
    lower: list[int], factor: list[Fraction], seed: int
) -> None:
    p = plain((1, *lower))
    modulus = over_q((1, *lower))
    d = len(lower)
    rows = [
        [fmpq_poly([(seed >> (i + k + e)) % 7 - 3 for e in range(d)]) for k in range(2)]
        for i in range(3)
    ]
    g = fmpq_poly([fmpq(c.numerator, c.denominator) for c in factor])
    made = root_matrix((1, *lower), rows).scaled(Q.polynomial([Q.scalar(c) for c in factor[::-1]]))
    assert made.modulus == modulus
    for i, row in enumerate(rows):
        for k, entry in enumerate(row):
            assert as_plain(made.entry(i, k)) == entry * g % p
