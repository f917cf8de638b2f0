"""Each error of a model says its facts, keeps them, and survives pickling."""

from __future__ import annotations

import pickle
from types import ModuleType

import pytest

from closedform.errors import InputError, Place
from closedform.model import errors, file_errors
from closedform.model.errors import (
    BinaryFractionError,
    ClashingKeysError,
    DuplicateNameError,
    InitialLengthError,
    InputColumnsError,
    LaterKeyError,
    LookalikeNamesError,
    MisplacedKeyError,
    MissingInitialError,
    MissingKeyError,
    MixedFormsError,
    ModelError,
    NoStatesError,
    RowCountError,
    RowLengthError,
    TooManyStatesError,
    UnknownKeyError,
    UnknownStateError,
    UnusableNameError,
    WrongKindError,
)
from closedform.model.file_errors import (
    FileEmptyError,
    FileEncodingError,
    FileIsDirectoryError,
    FileMissingError,
    FileSyntaxError,
    FileTooLargeError,
    FileUnreadableError,
    ModelFileError,
)

HERE = Place("bench.toml", "some.key")
MODEL: list[tuple[ModelError, str]] = [
    (BinaryFractionError(HERE, 0.1), "0.1 is a binary floating-point number, and models are exact"),
    (
        ClashingKeysError(HERE, "at_points", "initial", "some reason"),
        "'at_points' and 'initial' do not go together: some reason; take one of them away",
    ),
    (DuplicateNameError(HERE, "x"), "the name 'x' is given twice"),
    (InitialLengthError(HERE, 1, 2), "'initial' has 1 value, but there are 2 states"),
    (InputColumnsError(HERE, 2, 1, 3), "row 2 of the input matrix has 1 entry, but there are 3"),
    (LaterKeyError(HERE, "document"), "this version does not read 'document' yet; take it away"),
    (
        LookalikeNamesError(HERE, "x_1", "x1", "x_1"),
        "the names 'x1' and 'x_1' would be printed alike, both as x with the index 1; give one",
    ),
    (LookalikeNamesError(HERE, "k_1_2", "k1_2", "k_1_2"), "both as k with the index 1,2;"),
    (LookalikeNamesError(HERE, "lamda", "lambda", "lambda"), "both as lambda; give one of them"),
    (MisplacedKeyError(HERE, "times", "outputs"), "it stands below the heading [outputs]"),
    (MissingInitialError(HERE, tuple("abcdefghij")), "no value to 'a', 'b', 'c', 'd', 'e', 'f'"),
    (
        MissingKeyError(HERE, "title", "title = 'a'"),
        "is missing; add a line such as 'title = 'a''.",
    ),
    (
        MixedFormsError(HERE, "equations", "matrix"),
        "'equations' and 'matrix' state a model in two different ways; state it by 'equations'",
    ),
    (NoStatesError(HERE), "there are no states"),
    (RowCountError(HERE, 3, 1), "the matrix has 3 rows, but there is 1 state;"),
    (
        RowLengthError(HERE, 2, 1, 2),
        "row 2 of the matrix has 1 entry, but there are 2 states, so 1 is missing",
    ),
    (RowLengthError(HERE, 2, 4, 2), "has 4 entries, but there are 2 states, so 2 are too many"),
    (TooManyStatesError(HERE, 500, 400), "there are 500 states, and at most 400 are read"),
    (UnknownKeyError(HERE, "titel", "title", ("title",)), "no key 'titel'; did you mean 'title'?"),
    (UnknownKeyError(HERE, "q", None, ("title", "states")), "the keys are title, states"),
    (UnknownStateError(HERE, "x3", "x2", ("x2",)), "there is no state 'x3'; did you mean 'x2'?"),
    (
        UnknownStateError(HERE, "q", None, tuple("abcdefghij")),
        "the states are a, b, c, d, e, f, g, h, …",
    ),
    (UnusableNameError(HERE, "2x", "some reason"), "'2x' cannot be used as a name: some reason"),
    (WrongKindError(HERE, "a number", "text"), "here stands text, and a number is needed"),
]
FILE: list[tuple[InputError, str]] = [
    (FileEmptyError("bench.toml"), "the file is empty"),
    (FileEncodingError("bench.toml", 7, 0xE4), "byte 7 (0xe4) is not UTF-8 text"),
    (FileIsDirectoryError("bench.toml"), "this is a directory"),
    (FileMissingError("bench.toml"), "there is no such file"),
    (
        FileSyntaxError(Place("bench.toml", None, 3, 7), "a slip"),
        "line 3, column 7: the file is not",
    ),
    (FileTooLargeError("bench.toml", 9, 5), "at most 5 bytes, and this one has 9 bytes"),
    (FileTooLargeError("bench.toml", None, 5), "at most 5 bytes, and this one has more than that"),
    (FileSyntaxError(Place("bench.toml"), "a slip", "some advice"), "TOML: a slip; some advice."),
    (FileUnreadableError("bench.toml", "why"), "the file cannot be read (why)"),
]


@pytest.mark.parametrize(("error", "words"), [*MODEL, *FILE])
def test_the_text_names_the_file_and_the_facts(error: InputError, words: str) -> None:
    assert str(error).startswith("bench.toml")
    assert words in str(error)


@pytest.mark.parametrize(("error", "words"), [*MODEL, *FILE])
def test_the_text_ends_as_a_sentence(error: InputError, words: str) -> None:
    assert words in str(error)
    assert str(error).endswith((".", "?", "…"))
    assert not str(error).endswith((" .", "..", ":."))


@pytest.mark.parametrize(("error", "words"), MODEL)
def test_the_text_names_the_key(error: ModelError, words: str) -> None:
    assert str(error).startswith("bench.toml, some.key: ")
    assert error.place == HERE
    assert words in str(error)


@pytest.mark.parametrize(("error", "words"), [*MODEL, *FILE])
def test_errors_survive_pickling(error: InputError, words: str) -> None:
    again = pickle.loads(pickle.dumps(error))  # noqa: S301 - made here
    assert type(again) is type(error)
    assert again.__dict__ == error.__dict__
    assert words in str(again)


@pytest.mark.parametrize(
    ("module", "table", "base"), [(errors, MODEL, ModelError), (file_errors, FILE, ModelFileError)]
)
def test_all_errors_are_input_errors_and_tested(
    module: ModuleType, table: list[tuple[InputError, str]], base: type[InputError]
) -> None:
    classes = {getattr(module, name) for name in module.__all__} - {base}
    assert {type(error) for error, _ in table} == classes
    assert all(issubclass(cls, InputError) for cls in classes)
