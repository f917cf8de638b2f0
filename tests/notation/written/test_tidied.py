"""Formulas without what says nothing: shorter, and of the same value."""

from __future__ import annotations

from fractions import Fraction

import pytest
from flint import acb, arb
from hypothesis import given
from hypothesis import strategies as st

from closedform.checking.balls.enclosing import enclose_written
from closedform.notation.written.plain_form import plain_written
from closedform.notation.written.tidied import tidied
from closedform.notation.written.tree import (
    Literal,
    Negation,
    Power,
    Product,
    Quotient,
    Sum,
    Symbol,
    Written,
    walk,
)

T = Symbol("t")
DECIMAL = Literal(Fraction(1), Fraction(1, 100), is_decimal=True)


def whole(value: int) -> Written:
    return Literal(Fraction(value)) if value >= 0 else Negation(Literal(Fraction(-value)))


@pytest.mark.parametrize(
    ("tree", "text"),
    [
        (Quotient(whole(-3), whole(3)), "-1"),
        (Power(Symbol("omega_n"), whole(1)), "omega_n"),
        (Product((whole(1), T, whole(-2))), "-t*2"),
        (Negation(Negation(T)), "t"),
        (Sum((whole(0), T, Product((whole(0), T)))), "t"),
        (Quotient(T, whole(-2)), "-t/2"),
        (Product((DECIMAL, T)), "1.00*t"),
    ],
)
def test_what_says_nothing_is_left_out(tree: Written, text: str) -> None:
    assert plain_written(tidied(tree)) == text


TREES = st.recursive(
    st.integers(-3, 4).map(whole) | st.just(T),
    lambda inner: (
        inner.map(Negation)
        | st.lists(inner, min_size=2, max_size=3).map(lambda parts: Sum(tuple(parts)))
        | st.lists(inner, min_size=2, max_size=3).map(lambda parts: Product(tuple(parts)))
        | st.tuples(inner, st.sampled_from([-3, -1, 1, 2])).map(
            lambda pair: Quotient(pair[0], whole(pair[1]))
        )
        | inner.map(lambda base: Power(base, whole(1)))
    ),
    max_leaves=12,
)


@given(TREES)
def test_the_value_stays(tree: Written) -> None:
    names = {"t": arb(5) / 7}
    found: acb = enclose_written(tidied(tree), names) - enclose_written(tree, names)
    assert found.contains(0)
    assert len(list(walk(tidied(tree)))) <= len(list(walk(tree)))
