"""Conditions as written say no more and no less than what a case was solved for."""

from __future__ import annotations

import pytest

from closedform.algebra.domain import Comparison, ParameterDomain
from closedform.verification.parametric.conditions import condition_check, follows, is_empty
from tests.rational_elements import element
from tests.sign_checks import field_of
from tests.verification.parametric.spoiling import KINDS, response_to, with_case

FIELD = field_of("a b c")


def stated(*comparisons: tuple[str, str]) -> ParameterDomain:
    """a and b are positive, c may be any number, and more is stated."""
    whole = (("a", ">"), ("b", ">"), *comparisons)
    return ParameterDomain(FIELD, tuple(Comparison(element(FIELD, e), r) for e, r in whole))


@pytest.mark.parametrize("kind", KINDS)
def test_the_conditions_of_a_right_response_are_proved(kind: str) -> None:
    response = response_to(kind)
    for case in response.cases:
        assert condition_check(response, case).outcome == "proved"


def test_the_condition_that_says_too_little_or_too_much_is_named() -> None:
    response = response_to("rates")
    apart, equal = response.cases
    check = condition_check(response, with_case(response, 0, conditions=()).cases[0])
    assert (check.outcome, check.how) == (
        "not attempted",
        "a - b != 0 was not shown from the conditions",
    )
    check = condition_check(response, with_case(response, 1, conditions=()).cases[1])
    assert check.how == "a - b = 0 was not shown from the conditions"
    spoiled = with_case(response, 1, conditions=apart.conditions)
    check = condition_check(response, spoiled.cases[1])
    assert check.how == "a - b != 0 was not shown to hold in the case"
    assert equal.condition == "b == a"


@pytest.mark.parametrize(
    ("domain", "comparison", "is_so"),
    [
        (stated(("c - a", "=")), ("c", ">"), True),
        (stated(("c - a", "="), ("a - b", "=")), ("c - b", "="), True),
        (stated(("c - a*b", "=")), ("c + a^2", ">"), True),
        (stated(("c - a", "=")), ("c - b", "!="), False),
        (stated(("c^2 - a", "=")), ("c", "!="), True),
        (stated(), ("c", "!="), False),
    ],
)
def test_what_follows_follows_with_equations_put_in(
    domain: ParameterDomain, comparison: tuple[str, str], *, is_so: bool
) -> None:
    text, relation = comparison
    assert follows(FIELD, domain, Comparison(element(FIELD, text), relation)) == is_so


@pytest.mark.parametrize(
    ("domain", "is_so"),
    [
        (stated(("a + b", "=")), True),
        (stated(("c - a", "="), ("-c", ">")), True),
        (stated(("c - a", "="), ("c - b", "="), ("a - b", "!=")), True),
        (stated(("c - a", "="), ("c - b", "=")), False),
        (stated(), False),
    ],
)
def test_a_domain_is_empty_where_its_equations_break_a_condition(
    domain: ParameterDomain, *, is_so: bool
) -> None:
    assert is_empty(FIELD, domain) == is_so
