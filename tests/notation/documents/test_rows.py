"""Which rows of a display make one chain."""

from __future__ import annotations

import pytest
from hypothesis import given
from hypothesis import strategies as st

from closedform.notation.documents.displays import displayed_formulas


def rows(inside: str, name: str = "align") -> list[str]:
    document = rf"\begin{{{name}}}{inside}\end{{{name}}}"
    return [formula.text for formula in displayed_formulas(document).formulas]


CHAINS = [
    (r"x(t) &= a \\ &= b \\ &\approx c", [r"x(t) = a = b \approx c"]),
    (r"x_1 &= a \\ x_2 &= b", ["x_1 = a", "x_2 = b"]),
    (r"x &= a \\ &\quad + b", [r"x = a \quad + b"]),
    (r"x &= a \\ &\quad {} + b \\ &= c", [r"x = a \quad {} + b = c"]),
    (r"x &= a \\ & - b", ["x = a - b"]),
    (r"x &= a \\ & - b = c", ["x = a - b = c"]),
    (r"& x + y = 1 \\ & -x + y = 2", ["x + y = 1", "-x + y = 2"]),
    (r"x &= 1 \\ -x &= -1", ["x = 1", "-x = -1"]),
    (r"x &= a \nonumber \\ &\qquad \sin t", [r"x = a \qquad \sin t"]),
    (r"x &= a \nonumber \\ y &= b", ["x = a", "y = b"]),
    (r"x &= a + \\ & b", ["x = a + b"]),
    (r"x &= (a \\ & b)", ["x = (a b)"]),
    (r"x &= 1 \\ \Rightarrow y &= 2", ["x = 1", "y = 2"]),
    (r"x &= 1 \\ &\stackrel{!}{=} 2", [r"x = 1 \stackrel{!}{=} 2"]),
    (r"x &= 1 \\[2mm] y &= 2 \\*[-1ex] z &= 3 \\", ["x = 1", "y = 2", "z = 3"]),
    (r"x &= 1, & y &= 2", [r"x = 1, \quad y = 2"]),
    (r"x &= a & y &= b \\ &= c & &= d", [r"x = a = c \quad y = b = d"]),
    (r"x &= 1 && \text{for } t > 0", [r"x = 1 \quad \text{for } t > 0"]),
    (r"x &= \begin{pmatrix} 1 & 2 \\ = & 4 \end{pmatrix}", None),
    (r"x &= \begin{cases} 1 & t \\ 2 & s \end{cases} \\ y &= 3", None),
    (r"\intertext{Now} x &= 1 \\ \displaybreak y &= 2", ["x = 1", "y = 2"]),
    (r"x &= \sum_{n=1} \\ &\quad \cdot y", [r"x = \sum_{n=1} \quad \cdot y"]),
]


@pytest.mark.parametrize(("inside", "lines"), [case for case in CHAINS if case[1]])
def test_rows_make_these_lines(inside: str, lines: list[str]) -> None:
    assert rows(inside) == lines


def test_what_stands_in_an_inner_environment_stays_there() -> None:
    assert rows(r"x &= \begin{pmatrix} 1 & 2 \\ = & 4 \end{pmatrix} \\ y &= 3") == [
        r"x = \begin{pmatrix} 1 & 2 \\ = & 4 \end{pmatrix}",
        "y = 3",
    ]
    inner = r"\begin{split} x &= 1 \\ &= 2 \end{split}"
    assert rows(inner, "equation") == [inner]


def test_cells_of_three_columns_belong_together() -> None:
    assert rows(r"x &=& a \\ &=& b \\ && + c \\ y &=& d", "eqnarray") == ["x = a = b + c", "y = d"]


def test_an_elimination_by_columns_is_one_equation_a_row() -> None:
    assert rows(r"{3} x &+ y &&= 1 \\ 2x &- y &&= 3", "alignat") == ["x + y = 1", "2x - y = 3"]


def test_all_rows_of_a_multline_are_one_formula() -> None:
    assert rows(r"x = a \\ y \\ z = b", "multline") == ["x = a y z = b"]


def test_labels_are_kept_for_their_rows() -> None:
    document = r"\begin{align} x &= 1 \label{a} \\ &= 2 \\ y &= 3 \label{b} \end{align}"
    found = displayed_formulas(document).formulas
    assert [(formula.text, formula.label) for formula in found] == [
        ("x = 1 = 2", "a"),
        ("y = 3", "b"),
    ]


@given(
    st.lists(
        st.sampled_from(["x", "&", "=", r"\\", "+", "-", r"\quad", "(", ")", r"\nonumber", "{y}"]),
        max_size=25,
    )
)
def test_nothing_that_is_written_gets_lost(pieces: list[str]) -> None:
    text = " ".join(pieces)
    kept = [p for p in pieces if p in ("x", "=", "+", "-", "(", ")", "{y}")]
    found = " ".join(rows(f" {text} ")).split()
    assert [p for p in found if p in kept] == kept or "&" in pieces
    assert sorted(p for p in found if p in kept) == sorted(kept)
