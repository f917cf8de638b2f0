"""Polynomials share a root exactly when it was built in."""

from __future__ import annotations

from functools import reduce
from operator import mul

import pytest
from hypothesis import given
from hypothesis import strategies as st

from closedform.algebra.coprime import are_coprime, is_squarefree
from closedform.algebra.field import BaseField, Polynomial
from tests.rational_elements import element, field_of

FIELD = field_of("a b c")
ROOTS = ("a", "b", "-a", "a + b", "0", "1", "2", "a*b", "c", "1/(a - b)", "3", "5*a - 2*b - 4")
"""Some of them meet at small numbers, though not as functions."""
LISTS = st.lists(st.sampled_from(ROOTS), min_size=1, max_size=3)


def of_roots(roots: list[str]) -> Polynomial:
    factors = [FIELD.polynomial([FIELD.domain.one, -element(FIELD, r)]) for r in roots]
    return reduce(mul, factors)


@given(LISTS, LISTS)
def test_two_polynomials_are_coprime_unless_a_root_is_in_both(
    first: list[str], second: list[str]
) -> None:
    shared = set(first) & set(second)
    assert are_coprime(of_roots(first), of_roots(second)) == (not shared)


@given(LISTS)
def test_a_polynomial_is_squarefree_unless_a_root_is_repeated(roots: list[str]) -> None:
    assert is_squarefree(of_roots(roots)) == (len(set(roots)) == len(roots))


def test_roots_that_meet_at_the_numbers_that_are_tried_are_told_apart() -> None:
    """3 b - 2 c is 9 - 10 at the first numbers; the others vanish at the first or at all."""
    for text in ("2 - a", "(2 - a)*(13 - a)*(41 - a)", "1/(2 - a)"):
        one = FIELD.polynomial([FIELD.domain.one, -element(FIELD, text)])
        other = FIELD.polynomial([FIELD.domain.one, FIELD.domain.zero])
        assert are_coprime(one, other)
        assert not are_coprime(one * other, other)


@pytest.mark.parametrize(
    ("first", "second", "coprime"),
    [([1, 0, -1], [1, -2], True), ([1, 0, -1], [1, -1], False), ([1, 0, 1], [1, 0, 1], False)],
)
def test_over_the_rationals_too(first: list[int], second: list[int], *, coprime: bool) -> None:
    field = BaseField()
    p, q = (field.polynomial([field.scalar(c) for c in cs]) for cs in (first, second))
    assert are_coprime(p, q) == coprime
