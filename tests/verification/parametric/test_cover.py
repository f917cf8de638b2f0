"""No point of the domain is left out silently, and none has two cases."""

from __future__ import annotations

from dataclasses import replace
from fractions import Fraction

import pytest
from hypothesis import given
from hypothesis import strategies as st

from closedform.algebra.domain import Comparison
from closedform.notation.expression import Name, Quotient
from closedform.response.parametric.conditions import WrittenComparison
from closedform.verification.parametric.cover import (
    applying_cases,
    cover_check,
    cover_points_check,
)
from tests.verification.parametric.spoiling import (
    KINDS,
    response_to,
    with_case,
    with_exceptional,
)

each_kind = pytest.mark.parametrize("kind", KINDS)
SMALL = st.fractions(min_value=Fraction(1, 3), max_value=4, max_denominator=3)


@each_kind
def test_the_cover_of_a_right_response_is_proved(kind: str) -> None:
    response = response_to(kind)
    assert cover_check(response).outcome == "proved"
    assert cover_points_check(response).outcome == "proved"


@pytest.mark.parametrize("kind", ["pair", "rates", "exchange", "star", "depot"])
@given(st.data())
def test_one_case_applies_at_every_point(kind: str, data: st.DataObject) -> None:
    response = response_to(kind)
    values = {n: data.draw(SMALL) for n in response.model.field.parameters}
    assert len(applying_cases(response, values)) == 1


def test_on_a_border_the_case_of_the_border_applies() -> None:
    values = {n: Fraction(v) for n, v in zip("abp", (2, 2, 1), strict=True)}
    (case,) = applying_cases(response_to("rates"), values)
    assert case.condition == "b == a"


def test_a_comparison_does_not_hold_where_a_side_is_not_defined() -> None:
    response = response_to("rates")
    over = WrittenComparison(Quotient(Name("p"), Name("a")), "<=", Name("b"))
    spoiled = with_case(response, 0, conditions=(over,))
    values = dict.fromkeys("abp", Fraction(0))
    assert spoiled.cases[0] not in applying_cases(spoiled, values)


def test_points_at_which_no_case_applies_are_told() -> None:
    response = response_to("rates")
    check = cover_points_check(replace(response, cases=response.cases[:1]))
    assert check.outcome == "refuted"
    assert check.how.startswith("0 cases apply at a = ")


def test_points_at_which_two_cases_apply_are_told() -> None:
    response = response_to("rates")
    check = cover_points_check(with_case(response, 0, conditions=()))
    assert check.outcome == "refuted"
    assert check.how.startswith("2 cases apply at a = ")


def test_what_is_said_not_to_be_covered_is_counted() -> None:
    response = response_to("rates")
    (item,) = response.branches[0].exceptional
    left = replace(item, fate="not covered", branch=None, reason="budget")
    gap = with_exceptional(response, 0, 0, left)
    gap = replace(gap, branches=gap.branches[:1], cases=gap.cases[:1])
    check = cover_check(gap)
    assert check.outcome == "proved"
    assert check.how.endswith("but for 1 listed as not covered")
    points = cover_points_check(gap)
    assert points.outcome == "proved"
    assert points.how.endswith("or none where that is said")


def test_a_domain_without_known_points_settles_nothing() -> None:
    """Nothing is claimed, and nothing hangs on it: the cover is proved exactly."""
    response = response_to("rates")
    a = response.model.field.symbol("a")
    empty = response.domain.narrowed(Comparison(-a, ">"))
    check = cover_points_check(replace(response, domain=empty))
    assert (check.outcome, check.essential) == ("not attempted", False)
