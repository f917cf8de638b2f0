"""Formulas of any width to print and to read back."""

from __future__ import annotations

from fractions import Fraction

from hypothesis import strategies as st

from closedform.derivation.step import Side, Statement
from closedform.document.display import Display, displayed
from closedform.document.printed import Shown
from closedform.document.reading.back import display_unlike
from closedform.document.reading.comparing import Difference
from closedform.document.reading.expected import Expected
from closedform.document.reading.found import displays_in
from closedform.notation.expression import (
    ZERO,
    Call,
    Expression,
    Name,
    Negation,
    Number,
    Power,
    Product,
    Quotient,
    Sum,
)

NAMES = (
    *("k", "k_12", "omega_1", "alpha", "m1", "lambda_1", "zeta", "R", "speed", "v_left", "t"),
    *("x_0", "e", "i", "j", "A", "g_1", "q_in_left", "0.040"),
)
"""Among them letters that have customary meanings, and a decimal."""


def _numbers() -> st.SearchStrategy[Expression]:
    whole = st.integers(0, 30) | st.integers(10**9, 10**14) | st.integers(10**60, 10**110)
    fractions = st.builds(Fraction, st.integers(1, 40), st.integers(1, 60))
    return st.builds(Number, whole.map(Fraction) | fractions)


def _above(inner: st.SearchStrategy[Expression]) -> st.SearchStrategy[Expression]:
    several = st.lists(inner, min_size=2, max_size=5).map(tuple)
    functions = ("exp", "sin", "cos", "sinh", "cosh", "sqrt", "step", "u_in", "F")
    exponents = st.integers(2, 4).map(lambda n: Number(Fraction(n)))
    return st.one_of(
        st.builds(Negation, inner),
        st.builds(Sum, several),
        st.builds(Product, several),
        st.builds(Quotient, inner, inner),
        st.builds(Power, inner, exponents),
        st.builds(Call, st.sampled_from(functions), inner),
    )


NUMBERS = _numbers()
LEAVES = NUMBERS | st.sampled_from(NAMES).map(Name) | st.sampled_from(NAMES).map(Name)


def formulas(leaves: int = 40) -> st.SearchStrategy[Expression]:
    """Trees of every kind of node, most of them too wide for a line."""
    return st.recursive(LEAVES, _above, max_leaves=leaves)


def rows() -> st.SearchStrategy[tuple[tuple[Expression, ...], ...]]:
    """The rows of a matrix that is not zero."""
    row = st.integers(1, 5).flatmap(
        lambda n: st.lists(
            st.lists(formulas(12), min_size=n, max_size=n).map(tuple), min_size=1, max_size=4
        ).map(tuple)
    )
    return row.filter(lambda found: any(entry != ZERO for row in found for entry in row))


def set_alone(*sides: Side, by: str = "auto") -> tuple[Statement, Display]:
    """Return a statement, and how it is displayed."""
    statement = Statement("solution", sides)
    return statement, displayed(statement, by=by)


def read_again(statement: Statement, display: Display, latex: str = "") -> Difference | None:
    """Return what is wrong with a display, or with other LaTeX in its place."""
    (found,) = displays_in(r"\begin{document}" + (latex or display.latex))
    return display_unlike(found, Shown(display, (statement,)), Expected("t"))
