"""A domain is narrowed, substituted into, asked for contradictions, and sampled."""

from __future__ import annotations

import pytest
from hypothesis import given
from hypothesis import strategies as st

from closedform.algebra.domain import Comparison, ParameterDomain
from closedform.algebra.sample import holds_at, value_at
from tests.sign_checks import FIELD, A, B, C, Point, domains, field_of, grid, positive

POSITIVE = positive("a b c")


@given(domains(), st.integers(0, 3), st.integers(0, 5))
def test_samples_are_admissible_different_and_the_same_each_time(
    domain: ParameterDomain, count: int, seed: int
) -> None:
    points = domain.sample(count, seed)
    assert len(points) <= count
    for place, point in enumerate(points):
        assert tuple(point) == domain.field.parameters
        assert all(holds_at(c, point) for c in domain.conditions)
        assert point not in points[:place]
    assert points == domain.sample(count, seed)


@given(domains())
def test_a_domain_with_a_point_has_no_contradiction(domain: ParameterDomain) -> None:
    if grid(domain) or domain.sample(2, 1):
        assert domain.contradiction() is None


@given(domains(), domains())
def test_what_is_implied_or_excluded_is_so_at_the_points(
    domain: ParameterDomain, other: ParameterDomain
) -> None:
    points = grid(domain)
    for comparison in other.conditions:
        if domain.implies(comparison):
            assert all(holds_at(comparison, p) for p in points)
        if domain.excludes(comparison):
            assert not any(holds_at(comparison, p) for p in points)
    narrowed = domain.narrowed(*other.conditions)
    assert grid(narrowed) == [p for p in points if all(holds_at(c, p) for c in other.conditions)]


@given(domains(), st.sampled_from((B, B + C, C**2, B * C - 1, FIELD.scalar(2))))
def test_a_substitution_keeps_the_points_where_the_parameter_has_that_value(
    domain: ParameterDomain, value: object
) -> None:
    def put(point: Point) -> Point:
        return {**point, "a": value_at(value, point)}

    try:
        substituted = domain.substituted("a", value)
    except ZeroDivisionError:
        held = [p for p in grid(ParameterDomain(FIELD, ())) if p["a"] == 1]
        assert not any(all(holds_at(c, put(p)) for c in domain.conditions) for p in held)
        return
    assert not any("a" in FIELD.names_in(c.element) for c in substituted.conditions)
    points = grid(substituted)
    assert all(holds_at(c, put(p)) for p in points for c in domain.conditions if not vanishing(c))
    everywhere = grid(ParameterDomain(FIELD, ()))
    inside = [p for p in everywhere if all(holds_at(c, put(p)) for c in domain.conditions)]
    assert all(holds_at(c, p) for p in inside for c in substituted.conditions)


def vanishing(comparison: Comparison) -> bool:
    """Whether the element has a denominator, which a substitution may cancel."""
    return not comparison.element.denom.is_ground


@pytest.mark.parametrize(
    "conditions",
    [
        (Comparison(A - B, ">"), Comparison(B - A, ">")),
        (Comparison(A + B, "="),),
        (Comparison(A**2 + B**2 - A * B, "="),),
        (Comparison(A - B, ">"), Comparison(B - C, ">"), Comparison(C - A, ">")),
        (Comparison(A - B, "="), Comparison(A - 2 * B, ">")),
        (Comparison(4 * A * B - C**2, ">"), Comparison(C**2 - 5 * A * B, ">=")),
    ],
)
def test_contradictions_are_found_and_none_of_their_parts_can_be_left_out(
    conditions: tuple[Comparison, ...],
) -> None:
    found = ParameterDomain(FIELD, (*POSITIVE.conditions, *conditions)).contradiction()
    assert found is not None
    for place in range(len(found)):
        assert ParameterDomain(FIELD, found[:place] + found[place + 1 :]).contradiction() is None


def test_narrowing_leaves_out_what_is_implied() -> None:
    assert POSITIVE.narrowed(Comparison(A + B, ">"), Comparison(A * B, "!=")) == POSITIVE
    once = POSITIVE.narrowed(Comparison(A - B, ">"))
    assert once.conditions == (*POSITIVE.conditions, Comparison(A - B, ">"))
    assert once.narrowed(Comparison(2 * A - 2 * B, "!=")) == once


def test_a_comparison_is_not_implied_where_it_is_not_defined() -> None:
    domain = ParameterDomain(FIELD, ())
    assert domain.implies(Comparison(1 / A, "!=")) is None
    assert domain.narrowed(Comparison(A, "!=")).implies(Comparison(1 / A, "!="))


def test_the_assumption_on_a_substituted_parameter_becomes_one_on_the_others() -> None:
    domain = POSITIVE.narrowed(Comparison(A - C, "!="))
    substituted = domain.substituted("a", B - C)
    assert substituted.conditions == (
        Comparison(B - C, ">"),
        Comparison(B, ">"),
        Comparison(C, ">"),
        Comparison(B - 2 * C, "!="),
    )
    assert POSITIVE.substituted("a", B).conditions == POSITIVE.conditions[1:]


def test_a_condition_made_false_by_a_substitution_is_a_contradiction() -> None:
    domain = POSITIVE.narrowed(Comparison(A - B, ">"))
    false = Comparison(FIELD.domain.zero, ">")
    assert domain.substituted("a", B).contradiction() == (false,)


@pytest.mark.parametrize(
    "conditions",
    [
        (Comparison(C**2 - 4 * A * B, "="),),
        (Comparison(4 * A * B - C**2, ">"),),
        (Comparison(A - B, "="), Comparison(C - 2 * A, ">")),
        (Comparison(A - B, "="), Comparison(B - C, "=")),
        (Comparison(A - 10 * B, ">"), Comparison(B - 3 * C, ">")),
        (Comparison(1 - A, ">"), Comparison(B - 50, ">")),
    ],
)
def test_points_are_found_in_usual_domains(conditions: tuple[Comparison, ...]) -> None:
    domain = ParameterDomain(FIELD, (*POSITIVE.conditions, *conditions))
    points = domain.sample(3, 7)
    assert len(points) == 3
    assert len(POSITIVE.sample(1, 0)[0]) == len(set(POSITIVE.sample(1, 0)[0].values()))


@pytest.mark.parametrize(
    "conditions",
    [
        (Comparison(A**2 - 4, "="),),
        (Comparison(A**2 - 4, "="), Comparison(B - A * C, "=")),
        (Comparison(A**2 - 3 * A + 2, "="), Comparison(A - 1, ">")),
        (Comparison(108 * A - 1, "="),),
        (Comparison(1001 * A - 1000, ">"), Comparison(1000 - 1000 * A, ">")),
        (Comparison(A**2 - 2, ">"), Comparison(20001 - 10000 * A**2, ">")),
        (Comparison(A * B - 1, "="), Comparison(2001 - 1000 * B, ">"), Comparison(B - 2, ">")),
        (Comparison(A * B - 7, ">"), Comparison(7001 - 1000 * A * B, ">")),
        (Comparison(A**2 - B**2 * C**2, "="), Comparison(B + C - 3, ">")),
        (Comparison(-((A - 3) ** 2), ">="),),
        (Comparison(-((A**2 - 3 * A) ** 2), ">="), Comparison(A - B, ">"), Comparison(B - 2, ">")),
    ],
)
def test_a_point_is_found_where_little_is_left_to_a_parameter(
    conditions: tuple[Comparison, ...],
) -> None:
    domain = ParameterDomain(FIELD, (*POSITIVE.conditions, *conditions))
    points = domain.sample(2, 7)
    assert len(points) == 2
    assert all(holds_at(c, p) for p in points for c in domain.conditions)


def test_all_rational_values_are_found_where_these_are_finitely_many() -> None:
    field = field_of("a")
    a = field.symbol("a")
    isolated = Comparison(-(((a - 1) * (a - 2) * (a**2 - 2)) ** 2), ">=")
    domain = ParameterDomain(field, (isolated,))
    assert sorted(p["a"] for p in domain.sample(5, 1)) == [1, 2]
    irrational = ParameterDomain(field, (Comparison(a**2 - 2, "="),))
    assert irrational.sample(1, 1) == []


def test_an_empty_domain_gives_no_points() -> None:
    assert POSITIVE.narrowed(Comparison(A + B, "=")).sample(1, 0) == []
    assert POSITIVE.narrowed(Comparison(A**2 + B**2 + C**2, "=")).sample(1, 0) == []
