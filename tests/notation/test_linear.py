"""Outputs are read as linear combinations of the states, exactly."""

from __future__ import annotations

from fractions import Fraction

import pytest
from hypothesis import given
from hypothesis import strategies as st

from closedform.algebra.surds import SurdSum
from closedform.notation.errors import (
    ConstantTermError,
    DivisionByZeroError,
    FormulaError,
    NonlinearTermError,
    SizeError,
)
from closedform.notation.exact import exact_value
from closedform.notation.expression import Expression, Name, Negation, Product, Sum
from closedform.notation.linear import linear_combination
from closedform.notation.terms import surd_formula
from tests.notation.formulas import HERE, read

STATES = ("x1", "x2", "v")

COMBINATIONS: list[tuple[str, tuple[str, str, str]]] = [
    ("x1", ("1", "0", "0")),
    ("-x1", ("-1", "0", "0")),
    ("(x1 - x2)/2 + sqrt(2)*v", ("1/2", "-1/2", "sqrt(2)")),
    ("2(x1 - x2)*3/4", ("3/2", "-3/2", "0")),
    ("x1 + x1 - v/3", ("2", "0", "-1/3")),
    ("(x1 + 1) - 1", ("1", "0", "0")),
    ("0*x2", ("0", "0", "0")),
    ("0", ("0", "0", "0")),
    ("v/(1 + sqrt(2))", ("0", "0", "sqrt(2) - 1")),
    ("x1*2*3", ("6", "0", "0")),
]


@pytest.mark.parametrize(("text", "weights"), COMBINATIONS)
def test_weights_are_exact(text: str, weights: tuple[str, str, str]) -> None:
    expected = tuple(exact_value(read(w), HERE) for w in weights)
    assert linear_combination(read(text, *STATES), STATES, HERE) == expected


WEIGHTS = st.tuples(
    *[
        st.dictionaries(
            st.sampled_from([1, 2, 3, 6]), st.fractions(max_denominator=9), max_size=2
        ).map(SurdSum.of)
    ]
    * 3
)


@given(WEIGHTS)
def test_a_sum_of_weights_times_states_gives_the_weights(weights: tuple[SurdSum, ...]) -> None:
    terms: list[Expression] = [
        Product((surd_formula(w), Name(s))) for w, s in zip(weights, STATES, strict=True)
    ]
    assert linear_combination(Sum(tuple(terms)), STATES, HERE) == weights
    negated = tuple(-w for w in weights)
    assert linear_combination(Negation(Sum(tuple(terms))), STATES, HERE) == negated


REFUSED: list[tuple[str, type[FormulaError], str]] = [
    ("x1 + 2*x1*x2", NonlinearTermError, "'2*x1*x2'"),
    ("v + x1^2", NonlinearTermError, "'x1^2'"),
    ("x1/x2", NonlinearTermError, "'x1/x2'"),
    ("1/x2", NonlinearTermError, "'1/x2'"),
    ("x1 + sin(x2)", NonlinearTermError, "'sin(x2)'"),
    ("2^x1", NonlinearTermError, "'2^x1'"),
    ("x1 + t", NonlinearTermError, "the term 't' is not a number times a state"),
    ("t*x1", NonlinearTermError, "'t*x1'"),
    ("x1 + 1/2", ConstantTermError, "the constant '1/2'"),
    ("3", ConstantTermError, "the constant '3'"),
    ("2*(x1 - sqrt(2))", ConstantTermError, "'-2*sqrt(2)'"),
    ("x1/(1 - 1)", DivisionByZeroError, "'x1/(1 - 1)'"),
    ("x1*10^100000", SizeError, "'10^100000'"),
]


@pytest.mark.parametrize(("text", "error", "words"), REFUSED)
def test_what_is_not_linear_is_refused(text: str, error: type[FormulaError], words: str) -> None:
    with pytest.raises(error) as caught:
        linear_combination(read(text, *STATES, "t"), STATES, HERE)
    assert words in str(caught.value)
    assert caught.value.place == HERE


def test_a_long_sum_is_combined() -> None:
    text = "+".join(["x1/2"] * 1000)
    assert linear_combination(read(text, *STATES), STATES, HERE)[0].as_fraction() == Fraction(500)
