"""Conditions are read as two formulas and a relation, or refused at the right column."""

from __future__ import annotations

import pytest

from closedform.errors import Place
from closedform.notation.comparison import Compared, read_comparison
from closedform.notation.errors import FormulaError, FormulaSyntaxError, UndeclaredNameError
from closedform.notation.parametric_errors import ComparisonCountError, ComparisonSignError
from tests.notation.formulas import read

NAMES = frozenset("abck")

READ = [
    ("a < b", "a", "<", "b"),
    ("a<=b", "a", "<=", "b"),
    ("c^2 > 4*k*a", "c^2", ">", "4*k*a"),
    ("a >= -b", "a", ">=", "-b"),
    ("a != (b + c)/2", "a", "!=", "(b + c)/2"),
    ("a = b", "a", "=", "b"),
    ("a == 0", "a", "=", "0"),
    ("a ≤ b", "a", "<=", "b"),
    ("a≥b", "a", ">=", "b"),
    (" a ≠\n b ", "a", "!=", "b"),
    ("(a + b) < (c)", "a + b", "<", "c"),
]


@pytest.mark.parametrize(("text", "left", "relation", "right"), READ)
def test_a_condition_is_read(text: str, left: str, relation: str, right: str) -> None:
    expected = Compared(read(left, *NAMES), relation, read(right, *NAMES))
    assert read_comparison(text, names=NAMES) == expected


REFUSED: list[tuple[str, type[FormulaError], int, str]] = [
    ("a", ComparisonCountError, 2, "here is no sign of comparison; write one of < <= > >="),
    ("", ComparisonCountError, 1, "here is no sign"),
    ("a < b < c", ComparisonCountError, 7, "one sign of comparison, and here are 2"),
    ("a < b and b < c", ComparisonCountError, 13, 'as ["a < b", "b < c"] for a < b < c'),
    ("a =< b", ComparisonSignError, 3, "'=<' does not compare two formulas: write '<='"),
    ("a => b", ComparisonSignError, 3, "write '>='"),
    ("a <> b", ComparisonSignError, 3, "write '!='"),
    ("a === b", ComparisonSignError, 3, "the signs are < <= > >= != ="),
    ("!a < b", ComparisonSignError, 1, "the signs are"),
    ("(a < b)", ComparisonSignError, 4, "inside brackets; take these away"),
    ("(a < b", FormulaSyntaxError, 1, "a closing bracket is missing"),
    ("a < b)", FormulaSyntaxError, 6, "a closing bracket has no opening one"),
    ("< b", FormulaSyntaxError, 1, "the formula is empty"),
    ("a <", FormulaSyntaxError, 4, "the formula is empty"),
    ("a < b + * c", FormulaSyntaxError, 9, "two operators"),
    ("a < 4*q", UndeclaredNameError, 7, "'q' is not declared"),
    ("q < 4", UndeclaredNameError, 1, "'q' is not declared"),
]


@pytest.mark.parametrize(("text", "error", "column", "words"), REFUSED)
def test_what_is_no_condition_is_refused_in_its_column(
    text: str, error: type[FormulaError], column: int, words: str
) -> None:
    with pytest.raises(error) as caught:
        read_comparison(text, names=NAMES)
    assert words in str(caught.value)
    assert (caught.value.place.line, caught.value.place.column) == (1, column)
    assert caught.value.place.excerpt == text


@pytest.mark.parametrize(("text", "error", "column", "words"), REFUSED)
def test_inside_a_file_columns_count_from_where_the_condition_starts(
    text: str, error: type[FormulaError], column: int, words: str
) -> None:
    line = f'conditions = ["{text}"]'
    with pytest.raises(error, match=r"^bench\.toml, conditions") as caught:
        read_comparison(text, names=NAMES, place=Place("bench.toml", "conditions[1]", 7, 16, line))
    place = caught.value.place
    assert (place.line, place.column, place.excerpt) == (7, column + 15, line)
    assert words in str(caught.value)


def test_a_second_line_counts_its_own_columns() -> None:
    with pytest.raises(UndeclaredNameError) as caught:
        read_comparison("a <\n  b + q", names=NAMES, place=Place(None, "conditions[1]", 7, 5, "x"))
    assert (caught.value.place.line, caught.value.place.column) == (8, 7)
