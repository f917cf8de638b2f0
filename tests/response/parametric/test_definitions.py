"""The formulas that define names have the value that they stand for, and are short."""

from __future__ import annotations

import pytest
from flint import arb, ctx
from hypothesis import given

from closedform.notation import enclose, plain
from closedform.response.parametric.definitions import definition_formula, square_root_formula
from closedform.response.parametric.quantities import (
    RootDefinition,
    SquareRoot,
    SumOfRoots,
    Value,
)
from tests.rational_elements import element, elements, points
from tests.sign_checks import positive

DOMAIN = positive("a b c")
FIELD = DOMAIN.field
PAIR = positive("m c k")


@given(elements(FIELD).filter(bool), points(FIELD.parameters))
def test_a_square_root_squares_to_its_element(square: object, at: dict[str, arb]) -> None:
    ctx.prec = 200
    value = FIELD.enclose_at(square, at)
    root = enclose(square_root_formula(DOMAIN, square), at)
    if root.is_finite():
        assert (root * root).overlaps(value)
        assert not root < 0
    else:
        assert not value > 0


@pytest.mark.parametrize(
    ("text", "written"),
    [
        ("k/m", "sqrt(k/m)"),
        ("4*c^2", "2*c"),
        ("c^2*k", "c*sqrt(k)"),
        ("9/4", "3/2"),
        ("c^2*(k - m)", "c*sqrt(k - m)"),
    ],
)
def test_what_is_known_to_be_positive_is_drawn_out_of_the_root(text: str, written: str) -> None:
    found = square_root_formula(PAIR, element(PAIR.field, text))
    assert plain(found) == written


def test_what_may_be_negative_stays_under_the_root() -> None:
    domain = PAIR.narrowed()
    free = type(domain)(domain.field, ())
    assert plain(square_root_formula(free, element(domain.field, "c^2*k"))) == "sqrt(c^2*k)"


@given(elements(FIELD), elements(FIELD), points(FIELD.parameters))
def test_the_two_roots_of_a_quadratic_add_and_multiply(
    total: object, last: object, at: dict[str, arb]
) -> None:
    ctx.prec = 300
    first, second = (
        enclose(definition_formula(DOMAIN, SumOfRoots(total, last, sign)), at) for sign in (1, -1)
    )
    if first.is_finite() and second.is_finite():
        assert (first + second).overlaps(FIELD.enclose_at(total, at))
        assert (first * second).overlaps(FIELD.enclose_at(last, at))
        assert not first < second


def test_rates_of_an_exchange_are_half_of_sum_and_root() -> None:
    domain = positive("k10 k12 k21")
    total, last = (element(domain.field, t) for t in ("k10 + k12 + k21", "k10*k21"))
    texts = [plain(definition_formula(domain, SumOfRoots(total, last, sign))) for sign in (1, -1)]
    assert texts == [
        "(k10 + k12 + k21 + sqrt((k10 + k12 + k21)^2 - 4*k10*k21))/2",
        "(k10 + k12 + k21 - sqrt((k10 + k12 + k21)^2 - 4*k10*k21))/2",
    ]


def test_a_rooted_sum_is_the_frequency_of_which_it_is_the_square() -> None:
    total, last = element(FIELD, "a + b"), element(FIELD, "a*b")
    plainly = definition_formula(DOMAIN, SumOfRoots(total, last, 1))
    rooted = definition_formula(DOMAIN, SumOfRoots(total, last, 1, rooted=True))
    assert plain(rooted) == f"sqrt({plain(plainly)})"


def test_other_definitions_are_as_they_stand() -> None:
    assert plain(definition_formula(DOMAIN, Value(element(FIELD, "-(a + b)/2")))) == "-(a + b)/2"
    assert plain(definition_formula(DOMAIN, SquareRoot(element(FIELD, "a/b")))) == "sqrt(a/b)"
    assert definition_formula(DOMAIN, RootDefinition((FIELD.domain.one,) * 4, 1)) is None
