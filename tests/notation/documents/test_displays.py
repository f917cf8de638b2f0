"""Which formulas of a document are found, and where."""

from __future__ import annotations

import pytest
from hypothesis import given
from hypothesis import strategies as st

from closedform.errors import InputError, Place
from closedform.notation.documents.displays import displayed_formulas
from closedform.notation.documents.errors import (
    DocumentSizeError,
    IncludedFileError,
    UnendedError,
)
from closedform.notation.documents.weaving import TextFile


def texts(document: str) -> list[str]:
    return [formula.text for formula in displayed_formulas(document).formulas]


ENVIRONMENTS = (
    *("equation", "align", "gather", "multline", "eqnarray", "flalign", "displaymath", "math"),
    *("dmath", "equation*", "align*", "gather*", "multline*", "eqnarray*", "flalign*", "dmath*"),
)


@pytest.mark.parametrize("name", ENVIRONMENTS)
def test_a_formula_is_found_in_each_environment(name: str) -> None:
    document = rf"Text \begin{{{name}}} x = 2 \end{{{name}}} more."
    assert texts(document) == ["x = 2"]


@pytest.mark.parametrize(
    ("document", "formula"),
    [
        (r"\[ x = 2 \]", "x = 2"),
        ("$$ x = 2 $$", "x = 2"),
        (r"\begin{alignat}{2} x &= 2 \end{alignat}", "x = 2"),
        (r"\begin{alignat*}{2} x &= 2 \end{alignat*}", "x = 2"),
        (r"\begin{IEEEeqnarray}{rCl} x & = & 2 \IEEEyesnumber \end{IEEEeqnarray}", "x = 2"),
        (r"\begin{subequations}\begin{align} x &= 2 \end{align}\end{subequations}", "x = 2"),
        (r"\[ \begin{align} x &= 2 \end{align} \]", "x = 2"),
        (r"\[ x = 2 \tag{3.1} \]", "x = 2"),
        (r"$$ x = 2 \eqno(3) $$", "x = 2"),
        (r"$$ x = 2 \text{ in \$} $$", r"x = 2 \text{ in \$}"),
        (r"\[ a \\[2pt] \]", "a"),
        (r"\[ \text{a $b$ c} \]", r"\text{a $b$ c}"),
    ],
)
def test_a_display_gives_its_formula(document: str, formula: str) -> None:
    assert texts(document) == [formula]


@pytest.mark.parametrize(
    "passed_by",
    [
        "% \\[ no \\]\n",
        "$no$ and \\(no\\) and costs \\$5\n",
        "\\begin{verbatim}\n\\[ no \\]\n\\end{verbatim}",
        "\\begin{lstlisting}[language=C]\n\\[ no \\] $$\n\\end{lstlisting}",
        "\\begin{comment}\n\\[ no \\]\n\\end{comment}",
        "\\iffalse \\[ no \\] \\ifx a b \\fi \\[ no \\] \\fi",
        "\\verb|\\[ no \\]| \\verb*+$$+ \\lstinline{$$}",
        "a \\\\[2mm] b",
        "a stray $ in the text\n\nnew paragraph",
        "$a$$b$",
    ],
)
def test_what_is_not_displayed_is_passed_by(passed_by: str) -> None:
    assert texts(passed_by + r" \[ yes \] ") == ["yes"]


def test_an_else_ends_what_is_hidden() -> None:
    assert texts(r"\iffalse \[ no \] \else \[ yes \] \fi") == ["yes"]


def test_an_escaped_percent_begins_no_comment() -> None:
    assert texts("\\[ 5\\% \\\\% comment \\]\n \\]") == [r"5\%"]


def test_only_the_text_proper_of_a_document_is_read() -> None:
    document = "\\[ no \\]\\begin{document}\\[ yes \\]\\end{document}\\[ no \\]"
    assert texts(document) == ["yes"]


def test_a_formula_knows_where_it_begins() -> None:
    document = (
        "% comment\nText \\[\n  x = 2\n\\] and\n"
        "\\begin{align}\n a &= 1 \\\\\n & b = 2\n\\end{align}"
    )
    found = displayed_formulas(document, name="a.tex").formulas
    assert [(f.place.line, f.place.column) for f in found] == [(3, 3), (6, 2), (7, 4)]
    assert {f.place.file for f in found} == {"a.tex"}


def test_a_formula_of_a_file_taken_in_is_placed_there() -> None:
    files = {"one": "one\n\\[ b \\]\n", "two": "\\[ c \\]\\endinput \\[ no \\]"}

    def opener(name: str, place: Place) -> TextFile:
        assert place.line == 2
        return TextFile(f"{name}.tex", files[name])

    document = "\\[ a \\]\n\\input{one} \\include{two}\n\\[ d \\]"
    found = displayed_formulas(document, name="main.tex", opener=opener).formulas
    assert [(f.text, f.place.file, f.place.line) for f in found] == [
        ("a", "main.tex", 1),
        ("b", "one.tex", 2),
        ("c", "two.tex", 1),
        ("d", "main.tex", 3),
    ]


def test_a_file_that_takes_itself_in_is_an_error() -> None:
    def opener(name: str, _: Place) -> TextFile:
        return TextFile(name, r"\input{b}" if name == "a" else r"\input{a}")

    with pytest.raises(IncludedFileError, match="takes itself in"):
        displayed_formulas(r"\input{a}", name="main", opener=opener)


@pytest.mark.parametrize(
    ("document", "line"),
    [
        ("a\n\\begin{align} x", 2),
        ("\\[ x\n\\end{align}", 1),
        ("\n\n$$ x", 3),
        ("\\begin{equation} a\n\\begin{equation} b \\end{equation}", 1),
        ("\n\\begin{verbatim}", 2),
        ("\n\\iffalse \\ifx", 2),
    ],
)
def test_what_never_ends_is_an_error_that_names_its_line(document: str, line: int) -> None:
    with pytest.raises(UnendedError) as caught:
        displayed_formulas(document)
    assert caught.value.place.line == line


def test_braces_that_do_not_balance_are_left_to_the_reader_of_the_formula() -> None:
    assert texts(r"\[ {x \] \[ y} \]") == ["{x", "y}"]


def test_deep_braces_do_no_harm() -> None:
    inner = "{" * 10_000 + "x" + "}" * 10_000
    assert texts(rf"\[ {inner} \]") == [inner]
    assert texts(rf"\newcommand{{\a}}[1]{{#1}}\[ \a{inner[:-5000]} \]")


@pytest.mark.parametrize(
    "document",
    [
        r"\[ a \]" * 5_001,
        r"\[" + "a" * 100_001 + r"\]",
        "% closedform: skip\n" * 10_001,
        "a" * 8_000_001,
    ],
)
def test_more_than_is_read_is_an_error(document: str) -> None:
    with pytest.raises(DocumentSizeError, match="at most"):
        displayed_formulas(document)


def about(document: str) -> list[tuple[str, list[str]]]:
    displayed = displayed_formulas(document)
    return [
        (remark.text, [displayed.formulas[index].text for index in remark.formulas])
        for remark in displayed.remarks
    ]


def test_a_remark_is_about_the_next_display() -> None:
    assert about("% closedform: r\nText.\n\\begin{gather} a \\\\ b = 1 \\end{gather}\\[c\\]") == [
        ("r", ["a", "b = 1"])
    ]


def test_a_remark_behind_a_display_on_its_line_is_about_it() -> None:
    assert about("\\[a\\] % closedform: r\n\\[b\\]") == [("r", ["a"])]
    assert about("\\[a\\]\n% closedform: r\n\\[b\\]") == [("r", ["b"])]


def test_a_remark_inside_a_display_is_about_its_row() -> None:
    document = (
        "\\begin{align} % closedform: all\n"
        "a &= 1 \\\\ % closedform: first\n"
        "% closedform: second\n"
        "b &= 2 \\\\\n"
        "c &= 3 % closedform: third\n"
        "\\end{align}"
    )
    assert about(document) == [
        ("all", ["a = 1", "b = 2", "c = 3"]),
        ("first", ["a = 1"]),
        ("second", ["b = 2"]),
        ("third", ["c = 3"]),
    ]


def test_a_remark_behind_the_last_formula_is_about_none() -> None:
    assert about("\\[a\\]\n% closedform: r") == [("r", [])]


def test_remarks_keep_to_their_formulas_when_macros_are_expanded() -> None:
    document = (
        "\\newcommand{\\be}{\\begin{equation}}\\newcommand{\\ee}{\\end{equation}}\n"
        "% closedform: r\n\\be a \\ee\n\\be b \\ee % closedform: s\n\\be c \\ee"
    )
    assert about(document) == [("r", ["a"]), ("s", ["b"])]


PIECES = st.sampled_from(
    [
        *(r"\[", r"\]", "$", "$$", r"\begin{align}", r"\end{align}", r"\begin{equation}"),
        *(r"\end{equation}", "&", r"\\", "=", "+", "-", "{", "}", "x", "\n", "\n\n", " ", "%"),
        *("% closedform: says = J\n", r"\newcommand{\a}[1]{#1 x}", r"\a", r"\def\b#1{\a\b}"),
        *(r"\b", r"\let\a\b", r"\newcommand{\c}{\ifx}", r"\c", r"\iffalse", r"\fi", r"\else"),
        *(r"\verb|x|", r"\input{x}", r"\begin{verbatim}", r"\end{verbatim}", r"\label{l}"),
        *(r"\begin{document}", r"\end{document}", r"\nonumber", r"\quad", "\\", "#1", "[", "]"),
        *(r"\newenvironment{q}{\[}{\]}", r"\begin{q}", r"\end{q}", r"\begin{split}", r"\%"),
    ]
)


@given(st.lists(PIECES, max_size=40).map("".join) | st.text(max_size=100))
def test_any_text_gives_formulas_in_their_order_or_an_error_of_the_family(text: str) -> None:
    try:
        found = displayed_formulas(text)
    except InputError as error:
        assert str(error)
        return
    places = [(f.place.line or 0, f.place.column or 0) for f in found.formulas]
    assert places == sorted(places)
    assert all(f.text and f.text == " ".join(f.text.split()) for f in found.formulas)
    lines = text.split("\n")
    assert all(1 <= line <= len(lines) and column >= 1 for line, column in places)
    count = len(found.formulas)
    assert all(0 <= i < count for remark in found.remarks for i in remark.formulas)
