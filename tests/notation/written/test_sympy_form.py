"""Trees as SymPy objects: each kind of node against what a person would type in SymPy."""

from __future__ import annotations

from fractions import Fraction

import pytest
import sympy
from sympy import Derivative, Eq, I, Subs, exp, oo
from sympy.abc import s, t

from closedform.notation.written.sympy_form import sympy_eigenvalues, sympy_matrix, sympy_of
from closedform.notation.written.tree import (
    EULER,
    IMAGINARY,
    INFINITY,
    Apply,
    Array,
    Declared,
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
    Reading,
    Statement,
    Sum,
    SumOver,
    Symbol,
    Transform,
    Written,
)

T, A, LAMBDA = Symbol("t"), Symbol("A"), Symbol("lambda")
x = sympy.Function("x")
DECLARED = Declared(states=frozenset({"x"}))


def n(value: int) -> Literal:
    return Literal(Fraction(value))


M = Array(((n(1), n(2)), (n(3), n(4))))
MATRIX = sympy.ImmutableMatrix([[1, 2], [3, 4]])
CHARACTERISTIC = Sum((Product((LAMBDA, Identity())), Negation(A)))
PAIR = Sum((n(-2), PlusMinus(Product((n(3), IMAGINARY)))))

FORMS: list[tuple[Written, object]] = [
    (Literal(Fraction(1, 8), Fraction(1, 1000), is_decimal=True), sympy.Rational(1, 8)),
    (Quotient(Power(EULER, Negation(T)), n(2)), exp(-t) / 2),
    (LAMBDA, sympy.Symbol("lamda")),
    (Symbol("lambda_1"), sympy.Symbol("lamda_1")),
    (Jet("x"), x(t)),
    (Jet("x", 2), Derivative(x(t), (t, 2))),
    (Jet("x", 1, n(0)), Subs(Derivative(x(t), t), t, 0)),
    (Jet("x", 0, Sum((T, Negation(n(1))))), x(t - 1)),
    (Evaluated(Jet("x", 1), "t", n(0)), Subs(Derivative(x(t), t), t, 0)),
    (Apply("det", (CHARACTERISTIC,)), sympy.Symbol("charpoly_A")),
    (
        Apply("det", (Sum((A, Negation(Product((LAMBDA, Identity()))))),)),
        sympy.Symbol("charpoly_A_neg"),
    ),
    (Apply("step", (T,)), sympy.Heaviside(t)),
    (Apply("log10", (T,)), sympy.log(t, 10)),
    (PAIR, [-2 + 3 * I, -2 - 3 * I]),
    (PlusMinus(n(1), -1), [-1, 1]),
    (Listing((n(1), n(2))), [1, 2]),
    (M, MATRIX),
    (Apply("diag", (n(7), M)), sympy.diag(7, MATRIX)),
    (Apply("transpose", (M,)), MATRIX.T),
    (Product((M, Power(M, n(-1)))), sympy.eye(2).as_immutable()),
    (Sum((Product((T, Identity())), Negation(M))), t * sympy.eye(2) - MATRIX),
    (
        Array(((M, M), (Identity(2), M))),
        sympy.Matrix.vstack(
            sympy.Matrix.hstack(MATRIX, MATRIX), sympy.Matrix.hstack(sympy.eye(2), MATRIX)
        ).as_immutable(),
    ),
    (Integral(T, "t", n(0), INFINITY), sympy.Integral(t, (t, 0, oo))),
    (Integral(T, "t"), sympy.Integral(t, t)),
    (SumOver(T, "k", n(0), n(3)), sympy.Sum(t, (sympy.Symbol("k"), 0, 3))),
    (Limit(Jet("x"), "t", INFINITY), sympy.Limit(x(t), t, oo)),
    (Transform(Jet("x")), sympy.Symbol("Lx")),
    (Transform(T), sympy.LaplaceTransform(t, t, s)),
    (
        Piecewise(((n(1), (Range((n(0), T, n(2)), ("≤", "<")),)), (n(0), None))),
        sympy.Piecewise((1, (t >= 0) & (t < 2)), (0, True)),
    ),
]


@pytest.mark.parametrize(("tree", "meant"), FORMS, ids=[str(k) for k in range(len(FORMS))])
def test_a_tree_is_what_one_would_type(tree: Written, meant: object) -> None:
    assert sympy_of(tree, DECLARED) == meant


def test_a_back_transform_waits_to_be_done() -> None:
    made = sympy_of(Transform(Quotient(n(1), Symbol("s")), back=True))
    assert made.doit() == sympy.Heaviside(t)


def test_an_exponential_of_a_matrix_is_not_worked_out() -> None:
    made = sympy_of(Power(EULER, Product((M, T))))
    assert isinstance(made, exp)
    assert made.args[0] == MATRIX * t


def test_a_chain_keeps_its_form_between_neighbours() -> None:
    chain = Statement((n(1), n(1), n(2)), ("=", "≈"))
    assert sympy_of(chain) == [Eq(1, 1, evaluate=False), Eq(1, 2, evaluate=False)]


def test_a_relation_unknown_to_sympy_is_refused() -> None:
    with pytest.raises(ValueError, match="∝"):
        sympy_of(Statement((n(1), T), ("∝",)))


def test_statements_make_one_list() -> None:
    both = Reading((Statement((T, n(1)), ("=",)), Statement((A, n(2)), ("<",))))
    assert sympy_of(both) == [Eq(t, 1), sympy.Symbol("A") < 2]


def test_what_tends_to_a_value_has_it_as_its_limit() -> None:
    tends = Statement((Jet("x"), n(3)), ("→",), conditions=(Range((T, INFINITY), ("→",)),))
    assert sympy_of(tends, DECLARED) == Eq(sympy.Limit(x(t), t, oo), 3)


EIGENVALUES: list[tuple[Statement, list[object]]] = [
    (Statement((Symbol("lambda_1_2"), PAIR), ("=",)), [-2 + 3 * I, -2 - 3 * I]),
    (Statement((Symbol("lambda_1_2"), n(5)), ("=",)), [5, 5]),
    (Statement((Symbol("lambda_2"), Symbol("lambda_3"), n(5)), ("=", "=")), [5, 5]),
    (Statement((LAMBDA, n(5)), ("=",), note="(multiplicity 3)"), [5, 5, 5]),
    (Statement((LAMBDA, n(5)), ("=",), note="double"), [5, 5]),
    (
        Statement((Product((Symbol("sigma"), A)), Listing((n(-1), PAIR))), ("=",)),
        [-1, -2 + 3 * I, -2 - 3 * I],
    ),
]


@pytest.mark.parametrize(("statement", "values"), EIGENVALUES)
def test_eigenvalues_come_as_often_as_they_are_meant(
    statement: Statement, values: list[object]
) -> None:
    assert sympy_eigenvalues(statement) == values


def test_the_matrix_claimed_stands_last_and_is_multiplied_out() -> None:
    chain = Statement((Symbol("P"), A, Product((M, M))), ("=", "="))
    assert sympy_matrix(chain) == MATRIX**2
