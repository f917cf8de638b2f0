"""The lines of a LaTeX document, with what comments and notes say of them."""

from __future__ import annotations

from pathlib import Path

import pytest
from hypothesis import given
from hypothesis import strategies as st

from closedform.checking.claim import KINDS, SourceLine
from closedform.checking.source.errors import (
    LineReferenceError,
    NoFormulaError,
    NoModelError,
    NoSuchModelError,
    RemarkError,
    SourceEncodingError,
    SourceError,
    SourceFileError,
    SourceKeyError,
    StatedTwiceError,
    StrayRemarkError,
    UnknownKindError,
)
from closedform.checking.source.files import LARGEST_DOCUMENT
from closedform.checking.source.reading import Source, read_source
from closedform.errors import InputError
from closedform.notation.documents.errors import IncludedFileError

MODEL = "% closedform: model = cart.toml\n"


@pytest.fixture
def folder(tmp_path: Path) -> Path:
    (tmp_path / "cart.toml").write_text('title = "Cart"\n')
    return tmp_path


def read(folder: Path, document: str, notes: str = "") -> Source:
    (folder / "note.tex").write_text(document)
    if notes:
        (folder / "note.check.toml").write_text(notes)
    return read_source(folder / "note.tex")


def said(line: SourceLine) -> tuple[str, str, str, str]:
    return line.says, line.of, line.at, line.where


def test_formulas_are_lines_and_comments_say_what_they_claim(folder: Path) -> None:
    source = read(
        folder,
        "% closedform: model = cart.toml, title = A cart; case = 2\n"
        "% closedform: says = Eigenvector of -2\n\\[ v = (1, -2) \\]\n"
        "\\[ E = m \\] % closedform: skip\n"
        '\\begin{align}\n x &= 1 \\label{eq:x} \\\\ % closedform: at = "t = 0, 1", where = k > 0\n'
        " y &= 2 \\end{align}",
    )
    assert (source.model, source.title, source.case) == ("cart.toml", "A cart", "2")
    assert source.model_path == folder / "cart.toml"
    assert [(line.number, line.text, line.label) for line in source.lines] == [
        (1, "v = (1, -2)", ""),
        (2, "x = 1", "eq:x"),
        (3, "y = 2", ""),
    ]
    assert [said(line) for line in source.lines] == [
        ("eigenvector", "-2", "", ""),
        ("", "", "t = 0, 1", "k > 0"),
        ("", "", "", ""),
    ]
    assert source.lines[1].place.line == 6


def test_what_is_said_of_a_row_goes_before_what_is_said_of_its_display(folder: Path) -> None:
    source = read(
        folder,
        MODEL + "% closedform: says = solution, at = 1\n\\begin{align} x &= 1 \\\\\n"
        "y &= 2 % closedform: says = output\n\\end{align}",
    )
    assert [said(line) for line in source.lines] == [
        ("solution", "", "1", ""),
        ("output", "", "1", ""),
    ]


def test_where_beside_the_model_holds_for_all_lines(folder: Path) -> None:
    source = read(
        folder,
        '% closedform: model = cart.toml, where = "k = 1, m = 2"\n\\[a\\]\n'
        "\\[b\\] % closedform: where = k > 0",
    )
    assert [line.where for line in source.lines] == ["k = 1, m = 2", "k > 0"]


def test_a_macro_that_is_not_followed_is_told(folder: Path) -> None:
    source = read(folder, MODEL + r"\newcommand{\bad}{\ifmmode x\fi}\[ \bad \]\[ y \]")
    assert r"\bad is not known" in source.lines[0].trouble
    assert source.lines[1].trouble == ""


def test_notes_beside_the_document_say_the_same_and_keep_its_numbers(folder: Path) -> None:
    source = read(
        folder,
        "\\[a\\]\n\\begin{equation} b \\label{eq:b} \\end{equation}\n\\[c\\]",
        'model = "cart.toml"\ntitle = "T"\n[[line]]\nnumber = 1\nskip = true\n'
        '[[line]]\nlabel = "eq:b"\nsays = "P_inv"\nat = 0.50\n',
    )
    assert (source.model, source.title) == ("cart.toml", "T")
    assert [(line.number, line.text, line.says, line.at) for line in source.lines] == [
        (2, "b", "P inverse", "0.50"),
        (3, "c", "", ""),
    ]


@pytest.mark.parametrize(
    ("document", "notes", "error", "line"),
    [
        ("% closedform: sais = J\n\\[a\\]", "", SourceKeyError, 1),
        ("\n% closedform: says = eigenvektor\n\\[a\\]", "", UnknownKindError, 2),
        ("% closedform: says\n\\[a\\]", "", RemarkError, 1),
        ("% closedform: skip = no\n\\[a\\]", "", RemarkError, 1),
        ("% closedform:\n\\[a\\]", "", RemarkError, 1),
        ("% closedform: = J\n\\[a\\]", "", RemarkError, 1),
        ("% closedform: at = 1, at = 2\n\\[a\\]", "", RemarkError, 1),
        ("\\[a\\]\n% closedform: says = J", "", StrayRemarkError, 2),
        ("% closedform: says = J, model = cart.toml\n\\[a\\]", "", StrayRemarkError, 1),
        ("% closedform: at = 1\n% closedform: at = 2\n\\[a\\]", "", StatedTwiceError, 2),
        ("% closedform: says = mode of 1, of = 2\n\\[a\\]", "", StatedTwiceError, 1),
        ("% closedform: case = 1\n% closedform: case = 2\n\\[a\\]", "", StatedTwiceError, 2),
        ("\\[a\\]", "", NoModelError, None),
        ("% closedform: model = none.toml\n\\[a\\]", "", NoSuchModelError, 1),
        (MODEL + "text", "", NoFormulaError, None),
        (MODEL + "% closedform: skip\n\\[a\\]", "", NoFormulaError, None),
        (MODEL + "\\[a\\]", "[[line]]\nnumber = 2", LineReferenceError, 2),
        (MODEL + "\\[a\\]", '[[line]]\nlabel = "q"', LineReferenceError, 2),
        (MODEL + "\\[a\\]", '[[line]]\nsays = "J"', LineReferenceError, 1),
        (MODEL + "\\[a\\]", "[[line]]\nnumber = 1\n[[line]]\nnumber = 1", LineReferenceError, 3),
        (MODEL + "\\[a\\]", '[[line]]\nnumber = 1\nfoo = "J"', SourceKeyError, 3),
        (MODEL + "\\[a\\]", 'model = "b.toml"', StatedTwiceError, 1),
        (
            MODEL + "\\[a\\] % closedform: says = J",
            '[[line]]\nnumber = 1\nsays = "P"',
            StatedTwiceError,
            3,
        ),
    ],
)
def test_what_cannot_be_meant_is_an_error_with_its_line(
    folder: Path, document: str, notes: str, error: type[SourceError], line: int | None
) -> None:
    with pytest.raises(error) as caught:
        read(folder, document, notes)
    assert caught.value.place.line == line
    assert (caught.value.place.file or "").startswith(str(folder))


def test_an_unknown_word_is_answered_with_those_that_are_known(folder: Path) -> None:
    with pytest.raises(UnknownKindError) as caught:
        read(folder, "% closedform: says = eigenvektor\n\\[a\\]")
    assert "did you mean 'eigenvector'?" in str(caught.value)
    assert all(kind in str(caught.value) for kind in KINDS)


def test_files_are_taken_in_from_the_folder(folder: Path) -> None:
    (folder / "parts").mkdir()
    (folder / "parts" / "one.tex").write_text("\n\\[ b \\]")
    source = read(folder, MODEL + "\\[ a \\]\\input{parts/one}")
    assert [Path(line.place.file or "").name for line in source.lines] == ["note.tex", "one.tex"]
    assert source.lines[1].place.line == 2


@pytest.mark.parametrize(
    "named", [r"\input{../secret}", r"\input{/etc/hostname}", r"\include{link}", r"\input{none}"]
)
def test_no_file_outside_the_folder_is_taken_in(tmp_path: Path, named: str) -> None:
    (tmp_path / "secret.tex").write_text("\\[ s \\]")
    folder = tmp_path / "inside"
    folder.mkdir()
    (folder / "link.tex").symlink_to(tmp_path / "secret.tex")
    with pytest.raises(IncludedFileError) as caught:
        read(folder, f"\n{named}")
    assert caught.value.place.line == 2


def test_a_circle_of_files_is_an_error(folder: Path) -> None:
    (folder / "b.tex").write_text("\\input{note}")
    with pytest.raises(IncludedFileError, match="takes itself in"):
        read(folder, "\\input{b}")


def test_a_byte_that_is_no_text_is_placed(folder: Path) -> None:
    (folder / "bad.tex").write_bytes("é\r\nab".encode() + b"\xff")
    with pytest.raises(SourceEncodingError) as caught:
        read_source(folder / "bad.tex")
    assert (caught.value.place.line, caught.value.place.column) == (2, 3)


def test_what_is_no_file_is_an_error(folder: Path) -> None:
    for path in (folder, folder / "none.tex", folder / ("x" * 300), "a\0b.tex", "", ".."):
        with pytest.raises(SourceFileError):
            read_source(path)


def test_a_file_that_is_too_large_is_an_error(folder: Path) -> None:
    (folder / "large.tex").write_text("x" * (LARGEST_DOCUMENT + 1))
    with pytest.raises(SourceFileError, match=str(LARGEST_DOCUMENT)):
        read_source(folder / "large.tex")


def test_a_model_that_is_handed_over_takes_the_place_of_the_named_one(folder: Path) -> None:
    (folder / "note.tex").write_text("\\[a\\]")
    source = read_source(folder / "note.tex", model=folder / "cart.toml")
    assert source.model_path == folder / "cart.toml"


REMARKS = st.lists(
    st.sampled_from(
        ["says", "of", "at", "skip", "model", "=", " ", ",", ";", '"', "'", "(", ")", "J", "x", "é"]
    ),
    max_size=12,
).map("".join)


@given(REMARKS, st.text(max_size=60))
def test_any_text_gives_lines_or_an_error_of_the_family(
    tmp_path_factory: pytest.TempPathFactory, remark: str, text: str
) -> None:
    folder = tmp_path_factory.getbasetemp() / "any"
    folder.mkdir(exist_ok=True)
    (folder / "cart.toml").touch()
    document = f"{MODEL}% closedform: {remark}\n\\[ x \\]\n{text}"
    (folder / "any.tex").write_bytes(document.encode("utf-8", "surrogatepass"))
    try:
        source = read_source(folder / "any.tex")
    except InputError as error:
        assert str(error)
        return
    assert [line.number for line in source.lines] == list(range(1, len(source.lines) + 1))
    assert all(line.says == "" or line.says in KINDS for line in source.lines)
