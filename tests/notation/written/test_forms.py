"""What is written out in plain notation is read back as the same tree."""

from __future__ import annotations

from fractions import Fraction

import pytest
from hypothesis import given

from closedform.notation import plain
from closedform.notation.expression import Call, Expression, Name
from closedform.notation.written.from_expression import written_from
from closedform.notation.written.plain_form import plain_statement, plain_written
from closedform.notation.written.tree import (
    EULER,
    INFINITY,
    PI,
    Apply,
    Array,
    Constant,
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
    PlusMinus,
    Power,
    Product,
    Quotient,
    Range,
    Statement,
    Sum,
    SumOver,
    Symbol,
    Transform,
    Written,
    walk,
)
from closedform.notation.written.typed_reader import read_typed
from tests.notation.formulas import NAMES
from tests.notation.formulas import formulas as own_formulas
from tests.notation.written.trees import DECLARED, formulas, matrices

T, K = Symbol("t"), Symbol("k")


def n(value: int) -> Literal:
    return Literal(Fraction(value))


@given(formulas() | matrices())
def test_a_tree_printed_and_read_is_the_same(tree: Written) -> None:
    reading = read_typed(plain_written(tree), DECLARED)
    assert [statement.members for statement in reading.statements] == [(tree,)]
    assert not reading.ambiguities


READ_BACK = [
    Identity(),
    Identity(3),
    Listing((n(1), Negation(n(2)))),
    Apply("diag", (n(1), Array(((n(1), T), (n(0), n(1)))))),
    Apply("atan2", (n(1), K)),
    Apply("det", (Sum((Product((Symbol("s"), Identity())), Negation(Symbol("A")))),)),
    Power(Symbol("A"), Negation(n(1))),
    Piecewise(((T, (Range((n(0), T, n(2)), ("≤", "<")),)), (n(0), None))),
    Transform(Quotient(n(1), Symbol("s")), back=True),
    Derivative(Product((T, T)), "t"),
    Derivative(Power(EULER, T), "t", 2),
    Jet("x", 0, Sum((T, Negation(n(1))))),
    INFINITY,
]


@pytest.mark.parametrize("tree", READ_BACK, ids=plain_written)
def test_every_kind_that_typed_text_has_is_read_back(tree: Written) -> None:
    assert read_typed(plain_written(tree), DECLARED).statements[0].members == (tree,)


PRINTED = {
    "2*exp(-3*t)*cos(2*t)": Product(
        (
            n(2),
            Power(EULER, Negation(Product((n(3), T)))),
            Apply("cos", (Product((n(2), T)),)),
        )
    ),
    "[[1, 2], [3, 4]]": Array(((n(1), n(2)), (n(3), n(4)))),
    "-(1 + t)/2": Negation(Quotient(Sum((n(1), T)), n(2))),
    "1 ± 2 ∓ t": Sum((n(1), PlusMinus(n(2)), PlusMinus(T, -1))),
    "(a/b)*c": Product((Quotient(Symbol("a"), Symbol("b")), Symbol("c"))),
    "0.040": Literal(Fraction(4, 100), Fraction(1, 1000), is_decimal=True),
    "12e3": Literal(Fraction(12000), Fraction(1000), is_decimal=True),
    "1/3": Literal(Fraction(1, 3)),
    "integral(t, tau, 0, t)": Integral(T, "tau", n(0), T),
    "integral(t, tau)": Integral(T, "tau"),
    "sum(t, k, 0, oo)": SumOver(T, "k", n(0), INFINITY),
    "limit(x, t, oo)": Limit(Jet("x"), "t", INFINITY),
    "taken_at(k, t, 1, 0)": Evaluated(K, "t", n(1), n(0)),
    "x''(0)": Jet("x", 2, n(0)),
}


@pytest.mark.parametrize(("text", "tree"), PRINTED.items(), ids=PRINTED)
def test_a_tree_is_printed_as_one_would_type_it(text: str, tree: Written) -> None:
    assert plain_written(tree) == text


def test_a_statement_is_printed_with_its_unit_and_conditions() -> None:
    condition = Range((T, n(2)), ("≥",))
    statement = Statement((Jet("x"), n(3)), ("≈",), unit="m", conditions=(condition,))
    assert plain_statement(statement) == "x ~= 3 m for t >= 2"
    assert read_typed(plain_statement(statement), DECLARED).statements == (statement,)


@given(own_formulas())
def test_our_own_formulas_become_trees_that_are_printed_alike(expression: Expression) -> None:
    tree = written_from(expression)
    names = {part.name for part in walk(tree) if isinstance(part, Symbol)}
    assert names <= NAMES
    assert not any(isinstance(part, Jet) for part in walk(tree))
    assert plain_written(tree).replace("(", "").replace(")", "") == plain(expression).replace(
        "(", ""
    ).replace(")", "")


def test_names_that_vary_and_numbers_with_a_name_are_found_in_our_own_formulas() -> None:
    assert written_from(Name("x1''")) == Jet("x1", 2)
    assert written_from(Name("x"), functions=frozenset({"x"})) == Jet("x")
    assert written_from(Name("pi")) == PI
    assert written_from(Name("@i")) == Constant("i")
    assert written_from(Call("exp", Name("t"))) == Power(EULER, T)
    assert written_from(Call("step", Name("t"))) == Apply("step", (T,))
    assert written_from(Call("u'", Name("t"))) == Jet("u", 1, T)
