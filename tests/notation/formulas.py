"""Formulas to test with: trees of every kind, and their values by independent means."""

from __future__ import annotations

from fractions import Fraction

from hypothesis import strategies as st

from closedform.errors import Place
from closedform.notation.expression import (
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
from closedform.notation.reader import read_formula

NAMES = frozenset({"t", "x1", "omega_1", "lambda"})
HERE = Place(file="bench.toml", key="matrix[1][2]")


def read(text: str, *names: str) -> Expression:
    """Return the tree of a text; `names` default to `NAMES`."""
    return read_formula(text, names=frozenset(names) or NAMES)


def whole(n: int) -> Number:
    return Number(Fraction(n))


def _pairs(inner: st.SearchStrategy[Expression]) -> st.SearchStrategy[tuple[Expression, ...]]:
    return st.lists(inner, min_size=2, max_size=4).map(tuple)


def _above(inner: st.SearchStrategy[Expression]) -> st.SearchStrategy[Expression]:
    functions = st.sampled_from(["exp", "sin", "cos", "sinh", "cosh", "sqrt"])
    return st.one_of(
        inner.map(Negation),
        _pairs(inner).map(Sum),
        _pairs(inner).map(Product),
        st.builds(Quotient, inner, inner),
        st.builds(Power, inner, inner),
        st.builds(Call, functions, inner),
    )


NUMBERS = st.builds(Number, st.fractions(min_value=0, max_value=20, max_denominator=12))


def formulas() -> st.SearchStrategy[Expression]:
    """Trees of every kind of node over `NAMES`."""
    leaves = NUMBERS | st.sampled_from(sorted(NAMES)).map(Name)
    return st.recursive(leaves, _above, max_leaves=12)


def rational_formulas() -> st.SearchStrategy[Expression]:
    """Trees without names, of rational operations."""

    def above(inner: st.SearchStrategy[Expression]) -> st.SearchStrategy[Expression]:
        exponents = st.integers(-3, 3).map(lambda n: whole(n) if n >= 0 else Negation(whole(-n)))
        return st.one_of(
            inner.map(Negation),
            _pairs(inner).map(Sum),
            _pairs(inner).map(Product),
            st.builds(Quotient, inner, inner),
            st.builds(Power, inner, exponents),
        )

    return st.recursive(NUMBERS, above, max_leaves=8)


def surd_formulas() -> st.SearchStrategy[Expression]:
    """Trees without names, of rational operations and square roots of numbers."""
    roots = NUMBERS.map(lambda n: Call("sqrt", n))

    def above(inner: st.SearchStrategy[Expression]) -> st.SearchStrategy[Expression]:
        return st.one_of(
            inner.map(Negation),
            _pairs(inner).map(Sum),
            st.builds(lambda a, b: Product((a, b)), inner, inner),
            st.builds(Quotient, inner, inner),
            st.builds(Power, inner, st.integers(0, 3).map(whole)),
        )

    return st.recursive(NUMBERS | roots, above, max_leaves=5)


def rational_value(expression: Expression) -> Fraction:
    """Return the value of a rational formula by Fraction arithmetic alone."""
    match expression:
        case Number(value):
            return value
        case Negation(operand):
            return -rational_value(operand)
        case Sum(terms):
            return sum(map(rational_value, terms), Fraction(0))
        case Product(factors):
            product = Fraction(1)
            for factor in factors:
                product *= rational_value(factor)
            return product
        case Quotient(above, below):
            return rational_value(above) / rational_value(below)
        case Power(base, exponent):
            return Fraction(rational_value(base) ** int(rational_value(exponent)))
    raise AssertionError(expression)
