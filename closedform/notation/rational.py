"""Formulas in parameters as exact elements of the field of their rational functions."""

from __future__ import annotations

from collections.abc import Mapping, Sequence
from fractions import Fraction

from closedform.algebra.field import Scalar
from closedform.algebra.parameter_field import ParameterField, ParameterPolynomial
from closedform.algebra.surds import root_of_rational
from closedform.errors import Place
from closedform.notation.arithmetic import Arithmetic
from closedform.notation.errors import DivisionByZeroError, NegativeRootError, NotANumberError
from closedform.notation.exact import MOST_BITS
from closedform.notation.expression import Call, Expression, Negation, Sum
from closedform.notation.linear import combination
from closedform.notation.parametric_errors import (
    IrrationalNumberError,
    ParameterFunctionError,
    ParameterRootError,
    ParameterSizeError,
)
from closedform.notation.plain import plain
from closedform.notation.rational_formula import rational_formula

__all__ = ["difference", "field_arithmetic", "rational_combination", "rational_value"]

MOST_TERMS = 100
"""Terms of a numerator or a denominator: common factors of larger ones take seconds to find."""
MOST_PRODUCTS = 4_000
"""Products of single terms when two polynomials are multiplied."""
MOST_DEGREE = 60

SIZE_LIMIT = (
    f"numerators and denominators have up to {MOST_TERMS} terms, of a degree up to "
    f"{MOST_DEGREE}, with numbers up to {MOST_BITS * 3 // 10} digits"
)
NOTHING: Mapping[str, Scalar] = {}


def field_arithmetic(
    field: ParameterField, *, meanings: Mapping[str, Scalar] = NOTHING
) -> Arithmetic[Scalar]:
    """Return the arithmetic of formulas whose names are parameters, or keys of `meanings`."""
    return _Functions(field, meanings)


def rational_value(
    expression: Expression,
    field: ParameterField,
    place: Place,
    *,
    meanings: Mapping[str, Scalar] = NOTHING,
) -> Scalar:
    """Return the exact value of a formula in the field of rational functions of parameters.

    Its names are parameters of the field, or keys of `meanings`, which gives the elements
    that they stand for.  Read are rational numbers, + - * /, integer powers, and square
    roots that are rational numbers.

    Raises:  DivisionByZeroError for a division by what is zero identically,
             IrrationalNumberError, ParameterRootError, ParameterFunctionError,
             ParameterSizeError, NegativeRootError, ExponentError, and NotANumberError for
             any other name; each quotes the part concerned.

    >>> from closedform.notation.reader import read_formula
    >>> formula = read_formula("(k^2 - 1)/(k + 1)", names=frozenset({"k"}))
    >>> rational_value(formula, ParameterField(parameters=("k",)), Place())
    k - 1
    """
    return _Functions(field, meanings).value(expression, place)


def arithmetic_in(
    field: ParameterField, meanings: Mapping[str, Scalar] = NOTHING
) -> Arithmetic[Scalar]:
    """Return the arithmetic by which `rational_value` finds values."""
    return _Functions(field, meanings)


def difference(
    one: Expression,
    other: Expression,
    field: ParameterField,
    place: Place,
    *,
    meanings: Mapping[str, Scalar] = NOTHING,
) -> Scalar:
    """Return the element one - other, of two formulas.  Raises what `rational_value` raises."""
    return rational_value(Sum((one, Negation(other))), field, place, meanings=meanings)


def rational_combination(
    expression: Expression,
    states: Sequence[str],
    field: ParameterField,
    place: Place,
    *,
    meanings: Mapping[str, Scalar] = NOTHING,
) -> tuple[Scalar, ...]:
    """Return the weight of each state in the field: one element per state, in their order.

    Raises:  NonlinearTermError, ConstantTermError, and what `rational_value` raises.
    """
    return combination(expression, states, _Functions(field, meanings), place)


class _Functions(Arithmetic[Scalar]):
    """Rational functions of the parameters, with a limit to their terms and degree."""

    def __init__(self, field: ParameterField, meanings: Mapping[str, Scalar]) -> None:
        self.field, self.meanings = field, meanings
        self.names = frozenset(field.parameters) | frozenset(meanings)

    def number(self, value: Fraction) -> Scalar:
        return self.field.scalar(value)

    def named(self, name: str, place: Place) -> Scalar:
        if name in self.meanings:
            return self.meanings[name]
        if name not in self.names:
            raise NotANumberError(place, name)
        return self.field.symbol(name)

    def negated(self, value: Scalar) -> Scalar:
        return -value

    def added(self, one: Scalar, other: Scalar, whole: Expression, place: Place) -> Scalar:
        if one.denom != other.denom:
            crosswise = ((one.numer, other.denom), (other.numer, one.denom))
            _foresee((*crosswise, (one.denom, other.denom)), whole, place)
        return _bounded(one + other, whole, place)

    def multiplied(self, one: Scalar, other: Scalar, whole: Expression, place: Place) -> Scalar:
        _foresee(((one.numer, other.numer), (one.denom, other.denom)), whole, place)
        return _bounded(one * other, whole, place)

    def inverted(self, value: Scalar, whole: Expression, place: Place) -> Scalar:
        if not value:
            raise DivisionByZeroError(place, plain(whole))
        return 1 / value

    def called(self, call: Call, place: Place) -> Scalar:
        if call.function != "sqrt":
            raise ParameterFunctionError(place, plain(call))
        return self.root(self.value(call.argument, place), call, place)

    def root(self, value: Scalar, whole: Expression, place: Place) -> Scalar:
        square = self.fraction(value)
        if square is None:
            raise ParameterRootError(place, plain(whole))
        if square < 0:
            raise NegativeRootError(place, plain(whole))
        found = root_of_rational(square)
        if found is None or not found.is_rational:
            raise IrrationalNumberError(place, plain(whole))
        return self.field.scalar(found)

    def fraction(self, value: Scalar) -> Fraction | None:
        return self.field.constant(value)

    def text(self, value: Scalar) -> str:
        return plain(rational_formula(self.field, value))


def _foresee(
    pairs: Sequence[tuple[ParameterPolynomial, ParameterPolynomial]],
    whole: Expression,
    place: Place,
) -> None:
    """Raise ParameterSizeError before polynomials are multiplied whose product is too large."""
    for one, other in pairs:
        if len(one) * len(other) > MOST_PRODUCTS or _degree(one) + _degree(other) > MOST_DEGREE:
            raise ParameterSizeError(place, plain(whole), SIZE_LIMIT)


def _bounded(value: Scalar, whole: Expression, place: Place) -> Scalar:
    """Return the value.  Raises ParameterSizeError if it is too large to go on with."""
    for polynomial in (value.numer, value.denom):
        if (
            len(polynomial) > MOST_TERMS
            or _degree(polynomial) > MOST_DEGREE
            or _bits(polynomial) > MOST_BITS
        ):
            raise ParameterSizeError(place, plain(whole), SIZE_LIMIT)
    return value


def _degree(polynomial: ParameterPolynomial) -> int:
    return max((sum(monomial) for monomial in polynomial.itermonoms()), default=0)


def _bits(polynomial: ParameterPolynomial) -> int:
    """Return the length in bits of the longest integer among the coefficients."""
    return max(
        (
            max(int(c.numerator).bit_length(), int(c.denominator).bit_length())
            for c in polynomial.itercoeffs()
        ),
        default=0,
    )
