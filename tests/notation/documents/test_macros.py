"""How the macros of a document are expanded."""

from __future__ import annotations

from itertools import pairwise

import pytest

from closedform.notation.documents.displays import Formula, displayed_formulas
from closedform.notation.documents.errors import DocumentSizeError


def only(document: str) -> Formula:
    (formula,) = displayed_formulas(document).formulas
    return formula


@pytest.mark.parametrize(
    ("definition", "used", "means"),
    [
        (r"\newcommand{\e}{\mathrm{e}}", r"\e^{2t}", r"\mathrm{e}^{2t}"),
        (r"\newcommand\e[1]{\mathrm{e}^{#1}}", r"\e{-2t}", r"\mathrm{e}^{-2t}"),
        (r"\newcommand*{\e}[1]{\mathrm{e}^{#1}}", r"\e t", r"\mathrm{e}^{t}"),
        (r"\newcommand{\d}[2][t]{\frac{d#2}{d#1}}", r"\d{x}", r"\frac{dx}{dt}"),
        (r"\newcommand{\d}[2][t]{\frac{d#2}{d#1}}", r"\d[s]{x}", r"\frac{dx}{ds}"),
        (r"\def\half{\tfrac12}", r"\half x", r"\tfrac12 x"),
        (r"\def\q#1#2{#2#1}", r"\q ab", "ba"),
        (r"\DeclareMathOperator{\tr}{tr}", r"\tr A", r"\operatorname{tr} A"),
        (r"\renewcommand{\vec}[1]{\mathbf{#1}}", r"\vec x", r"\mathbf{x}"),
        (r"\newcommand{\c}[1]{\cos#1x}", r"\c{a}", r"\cos ax"),
        (r"\newcommand{\c}[1]{\cos#1x}", r"\c{}", r"\cos x"),
        (r"\newcommand{\n}[1]{|#1\rvert}", r"\n{x}y", r"|x\rvert y"),
        (r"\newcommand{\v}{\w}\newcommand{\w}[1]{\mathbf{#1}}", r"\v{x}", r"\mathbf{x}"),
        (r"\let\ep\varepsilon", r"\ep", r"\varepsilon"),
        (r"\let\old\phi \renewcommand{\phi}{\varphi}", r"\phi+\old", r"\varphi +\phi"),
        (r"\newcommand{\R}{\ensuremath{\mathbb{R}}\xspace}", r"\R", r"\mathbb{R}"),
        (r"\newcommand{\a}{1}\providecommand{\a}{2}", r"\a", "1"),
        (r"\newcommand{\a}{1}\renewcommand{\a}{2}", r"\a", "2"),
        (r"{\newcommand{\a}{1}}\newcommand{\b}{2}", r"\a\b", r"\a2"),
        (r"\newcommand{\a}{1}{\renewcommand{\a}{2}}", r"\a", "1"),
        (r"{\gdef\a{1}}", r"\a", "1"),
        (r"\NewDocumentCommand{\p}{O{2} m}{#2^#1}", r"\p{x}+\p[3]{y}", "x^2+y^3"),
        ("\\newcommand{\\a}[1]{% says what\n  #1 % and\n}", r"\a{1}", "1"),
    ],
)
def test_a_plain_macro_is_expanded(definition: str, used: str, means: str) -> None:
    formula = only(rf"{definition}\[ {used} \]")
    assert formula.text == means
    assert formula.unfollowed == ()


@pytest.mark.parametrize(
    ("definitions", "used"),
    [
        (r"\newcommand{\be}{\begin{equation}}\newcommand{\ee}{\end{equation}}", r"\be x=1 \ee"),
        (r"\def\beq{\[}\def\eeq{\]}", r"\beq x=1\eeq"),
        (r"\newenvironment{eq}{\begin{equation}}{\end{equation}}", r"\begin{eq}x=1\end{eq}"),
        (r"\newcommand{\show}[1]{\begin{align*}#1\end{align*}}", r"\show{x=1}"),
    ],
)
def test_a_display_made_by_macros_is_found(definitions: str, used: str) -> None:
    formula = only(f"{definitions}\n\n {used}")
    assert formula.text == "x=1"
    assert formula.place.line == 3


@pytest.mark.parametrize(
    "definition",
    [
        r"\newcommand{\vec}[1]{\ifmmode #1\else #1\fi}",
        r"\newcommand{\vec}[1]{\csname x#1\endcsname}",
        r"\newcommand{\vec}[1]{\expandafter\mathbf #1}",
        r"\def\vec#1.{#1}",
        r"\edef\vec{x}",
        r"\newcommand{\vec}{#1}",
        r"\newcommand{\vec}{\vec}",
        r"\newcommand{\vec}{\b}\newcommand{\b}{x\vec}",
        r"\newcommand{\vec}{\b\b}\newcommand{\b}{\c\c}\newcommand{\c}{\vec\vec}",
        r"\newcommand{\set}{\renewcommand{\vec}{y}}",
        r"\NewDocumentCommand{\vec}{s m}{#2}",
    ],
)
def test_a_formula_says_which_macro_is_not_followed(definition: str) -> None:
    formula = only(rf"{definition}\[ \vec{{x}} \]")
    assert [name for name, _ in formula.unfollowed] == [r"\vec"]
    assert r"\vec" in formula.text


def test_a_macro_that_is_used_elsewhere_does_not_trouble_a_formula() -> None:
    document = r"\newcommand{\b}{\ifx} \b \[ x \] \b \[ \b y \]"
    found = displayed_formulas(document).formulas
    assert [bool(formula.unfollowed) for formula in found] == [False, True]


def test_expansions_that_double_again_and_again_are_given_up() -> None:
    names = "abcdefghijklmnopqrstuvwxyz"
    doubling = "".join(rf"\newcommand{{\{one}}}{{\{two}\{two}}}" for one, two in pairwise(names))
    assert only(rf"{doubling}\[ \a \]").unfollowed[0][0] == r"\a"


def test_a_document_that_expands_without_measure_is_an_error() -> None:
    long = "x" * 10_000
    with pytest.raises(DocumentSizeError):
        displayed_formulas(rf"\newcommand{{\a}}{{{long}}}" + r"\a " * 2_000)


def test_a_macro_without_its_argument_stays() -> None:
    assert only(r"\newcommand{\a}[1]{#1}\[ {\a} \]").text == r"{\a}"
