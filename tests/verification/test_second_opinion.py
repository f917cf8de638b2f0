"""mpmath is asked for as many digits as the entries need, and no more than is sensible."""

from __future__ import annotations

from dataclasses import replace
from fractions import Fraction

import pytest

import closedform
from closedform.response.response import Response
from closedform.verification.enclosures import (
    References,
    ball_check,
    determinant_ball_check,
    trial_times,
)
from closedform.verification.second_opinion import MOST_DIGITS, mpmath_check
from tests.response.systems import KINDS, response_to
from tests.verification.tampering import every_residue, numbers_of, with_number


def far_from_normal(size: int) -> Response:
    return closedform.respond(closedform.system([[-1, 10**size], [0, -2]], initial=[1, 1]))


@pytest.mark.parametrize("kind", KINDS)
def test_mpmath_agrees_on_each_kind(kind: str) -> None:
    response = response_to(kind)
    check = mpmath_check(response, trial_times(response))
    assert check.outcome == "enclosed"
    assert "to 30 digits, or 60 places after the point," in check.how


@pytest.mark.parametrize("size", [50, 200])
def test_a_wrong_small_entry_beside_a_huge_one_is_refuted(size: int) -> None:
    response = far_from_normal(size)
    times = trial_times(response)
    assert mpmath_check(response, times).outcome == "enclosed"
    one = response.field.domain.one
    places = [p for p, element in numbers_of(response.exponential) if p[-2:] == (1, 1) and element]
    for place in places:
        value = dict(numbers_of(response.exponential))[place] + one / 10**20
        wrong = replace(response, exponential=with_number(response.exponential, place, value))
        check = mpmath_check(wrong, times)
        assert check.outcome == "refuted"
        assert check.how == f"entry (2, 2) differs at time {times[0]}"
        check = ball_check(wrong, References(wrong, times))
        assert check.how == f"entry (2, 2) differs at time {times[0]}"


def test_entries_that_ask_for_absurdly_many_digits_are_left_open() -> None:
    check = mpmath_check(far_from_normal(MOST_DIGITS + 100), (Fraction(1),))
    assert check.outcome == "not attempted"
    assert not check.essential
    assert check.how.endswith(f"done up to {MOST_DIGITS} digits")


@pytest.mark.parametrize("size", [10, 200])
def test_the_determinant_is_compared_to_significant_digits(size: int) -> None:
    response = far_from_normal(size)
    times = trial_times(response)
    assert determinant_ball_check(response, times).outcome == "enclosed"
    slightly = response.field.domain.one + response.field.domain.one / 10**25
    factor = response.field.polynomial([slightly])
    wrong = every_residue(response.exponential, lambda r: r.scaled(factor))
    check = determinant_ball_check(replace(response, exponential=wrong), times)
    assert check.how == f"the determinant differs at time {times[0]}"


def test_a_determinant_that_vanishes_in_all_digits_is_refuted() -> None:
    response = response_to("circular")
    wrong = every_residue(response.exponential, lambda r: r - r)
    assert determinant_ball_check(replace(response, exponential=wrong), (Fraction(1),)).outcome == (
        "refuted"
    )
