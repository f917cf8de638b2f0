"""The lines of a list of claims, and the words that say what is claimed."""

from __future__ import annotations

from pathlib import Path

import pytest
from hypothesis import given
from hypothesis import strategies as st

from closedform.checking.claim import KINDS
from closedform.checking.source.errors import (
    ClaimFormulaError,
    ModelHandedInError,
    NoFormulaError,
    NoModelError,
    NoSuchModelError,
    SourceError,
    SourceFileError,
    SourceKeyError,
    SourceSyntaxError,
    SourceValueError,
    UnknownKindError,
)
from closedform.checking.source.reading import Source, read_source
from closedform.checking.source.words import VARIANTS, kind_of
from closedform.errors import InputError, Place

MODEL = 'model = "cart.toml"\n'


@pytest.fixture
def folder(tmp_path: Path) -> Path:
    (tmp_path / "cart.toml").write_text('title = "Cart"\n')
    return tmp_path


def read(folder: Path, text: str) -> Source:
    (folder / "claims.toml").write_text(text)
    return read_source(str(folder / "claims.toml"))


def test_claims_are_lines(folder: Path) -> None:
    source = read(
        folder,
        MODEL + 'title = "Check"\ncase = 2\nwhere = "k > 0"\n'
        "[[claim]]\nlatex = '\\lambda = -2'\nsays = 'Eigenvalue'\n"
        '[[claim]]\nwhere = "k = 1"\nat = 0.50\ntext = """\nx = 1"""\n',
    )
    assert (source.model, source.title, source.case) == ("cart.toml", "Check", "2")
    first, second = source.lines
    assert (first.number, first.text, first.typed) == (1, r"\lambda = -2", False)
    assert (first.says, first.where) == ("eigenvalues", "k > 0")
    assert (first.place.key, first.place.line, first.place.column) == ("claim[1].latex", 6, 10)
    assert (second.number, second.text, second.typed) == (2, "x = 1", True)
    assert (second.at, second.where) == ("0.50", "k = 1")
    assert (second.place.line, second.place.column) == (12, 1)


def test_claims_may_stand_in_an_array(folder: Path) -> None:
    source = read(folder, MODEL + "claim = [{ text = 'x = 1' }, { latex = 'y' }]")
    assert [line.text for line in source.lines] == ["x = 1", "y"]
    assert source.lines[0].place == Place(str(folder / "claims.toml"), "claim[1].text")


def test_a_heading_inside_a_text_misplaces_nothing(folder: Path) -> None:
    source = read(folder, MODEL + "[[claim]]\ntext = '''\n[[claim]]\nlatex = 3'''\n")
    assert source.lines[0].place.line is None


@pytest.mark.parametrize(
    ("text", "error", "line"),
    [
        ("[[claim]]\nlatex = 'x'", NoModelError, None),
        ("model = 'none.toml'\n[[claim]]\nlatex = 'x'", NoSuchModelError, 1),
        (MODEL, NoFormulaError, None),
        ("", NoFormulaError, None),
        ("title = 'x'\nmatrix = [[1]]", ModelHandedInError, 2),
        ("[[line]]\nnumber = 1", SourceFileError, 1),
        (MODEL + "[[claim]]\nlatex = 'x'\ntext = 'x'", ClaimFormulaError, 2),
        (MODEL + "[[claim]]\nsays = 'J'", ClaimFormulaError, 2),
        (MODEL + "[[claim]]\nlatex = ' '", ClaimFormulaError, 2),
        (MODEL + "[[claim]]\nlatex = 'x'\nsay = 'J'", SourceKeyError, 4),
        (MODEL + "[[claim]]\nlatex = 'x'\nsays = 'foo'", UnknownKindError, 4),
        (MODEL + "[[claim]]\nlatex = ['x']", SourceValueError, 3),
        (MODEL + "[[claim]]\nlatex = true", SourceValueError, 3),
        (MODEL + '[[claim]]\nlatex = "\\theta = 1"', SourceValueError, 3),
        (MODEL + "claim = 3", SourceValueError, 2),
        (MODEL + "modle = 3\n[[claim]]\nlatex = 'x'", SourceKeyError, 2),
        ("model = 'cart.toml", SourceSyntaxError, None),
        ("\nmodel = =", SourceSyntaxError, 2),
        ("a" + ".a" * 200 + " = 1", SourceSyntaxError, None),
        ("a = " + "[" * 20_000, SourceSyntaxError, None),
        ("a = " + "1" * 5_000, SourceSyntaxError, None),
        ("claim = [" + "{ text = 'x' }," * 5_001 + "]\n" + MODEL, SourceFileError, 1),
    ],
)
def test_what_cannot_be_meant_is_an_error_with_its_line(
    folder: Path, text: str, error: type[SourceError], line: int | None
) -> None:
    with pytest.raises(error) as caught:
        read(folder, text)
    assert caught.value.place.line == line


@pytest.mark.parametrize("kind", KINDS)
def test_each_kind_is_read_however_it_is_spelled(kind: str) -> None:
    for word in (kind, kind.upper(), kind.replace(" ", "_"), kind.replace(" ", "-"), f" {kind} "):
        assert kind_of(word, Place()) == (kind, "")


def test_variants_lead_to_kinds() -> None:
    assert set(VARIANTS.values()) <= set(KINDS)


@pytest.mark.parametrize(
    ("word", "kind", "of"),
    [
        ("P_inv", "P inverse", ""),
        ("inverse of P", "P inverse", ""),
        ("P^{-1}", "P inverse", ""),
        ("exp_A", "exp A", ""),
        ("exp(A t)", "exp A", ""),
        ("$e^{At}$", "exp A", ""),
        ("Transition matrix", "exp A", ""),
        ("generalised-eigenvector", "generalized eigenvector", ""),
        ("mode shape of -2", "eigenvector", "-2"),
        ("response of x1", "solution", "x1"),
        ("", "", ""),
        ("  ", "", ""),
    ],
)
def test_customary_words_are_read(word: str, kind: str, of: str) -> None:
    assert kind_of(word, Place()) == (kind, of)


LINES = st.lists(
    st.sampled_from(
        [
            *("[[claim]]", "[claim]", "latex = 'x'", 'text = "y"', "says = 'J'", "at = 0.5"),
            *("model = 'cart.toml'", "says = 'é'", "case = [1]", "x = 1", "text = '''", "'''"),
            *("at = 1979-05-27", "[[line]]", "number = 1", "claim = [{}]", 'latex = "\\nu"', "["),
        ]
    ),
    max_size=10,
).map("\n".join)


@given(LINES | st.text(max_size=60))
def test_any_text_gives_lines_or_an_error_of_the_family(
    tmp_path_factory: pytest.TempPathFactory, text: str
) -> None:
    folder = tmp_path_factory.getbasetemp() / "claims"
    folder.mkdir(exist_ok=True)
    (folder / "cart.toml").touch()
    (folder / "any.toml").write_bytes(text.encode("utf-8", "surrogatepass"))
    try:
        source = read_source(folder / "any.toml")
    except InputError as error:
        assert str(error)
        return
    assert source.lines
    assert all(line.says == "" or line.says in KINDS for line in source.lines)
