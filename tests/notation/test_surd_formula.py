"""Surds are written as people write them, and mean the same number."""

from __future__ import annotations

from fractions import Fraction

import pytest
from hypothesis import given
from hypothesis import strategies as st

from closedform.algebra.surds import SurdSum
from closedform.errors import Place
from closedform.notation.exact import exact_value
from closedform.notation.expression import Negation, operations
from closedform.notation.plain import plain
from closedform.notation.terms import surd_formula
from tests.notation.formulas import read

WRITTEN = [
    "0",
    "3",
    "-3",
    "1/2",
    "-1/2",
    "sqrt(2)",
    "-sqrt(2)",
    "3*sqrt(2)",
    "sqrt(3)/2",
    "-sqrt(3)/2",
    "3*sqrt(5)/2",
    "1 + sqrt(2)",
    "1 - sqrt(2)",
    "sqrt(2) - 1",
    "-1 - sqrt(2)",
    "(1 + sqrt(5))/2",
    "(sqrt(5) - 1)/2",
    "-(1 + sqrt(5))/2",
    "(3 + 2*sqrt(5))/6",
    "1/2 - sqrt(2)",
    "1 + 2*sqrt(2) - 3*sqrt(3)",
    "sqrt(2) - 1 - sqrt(3)",
]


@pytest.mark.parametrize("text", WRITTEN)
def test_numbers_in_their_shortest_form_stay_as_they_are(text: str) -> None:
    assert plain(surd_formula(exact_value(read(text), Place()))) == text


SHORTENED = [
    ("sqrt(1/2)", "sqrt(2)/2"),
    ("1/2 + sqrt(5)/2", "(1 + sqrt(5))/2"),
    ("1/(1 + sqrt(2))", "sqrt(2) - 1"),
    ("sqrt(5)/3 - 1/2", "(2*sqrt(5) - 3)/6"),
    ("2/sqrt(2)", "sqrt(2)"),
]


@pytest.mark.parametrize(("text", "shortest"), SHORTENED)
def test_other_spellings_are_brought_to_the_shortest(text: str, shortest: str) -> None:
    assert plain(surd_formula(exact_value(read(text), Place()))) == shortest


SURDS = st.dictionaries(
    st.sampled_from([1, 2, 3, 5, 6, 10, 30]), st.fractions(max_denominator=12), max_size=4
).map(SurdSum.of)


@given(SURDS)
def test_the_formula_means_the_number(value: SurdSum) -> None:
    assert exact_value(surd_formula(value), Place()) == value
    assert exact_value(read(plain(surd_formula(value))), Place()) == value


@given(SURDS)
def test_a_positive_term_comes_first_and_a_sign_costs_at_most_one_operation(value: SurdSum) -> None:
    assert abs(operations(surd_formula(value)) - operations(surd_formula(-value))) <= 1
    if any(c > 0 for _, c in value.terms):
        assert not isinstance(surd_formula(value), Negation)
        assert not plain(surd_formula(value)).lstrip("(").startswith("-")
    assert value.terms or plain(surd_formula(value)) == str(Fraction(0))
