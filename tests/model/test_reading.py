"""A model file is read exactly, or refused with file, key, line and column."""

from __future__ import annotations

import tomllib
from fractions import Fraction
from pathlib import Path

import pytest

from closedform.algebra.surds import SurdSum
from closedform.errors import InputError
from closedform.model import errors, file_errors, load
from closedform.model.model import Output
from closedform.model.reading import LARGEST_FILE
from closedform.notation import errors as formula_errors
from tests.model.statements import BENCH, spoiled, written
from tests.privileges import as_a_usual_user, folder_open_to_all

RATIONAL = SurdSum.rational


def test_a_model_file_is_read_exactly(tmp_path: Path) -> None:
    text = (
        BENCH
        + """
summary = \"\"\"
A bench.
\"\"\"
time = "z"
times = [0, 0.5, "sqrt(2)/2", 1_0.2_5, "1/3", -1e-1]
[outputs]
drift = "(x1 - x2)/2 + sqrt(2)*x2"
"""
    )
    model = load(written(tmp_path, text))
    assert model.name == "bench"
    assert model.title == "Two carts"
    assert model.summary == "A bench."
    assert model.time == "z"
    assert model.states == ("x1", "x2")
    assert model.matrix == (
        (RATIONAL(0), RATIONAL(1)),
        (RATIONAL(-2), RATIONAL(Fraction(-1, 10))),
    )
    assert model.initial == (RATIONAL(1), RATIONAL(0))
    half = Fraction(1, 2)
    assert model.times == (
        RATIONAL(0),
        RATIONAL(half),
        SurdSum.of({2: half}),
        RATIONAL(Fraction(41, 4)),
        RATIONAL(Fraction(1, 3)),
        RATIONAL(Fraction(-1, 10)),
    )
    assert model.outputs == (Output("drift", (RATIONAL(half), SurdSum.of({1: -half, 2: 1}))),)


def test_only_four_keys_are_needed(tmp_path: Path) -> None:
    model = load(str(written(tmp_path, BENCH)))
    assert (model.time, model.times, model.outputs, model.summary) == ("t", (), (), "")


def test_initial_values_may_be_given_by_name(tmp_path: Path) -> None:
    text = spoiled("initial = [1, 0]", '[initial]\nx2 = "1/3"\nx1 = 0.5')
    model = load(written(tmp_path, text))
    assert model.initial == (RATIONAL(Fraction(1, 2)), RATIONAL(Fraction(1, 3)))


def test_a_byte_order_mark_and_other_line_ends_are_accepted(tmp_path: Path) -> None:
    plain = load(written(tmp_path, BENCH))
    assert load(written(tmp_path, b"\xef\xbb\xbf" + BENCH.encode())) == plain
    assert load(written(tmp_path, BENCH.replace("\n", "\r\n"))) == plain


STEMS = [
    ("two carts.toml", "two-carts"),
    ("Münze (1).toml", "Munze-1"),
    ("..toml.toml", "toml"),
    ("質点.toml", "model"),
    ("v1.2_final-b.toml", "v1.2_final-b"),
]


@pytest.mark.parametrize(("file", "stem"), STEMS)
def test_results_are_filed_under_a_safe_name(tmp_path: Path, file: str, stem: str) -> None:
    assert load(written(tmp_path, BENCH, file)).name == stem


FILES: list[tuple[str | bytes, type[InputError], str]] = [
    ("", file_errors.FileEmptyError, "the file is empty; a model has at least title"),
    ("# a comment\n", file_errors.FileEmptyError, "the file is empty"),
    (b"# \xe4\n", file_errors.FileEncodingError, "byte 2 (0xe4) is not UTF-8"),
    (b"\xef\xbb\xbf# \xe4\n", file_errors.FileEncodingError, "byte 5 (0xe4)"),
    (BENCH.encode("utf-16"), file_errors.FileEncodingError, "byte 0 (0xff)"),
    ("#" * 10_000_000, file_errors.FileTooLargeError, "2000000 bytes, and this one has 10000000"),
    ("title = 'a'\nx = = 1\n", file_errors.FileSyntaxError, "line 2, column 5: the file is not"),
    ("title = 'a'\nx = [1,\n", file_errors.FileSyntaxError, "line 3, column 1: the file is not"),
    (BENCH + "title = 'b'\n", file_errors.FileSyntaxError, "line 8"),
    ("x = " + "[" * 100_000, file_errors.FileSyntaxError, "nested hundreds of levels deep"),
    ("x = " + "{a=" * 100_000, file_errors.FileSyntaxError, "nested hundreds of levels deep"),
    ("a." * 500_000 + "a = 1", file_errors.FileSyntaxError, "a key with dozens of parts"),
    ('"a b".' * 90_000 + "a = 1", file_errors.FileSyntaxError, "a key with dozens of parts"),
    ("x = " + "9" * 5000, file_errors.FileSyntaxError, "an integer with thousands of digits"),
]


@pytest.mark.parametrize(
    ("content", "error", "words"),
    FILES,
    ids=[f"{e.__name__}-{k}" for k, (_, e, _) in enumerate(FILES)],
)
def test_a_file_that_is_no_model_is_refused(
    tmp_path: Path, content: str | bytes, error: type[InputError], words: str
) -> None:
    path = written(tmp_path, content)
    with pytest.raises(error) as caught:
        load(path)
    assert words in str(caught.value)
    assert str(caught.value).startswith(str(path))


def test_syntax_errors_show_the_line(tmp_path: Path) -> None:
    path = written(tmp_path, "title = 'a'\nx = = 1\n")
    with pytest.raises(file_errors.FileSyntaxError) as caught:
        load(path)
    assert str(caught.value).endswith("\n  x = = 1\n      ^")


SYNTAX = [
    ("a = [[0, 1] [2, 3]]", "column 13", "unclosed array; before this place a comma or a"),
    ("a = [1/2]", "column 7", """a formula stands in quotation marks, as in "1/2"."""),
    ("a = [1., 2]", "column 7", "or digits after a decimal point;"),
    ("a = [.5]", "column 6", "a decimal has digits on both sides of its point."),
    ("a = Two carts", "column 5", "invalid value; text stands in quotation marks, as in title ="),
    ("a = 1,5", "column 6", "the decimal mark is a point, as in 0.5, and"),
    ("a 3", "column 3", "; a model file is made of lines such as"),
]


@pytest.mark.parametrize(("line", "column", "words"), SYNTAX)
def test_usual_slips_in_toml_come_with_advice(
    tmp_path: Path, line: str, column: str, words: str
) -> None:
    with pytest.raises(file_errors.FileSyntaxError) as caught:
        load(written(tmp_path, line))
    assert f"line 1, {column}: the file is not valid TOML: " in str(caught.value)
    assert words in str(caught.value)


def test_only_a_long_integer_is_called_one(tmp_path: Path, monkeypatch: pytest.MonkeyPatch) -> None:
    def failing(text: str, *, parse_float: object) -> None:
        raise ValueError(text[:1], parse_float)

    monkeypatch.setattr(tomllib, "loads", failing)
    with pytest.raises(ValueError, match="t") as caught:
        load(written(tmp_path, BENCH))
    assert not isinstance(caught.value, InputError)


def test_a_missing_file_is_told(tmp_path: Path) -> None:
    with pytest.raises(file_errors.FileMissingError, match="there is no such file"):
        load(tmp_path / "none.toml")


def test_a_directory_is_told(tmp_path: Path) -> None:
    with pytest.raises(file_errors.FileIsDirectoryError, match="this is a directory"):
        load(tmp_path)


def test_what_the_system_says_is_told(tmp_path: Path) -> None:
    below_a_file = written(tmp_path, BENCH) / "inner.toml"
    with pytest.raises(file_errors.FileUnreadableError, match="Not a directory"):
        load(below_a_file)
    with pytest.raises(file_errors.FileUnreadableError, match="NUL"):
        load("a\0b.toml")


def test_a_file_without_permission_is_told() -> None:
    with folder_open_to_all() as folder:
        path = written(folder, BENCH)
        load(path)  # what is imported late is imported while it may be read
        path.chmod(0)
        with (
            as_a_usual_user(),
            pytest.raises(file_errors.FileUnreadableError, match=r"(?i)permission"),
        ):
            load(path)


@pytest.mark.skipif(not Path("/dev/zero").exists(), reason="no endless device here")
def test_an_endless_file_is_refused() -> None:
    with pytest.raises(file_errors.FileTooLargeError, match="more than that") as caught:
        load("/dev/zero")
    assert (caught.value.size, caught.value.limit) == (None, LARGEST_FILE)


ENTRIES: list[tuple[str, type[InputError], str, str]] = [
    ('"sqrt(2"', formula_errors.FormulaSyntaxError, "matrix[2][1], line 5, column 9", '"sqrt'),
    ("'1/0'", formula_errors.DivisionByZeroError, "matrix[2][1], line 5, column 5", "'"),
    ('"2*k"', formula_errors.UndeclaredNameError, "matrix[2][1], line 5, column 7", '"2*'),
    ('"\\u0031/0"', formula_errors.DivisionByZeroError, "matrix[2][1]: ", ""),
    ("nan", formula_errors.NotFiniteError, "matrix[2][1], line 5, column 4", ""),
    ("-inf", formula_errors.NotFiniteError, "matrix[2][1], line 5, column 5", "-"),
    ("1e999999999", formula_errors.SizeError, "matrix[2][1], line 5, column 4", ""),
    ("0x" + "f" * 5000, formula_errors.SizeError, "matrix[2][1], line 5, column 4", ""),
    ("true", errors.WrongKindError, "line 5, column 4: here stands the truth value true", ""),
    ("[1]", errors.WrongKindError, "line 5, column 4: here stands an array, and a number", ""),
    ("{a = 1}", errors.WrongKindError, "line 5, column 4: here stands a table", ""),
    ("2020-01-01", errors.WrongKindError, "line 5, column 4: here stands a value of type date", ""),
    ('""', formula_errors.FormulaSyntaxError, "the formula is empty", '"'),
]


@pytest.mark.parametrize(("entry", "error", "words", "before"), ENTRIES)
def test_a_bad_entry_is_shown_in_its_line(
    tmp_path: Path, entry: str, error: type[InputError], words: str, before: str
) -> None:
    with pytest.raises(error) as caught:
        load(written(tmp_path, spoiled("-2", entry)))
    text = str(caught.value)
    assert words in text
    if "line" in words:
        assert text.endswith("\n     " + " " * len(before) + "^")


def test_a_slip_in_a_multi_line_formula_is_shown_in_its_line(tmp_path: Path) -> None:
    text = spoiled("-2", "'''\n1 +\n * 2'''")
    with pytest.raises(formula_errors.FormulaSyntaxError, match=r"line 7, column 2"):
        load(written(tmp_path, text))


STATEMENTS: list[tuple[str, str, type[InputError], str]] = [
    ('title = "Two carts"\n', "", errors.MissingKeyError, "toml: the key 'title' is missing"),
    ("initial = [1, 0]\n", "", errors.MissingKeyError, "such as 'initial = [1, 0]'."),
    ('"Two carts"', '""', errors.WrongKindError, "line 1, column 9: here stands empty text"),
    ('"Two carts"', "1", errors.WrongKindError, "here stands a number, and text in quotation"),
    ("title", "matrx = 1\ntitle", errors.UnknownKeyError, "line 1, column 1: there is no key"),
    ("title", "matrx = 1\ntitle", errors.UnknownKeyError, "did you mean 'matrix'?"),
    ("title", "qqq = 1\ntitle", errors.UnknownKeyError, "the keys are title, states, matrix"),
    ("title", "document = 1\ntitle", errors.LaterKeyError, "does not read 'document' yet"),
    ("[1, 0]", "[1, 0]\n[document]", errors.LaterKeyError, "document, line 8, column 2: this"),
    (
        "title",
        "mass = 1\ntitle",
        errors.MixedFormsError,
        "matrix, line 4, column 1: 'mass' and 'matrix' state a model in two different ways",
    ),
    (
        "title",
        "equations = []\ntitle",
        errors.MixedFormsError,
        "matrix, line 4, column 1: 'equations' and 'matrix' state a model",
    ),
    (
        "matrix = [",
        "stiffness = [",
        errors.MissingKeyError,
        "the key 'mass' is missing; add a line such as 'mass = [[2, 0], [0, 1]]'",
    ),
    (
        "[1, 0]",
        "[1, 0]\n[inputs]",
        errors.MissingKeyError,
        "inputs, line 8, column 2: the key 'input_matrix' is missing",
    ),
    (
        "title",
        "input_matrix = 1\ntitle",
        errors.MissingKeyError,
        "input_matrix, line 1, column 1: the key 'inputs' is missing",
    ),
    (
        "title",
        "at_points = 1\ntitle",
        errors.ClashingKeysError,
        "at_points, line 1, column 1: 'at_points' and 'initial' do not go together",
    ),
    ('["x1", "x2"]', "[]", errors.NoStatesError, "states, line 2, column 10: there are no states"),
    ('["x1", "x2"]', '"x1"', errors.WrongKindError, "here stands text, and an array of names"),
    ('"x2"', "2", errors.WrongKindError, "states[2], line 2, column 17: here stands a number"),
    ('"x2"', '"x1"', errors.DuplicateNameError, "line 2, column 17: the name 'x1' is given twice"),
    (
        '"x2"',
        '"x_1"',
        errors.LookalikeNamesError,
        "states[2], line 2, column 17: the names 'x1' and 'x_1' would be printed alike",
    ),
    (
        "[1, 0]",
        "[1, 0]\ntime = 'x_2'",
        errors.LookalikeNamesError,
        "states[2], line 2, column 17: the names 'x_2' and 'x2' would be printed alike",
    ),
    (
        "[1, 0]",
        "[1, 0]\n[outputs]\nx_1 = 'x2'",
        errors.LookalikeNamesError,
        "outputs.x_1, line 9, column 1: the names 'x1' and 'x_1' would be printed alike",
    ),
    (
        "[1, 0]",
        "[1, 0]\n[outputs]\ny1 = 'x2'\ny_1 = 'x1'",
        errors.LookalikeNamesError,
        "outputs.y_1, line 10, column 1: the names 'y1' and 'y_1'",
    ),
    (
        "[1, 0]",
        "[1, 0]\n[outputs]\nt = 'x2'",
        errors.UnusableNameError,
        "outputs.t, line 9, column 1: 't' cannot be used as a name: it is the name of the time",
    ),
    ('"x2"', '"2x"', errors.UnusableNameError, "'2x' cannot be used as a name: a name begins"),
    ('"x2"', '"x-2"', errors.UnusableNameError, "a name begins"),
    ('"x2"', '"ω"', errors.UnusableNameError, "write 'omega'"),
    ('"x2"', '"sin"', errors.UnusableNameError, "it is the name of a function"),
    ('"x2"', '"pi"', errors.UnusableNameError, "for the number 3.14159...; write 'p_i' or"),
    ('"x2"', '"e"', errors.UnusableNameError, "the base of exp; write 'e_1' or a word such as"),
    ("[-2, -0.1]", '[-2, "i"]', formula_errors.UndeclaredNameError, "there is no imaginary unit"),
    ("title", "A = 1\ntitle", errors.UnknownKeyError, "no key 'A'; did you mean 'matrix'?"),
    ("title", "Title = 1\ntitle", errors.UnknownKeyError, "did you mean 'title'?"),
    ('"x2"', '"t"', errors.UnusableNameError, "it is the name of the time"),
    ('"x2"', f'"{"x" * 65}"', errors.UnusableNameError, "names have at most 64"),
    (
        '["x1", "x2"]',
        str([f"x{k}" for k in range(401)]),
        errors.TooManyStatesError,
        "401 states, and at most 400",
    ),
    ("  [-2, -0.1],\n", "", errors.RowCountError, "the matrix has 1 row, but there are 2 states"),
    ("-0.1]", "-0.1, 3]", errors.RowLengthError, "matrix[2], line 5, column 3: row 2 of the"),
    ("-0.1]", "-0.1, 3, 4]", errors.RowLengthError, "row 2 of the matrix has 4 entries"),
    ("[0, 1],", "[],", errors.RowLengthError, "has 0 entries, but there are 2 states, so 2 are"),
    ("[-2, -0.1]", "-2", errors.WrongKindError, "here stands a number, and a row"),
    ("[1, 0]", "[1]", errors.InitialLengthError, "'initial' has 1 value, but there are 2 states"),
    ("[1, 0]", "1", errors.WrongKindError, "initial, line 7, column 11: here stands a number"),
    ("[1, 0]", "{x1 = 1}", errors.MissingInitialError, "'initial' gives no value to 'x2'"),
    ("[1, 0]", "{x1 = 1, x_2 = 0}", errors.UnknownStateError, "did you mean 'x2'?"),
    ("[1, 0]", "{x1 = 1, q = 0}", errors.UnknownStateError, "the states are x1, x2"),
    ("[1, 0]", "[1, 0]\ntime = 's s'", errors.UnusableNameError, "time, line 8, column 8"),
    ("[1, 0]", "[1, 0]\ntimes = 3", errors.WrongKindError, "an array of numbers is needed"),
    (
        "[1, 0]",
        "[1, 0]\ntimes = [0, 'x1']",
        formula_errors.UndeclaredNameError,
        "times[2], line 8, column 14",
    ),
    ("[1, 0]", "[1, 0]\noutputs = 3", errors.WrongKindError, "a table with a formula"),
    ("[1, 0]", "[1, 0]\n[outputs]\ny = 3", errors.WrongKindError, "a formula in quotation marks"),
    ("[1, 0]", "[1, 0]\n[outputs]\nx1 = 'x2'", errors.UnusableNameError, "a state has that name"),
    ("[1, 0]", "[1, 0]\n[outputs]\n'a b' = 'x2'", errors.UnusableNameError, "line 9, column 1"),
    ("[1, 0]", "[1, 0]\n[outputs]\ntimes = [0]", errors.MisplacedKeyError, "above the heading"),
    (
        "[1, 0]",
        "[1, 0]\n[outputs]\ny = 'x1 - x3'",
        formula_errors.UndeclaredNameError,
        "outputs.y, line 9, column 11: the name 'x3'",
    ),
    (
        "[1, 0]",
        "[1, 0]\n[outputs]\ny = 'x1*x2'",
        formula_errors.NonlinearTermError,
        "outputs.y, line 9, column 6: the term 'x1*x2'",
    ),
    (
        "[1, 0]",
        "[1, 0]\n[outputs]\ny = 'x1 + 1'",
        formula_errors.ConstantTermError,
        "the constant '1'",
    ),
]


@pytest.mark.parametrize(("old", "new", "error", "words"), STATEMENTS)
def test_a_bad_statement_is_told_where_it_stands(
    tmp_path: Path, old: str, new: str, error: type[InputError], words: str
) -> None:
    path = written(tmp_path, spoiled(old, new))
    with pytest.raises(error) as caught:
        load(path)
    assert words in str(caught.value)
    assert str(caught.value).startswith(str(path))


def test_a_model_of_the_greatest_size_is_read(tmp_path: Path) -> None:
    n = 60
    rows = [[k - j for k in range(n)] for j in range(n)]
    text = f"title = 'a'\nstates = {[f'x{k}' for k in range(n)]}\nmatrix = {rows}\n"
    model = load(written(tmp_path, text + f"initial = {[1] * n}\n"))
    assert [[entry.as_fraction() for entry in row] for row in model.matrix] == rows
