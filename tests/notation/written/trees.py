"""Trees of what people write, to test with: of every kind of node that typed text has."""

from __future__ import annotations

from fractions import Fraction

from hypothesis import strategies as st

from closedform.notation.written.tree import (
    EULER,
    IMAGINARY,
    PI,
    Apply,
    Array,
    Declared,
    Jet,
    Literal,
    Negation,
    PlusMinus,
    Power,
    Product,
    Quotient,
    Sum,
    Symbol,
    Written,
)

DECLARED = Declared(
    states=frozenset({"x", "x_1"}),
    parameters=frozenset({"k", "omega_n", "lambda_1", "Fhat", "RC"}),
    inputs=frozenset({"u"}),
    functions=frozenset({"y"}),
    matrices=frozenset({"A"}),
)
NAMES = ("k", "omega_n", "lambda_1", "Fhat", "t")
VARYING = ("x", "x_1", "u", "y")


def decimals() -> st.SearchStrategy[Literal]:
    """Decimals with up to four places, also such that end in noughts."""
    return st.builds(
        lambda units, places: Literal(
            Fraction(units, 10**places), Fraction(1, 10**places), is_decimal=True
        ),
        st.integers(0, 10**5),
        st.integers(1, 4),
    )


def leaves() -> st.SearchStrategy[Written]:
    """Numbers, names, functions of time and their derivatives, at an instant or not."""
    whole = st.integers(0, 2000).map(lambda n: Literal(Fraction(n)))
    instants = st.none() | whole
    return st.one_of(
        whole,
        decimals(),
        st.sampled_from(NAMES).map(Symbol),
        st.sampled_from((PI, IMAGINARY)),
        st.builds(Jet, st.sampled_from(VARYING), st.integers(0, 3), instants),
    )


FUNCTIONS = ("sin", "cos", "tan", "sinh", "asin", "atan", "ln", "sqrt", "abs", "re", "sign")


def _above(
    inner: st.SearchStrategy[Written], functions: st.SearchStrategy[str]
) -> st.SearchStrategy[Written]:
    several = st.lists(inner, min_size=2, max_size=3).map(tuple)
    return st.one_of(
        inner.map(Negation),
        several.map(Sum),
        several.map(Product),
        st.builds(Quotient, inner, inner),
        st.builds(Power, inner, inner),
        inner.map(lambda exponent: Power(EULER, exponent)),
        st.builds(lambda f, a: Apply(f, (a,)), functions, inner),
        st.tuples(inner, inner).map(lambda pair: Sum((pair[0], PlusMinus(pair[1])))),
    )


def formulas(*, steps: bool = True, leaves_most: int = 8) -> st.SearchStrategy[Written]:
    """Formulas of numbers over `DECLARED`, with the unit step of anything if `steps`."""
    functions = st.sampled_from((*FUNCTIONS, "step") if steps else FUNCTIONS)
    return st.recursive(leaves(), lambda inner: _above(inner, functions), max_leaves=leaves_most)


def matrices(*, steps: bool = True) -> st.SearchStrategy[Array]:
    """Matrices of formulas, one to three rows and columns."""
    entries = formulas(steps=steps, leaves_most=3)

    def of(columns: int) -> st.SearchStrategy[Array]:
        row = st.lists(entries, min_size=columns, max_size=columns).map(tuple)
        return st.lists(row, min_size=1, max_size=3).map(lambda rows: Array(tuple(rows)))

    return st.integers(1, 3).flatmap(of)
