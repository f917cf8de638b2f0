"""Formulas as linear combinations of the states, with exact weights."""

from __future__ import annotations

from collections.abc import Mapping, Sequence
from typing import NamedTuple

from closedform.algebra.surds import SurdSum
from closedform.errors import Place
from closedform.notation.errors import ConstantTermError, NonlinearTermError
from closedform.notation.exact import bounded, exact_value, inverse_of
from closedform.notation.expression import (
    Expression,
    Name,
    Negation,
    Number,
    Power,
    Product,
    Quotient,
    Sum,
)
from closedform.notation.plain import plain
from closedform.notation.terms import surd_formula

__all__ = ["linear_combination"]

ZERO, ONE = SurdSum.rational(0), SurdSum.rational(1)


class _Linear(NamedTuple):
    """weights . states + constant."""

    weights: Mapping[str, SurdSum]
    constant: SurdSum


def linear_combination(
    expression: Expression, states: Sequence[str], place: Place
) -> tuple[SurdSum, ...]:
    """Return the weight of each state, exactly: one number per state, in their order.

    Raises:  NonlinearTermError for a term that is not a number times a state,
             ConstantTermError for a number left over, and what `exact_value` raises.

    >>> half = Quotient(Sum((Name("a"), Negation(Name("b")))), Number(2))
    >>> [str(w.as_fraction()) for w in linear_combination(half, ("a", "b"), Place())]
    ['1/2', '-1/2']
    """
    result = _linear(expression, frozenset(states), place)
    if not result.constant.is_zero:
        raise ConstantTermError(place, plain(surd_formula(result.constant)))
    return tuple(result.weights.get(state, ZERO) for state in states)


def _linear(expression: Expression, states: frozenset[str], place: Place) -> _Linear:
    match expression:
        case Name(text) if text in states:
            return _Linear({text: ONE}, ZERO)
        case Negation(operand):
            return _scaled(_linear(operand, states, place), -ONE, expression, place)
        case Sum(terms):
            return _added([_linear(term, states, place) for term in terms], expression, place)
        case Product(factors):
            within = [factor for factor in factors if not _is_constant(factor)]
            if len(within) > 1:
                raise NonlinearTermError(place, plain(expression))
            if within:
                number = ONE
                for factor in factors:
                    if factor is not within[0]:
                        number = bounded(number * exact_value(factor, place), factor, place)
                return _scaled(_linear(within[0], states, place), number, expression, place)
        case Quotient(above, below) if not _is_constant(above) and _is_constant(below):
            number = inverse_of(exact_value(below, place), expression, place)
            return _scaled(_linear(above, states, place), number, expression, place)
    if _is_constant(expression):
        return _Linear({}, exact_value(expression, place))
    raise NonlinearTermError(place, plain(expression))


def _is_constant(expression: Expression) -> bool:
    """Whether no name occurs."""
    match expression:
        case Number():
            return True
        case Name():
            return False
        case Negation(inside):
            return _is_constant(inside)
        case Sum(several) | Product(several):
            return all(map(_is_constant, several))
        case Quotient(left, right) | Power(left, right):
            return _is_constant(left) and _is_constant(right)
        case _:
            return _is_constant(expression.argument)


def _scaled(linear: _Linear, number: SurdSum, whole: Expression, place: Place) -> _Linear:
    weights = {s: bounded(w * number, whole, place) for s, w in linear.weights.items()}
    return _Linear(weights, bounded(linear.constant * number, whole, place))


def _added(parts: Sequence[_Linear], whole: Expression, place: Place) -> _Linear:
    weights: dict[str, SurdSum] = {}
    constant = ZERO
    for part in parts:
        constant = bounded(constant + part.constant, whole, place)
        for state, weight in part.weights.items():
            weights[state] = bounded(weights.get(state, ZERO) + weight, whole, place)
    return _Linear(weights, constant)
