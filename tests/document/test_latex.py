from __future__ import annotations

import pytest

from closedform.document.latex import cell, decimal, inline, mixed, side_latex
from closedform.notation.expression import Name
from tests.document.making import A, T, X, add, q, says

DECIMALS = [
    ("0", "$0$"),
    ("-1.25", "$-1.25$"),
    ("\u22121.25", "$-1.25$"),
    ("1.25e-7", r"$1.25 \times 10^{-7}$"),
    ("2E+03", r"$2 \times 10^{3}$"),
    ("-0.5 ± 2.4i", r"$-0.5 \pm 2.4\mathrm{i}$"),
    ("± 2i", r"$\pm 2\mathrm{i}$"),
    ("1.5 - 2i", r"$1.5 - 2\mathrm{i}$"),
    ("none", "none"),
    ("1e", "1e"),
    ("50 %", r"50 \%"),
    ("", ""),
]


@pytest.mark.parametrize(("text", "latex"), DECIMALS)
def test_decimals_are_mathematics_and_words_are_not(text: str, latex: str) -> None:
    assert decimal(text) == latex


def test_mathematics_in_a_line() -> None:
    assert inline("omega_d") == r"$\omega_{\mathrm{d}}$"
    assert inline(says("", q("a"), (A, X))) == r"$a = \boldsymbol{A}\boldsymbol{x}$"
    assert inline(add("a", 1)) == "$a + 1$"
    assert side_latex(A) == r"\boldsymbol{A}"
    assert side_latex(T) == "t"


def test_cells_take_text_and_mathematics() -> None:
    assert cell("50 %") == r"50 \%"
    assert cell(Name("x1"), display=True) == r"$\displaystyle x_{1}$"
    assert mixed(["At", says("", T, q(0)), "it is 1 %."]) == r"At $t = 0$ it is 1 \%."
    assert mixed("a_b") == r"a\_b"
