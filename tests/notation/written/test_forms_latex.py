"""What is written out as LaTeX is read back as the same tree."""

from __future__ import annotations

from fractions import Fraction

import pytest
from hypothesis import given

from closedform.notation.written.latex_form import latex_name, latex_range, latex_written
from closedform.notation.written.reader import read_latex
from closedform.notation.written.tree import (
    EULER,
    INFINITY,
    Apply,
    Array,
    Derivative,
    Evaluated,
    Identity,
    Integral,
    Jet,
    Limit,
    Listing,
    Literal,
    Negation,
    Piecewise,
    Power,
    Product,
    Quotient,
    Range,
    Sum,
    SumOver,
    Symbol,
    Transform,
    Written,
)
from tests.notation.written.trees import DECLARED, formulas, matrices

T, K, S = Symbol("t"), Symbol("k"), Symbol("s")


def n(value: int) -> Literal:
    return Literal(Fraction(value))


def read(text: str) -> Written:
    r"""Return the tree of LaTeX; \uppi is a command of the preamble of a write-up."""
    (statement,) = read_latex(text.replace(r"\uppi", r"\pi"), DECLARED).statements
    (member,) = statement.members
    return member


@given(formulas(steps=False) | matrices(steps=False))
def test_a_tree_set_and_read_is_the_same(tree: Written) -> None:
    assert read(latex_written(tree)) == tree


READ_BACK = [
    Identity(),
    Identity(3),
    Listing((n(1), Negation(n(2)))),
    Apply("diag", (n(1), Array(((n(1), T), (n(0), n(1)))))),
    Apply("det", (Sum((Product((S, Identity())), Negation(Symbol("A")))),)),
    Apply("transpose", (Array(((n(1), n(2)),)),)),
    Apply("step", (Sum((T, Negation(n(2)))),)),
    Apply("delta", (T,)),
    Apply("factorial", (n(3),)),
    Apply("log10", (T,)),
    Power(Symbol("A"), Negation(n(1))),
    Power(EULER, Negation(Quotient(T, Product((n(2), K))))),
    Piecewise(((T, (Range((n(0), T, n(2)), ("≤", "<")),)), (n(0), None))),
    Transform(Quotient(n(1), S), back=True),
    Derivative(Product((T, T)), "t"),
    Integral(Power(EULER, Symbol("tau")), "tau", n(0), T),
    Integral(T, "t"),
    Limit(Jet("x"), "t", INFINITY),
    SumOver(Power(K, Symbol("n")), "n", n(0), INFINITY),
    Evaluated(Product((K, T)), "t", n(0)),
    Jet("x", 0, Sum((T, Negation(n(1))))),
    Literal(Fraction(12000), Fraction(1000), is_decimal=True),
]


@pytest.mark.parametrize("tree", READ_BACK, ids=latex_written)
def test_every_kind_is_read_back(tree: Written) -> None:
    assert read(latex_written(tree)) == tree


SET = {
    r"2\mathrm{e}^{-3t}\cos(2t)": Product(
        (
            n(2),
            Power(EULER, Negation(Product((n(3), T)))),
            Apply("cos", (Product((n(2), T)),)),
        )
    ),
    r"\begin{bmatrix} 1 & 2 \\ 3 & 4 \end{bmatrix}": Array(((n(1), n(2)), (n(3), n(4)))),
    r"x \cdot (1 + t)": Product((Jet("x"), Sum((n(1), T)))),
    r"k\,(1 + t)": Product((K, Sum((n(1), T)))),
    r"2 \cdot 3": Product((n(2), n(3))),
    r"\ddot{x}(0)": Jet("x", 2, n(0)),
    r"\int_{0}^{t} \tau\,\mathrm{d}\tau": Integral(Symbol("tau"), "tau", n(0), T),
}


@pytest.mark.parametrize(("text", "tree"), SET.items(), ids=SET)
def test_a_tree_is_set_as_the_standard_asks(text: str, tree: Written) -> None:
    assert latex_written(tree) == text


def test_names_are_printed_as_everywhere_here() -> None:
    assert latex_name("omega_n_1") == r"\omega_{\mathrm{n},1}"
    assert latex_name("Fhat_1") == r"\hat{F}_{1}"
    assert latex_name("lambda_star") == r"\lambda^{*}"
    assert latex_range(Range((n(0), T, n(2)), ("≤", "<"))) == r"0 \leq t < 2"
