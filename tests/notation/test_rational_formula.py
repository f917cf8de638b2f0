"""Rational functions of parameters are written the short way, and keep their value."""

from __future__ import annotations

import pytest
from flint import arb, ctx
from hypothesis import assume, given

from closedform.algebra.field import Scalar
from closedform.algebra.parameter_field import ParameterField
from closedform.notation.evaluation import enclose
from closedform.notation.expression import Call, Expression, Name, Negation, operations
from closedform.notation.plain import plain
from closedform.notation.rational_formula import rational_formula, taken_apart, weighted_rational
from closedform.notation.reader import read_formula
from tests.rational_elements import element, elements, field_of, points

FIELD = field_of("m c k delta omega_d x0 v0 k10 k12 k21 a b d")
SMALL = field_of("a b c d")


@pytest.mark.parametrize(
    "text",
    [
        "0",
        "1",
        "-3/2",
        "a",
        "-a",
        "1/a",
        "-1/a",
        "a/3",
        "c/(2*m)",
        "3*m/(2*c)",
        "-k/m",
        "a*(b + d)",
        "b - a",
        "-a - b",
        "(a - b)/2",
        "(b - a)/(2*m)",
        "1/(b - a)",
        "(a - b)/(a + b)",
        "k/m - delta^2",
        "a^2 - b^2",
        "1/(a^2 - b^2)",
        "(a + b)^3",
        "c^2 - 4*m*k",
        "(k10 + k12 + k21)^2 - 4*k10*k21",
        "(m*omega_d^2 - k)^2 + c^2*omega_d^2",
        "v0 + delta*x0",
        "(v0 + delta*x0)/omega_d",
        "(v0 + c*x0/(2*m))/omega_d",
        "x0 - b/a",
        "x0 - b/(a + d)",
        "c*(x0 - b/(a + d))/(m*omega_d)",
        "d + a*(b + k10*(k12 + k21))",
        "2*(a + b) + d",
        "a*(k - c)/(b*(a - b))",
        "1 + m*c",
        "a/(k10 - k12) - b/(k10 + k12)",
    ],
)
def test_the_form_a_person_would_write(text: str) -> None:
    assert plain(rational_formula(FIELD, element(FIELD, text))) == text


@pytest.mark.parametrize(
    ("text", "shortest"),
    [
        ("a*b + a*d", "a*(b + d)"),
        ("-(a - b)", "b - a"),
        ("a/(a - b) - b/(a - b)", "1"),
        ("1 - k10/(k10 + k12)", "k12/(k10 + k12)"),
        ("a^2 + 2*a*b + b^2", "(a + b)^2"),
        ("(2*m*v0 + c*x0)/(2*m*omega_d)", "(v0 + c*x0/(2*m))/omega_d"),
        ("x0*a/a - b/a", "x0 - b/a"),
        ("(a*x0 + d*x0 - b)/(a + d)", "x0 - b/(a + d)"),
    ],
)
def test_longer_forms_are_shortened(text: str, shortest: str) -> None:
    assert plain(rational_formula(FIELD, element(FIELD, text))) == shortest


@pytest.mark.parametrize(
    ("value", "written"),
    [
        ("1", "exp(d)/b"),
        ("-1", "-exp(d)/b"),
        ("a", "a*exp(d)/b"),
        ("-a/2", "-a*exp(d)/(2*b)"),
        ("b - a", "(b - a)*exp(d)/b"),
        ("-a - b", "-(a + b)*exp(d)/b"),
        ("3/(2*(a - b))", "3*exp(d)/(2*(a - b)*b)"),
    ],
)
def test_a_weight_is_one_term_with_its_sign_outside(value: str, written: str) -> None:
    factors, divisors = [Call("exp", Name("d"))], [Name("b")]
    formula = weighted_rational(FIELD, element(FIELD, value), factors, divisors)
    assert plain(formula) == written


@given(elements(SMALL).filter(bool))
def test_taking_apart_loses_nothing(value: Scalar) -> None:
    assert SMALL.product_of(taken_apart(value)) == value


@given(elements(SMALL), points(SMALL.parameters))
def test_the_value_is_kept_and_the_text_reads_back(value: Scalar, at: dict[str, arb]) -> None:
    ctx.prec = 200
    exact = SMALL.enclose_at(value, at)
    assume(exact.is_finite())
    formula = rational_formula(SMALL, value)
    read = read_formula(plain(formula), names=frozenset(SMALL.parameters))
    assert plain(read) == plain(formula)
    for written in (formula, read):
        ball = enclose(written, at)
        assert ball.is_finite()
        assert ball.overlaps(exact)
        assert ball.rad() < 1


@given(elements(SMALL))
def test_no_form_is_longer_than_numerator_over_denominator(value: Scalar) -> None:
    assert operations(rational_formula(SMALL, value)) <= operations(_expanded(SMALL, value))


def _expanded(field: ParameterField, value: Scalar) -> Expression:
    above, below = (str(p).replace("**", "^") for p in (value.numer, value.denom))
    text = above if below == "1" else f"({above})/({below})"
    return read_formula(text, names=frozenset(field.parameters))


@given(elements(SMALL).filter(bool))
def test_the_length_does_not_hang_on_the_sign(value: Scalar) -> None:
    formula, opposite = (rational_formula(SMALL, v) for v in (value, -value))
    assert abs(operations(formula) - operations(opposite)) <= 1
    assert not isinstance(formula, Negation) or not isinstance(opposite, Negation)
