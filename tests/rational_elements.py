"""Rational functions of parameters to test on, from text and at random."""

from __future__ import annotations

from fractions import Fraction
from functools import reduce
from operator import mul

from flint import arb, fmpq
from hypothesis import strategies as st

from closedform.algebra.field import Scalar
from closedform.algebra.parameter_field import ParameterField
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


def field_of(names: str) -> ParameterField:
    """Return the field of the parameters in a text, separated by blanks."""
    return ParameterField(parameters=tuple(names.split()))


def element(field: ParameterField, text: str) -> Scalar:
    """Return the element that a formula stands for."""
    return _value(field, read_formula(text, names=frozenset(field.parameters)))


def _value(field: ParameterField, formula: Expression) -> Scalar:
    match formula:
        case Number(value):
            return field.scalar(value)
        case Name(text):
            return field.symbol(text)
        case Negation(operand):
            return -_value(field, operand)
        case Sum(terms):
            return sum((_value(field, term) for term in terms), field.scalar(0))
        case Product(factors):
            return reduce(mul, (_value(field, factor) for factor in factors))
        case Quotient(above, below):
            return _value(field, above) / _value(field, below)
        case Power(base, Number(exponent)):
            return _value(field, base) ** int(exponent)
        case Power() | Call():
            raise ValueError(formula)


numbers = st.fractions(min_value=-5, max_value=5, max_denominator=4)


@st.composite
def polynomials(draw: st.DrawFn, field: ParameterField, terms: int = 4) -> Scalar:
    """Draw a polynomial of at most so many terms; it may be zero."""
    total = field.scalar(0)
    for _ in range(draw(st.integers(1, terms))):
        term = field.scalar(draw(numbers))
        for name in draw(st.lists(st.sampled_from(field.parameters), max_size=3)):
            term *= field.symbol(name)
        total += term
    return total


@st.composite
def elements(draw: st.DrawFn, field: ParameterField) -> Scalar:
    """Draw sums and products of quotients of polynomials."""
    total = field.scalar(0)
    for _ in range(draw(st.integers(1, 2))):
        above = reduce(mul, draw(st.lists(polynomials(field, 3), min_size=1, max_size=2)))
        below = draw(polynomials(field, 2).filter(bool))
        total += above / below
    return total


def points(names: tuple[str, ...]) -> st.SearchStrategy[dict[str, arb]]:
    """Draw values for names, exact to the working precision."""
    value = st.fractions(min_value=Fraction(1, 7), max_value=7, max_denominator=97)
    balls = value.map(lambda v: arb(fmpq(v.numerator, v.denominator)))
    return st.fixed_dictionaries(dict.fromkeys(names, balls))
