"""Fractions reduced by FLINT are the same elements as by the field's own arithmetic."""

from __future__ import annotations

from fractions import Fraction
from typing import Any

import pytest
from hypothesis import given
from hypothesis import strategies as st

from closedform.algebra.lowest_terms import (
    equal_under,
    fraction,
    multiplied_out,
    put_in,
    sum_at,
)
from closedform.algebra.parameter_field import ParameterField

FIELD = ParameterField(parameters=("a", "b", "c"))
A, B, C = map(FIELD.symbol, FIELD.parameters)

numbers = st.fractions(min_value=-6, max_value=6, max_denominator=4)
terms = st.tuples(numbers, *[st.integers(0, 2)] * 3)


def _polynomial(parts: list[tuple[Fraction, int, int, int]]) -> Any:
    total = FIELD.scalar(0)
    for number, *exponents in parts:
        term = FIELD.scalar(number)
        for symbol, exponent in zip((A, B, C), exponents, strict=True):
            term *= symbol**exponent
        total += term
    return total


polynomials = st.lists(terms, max_size=3).map(_polynomial)
elements = st.tuples(polynomials, polynomials.filter(bool)).map(lambda pair: pair[0] / pair[1])


def _same(first: Any, second: Any) -> bool:
    return bool(first.numer == second.numer and first.denom == second.denom)


@given(elements, elements.filter(bool))
def test_fraction_is_the_quotient(first: Any, second: Any) -> None:
    made = fraction(FIELD, [first.numer, second.denom], [first.denom, second.numer])
    assert _same(made, first / second)


def test_fraction_refuses_a_zero_below() -> None:
    with pytest.raises(ZeroDivisionError):
        fraction(FIELD, [A.numer], [FIELD.scalar(0).numer])


@given(elements.filter(bool))
def test_multiplied_out_undoes_factored(element: Any) -> None:
    assert _same(multiplied_out(FIELD, FIELD.factored(element)), element)


@given(st.lists(elements, max_size=4), elements, elements.filter(bool))
def test_sum_at_is_the_sum_of_the_powers(coefficients: list[Any], place: Any, over: Any) -> None:
    total = FIELD.scalar(0)
    for c in reversed(coefficients):
        total = total * place + c
    assert _same(sum_at(FIELD, coefficients, place, [over]), total / over)


@given(elements, elements)
def test_put_in_is_substitution(element: Any, value: Any) -> None:
    try:
        wanted = FIELD.substituted(element, {"b": value})
    except ZeroDivisionError:
        with pytest.raises(ZeroDivisionError):
            put_in(FIELD, element, "b", value)
    else:
        assert _same(put_in(FIELD, element, "b", value), wanted)


def test_equal_under_an_equation_only() -> None:
    square = (A + 1) / A
    assert equal_under(FIELD, C**4 + B, square**2 + B, "c", 2, square)
    assert equal_under(FIELD, 1 / C, C / square, "c", 2, square)
    assert not equal_under(FIELD, C**3, C, "c", 2, square)
    assert not equal_under(FIELD, A, B, "c", 2, square)
