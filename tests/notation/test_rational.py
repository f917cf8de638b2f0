"""Formulas in parameters have exact values in the field of their rational functions."""

from __future__ import annotations

from fractions import Fraction

import pytest
from hypothesis import given
from hypothesis import strategies as st

from closedform.algebra.parameter_field import ParameterField
from closedform.algebra.surds import SurdSum
from closedform.notation.errors import (
    ConstantTermError,
    DivisionByZeroError,
    ExponentError,
    FormulaError,
    NegativeRootError,
    NonlinearTermError,
    NotANumberError,
)
from closedform.notation.expression import Expression, Name, Negation, Power, Product, Quotient, Sum
from closedform.notation.parametric_errors import (
    IrrationalNumberError,
    ParameterFunctionError,
    ParameterRootError,
    ParameterSizeError,
)
from closedform.notation.rational import rational_combination, rational_value
from tests.notation.formulas import HERE, NUMBERS, read, whole
from tests.notation.formulas import rational_value as by_fractions

NAMES = ("a", "b", "c", "d")
FIELD = ParameterField(parameters=NAMES)
A, B, C, D = map(FIELD.symbol, NAMES)

VALUES = [
    ("3/4", FIELD.scalar(Fraction(3, 4))),
    ("a", A),
    ("-a/b", -A / B),
    ("a/b*c", A * C / B),
    ("0.1a b", A * B / 10),
    ("(a^2 - b^2)/(a + b)", A - B),
    ("a^-2", 1 / A**2),
    ("(a + b)^3", A**3 + 3 * A**2 * B + 3 * A * B**2 + B**3),
    ("sqrt(4)*a", 2 * A),
    ("(9/4)^(1/2)*a", 3 * A / 2),
    ("sqrt(a - a + 1/9)", FIELD.scalar(Fraction(1, 3))),
    ("a^(b/b + 1)", A**2),
    ("(a/a)^(10^30)", FIELD.scalar(1)),
    ("a/(b/(c/d))", A * C / (B * D)),
]


@pytest.mark.parametrize(("text", "value"), VALUES)
def test_values_are_exact(text: str, value: object) -> None:
    assert rational_value(read(text, *NAMES), FIELD, HERE) == value


def test_a_name_with_a_meaning_stands_for_it() -> None:
    value = rational_value(read("k/b", "k", "b"), FIELD, HERE, meanings={"k": B * A**2})
    assert value == A**2


def _formulas() -> st.SearchStrategy[Expression]:
    def above(inner: st.SearchStrategy[Expression]) -> st.SearchStrategy[Expression]:
        pairs = st.tuples(inner, inner)
        exponents = st.integers(-2, 2).map(lambda n: whole(n) if n >= 0 else Negation(whole(-n)))
        return st.one_of(
            inner.map(Negation),
            pairs.map(Sum),
            pairs.map(Product),
            st.builds(Quotient, inner, inner),
            st.builds(Power, inner, exponents),
        )

    return st.recursive(NUMBERS | st.sampled_from(NAMES).map(Name), above, max_leaves=7)


def _put_in(expression: Expression, values: dict[str, Fraction]) -> Expression:
    match expression:
        case Name(text):
            value = values[text]
            return Negation(_number(-value)) if value < 0 else _number(value)
        case Negation(operand):
            return Negation(_put_in(operand, values))
        case Sum(terms):
            return Sum(tuple(_put_in(term, values) for term in terms))
        case Product(factors):
            return Product(tuple(_put_in(factor, values) for factor in factors))
        case Quotient(one, other):
            return Quotient(_put_in(one, values), _put_in(other, values))
        case Power(base, exponent):
            return Power(_put_in(base, values), exponent)
        case _:
            return expression


def _number(value: Fraction) -> Expression:
    return Quotient(whole(value.numerator), whole(value.denominator))


@given(_formulas(), st.tuples(*[st.fractions(-5, 5, max_denominator=7)] * 4))
def test_at_a_point_the_value_is_that_of_the_formula(
    expression: Expression, point: tuple[Fraction, ...]
) -> None:
    values = dict(zip(NAMES, point, strict=True))
    try:
        element = rational_value(expression, FIELD, HERE)
    except DivisionByZeroError:
        with pytest.raises(ZeroDivisionError):
            by_fractions(_put_in(expression, values))
        return
    except ParameterSizeError:
        return
    try:
        expected = by_fractions(_put_in(expression, values))
    except ZeroDivisionError:
        return
    exact = {name: SurdSum.rational(value) for name, value in values.items()}
    assert FIELD.exact_at(element, exact) == SurdSum.rational(expected)


REFUSED: list[tuple[str, type[FormulaError], str]] = [
    ("sqrt(2)*a", IrrationalNumberError, "'sqrt(2)' is not rational, and the numbers of a model"),
    ("2^(1/2)", IrrationalNumberError, "make it a parameter that has this value"),
    ("b*sqrt(a/b)", ParameterRootError, "'sqrt(a/b)' is a root of parameters"),
    ("sqrt(a^2)", ParameterRootError, "'sqrt(a^2)'"),
    ("(a + 1)^(1/2)", ParameterRootError, "'(a + 1)^(1/2)'"),
    ("a^(-3/2)", ParameterRootError, "'a^(-3/2)'"),
    ("sqrt(-4)*a", NegativeRootError, "'sqrt(-4)'"),
    ("a*exp(-b)", ParameterFunctionError, "'exp(-b)' is no rational function of the parameters"),
    ("cos(0)", ParameterFunctionError, "make it a parameter of its own"),
    ("a^b", ExponentError, "'a^b'"),
    ("a^(1/3)", ExponentError, "'a^(1/3)'"),
    ("1/(a - a)", DivisionByZeroError, "'1/(a - a)' divides by zero"),
    ("((a + b)^2 - a^2 - 2a*b - b^2)^-1", DivisionByZeroError, "divides by zero"),
    ("(a + b + c + d)^200", ParameterSizeError, "'(a + b + c + d)^200' is too large to be"),
    ("a^(10^30)", ParameterSizeError, "of a degree up to 60"),
    ("(2a)^50*3^(10^9)", ParameterSizeError, "'3^(10^9)'"),
    ("*".join(f"(a + {k}*b + c)" for k in range(1, 90)), ParameterSizeError, "make a part of it"),
    ("+".join(f"1/(a + {k}*b + c)" for k in range(1, 90)), ParameterSizeError, "too large"),
]


@pytest.mark.parametrize(("text", "error", "words"), REFUSED)
def test_what_is_no_rational_function_is_refused(
    text: str, error: type[FormulaError], words: str
) -> None:
    with pytest.raises(error) as caught:
        rational_value(read(text, *NAMES), FIELD, HERE)
    assert words in str(caught.value)
    assert str(caught.value).startswith("bench.toml, matrix[1][2]: ")


def test_a_name_that_is_no_parameter_has_no_value() -> None:
    with pytest.raises(NotANumberError, match="'t' is a name"):
        rational_value(Name("t"), FIELD, HERE)


STATES = ("x", "v")
COMBINATIONS = [
    ("x", (FIELD.scalar(1), FIELD.scalar(0))),
    ("a*x + b*v", (A, B)),
    ("-(a*x - v)/b", (-A / B, 1 / B)),
    ("a*(x - v)*b/2", (A * B / 2, -A * B / 2)),
    ("(x + a) - a", (FIELD.scalar(1), FIELD.scalar(0))),
    ("a*x - x*a", (FIELD.scalar(0), FIELD.scalar(0))),
]


@pytest.mark.parametrize(("text", "weights"), COMBINATIONS)
def test_weights_are_exact(text: str, weights: tuple[object, ...]) -> None:
    formula = read(text, *NAMES, *STATES)
    assert rational_combination(formula, STATES, FIELD, HERE) == weights


NOT_LINEAR: list[tuple[str, type[FormulaError], str]] = [
    ("x*v", NonlinearTermError, "'x*v'"),
    ("a/x", NonlinearTermError, "'a/x'"),
    ("t*x", NonlinearTermError, "'t*x'"),
    ("x^2", NonlinearTermError, "'x^2'"),
    ("x + a^2/b", ConstantTermError, "the constant 'a^2/b'"),
    ("x*exp(a)", ParameterFunctionError, "'exp(a)'"),
    ("x/(a - a)", DivisionByZeroError, "'x/(a - a)'"),
]


@pytest.mark.parametrize(("text", "error", "words"), NOT_LINEAR)
def test_what_is_not_linear_is_refused(text: str, error: type[FormulaError], words: str) -> None:
    with pytest.raises(error) as caught:
        rational_combination(read(text, *NAMES, *STATES, "t"), STATES, FIELD, HERE)
    assert words in str(caught.value)
    assert caught.value.place == HERE
