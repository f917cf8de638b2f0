"""Instants of comparison suit the size of A, and numbers are compared to 30 digits."""

from __future__ import annotations

from fractions import Fraction

import mpmath
import pytest
from flint import arb, ctx

import closedform
from closedform.response.response import Response
from closedform.verification import verify
from closedform.verification.enclosures import References, trial_times
from closedform.verification.second_opinion import LARGEST_FOR_MPMATH, mpmath_check
from tests.response.systems import KINDS, response_to


def decay(rate: Fraction | int | str) -> Response:
    return closedform.respond(closedform.system([[rate]], initial=[1]))


@pytest.mark.parametrize(
    "rate",
    [0, 1, -1, Fraction(1, 3), 7, 10**9, Fraction(1, 10**9), "sqrt(2)", Fraction(10**6 + 1, 10**6)],
)
def test_three_instants_suit_the_size_of_a(rate: Fraction | int | str) -> None:
    response = decay(rate)
    short, middle, long = trial_times(response)
    assert 0 < short < middle < long
    (entry,) = (abs(response.field.enclose(row[0])) for row in response.matrix.to_list())
    size = entry * middle.numerator / middle.denominator
    assert rate == 0 or arb(0.25) <= size <= 2


@pytest.mark.parametrize("rate", [10**9, Fraction(1, 10**9), -(10**30), Fraction(-1, 10**30)])
def test_stiff_and_slow_models_are_proved(rate: Fraction | int) -> None:
    assert verify(decay(rate)).holds


@pytest.mark.parametrize("kind", KINDS)
def test_the_reference_is_the_exponential_of_mpmath(kind: str) -> None:
    response = response_to(kind)
    t = Fraction(3, 7)
    with ctx.workprec(256):
        reference = References(response, (t,)).at(t)
    n = response.matrix.shape[0]
    mp = mpmath.mp.clone()
    mp.dps = 60
    with ctx.workprec(300):
        entries = [
            mp.mpf(response.field.enclose(e).mid().str(70, radius=False)) * 3 / 7
            for row in response.matrix.to_list()
            for e in row
        ]
    matrix = mp.matrix(n, n)
    for i in range(n):
        for k in range(n):
            matrix[i, k] = entries[i * n + k]
    other = mp.expm(matrix)
    for i in range(n):
        for k in range(n):
            digits = reference[i, k].mid().str(50, radius=False)
            assert abs(mp.mpf(digits) - other[i, k]) < mp.mpf(10) ** -33


def test_mpmath_is_not_asked_beyond_its_size_and_the_record_says_so() -> None:
    n = LARGEST_FOR_MPMATH + 1
    chain = [[-(k + 1) * (i == k) + (i == k + 1) for k in range(n)] for i in range(n)]
    response = closedform.respond(closedform.system(chain, initial=[1] * n))
    check = mpmath_check(response, (Fraction(1),))
    assert (check.outcome, check.how) == ("not attempted", "done up to 12 states")
    record = verify(response)
    assert check.item in {c.item for c in record.checks if c.outcome == "not attempted"}
    assert record.holds
    assert record.left_open == ()


def test_only_what_is_proved_exactly_already_may_stay_open() -> None:
    checks = verify(response_to("mixed")).checks
    assert [check.item for check in checks if not check.essential] == [
        "det e^(At), numbers",
        "e^(At), second opinion",
    ]


def test_a_record_is_the_same_every_time() -> None:
    assert verify(response_to("mixed")) == verify(response_to("mixed"))
