"""Each error says its facts, keeps them, and survives pickling."""

from __future__ import annotations

import pickle

import pytest

from closedform.errors import InputError, Place
from closedform.notation import errors as module
from closedform.notation.errors import (
    AmbiguousFormulaError,
    ConstantTermError,
    DivisionByZeroError,
    ExponentError,
    FormulaDepthError,
    FormulaError,
    FormulaLengthError,
    FormulaSyntaxError,
    InexactFunctionError,
    NegativeRootError,
    NestedRootError,
    NonlinearTermError,
    NotANumberError,
    NotFiniteError,
    PlacedError,
    SizeError,
    UndeclaredNameError,
    quoted,
    sentence,
    shown,
)

HERE = Place("bench.toml", "matrix[1][2]", 3, 5, "    1/0")
ERRORS: list[tuple[FormulaError, str]] = [
    (AmbiguousFormulaError(HERE, "a division", ("1/(2*x)", "(1/2)*x")), "write '1/(2*x)' or"),
    (ConstantTermError(HERE, "2"), "the constant '2' is added"),
    (DivisionByZeroError(HERE, "1/0"), "'1/0' divides by zero"),
    (ExponentError(HERE, "2^x"), "the exponent of '2^x' is not an integer"),
    (FormulaDepthError(HERE, 100), "more than 100 levels deep"),
    (FormulaLengthError(HERE, 7, 5), "has 7 characters, and at most 5 are read"),
    (FormulaSyntaxError(HERE, "what is wrong", "*", "what to do"), "what is wrong (found '*'): "),
    (FormulaSyntaxError(HERE, "what is wrong", "", "what to do"), "what is wrong: what to do"),
    (InexactFunctionError(HERE, "exp(1)"), "'exp(1)' is not read as a number"),
    (NegativeRootError(HERE, "sqrt(-1)"), "'sqrt(-1)' is the square root of a negative number"),
    (NestedRootError(HERE, "sqrt(sqrt(2))"), "square roots of rational numbers are read"),
    (NonlinearTermError(HERE, "x*y"), "the term 'x*y' is not a number times a state"),
    (NotANumberError(HERE, "k"), "'k' is a name, and a number is needed"),
    (NotFiniteError(HERE, "nan"), "'nan' is no value: values must be finite exact numbers"),
    (SizeError(HERE, "9^9", "some limit"), "'9^9' is too large to be held exactly: some limit"),
    (UndeclaredNameError(HERE, "xi", "x1", ("x1",)), "did you mean 'x1'?"),
    (UndeclaredNameError(HERE, "q", None, ()), "only numbers may stand here"),
    (UndeclaredNameError(HERE, "q", None, tuple("abcdefghij")), "a, b, c, d, e, f, g, h, …"),
]


@pytest.mark.parametrize(("error", "words"), ERRORS)
def test_the_text_names_place_and_facts(error: FormulaError, words: str) -> None:
    text = str(error)
    assert text.startswith("bench.toml, matrix[1][2], line 3, column 5: ")
    assert words in text
    assert text.endswith("\n      1/0\n      ^")
    assert text.split("\n", maxsplit=1)[0].endswith((".", "?", "…"))


@pytest.mark.parametrize(("error", "words"), ERRORS)
def test_errors_survive_pickling(error: FormulaError, words: str) -> None:
    again = pickle.loads(pickle.dumps(error))  # noqa: S301 - made here
    assert type(again) is type(error)
    assert again.__dict__ == error.__dict__
    assert words in str(again)


def test_all_errors_are_input_errors_and_tested() -> None:
    classes = {
        cls
        for name in module.__all__
        if isinstance(cls := getattr(module, name), type) and cls not in (FormulaError, PlacedError)
    }
    assert {type(error) for error, _ in ERRORS} == classes
    assert all(issubclass(cls, FormulaError) and issubclass(cls, InputError) for cls in classes)


SENTENCES = [("do this", "do this."), ("do this.", "do this."), ("a?", "a?"), ("a, …", "a, …")]


@pytest.mark.parametrize(("paragraph", "ended"), SENTENCES)
def test_a_paragraph_ends_with_one_mark(paragraph: str, ended: str) -> None:
    assert sentence(paragraph) == ended


def test_without_a_place_the_paragraph_stands_alone() -> None:
    assert shown(Place(), "wrong") == "wrong"


def test_without_a_column_there_is_no_caret() -> None:
    assert shown(Place(line=2, excerpt="x = 1"), "wrong") == "line 2: wrong\n  x = 1"


@pytest.mark.parametrize("column", [1, 39, 100, 500, 999, 1000])
def test_a_long_line_is_cut_around_its_caret(column: int) -> None:
    line = "".join(chr(ord("a") + k % 26) for k in range(1000))
    _, excerpt, caret = shown(Place(line=1, column=column, excerpt=line), "wrong").split("\n")
    assert len(excerpt) <= 80
    assert excerpt[caret.index("^")] == line[column - 1]


def test_control_characters_do_not_reach_the_terminal() -> None:
    place = Place(line=1, column=2, excerpt="\x1b[31m\tx")
    assert "\x1b" not in shown(place, "wrong")
    assert "\x1b" not in quoted("\x1b[31m")


def test_long_quotations_are_cut() -> None:
    assert len(quoted("x" * 1000)) == 62
