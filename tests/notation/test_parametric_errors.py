"""Each error of a formula in parameters says its facts, keeps them, and survives pickling."""

from __future__ import annotations

import pickle

import pytest

from closedform.errors import Place
from closedform.notation import parametric_errors as module
from closedform.notation.errors import FormulaError
from closedform.notation.parametric_errors import (
    ComparisonCountError,
    ComparisonSignError,
    IrrationalNumberError,
    ParameterFunctionError,
    ParameterRootError,
    ParameterSizeError,
)

HERE = Place("bench.toml", "matrix[1][2]", 3, 5, "    k/m")
ERRORS: list[tuple[FormulaError, str]] = [
    (ComparisonCountError(HERE, 0), "here is no sign of comparison"),
    (ComparisonCountError(HERE, 3), "one sign of comparison, and here are 3"),
    (ComparisonSignError(HERE, "=<", "write '<='"), "'=<' does not compare two formulas: write"),
    (IrrationalNumberError(HERE, "sqrt(2)"), "'sqrt(2)' is not rational"),
    (ParameterFunctionError(HERE, "exp(k)"), "'exp(k)' is no rational function"),
    (ParameterRootError(HERE, "sqrt(k)"), "'sqrt(k)' is a root of parameters"),
    (ParameterSizeError(HERE, "k^999", "some limit"), "'k^999' is too large to be multiplied out"),
]


@pytest.mark.parametrize(("error", "words"), ERRORS)
def test_the_text_names_place_and_facts(error: FormulaError, words: str) -> None:
    text = str(error)
    assert text.startswith("bench.toml, matrix[1][2], line 3, column 5: ")
    assert words in text
    assert text.endswith("\n      k/m\n      ^")
    assert text.split("\n", maxsplit=1)[0].endswith((".", "?", "…"))


@pytest.mark.parametrize(("error", "words"), ERRORS)
def test_errors_survive_pickling(error: FormulaError, words: str) -> None:
    again = pickle.loads(pickle.dumps(error))  # noqa: S301 - made here
    assert type(again) is type(error)
    assert again.__dict__ == error.__dict__
    assert words in str(again)


def test_all_errors_are_tested() -> None:
    assert {type(error).__name__ for error, _ in ERRORS} == set(module.__all__)
