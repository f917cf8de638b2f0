"""Formulas in the time as Taylor series in balls: values and derivatives at an instant.

Unit steps are 0 or 1 around an instant that is none of their own, and impulses 0.  Where the
instant is one of their own, a side of it is chosen; the impulses there have weights.
"""

from __future__ import annotations

from collections.abc import Callable, Mapping
from dataclasses import dataclass

from flint import arb, arb_series, fmpq

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

__all__ = ["Moment", "impulse_weight", "taylor"]

Given = Callable[[Expression], arb | None]
"""What knows the value of a name or a call otherwise than by the formula; None if it does not."""


@dataclass(frozen=True)
class Moment:
    """An instant `t` of `time`, with balls for all names; series have `length` coefficients.

    `side` is 1 or -1 where what holds after or before `t` is asked for, 0 elsewhere.  What
    `given` knows counts as constant.
    """

    time: str
    t: arb
    known: Mapping[str, arb]
    length: int = 1
    side: int = 0
    given: Given = lambda _: None

    def constant(self, value: arb) -> arb_series:
        """Return a number as a series."""
        return arb_series([value], prec=self.length)

    @property
    def own(self) -> arb_series:
        """The time as a series."""
        return arb_series([self.t, arb(1)], prec=self.length)


def taylor(expression: Expression, moment: Moment) -> arb_series:
    """Return the Taylor series of a formula at a moment; not finite where it has none.

    Raises:  KeyError for a name that is not known, ValueError for what has no series here.
    """
    value = moment.given(expression)
    if value is not None:
        return moment.constant(value)
    match expression:
        case Number(number):
            return moment.constant(arb(fmpq(number.numerator, number.denominator)))
        case Name(text):
            return moment.own if text == moment.time else moment.constant(moment.known[text])
        case Negation(operand):
            return -taylor(operand, moment)
        case Sum(terms):
            total = moment.constant(arb(0))
            for term in terms:
                total = total + taylor(term, moment)
            return total
        case Product(factors):
            product = moment.constant(arb(1))
            for factor in factors:
                product = product * taylor(factor, moment)
            return product
        case Quotient(above, below):
            return taylor(above, moment) / taylor(below, moment)
        case Power(base, exponent):
            return _power(taylor(base, moment), exponent, moment)
        case Call(function, argument):
            return _applied(function, taylor(argument, moment), moment)


def impulse_weight(expression: Expression, moment: Moment) -> arb:
    """Return the weight of the impulse that a formula has at a moment.

    f(t) delta(c (t - a)) has the weight f(a)/|c| at a.
    """
    match expression:
        case Negation(operand):
            return -impulse_weight(operand, moment)
        case Sum(terms):
            return sum((impulse_weight(term, moment) for term in terms), arb(0))
        case Product(factors):
            total = arb(0)
            for place, factor in enumerate(factors):
                if _has_impulse(factor):
                    weight = impulse_weight(factor, moment)
                    for other in (*factors[:place], *factors[place + 1 :]):
                        weight = weight * taylor(other, moment)[0]
                    total = total + weight
            return total
        case Quotient(above, below) if _has_impulse(above):
            return impulse_weight(above, moment) / taylor(below, moment)[0]
        case Call("delta", argument):
            inside = taylor(argument, Moment(moment.time, moment.t, moment.known, 2))
            return 1 / abs(inside[1]) if inside[0].contains(0) else arb(0)
        case _:
            return arb(0)


def _has_impulse(expression: Expression) -> bool:
    match expression:
        case Call(function, argument):
            return function == "delta" or _has_impulse(argument)
        case Negation(inside):
            return _has_impulse(inside)
        case Sum(parts) | Product(parts):
            return any(map(_has_impulse, parts))
        case Quotient(left, right) | Power(left, right):
            return _has_impulse(left) or _has_impulse(right)
        case _:
            return False


def _power(base: arb_series, exponent: Expression, moment: Moment) -> arb_series:
    negative = isinstance(exponent, Negation)
    inside = exponent.operand if isinstance(exponent, Negation) else exponent
    if not isinstance(inside, Number) or inside.value.denominator != 1:
        raise ValueError("only whole powers have a series here")
    result = moment.constant(arb(1))
    for _ in range(int(inside.value)):
        result = result * base
    return 1 / result if negative else result


def _applied(function: str, inside: arb_series, moment: Moment) -> arb_series:
    match function:
        case "exp":
            return inside.exp()
        case "sin":
            return inside.sin()
        case "cos":
            return inside.cos()
        case "sqrt":
            return inside.sqrt()
        case "sinh" | "cosh":
            up, down = inside.exp(), (-inside).exp()
            return (up + down if function == "cosh" else up - down) / 2
        case "step":
            return moment.constant(_step(inside, moment))
        case "delta" if not inside[0].contains(0):
            return moment.constant(arb(0))
        case "delta":
            return moment.constant(arb(0 if moment.side else "nan"))
        case _:
            raise ValueError(f"{function} has no value here")


def _step(inside: arb_series, moment: Moment) -> arb:
    value = inside[0]
    if value.contains(0):
        value = inside[1] * moment.side if moment.side else arb(0)
    if value > 0:
        return arb(1)
    return arb(0) if value < 0 else arb("nan")
