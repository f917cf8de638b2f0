"""The pieces of a formula say together what the formula says, wherever it is opened."""

from __future__ import annotations

import ast
import operator
from collections.abc import Callable
from dataclasses import replace
from fractions import Fraction
from unittest.mock import patch

import pytest
from hypothesis import given, reject
from hypothesis import strategies as st

from closedform.document import checked_pieces
from closedform.document.checked_formulas import formula_of, right_of, statements_of
from closedform.document.checked_pieces import pieces
from closedform.notation.written.plain_form import plain_written
from closedform.notation.written.tree import (
    Array,
    Jet,
    Listing,
    Literal,
    Negation,
    PlusMinus,
    Power,
    Product,
    Quotient,
    Statement,
    Sum,
    Symbol,
    Written,
)
from tests.document.checked_samples import judged, num, rows

VALUES = {"a": Fraction(3), "b": Fraction(-5, 7), "x_1": Fraction(11, 13), "long_name": Fraction(2)}
BINARY: dict[type[ast.operator], Callable[[Fraction, Fraction], Fraction]] = {
    ast.Add: operator.add,
    ast.Sub: operator.sub,
    ast.Mult: operator.mul,
    ast.Div: operator.truediv,
}
atoms: st.SearchStrategy[Written] = st.one_of(
    st.sampled_from([Symbol(name) for name in VALUES]),
    st.integers(0, 12).map(lambda n: Literal(Fraction(n))),
)


def grown(inner: st.SearchStrategy[Written]) -> st.SearchStrategy[Written]:
    several = st.lists(inner, min_size=2, max_size=4).map(tuple)
    return st.one_of(
        several.map(Sum),
        several.map(Product),
        inner.map(Negation),
        st.tuples(inner, inner).map(lambda pair: Quotient(*pair)),
        inner.map(lambda base: Power(base, num("2"))),
    )


formulas = st.recursive(atoms, grown, max_leaves=14)


def value(text: str) -> Fraction:
    """Return the value of a text in plain notation, read as Python reads it."""
    return evaluated(ast.parse(text.replace("^", "**").strip(), mode="eval").body)


def evaluated(node: ast.expr) -> Fraction:
    match node:
        case ast.Constant(number):
            return Fraction(str(number))
        case ast.Name(name):
            return VALUES[name]
        case ast.UnaryOp(ast.USub(), operand):
            return -evaluated(operand)
        case ast.BinOp(base, ast.Pow(), ast.Constant(int(exponent))):
            return Fraction(evaluated(base) ** exponent)
        case ast.BinOp(left, kind, right):
            return BINARY[type(kind)](evaluated(left), evaluated(right))
    raise ValueError(ast.dump(node))


@given(formulas, st.integers(0, 30))
def test_the_pieces_have_the_value_of_the_formula(tree: Written, widest: int) -> None:
    try:
        expected = value(plain_written(tree))
    except ZeroDivisionError:
        reject()
    with patch.object(checked_pieces, "WIDEST", widest):
        found = pieces(tree)
    assert value(" ".join(part.plain for part in found)) == expected


@given(formulas, st.integers(0, 30))
def test_the_brackets_of_the_pieces_are_balanced(tree: Written, widest: int) -> None:
    with patch.object(checked_pieces, "WIDEST", widest):
        latex = "".join(part.latex for part in pieces(tree))
        formula_of(tree)
    assert latex.count("{") == latex.count("}")
    assert latex.count("(") == latex.count(")")
    assert latex.count(r"\left") == latex.count(r"\right")


OPENED = [
    (Sum((Symbol("a"), Negation(Symbol("b")))), ["a", "{}- b"]),
    (Sum((Negation(Symbol("a")), PlusMinus(Symbol("b"), -1))), ["- a", r"{}\mp b"]),
    (Listing((num("1"), num("2"), Negation(num("3")))), [r"\{1,\ ", r"2,\ ", r"- 3\}"]),
    (Product((num("2"), num("3"))), ["2", r"{}\cdot 3"]),
    (
        Product((Symbol("a"), Sum((Symbol("a"), num("1"))), num("7"))),
        ["a", r"{}\cdot \bigl(a", r"{}+ 1\bigr)", r"{}\cdot 7"],
    ),
    (
        Quotient(Sum((Symbol("a"), num("1"))), Symbol("b")),
        [r"\bigl(a", r"{}+ 1\bigr)", r"\big/\bigl(b\bigr)"],
    ),
    (Negation(Sum((Symbol("a"), num("1")))), [r"- \bigl(a", r"{}+ 1\bigr)"]),
]


@pytest.mark.parametrize(("tree", "latex"), OPENED)
def test_a_formula_is_opened_at_signs_and_brackets(tree: Written, latex: list[str]) -> None:
    with patch.object(checked_pieces, "WIDEST", 0):
        assert [part.latex for part in pieces(tree)] == latex


def test_a_short_formula_is_as_it_would_be_elsewhere() -> None:
    tree = Product((Symbol("a"), Sum((Symbol("a"), num("1")))))
    assert [part.plain for part in pieces(tree)] == [plain_written(tree)]


def test_a_chain_may_break_before_each_relation() -> None:
    text = statements_of([Statement((Symbol("x"), Symbol("a"), num("2")), ("=", "≈"))])
    assert text.count(r"\allowbreak") == 2
    assert r"\piece{{}\approx 2}" in text


def test_short_statements_stand_beside_each_other_as_far_as_there_is_room() -> None:
    short = [Statement((Symbol(f"x_{k}"), num("10")), ("=",)) for k in range(1, 5)]
    assert statements_of(short).count(r"\begin{formula}") == 1
    assert statements_of(short).count(r"\quad") == 3
    assert statements_of(short * 6).count(r"\begin{formula}") > 1
    long = Statement((Symbol("y"), Sum(tuple(Symbol(f"term_{k}") for k in range(9)))), ("=",))
    assert statements_of([short[0], long, short[1]]).count(r"\begin{formula}") == 3
    order = [statements_of([*short[:2], long, *short[2:]]).index(f"x_{{{k}}}") for k in range(1, 5)]
    assert order == sorted(order)


def test_the_right_form_has_the_author_s_name_for_it() -> None:
    wrong = judged(1, "fails", "value x", "", Jet("x", 0, num("1")), num("0.41"), right=num("0.53"))
    read = (replace(wrong.read[0], unit="mm"),)
    shown = right_of(replace(wrong, read=read))
    assert r"\piece{{}\approx 0.53}" in shown
    assert r"\mathrm{mm}" in shown
    assert "x(1)" in shown.replace(r"\left", "").replace(r"\right", "")
    assert r"\piece{{}= 3}" in right_of(replace(wrong, right=num("3")))
    for unnamed in (
        replace(wrong, read=()),
        replace(wrong, read=wrong.read * 2),
        replace(wrong, read=(Statement((num("1"), num("2")), ("=",)),)),
    ):
        assert right_of(unnamed) == formula_of(num("0.53"))
    assert right_of(replace(wrong, right=None)) == ""


def test_entries_stand_by_row_and_column() -> None:
    tall = Array(tuple((num(str(k)), num("0")) for k in range(1, 31)))
    text = formula_of(tall)
    assert r"[\,\cdot\,]_{11} = 1" in text
    assert r"[\,\cdot\,]_{12,1} = 12" in text
    assert r"_{12} = 0" not in text
    assert text.endswith("Entries that are not listed are zero.\\par")
    assert r"\begin{bmatrix}" in formula_of(rows(("1", "2"), ("3", "4")))
