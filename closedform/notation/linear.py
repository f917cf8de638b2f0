"""Formulas as linear combinations of the states, with exact weights."""

from __future__ import annotations

from collections.abc import Mapping, Sequence
from fractions import Fraction
from typing import Generic, NamedTuple, TypeVar

from closedform.algebra.surds import SurdSum
from closedform.errors import Place
from closedform.notation.arithmetic import Arithmetic
from closedform.notation.errors import ConstantTermError, NonlinearTermError
from closedform.notation.exact import NUMBERS
from closedform.notation.expression import (
    Expression,
    Name,
    Negation,
    Product,
    Quotient,
    Sum,
    names_in,
)
from closedform.notation.plain import plain

__all__ = ["affine", "combination", "linear_combination"]

T = TypeVar("T")


class _Linear(NamedTuple, Generic[T]):
    """weights . states + constant."""

    weights: Mapping[str, T]
    constant: T


def linear_combination(
    expression: Expression, states: Sequence[str], place: Place
) -> tuple[SurdSum, ...]:
    """Return the weight of each state, exactly: one number per state, in their order.

    Raises:  NonlinearTermError for a term that is not a number times a state,
             ConstantTermError for a number left over, and what `exact_value` raises.

    >>> from closedform.notation.expression import Number
    >>> half = Quotient(Sum((Name("a"), Negation(Name("b")))), Number(Fraction(2)))
    >>> [str(w.as_fraction()) for w in linear_combination(half, ("a", "b"), Place())]
    ['1/2', '-1/2']
    """
    return combination(expression, states, NUMBERS, place)


def combination(
    expression: Expression, states: Sequence[str], arithmetic: Arithmetic[T], place: Place
) -> tuple[T, ...]:
    """Return the weight of each state as a value of `arithmetic`, in the order of the states.

    Raises:  NonlinearTermError, ConstantTermError, and what `arithmetic` raises.
    """
    weights, constant = affine(expression, states, arithmetic, place)
    if constant != arithmetic.number(Fraction(0)):
        raise ConstantTermError(place, arithmetic.text(constant))
    return weights


def affine(
    expression: Expression, names: Sequence[str], arithmetic: Arithmetic[T], place: Place
) -> tuple[tuple[T, ...], T]:
    """Return the weight of each name, in their order, and the constant that is added.

    Raises:  NonlinearTermError, and what `arithmetic` raises.
    """
    zero = arithmetic.number(Fraction(0))
    result = _Walk(frozenset(names), arithmetic, place).linear(expression)
    return tuple(result.weights.get(name, zero) for name in names), result.constant


class _Walk(NamedTuple, Generic[T]):
    """What stays the same while a formula is walked through."""

    states: frozenset[str]
    arithmetic: Arithmetic[T]
    place: Place

    def linear(self, expression: Expression) -> _Linear[T]:
        one = self.arithmetic.number(Fraction(1))
        match expression:
            case Name(text) if text in self.states:
                return _Linear({text: one}, self.arithmetic.number(Fraction(0)))
            case Negation(operand):
                return self._scaled(self.linear(operand), self.arithmetic.negated(one), expression)
            case Sum(terms):
                return self._added([self.linear(term) for term in terms], expression)
            case Product(factors):
                within = [factor for factor in factors if not self._is_constant(factor)]
                if len(within) > 1:
                    raise NonlinearTermError(self.place, plain(expression))
                if within:
                    weight = one
                    for factor in factors:
                        if factor is not within[0]:
                            value = self.arithmetic.value(factor, self.place)
                            weight = self._product(weight, value, factor)
                    return self._scaled(self.linear(within[0]), weight, expression)
            case Quotient(above, below) if not self._is_constant(above):
                if self._is_constant(below):
                    value = self.arithmetic.value(below, self.place)
                    weight = self.arithmetic.inverted(value, expression, self.place)
                    return self._scaled(self.linear(above), weight, expression)
        if self._is_constant(expression):
            return _Linear({}, self.arithmetic.value(expression, self.place))
        raise NonlinearTermError(self.place, plain(expression))

    def _is_constant(self, expression: Expression) -> bool:
        return names_in(expression) <= self.arithmetic.names

    def _product(self, one: T, other: T, whole: Expression) -> T:
        return self.arithmetic.multiplied(one, other, whole, self.place)

    def _scaled(self, linear: _Linear[T], weight: T, whole: Expression) -> _Linear[T]:
        weights = {s: self._product(w, weight, whole) for s, w in linear.weights.items()}
        return _Linear(weights, self._product(linear.constant, weight, whole))

    def _added(self, parts: Sequence[_Linear[T]], whole: Expression) -> _Linear[T]:
        zero = constant = self.arithmetic.number(Fraction(0))
        weights: dict[str, T] = {}
        for part in parts:
            constant = self.arithmetic.added(constant, part.constant, whole, self.place)
            for state, weight in part.weights.items():
                so_far = weights.get(state, zero)
                weights[state] = self.arithmetic.added(so_far, weight, whole, self.place)
        return _Linear(weights, constant)
