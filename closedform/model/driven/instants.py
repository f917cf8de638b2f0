"""Instants and their order, as far as it is known."""

from __future__ import annotations

from collections.abc import Callable
from dataclasses import dataclass
from typing import TypeVar

from flint import ctx

from closedform.algebra.domain import ParameterDomain
from closedform.algebra.enclosure import ball_of
from closedform.algebra.field import BaseField, Scalar
from closedform.algebra.parameter_field import ParameterField
from closedform.algebra.sign_argument import ANY
from closedform.algebra.surds import SurdSum
from closedform.errors import Place
from closedform.model.driven.signal_errors import UnknownOrderError
from closedform.notation.arithmetic import Arithmetic
from closedform.notation.plain import plain
from closedform.notation.rational_formula import rational_formula
from closedform.notation.terms import surd_formula

__all__ = ["Order", "Signs", "order_in", "order_of_numbers", "signs_in", "signs_of_numbers"]

T = TypeVar("T")
Signs = Callable[[Scalar], frozenset[int]]
"""What tells the signs, of -1, 0 and 1, that a number may have."""


@dataclass(frozen=True)
class Order:
    """The order of instants; `text` writes one for the error, `place` is where it is asked."""

    signs: Signs
    text: Callable[[Scalar], str]
    place: Place

    def known(self, one: Scalar, other: Scalar) -> int | None:
        """Return -1, 0 or 1 as `one` comes before, with or after the other, None if unknown."""
        if one == other:
            return 0
        found = self.signs(one - other)
        return next(iter(found)) if len(found) == 1 else None

    def compared(self, one: Scalar, other: Scalar) -> int:
        """Return what `known` does.  Raises UnknownOrderError."""
        found = self.known(one, other)
        if found is None:
            raise UnknownOrderError(self.place, self.text(one), self.text(other))
        return found

    def not_after(self, one: Scalar, other: Scalar) -> bool:
        """Whether `one` is known to come before or with the other."""
        return one == other or 1 not in self.signs(one - other)

    def later(self, one: Scalar | None, other: Scalar | None) -> Scalar | None:
        """Return the later of two starts; None is ever since."""
        if one is None or other is None:
            return other if one is None else one
        return one if self.compared(one, other) >= 0 else other

    def earlier(self, one: Scalar | None, other: Scalar | None) -> Scalar | None:
        """Return the earlier of two ends; None is for ever."""
        if one is None or other is None:
            return other if one is None else one
        return one if self.compared(one, other) <= 0 else other

    def is_empty(self, start: Scalar | None, end: Scalar | None) -> bool:
        """Whether nothing is known to lie between a start and an end."""
        if start is None or end is None:
            return False
        return self.not_after(end, start)


def signs_of_numbers(arithmetic: Arithmetic[T]) -> Signs:
    """Return what tells the signs of numbers, and nothing of formulas in parameters."""

    def signs(value: Scalar) -> frozenset[int]:
        if isinstance(value, SurdSum):
            return frozenset({_sign(value)})
        number = arithmetic.fraction(value)
        return ANY if number is None else frozenset({(number > 0) - (number < 0)})

    return signs


def signs_in(field: BaseField, domain: ParameterDomain | None) -> Signs:
    """Return what tells the signs of elements of a field; with parameters, in the domain."""
    if domain is None:
        return lambda element: frozenset({field.sign(element)})
    return lambda element: domain.sign_of(element).values


def order_of_numbers(arithmetic: Arithmetic[T], place: Place, signs: Signs | None = None) -> Order:
    """Return the order of instants that are values of an arithmetic."""
    return Order(signs or signs_of_numbers(arithmetic), arithmetic.text, place)


def order_in(field: BaseField, domain: ParameterDomain | None, place: Place) -> Order:
    """Return the order of instants that are elements of a field."""

    def text(element: Scalar) -> str:
        if isinstance(field, ParameterField):
            return plain(rational_formula(field, element))
        return plain(surd_formula(field.surds(element)))

    return Order(signs_in(field, domain), text, place)


def _sign(value: SurdSum) -> int:
    if value.is_zero:
        return 0
    bits = 64
    while True:
        with ctx.workprec(bits):
            ball = ball_of(value)
        if not ball.contains(0):
            return 1 if ball > 0 else -1
        bits *= 2
