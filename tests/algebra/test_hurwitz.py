"""Stability by signs of coefficients, against certified roots and published criteria."""

from __future__ import annotations

from fractions import Fraction
from functools import reduce
from operator import mul

import pytest
from flint import fmpq, fmpq_poly
from hypothesis import given
from hypothesis import strategies as st

from closedform.algebra.domain import Comparison, ParameterDomain
from closedform.algebra.field import BaseField, FieldMatrix, Polynomial
from closedform.algebra.hurwitz import (
    HurwitzTest,
    hurwitz_determinant,
    hurwitz_test,
    hurwitz_tests,
    sign_oracle,
)
from closedform.algebra.parameter_field import ParameterField
from closedform.algebra.surds import SurdSum

FIELD = BaseField()
SMALL = st.integers(-6, 6)


def _polynomial(coefficients: list[int] | list[Fraction]) -> Polynomial:
    return FIELD.polynomial([FIELD.scalar(Fraction(c)) for c in coefficients])


def _companion(coefficients: list[Fraction]) -> FieldMatrix:
    """A matrix with the monic polynomial 1, c_1, …, c_n."""
    n = len(coefficients)
    rows = [[Fraction(int(k == i + 1)) for k in range(n)] for i in range(n - 1)]
    rows.append([-c for c in reversed(coefficients)])
    return FIELD.matrix([[FIELD.scalar(e) for e in row] for row in rows])


def _largest_real_part(coefficients: list[Fraction]) -> int:
    """The sign of the largest real part of the roots of an irreducible polynomial, certified.

    An imaginary root is told by arithmetic: p(s) and p(-s) have a common factor then.
    """
    highest = [fmpq(c.numerator, c.denominator) for c in coefficients]
    p = fmpq_poly(highest[::-1])
    mirrored = p(fmpq_poly([0, -1]))
    signs = set()
    for part, _ in p.factor()[1]:
        even = part.gcd(mirrored).degree() == part.degree()
        for root, _ in part.complex_roots():
            real = root.real
            if not real.contains(0):
                signs.add(1 if real > 0 else -1)
            else:
                assert even
                signs.add(0)
    return max(signs)


@given(st.lists(SMALL, min_size=1, max_size=7))
def test_numbers_are_told_as_certified_roots_tell_them(inside: list[int]) -> None:
    coefficients = [Fraction(1), *map(Fraction, inside)]
    tests = hurwitz_tests(FIELD, _companion(coefficients[1:]), None)
    manners = {test.manner for test in tests}
    sign = _largest_real_part(coefficients)
    assert ("grows" in manners) == (sign > 0)
    assert (manners == {"decays"}) == (sign < 0)
    assert manners <= {"decays", "rests", "oscillates", "grows"}


FACTORS = st.one_of(
    st.tuples(st.integers(0, 4)),
    st.tuples(st.integers(0, 4), st.integers(1, 9)),
)


@given(st.lists(FACTORS, min_size=1, max_size=4))
def test_products_of_factors_that_do_not_grow(factors: list[tuple[int, ...]]) -> None:
    whole = reduce(mul, (_polynomial([1, *f]) for f in factors))
    tests = hurwitz_tests(FIELD, _companion([Fraction(str(c)) for c in whole.to_list()[1:]]), None)
    manners = {test.manner for test in tests}
    marginal = {"rests"} if any(f == (0,) for f in factors) else set()
    marginal |= {"oscillates"} if any(len(f) == 2 and f[0] == 0 for f in factors) else set()
    assert manners - {"decays"} == marginal
    assert sum((len(t.polynomial) - 1) * t.multiplicity for t in tests) == whole.degree()


@given(st.lists(st.integers(1, 9), min_size=3, max_size=6))
def test_lienard_and_chipart_say_what_all_hurwitz_determinants_say(inside: list[int]) -> None:
    p = _polynomial([1, *inside])
    test = hurwitz_test(FIELD, p, sign_oracle(FIELD, None))
    coefficients = tuple(p.to_list())
    every = [hurwitz_determinant(FIELD, coefficients, k) for k in range(1, len(inside) + 1)]
    assert (test.manner == "decays") == all(FIELD.sign(d) > 0 for d in every)


def test_hurwitz_determinants_of_the_cubic_and_quartic_are_the_published_ones() -> None:
    # F. R. Gantmacher, The Theory of Matrices, volume 2, chapter XV.
    field = ParameterField((), ("a1", "a2", "a3", "a4"))
    a1, a2, a3, a4 = map(field.symbol, field.parameters)
    one = field.domain.one
    assert hurwitz_determinant(field, (one, a1, a2, a3), 2) == a1 * a2 - a3
    assert hurwitz_determinant(field, (one, a1, a2, a3), 3) == a3 * (a1 * a2 - a3)
    fourth = hurwitz_determinant(field, (one, a1, a2, a3, a4), 3)
    assert fourth == a3 * (a1 * a2 - a3) - a1**2 * a4


def test_even_polynomials_oscillate_only_with_roots_that_are_all_imaginary() -> None:
    def manner(coefficients: list[int]) -> str:
        return hurwitz_test(FIELD, _polynomial(coefficients), sign_oracle(FIELD, None)).manner

    assert manner([1, 0, 4, 0, 2]) == "oscillates"
    assert manner([1, 0, 9, 0, 24, 0, 18]) == "oscillates"
    assert manner([1, 0, 2, 0, 2]) == "persists"
    assert manner([1, 0, 2, 0, 1]) == "persists"  # (s^2 + 1)^2: a repeated pair
    assert manner([1, 0, -5, 0, 6]) == "grows"


def test_square_roots_are_numbers_too() -> None:
    field = BaseField((2,))
    root = field.scalar(SurdSum.of({2: Fraction(1)}))
    near = field.polynomial([field.scalar(1), root, field.scalar(2), 2 * root])  # D_2 = 0
    test = hurwitz_test(field, near, sign_oracle(field, None))
    assert test.determinants[0][1].sign == "zero"
    assert test.manner == "persists"


def _control_loop(*conditions: str) -> HurwitzTest:
    """s^3 + 3 s^2 + 2 s + K: a servo loop, stable for 0 < K < 6 (common practice)."""
    field = ParameterField((), ("K",))
    gain = field.symbol("K")
    known = {"positive": gain, "below": 6 - gain, "above": gain - 6}
    domain = ParameterDomain(field, tuple(Comparison(known[c], ">") for c in conditions))
    p = field.polynomial([field.domain.one, field.scalar(3), field.scalar(2), gain])
    return hurwitz_test(field, p, domain.sign_of)


@pytest.mark.parametrize(
    ("conditions", "manner"),
    [
        (("positive", "below"), "decays"),
        (("positive",), "undecided"),
        (("above",), "grows"),
        ((), "undecided"),
    ],
)
def test_the_gain_of_a_loop_is_told_by_its_conditions(
    conditions: tuple[str, ...], manner: str
) -> None:
    test = _control_loop(*conditions)
    assert test.manner == manner
    assert bool(test.open) == (manner == "undecided")


def test_a_structure_says_it_where_signs_of_determinants_would_be_long() -> None:
    field = ParameterField((), ("k1", "k2", "k3", "q"))
    k1, k2, k3, q = map(field.symbol, field.parameters)
    zero = field.domain.zero
    matrix = field.matrix(
        [
            [-k1 - q, k2, zero],
            [k1, -k2 - k3, k2],
            [zero, k3, -k2],
        ]
    )
    domain = ParameterDomain(field, tuple(Comparison(x, ">") for x in (k1, k2, k3, q)))
    (test,) = hurwitz_tests(field, matrix, domain)
    assert test.manner == "decays"
    assert test.structure is not None
    assert test.determinants == ()


def test_undamped_springs_and_masses_oscillate() -> None:
    field = ParameterField((), ("a", "b"))
    a, b = map(field.symbol, field.parameters)
    zero, one = field.domain.zero, field.domain.one
    matrix = field.matrix(
        [
            [zero, zero, one, zero],
            [zero, zero, zero, one],
            [-a - b, b, zero, zero],
            [b, -b - a, zero, zero],
        ]
    )
    domain = ParameterDomain(field, tuple(Comparison(x, ">") for x in (a, b)))
    tests = hurwitz_tests(field, matrix, domain)
    assert [test.manner for test in tests] == ["oscillates", "oscillates"]
