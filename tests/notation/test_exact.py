"""Constant formulas have exact values, and only those that can have one."""

from __future__ import annotations

from fractions import Fraction

import pytest
from flint import arb, ctx, fmpq
from hypothesis import given

from closedform.algebra.surds import SurdSum
from closedform.errors import Place
from closedform.notation.errors import (
    DivisionByZeroError,
    ExponentError,
    FormulaError,
    InexactFunctionError,
    NegativeRootError,
    NestedRootError,
    NotANumberError,
    SizeError,
)
from closedform.notation.evaluation import enclose
from closedform.notation.exact import exact_value
from closedform.notation.expression import Expression, Name
from tests.notation.formulas import (
    HERE,
    rational_formulas,
    rational_value,
    read,
    surd_formulas,
)

F = Fraction

VALUES: list[tuple[str, dict[int, Fraction]]] = [
    ("0.1", {1: F(1, 10)}),
    ("-3", {1: F(-3)}),
    ("1/3 + 1/6", {1: F(1, 2)}),
    ("sqrt(8)", {2: F(2)}),
    ("sqrt(2/3)", {6: F(1, 3)}),
    ("sqrt(0.3)", {30: F(1, 10)}),
    ("sqrt(1.23456789012)", {308641972530: F(1, 500000)}),
    ("sqrt(0)", {}),
    ("sqrt(sqrt(16))", {1: F(2)}),
    ("(1 + sqrt(5))/2", {1: F(1, 2), 5: F(1, 2)}),
    ("((1 + sqrt(5))/2)^2 - (1 + sqrt(5))/2", {1: F(1)}),
    ("1/(sqrt(3) - sqrt(2))", {2: F(1), 3: F(1)}),
    ("sqrt(2)*sqrt(3)", {6: F(1)}),
    ("sqrt(2)^4", {1: F(4)}),
    ("8^(1/2)", {2: F(2)}),
    ("(1/2)^(-3/2)", {2: F(2)}),
    ("2^-3", {1: F(1, 8)}),
    ("(1 + sqrt(2))^-1", {1: F(-1), 2: F(1)}),
    ("(-1)^(10^900 + 1)", {1: F(-1)}),
    ("1/(1 + sqrt(999999999999999989))", {1: F(-1, 10**18 - 12), 10**18 - 11: F(1, 10**18 - 12)}),
]


@pytest.mark.parametrize(("text", "terms"), VALUES)
def test_numbers_are_exact(text: str, terms: dict[int, Fraction]) -> None:
    assert exact_value(read(text), HERE) == SurdSum.of(terms)


@given(rational_formulas())
def test_rational_formulas_have_their_rational_value(expression: Expression) -> None:
    try:
        value = rational_value(expression)
    except ZeroDivisionError:
        with pytest.raises(DivisionByZeroError):
            exact_value(expression, HERE)
        return
    assert exact_value(expression, HERE) == SurdSum.rational(value)


@given(surd_formulas())
def test_surds_lie_in_their_enclosure(expression: Expression) -> None:
    try:
        value = exact_value(expression, HERE)
    except (DivisionByZeroError, SizeError):
        return
    ctx.prec = 300
    total = arb(0)
    for d, c in value.terms:
        total += arb(fmpq(c.numerator, c.denominator)) * arb(d).sqrt()
    ball = enclose(expression, {})
    if ball.is_finite():
        assert ball.overlaps(total)


REFUSED: list[tuple[str, type[FormulaError], str]] = [
    ("1/0", DivisionByZeroError, "'1/0' divides by zero"),
    ("2/(sqrt(8) - 2 sqrt(2))", DivisionByZeroError, "'2/(sqrt(8) - 2*sqrt(2))'"),
    ("0^-1", DivisionByZeroError, "'0^(-1)'"),
    ("sqrt(-2)", NegativeRootError, "'sqrt(-2)'"),
    ("(-2)^(1/2)", NegativeRootError, "'(-2)^(1/2)'"),
    ("1 + sqrt(2 + sqrt(3))", NestedRootError, "'sqrt(2 + sqrt(3))' is a root of a root"),
    ("2*exp(1)", InexactFunctionError, "'exp(1)' is not read as a number"),
    ("sin(0)", InexactFunctionError, "'sin(0)'"),
    ("2^(1/3)", ExponentError, "'2^(1/3)'"),
    ("2^sqrt(2)", ExponentError, "'2^sqrt(2)'"),
    ("sqrt(2)^(1/2)", ExponentError, "'sqrt(2)^(1/2)'"),
    ("9^9^9^9", SizeError, "'9^(9^9)' is too large"),
    ("10^1000000", SizeError, "'10^1000000'"),
    ("2^(-10^9)", SizeError, "'2^(-10^9)'"),
    ("(1 + sqrt(2))^100000", SizeError, "too large"),
    ("(1/3)^(10^300)", SizeError, "too large"),
    ("sqrt(10^60 + 1)", SizeError, "'sqrt(10^60 + 1)'"),
    (
        "1/(sqrt(2)+sqrt(3)+sqrt(5)+sqrt(7)+sqrt(11)+sqrt(13)+sqrt(17)+sqrt(19))",
        SizeError,
        "denominators up to 7",
    ),
    ("*".join(f"(1+sqrt({p}))" for p in (2, 3, 5, 7, 11, 13, 17)), SizeError, "up to 64"),
    ("+".join(f"1/{n}" for n in range(1, 6000)), SizeError, "too large"),
]


@pytest.mark.parametrize(("text", "error", "words"), REFUSED)
def test_what_has_no_exact_value_is_refused(
    text: str, error: type[FormulaError], words: str
) -> None:
    with pytest.raises(error) as caught:
        exact_value(read(text), HERE)
    assert words in str(caught.value)
    assert str(caught.value).startswith("bench.toml, matrix[1][2]: ")


def test_a_name_is_no_number() -> None:
    with pytest.raises(NotANumberError, match="'k' is a name"):
        exact_value(Name("k"), Place())
