"""Products and powers are made in their simplest form, and keep their value."""

from __future__ import annotations

import math
import re
from fractions import Fraction

import pytest
from hypothesis import given
from hypothesis import strategies as st

from closedform.notation.expression import (
    ONE,
    ZERO,
    Call,
    Expression,
    Name,
    Negation,
    Power,
    Product,
    Quotient,
    Sum,
    factors_of,
    names_in,
    number,
    power_of,
    product,
    rebuilt,
)
from closedform.notation.plain import plain
from tests.notation.formulas import NAMES, NUMBERS, formulas, rational_value, whole

A, B, C = Name("a"), Name("b"), Name("c")

PRODUCTS: list[tuple[list[Expression], Expression]] = [
    ([], ONE),
    ([ONE], ONE),
    ([ONE, Product((ONE, ONE))], ONE),
    ([A], A),
    ([ONE, A], A),
    ([B, A], Product((B, A))),
    ([A, Product((B, C))], Product((A, B, C))),
    ([Product((A, Product((ONE, B)))), C], Product((A, B, C))),
    ([Product((A, ONE))], A),
    ([ZERO, A], Product((ZERO, A))),
    ([Quotient(A, B), Negation(C)], Product((Quotient(A, B), Negation(C)))),
]


@pytest.mark.parametrize(("factors", "expected"), PRODUCTS)
def test_a_product_is_opened_and_rid_of_ones(
    factors: list[Expression], expected: Expression
) -> None:
    assert product(factors) == expected


@given(st.lists(formulas(), max_size=4))
def test_a_product_has_two_factors_or_is_something_else(factors: list[Expression]) -> None:
    result = product(factors)
    if isinstance(result, Product):
        assert len(result.factors) > 1
        assert not [f for f in result.factors if f == ONE or isinstance(f, Product)]
    assert product([result]) == result
    assert product(factors_of(result)) == result


@given(st.lists(NUMBERS | st.lists(NUMBERS, min_size=2).map(lambda n: Product(tuple(n)))))
def test_a_product_has_the_value_of_its_factors(factors: list[Expression]) -> None:
    expected = math.prod(map(rational_value, factors), start=Fraction(1))
    assert rational_value(product(factors)) == expected


def test_the_factors_of_what_is_no_product_are_itself() -> None:
    assert factors_of(A) == (A,)
    assert factors_of(ONE) == (ONE,)
    assert factors_of(Product((ONE, ONE))) == (ONE,)


POWERS = [
    (0, ONE),
    (1, A),
    (2, Power(A, whole(2))),
    (-1, Power(A, Negation(whole(1)))),
]


@pytest.mark.parametrize(("exponent", "expected"), POWERS)
def test_a_power_is_no_power_where_none_is_needed(exponent: int, expected: Expression) -> None:
    assert power_of(A, exponent) == expected


@given(formulas())
def test_the_names_are_those_of_the_text(expression: Expression) -> None:
    words = set(re.findall("[a-z][a-z0-9_]*", plain(expression)))
    assert names_in(expression) == words & NAMES


def test_a_formula_is_rebuilt_from_the_outside_in() -> None:
    x, y = Name("x"), Name("y")
    formula = Sum((Call("step", x), Negation(Quotient(Product((x, y)), Power(x, number(2))))))

    def change(node: Expression) -> Expression | None:
        match node:
            case Call("step", _):
                return ZERO
            case Name("x"):
                return y
        return None

    assert rebuilt(formula, change) == Sum(
        (ZERO, Negation(Quotient(Product((y, y)), Power(y, number(2)))))
    )
    assert rebuilt(formula, lambda _: None) == formula
