"""Equal real parts of roots that are no conjugates are proved, and only equal ones."""

from __future__ import annotations

from fractions import Fraction
from itertools import combinations_with_replacement

import pytest
from hypothesis import given
from hypothesis import strategies as st

import closedform
from closedform.algebra.field import BaseField, Polynomial
from closedform.algebra.roots import enclosed_roots
from closedform.algebra.surds import SurdSum
from closedform.response.response import Response
from closedform.verification import verify
from closedform.verification.eigenvalues import name_check
from closedform.verification.real_parts import sums_of_roots

Rows = list[list[int]]

RATIONALS = BaseField()
CUBIC: Rows = [[0, 1, 0], [0, 0, 1], [-2, 0, 0]]
OTHER_CUBIC: Rows = [[0, 1, 0], [0, 0, 1], [-3, -1, -1]]
OSCILLATOR: Rows = [[0, 1], [-5, 0]]
LOOPS = {"cubic and oscillator": (CUBIC, OSCILLATOR), "two cubics": (CUBIC, OTHER_CUBIC)}


def side_by_side(a: Rows, b: Rows) -> Rows:
    """The Kronecker sum: its eigenvalues are all sums of one of a and one of b."""
    places = [(i, k) for i in range(len(a)) for k in range(len(b))]
    return [[a[i][j] * (k == m) + b[k][m] * (i == j) for j, m in places] for i, k in places]


def respond(rows: Rows) -> Response:
    return closedform.respond(closedform.system(rows, initial=[1, *[0] * (len(rows) - 1)]))


def with_roots(field: BaseField, roots: list[SurdSum]) -> Polynomial:
    p = field.polynomial([field.scalar(1)])
    for root in roots:
        p = p * field.polynomial([field.scalar(1), field.scalar(-root)])
    return p


@given(st.lists(st.fractions(-9, 9, max_denominator=4), min_size=1, max_size=5))
def test_the_roots_are_all_sums_of_two_and_each_is_simple(values: list[Fraction]) -> None:
    roots = [SurdSum.rational(value) for value in values]
    sums = sorted({x + y for x, y in combinations_with_replacement(values, 2)})
    expected = with_roots(RATIONALS, [SurdSum.rational(value) for value in sums])
    assert sums_of_roots(RATIONALS, with_roots(RATIONALS, roots)) == expected


def test_sums_are_found_over_square_roots_too() -> None:
    field = BaseField((2,))
    root, one = SurdSum.rational(2).sqrt(), SurdSum.rational(1)
    expected = with_roots(field, [root + root, root + one, one + one])
    assert sums_of_roots(field, with_roots(field, [root, one])) == expected


@pytest.mark.parametrize("name", LOOPS)
def test_roots_above_each_other_are_put_in_order(name: str) -> None:
    response = respond(side_by_side(*LOOPS[name]))
    assert response.closed_forms.constants
    record = verify(response)
    assert record.holds
    assert {check.outcome for check in record.checks} == {"proved", "enclosed"}


def test_roots_above_each_other_in_the_wrong_order_are_refuted(
    monkeypatch: pytest.MonkeyPatch,
) -> None:
    response = respond(side_by_side(CUBIC, OSCILLATOR))

    def swapped(base: BaseField, p: Polynomial) -> tuple[object, ...]:
        roots = list(enclosed_roots(base, p))
        above = [k for k in range(len(roots) - 1) if roots[k].real.overlaps(roots[k + 1].real)]
        k = next(k for k in above if not roots[k].conjugate().overlaps(roots[k + 1]))
        roots[k], roots[k + 1] = roots[k + 1], roots[k]
        return tuple(roots)

    monkeypatch.setattr("closedform.verification.eigenvalues.enclosed_roots", swapped)
    check = name_check(response)
    assert check.outcome == "refuted"
    assert check.how.endswith(" more: roots are counted out of order")


def test_without_sums_the_order_stays_open_and_a_few_names_are_told(
    monkeypatch: pytest.MonkeyPatch,
) -> None:
    monkeypatch.setattr("closedform.verification.eigenvalues.LARGEST_FOR_SUMS", 5)
    record = verify(respond(side_by_side(CUBIC, OSCILLATOR)))
    (check,) = record.left_open
    assert check.item == "names as defined"
    assert check.how == (
        "alpha_1, omega_1, alpha_2, omega_2 and 77 more: roots are not put in order by 4096 bits"
    )
    assert not record.holds
