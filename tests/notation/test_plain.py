"""A formula written in plain notation reads back as the same mathematics."""

from __future__ import annotations

from fractions import Fraction

import pytest
from flint import arb, ctx
from hypothesis import given

from closedform.notation.evaluation import enclose
from closedform.notation.expression import (
    Call,
    Expression,
    Name,
    Negation,
    Number,
    Power,
    Product,
    Quotient,
    Sum,
)
from closedform.notation.plain import plain
from tests.notation.formulas import formulas, rational_formulas, rational_value, read, whole

A, B, C, T = Name("a"), Name("b"), Name("c"), Name("t")
HALF = Number(Fraction(1, 2))

WRITTEN: list[tuple[Expression, str]] = [
    (Number(Fraction(3)), "3"),
    (HALF, "1/2"),
    (Sum((A, Negation(B))), "a - b"),
    (Sum((Negation(A), B)), "-a + b"),
    (Sum((A, Negation(Sum((B, C))))), "a - (b + c)"),
    (Sum((A, Sum((B, C)))), "a + (b + c)"),
    (Sum((A, Negation(Negation(B)))), "a - (-b)"),
    (Sum((A, HALF)), "a + 1/2"),
    (Sum((A, Negation(Product((whole(3), B))))), "a - 3*b"),
    (Product((HALF, T)), "(1/2)*t"),
    (Quotient(T, whole(2)), "t/2"),
    (Quotient(Product((A, B)), C), "a*b/c"),
    (Quotient(A, Product((B, C))), "a/(b*c)"),
    (Quotient(Quotient(A, B), C), "(a/b)/c"),
    (Quotient(Sum((A, B)), C), "(a + b)/c"),
    (Product((A, Quotient(B, C))), "a*(b/c)"),
    (Product((A, Negation(B))), "a*(-b)"),
    (Product((Sum((A, B)), C)), "(a + b)*c"),
    (Negation(Product((A, B))), "-a*b"),
    (Negation(Sum((A, B))), "-(a + b)"),
    (Negation(Power(A, whole(2))), "-a^2"),
    (Power(Negation(A), whole(2)), "(-a)^2"),
    (Power(A, Negation(B)), "a^(-b)"),
    (Power(A, HALF), "a^(1/2)"),
    (Power(Power(A, B), C), "(a^b)^c"),
    (Power(A, Power(B, C)), "a^(b^c)"),
    (Power(Product((A, B)), C), "(a*b)^c"),
    (Product((A, Power(B, whole(2)))), "a*b^2"),
    (Call("exp", Negation(T)), "exp(-t)"),
    (Power(Call("sin", T), whole(2)), "sin(t)^2"),
]


@pytest.mark.parametrize(("expression", "text"), WRITTEN)
def test_formulas_are_written_with_few_brackets(expression: Expression, text: str) -> None:
    assert plain(expression) == text


@pytest.mark.parametrize(("expression", "text"), WRITTEN)
def test_what_is_written_is_a_fixed_point_of_reading(expression: Expression, text: str) -> None:
    assert plain(read(text, "a", "b", "c", "t")).replace("(1/2)", "1/2") == plain(
        expression
    ).replace("(1/2)", "1/2")


@given(rational_formulas())
def test_the_value_survives_writing_and_reading(expression: Expression) -> None:
    try:
        value = rational_value(expression)
    except ZeroDivisionError:
        return
    assert rational_value(read(plain(expression))) == value


@given(formulas())
def test_the_enclosure_survives_writing_and_reading(expression: Expression) -> None:
    ctx.prec = 200
    values = {"t": arb("0.3"), "x1": arb("1.7"), "omega_1": arb(2).sqrt(), "lambda": arb(-3)}
    before = enclose(expression, values)
    after = enclose(read(plain(expression)), values)
    assert before.is_finite() == after.is_finite()
    if before.is_finite():
        assert before.overlaps(after)
