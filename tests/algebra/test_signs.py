"""A sign is decided by an argument that recombines to the element, and is never wrong."""

from __future__ import annotations

import pytest
from hypothesis import given
from hypothesis import strategies as st

from closedform.algebra.domain import Comparison, ParameterDomain
from closedform.algebra.field import Scalar
from closedform.algebra.sign_argument import (
    ByCondition,
    ByExpansion,
    ByFactors,
    BySquares,
    ByTerms,
    Combined,
    Constant,
    Undecided,
    power,
)
from tests.sign_checks import (
    ELEMENTS,
    FIELD,
    POLYNOMIALS,
    A,
    B,
    C,
    domains,
    grid,
    is_never_wrong,
    parts_of,
    positive,
    recombined,
    term,
)


@given(domains(), st.lists(ELEMENTS, min_size=1, max_size=3), POLYNOMIALS, POLYNOMIALS)
def test_no_sign_is_wrong_at_a_point_and_every_argument_recombines(
    domain: ParameterDomain, elements: list[Scalar], factor: Scalar, rest: Scalar
) -> None:
    points = grid(domain) + domain.sample(3, 1)
    held = [c.element * factor + rest for c in domain.conditions]
    for element in (*elements, *held):
        argument = domain.sign_of(element)
        assert is_never_wrong(argument, points)
        for part in parts_of(argument):
            bounded_by_equation = (
                isinstance(part.reason, ByExpansion) and part.reason.comparison.relation == "="
            )
            assert bounded_by_equation or recombined(FIELD, part) == part.element


@given(st.sampled_from((-1, 0, 1)), st.integers(-3, 3))
def test_the_signs_of_a_power_are_those_of_a_number(sign: int, exponent: int) -> None:
    if sign or exponent >= 0:
        assert power(frozenset({sign}), exponent) == {sign**exponent}


MONOMIALS = st.builds(term, st.integers(1, 3), st.tuples(*[st.integers(0, 2)] * 3))


@given(MONOMIALS, MONOMIALS, MONOMIALS)
def test_a_square_of_two_terms_beside_a_positive_one_is_found(
    first: Scalar, second: Scalar, third: Scalar
) -> None:
    argument = positive("a b c").sign_of((first - second) ** 2 + third)
    assert argument.sign == "positive"


@pytest.mark.parametrize(
    ("element", "sign", "reason"),
    [
        (FIELD.scalar(-2), "negative", Constant),
        (FIELD.domain.zero, "zero", Constant),
        (A, "positive", ByCondition),
        (A + 2 * B, "positive", ByTerms),
        (-(A + B) / C, "negative", ByTerms),
        ((A - B) ** 2, "nonnegative", ByFactors),
        (A**2 - A * B + B**2, "positive", BySquares),
        (A**2 - 2 * A * B + 2 * B**2, "positive", BySquares),
        (A - B, "unknown", Undecided),
        (A**2 - 3 * A * B + B**2, "unknown", Undecided),
        (A * C**2 - 2 * A * B * C + A * B**2 + B, "positive", BySquares),
    ],
)
def test_signs_for_positive_parameters(element: Scalar, sign: str, reason: type) -> None:
    argument = positive("a b c").sign_of(element)
    assert (argument.sign, type(argument.reason)) == (sign, reason)


@pytest.mark.parametrize(
    ("conditions", "element", "sign", "reason"),
    [
        ([], A**2, "nonnegative", ByTerms),
        ([], A**2 + A * B + B**2, "nonnegative", BySquares),
        ([], A**2 + A * B + B**2 + 1, "positive", BySquares),
        ([], 1 / A, "nonzero", ByFactors),
        ([(A, ">=")], A + 1, "positive", ByTerms),
        ([(A, ">="), (B, ">=")], A + B, "nonnegative", ByTerms),
        ([(A, ">="), (A, "!=")], A, "positive", Combined),
        ([(B, ">"), (C, ">")], (A - B) ** 2 + 4 * B * C, "positive", BySquares),
        ([(-A, ">")], A**3, "negative", ByTerms),
        ([(A, "!=")], A**2, "positive", ByTerms),
        ([(A * B, "!=")], A, "nonzero", ByCondition),
        ([(A - B, "!=")], (A - B) ** 2, "positive", ByFactors),
        ([(A - B, "=")], A**2 - B**2, "zero", ByFactors),
        ([(A - B, "="), (B, ">")], A + C**2, "positive", ByTerms),
        ([(A - B, "="), (B, ">")], A**2 * C - B**2 * C + B, "positive", ByExpansion),
        ([(A - B, ">"), (B, ">")], A, "positive", ByCondition),
        ([(A - B, ">"), (B, ">")], A**2 - A * B + 1, "positive", ByCondition),
        ([(A - B, ">"), (B - C, ">"), (C, ">")], A**2 - B * C, "positive", ByExpansion),
        ([(A - B, ">="), (B, ">")], A**3 - B**3, "nonnegative", ByFactors),
        ([(A * (A - B), ">"), (A, ">")], A - B, "positive", ByCondition),
        ([(A**2 * B, ">=")], B, "unknown", Undecided),
        ([(A**2 * B, ">")], B, "positive", ByCondition),
    ],
)
def test_signs_from_conditions(
    conditions: list[tuple[Scalar, str]], element: Scalar, sign: str, reason: type
) -> None:
    domain = ParameterDomain(FIELD, tuple(Comparison(e, r) for e, r in conditions))
    argument = domain.sign_of(element)
    assert (argument.sign, type(argument.reason)) == (sign, reason)


def test_two_compartments_have_a_positive_discriminant() -> None:
    domain = positive("k10 k12 k21")
    k10, k12, k21 = (domain.field.symbol(n) for n in domain.field.parameters)
    argument = domain.sign_of((k10 + k12 + k21) ** 2 - 4 * k10 * k21)
    assert argument.sign == "positive"
    (square,) = argument.reason.squares
    assert (square.weight, square.base) == (domain.field.scalar(1), k10 - k21)
    assert argument.reason.rest.element == k12 * (2 * k10 + k12 + 2 * k21)


def test_two_compartments_with_an_outflow_each_need_a_square_of_four_terms() -> None:
    domain = positive("k10 k12 k20 k21")
    k10, k12, k20, k21 = (domain.field.symbol(n) for n in domain.field.parameters)
    argument = domain.sign_of(
        (k10 + k12 + k20 + k21) ** 2 - 4 * ((k10 + k12) * (k20 + k21) - k12 * k21)
    )
    assert argument.sign == "positive"
    (square,) = argument.reason.squares
    assert square.base == k10 + k12 - k20 - k21
    assert argument.reason.rest.element == 4 * k12 * k21


def test_two_masses_and_three_springs_have_two_different_frequencies() -> None:
    domain = positive("m1 m2 k1 k2 k3")
    m1, m2, k1, k2, k3 = (domain.field.symbol(n) for n in domain.field.parameters)
    trace = (k1 + k2) / m1 + (k2 + k3) / m2
    determinant = (k1 * k2 + k1 * k3 + k2 * k3) / (m1 * m2)
    assert domain.sign_of(trace**2 - 4 * determinant).sign == "positive"


def test_the_oscillator_is_decided_by_its_condition_only() -> None:
    domain = positive("m c k")
    m, c, k = (domain.field.symbol(n) for n in domain.field.parameters)
    discriminant = (c**2 - 4 * k * m) / (4 * m**2)
    assert domain.sign_of(discriminant).sign == "unknown"
    for element, sign in ((4 * k * m - c**2, "negative"), (c**2 - 4 * k * m, "positive")):
        narrowed = domain.narrowed(Comparison(element, ">"))
        assert narrowed.sign_of(discriminant).sign == sign
    critical = domain.narrowed(Comparison(discriminant, "="))
    assert critical.sign_of(c**2 - 4 * k * m).sign == "zero"
    light = domain.narrowed(Comparison(-discriminant, ">"))
    assert light.sign_of(c**2 - 5 * k * m).sign == "negative"
    assert light.sign_of(c**2 - 3 * k * m).sign == "unknown"
