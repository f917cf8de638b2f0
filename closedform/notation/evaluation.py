"""Formulas as certified numbers: balls that contain the true value."""

from __future__ import annotations

from collections.abc import Mapping

from flint import arb, fmpq

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

__all__ = ["enclose"]


def enclose(expression: Expression, values: Mapping[str, arb]) -> arb:
    """Return a ball that contains the value of a formula, at flint's current precision.

    A unit step is 1 from the instant 0 on; a ball that does not tell the side is [0, 1].
    Where the formula has no real value (a division by zero, the root of a negative number)
    or a ball is too wide to tell, the result is a ball that is not finite.

    Raises:  KeyError if a name has no entry in `values`.
    Source:  F. Johansson, Arb: efficient arbitrary-precision midpoint-radius interval
             arithmetic, IEEE Transactions on Computers 66 (2017).

    >>> enclose(Power(Name("x"), Negation(Name("y"))), {"x": arb(2), "y": arb(2)})
    0.250000000000000
    """
    match expression:
        case Number(value):
            return arb(fmpq(value.numerator, value.denominator))
        case Name(text):
            return values[text]
        case Negation(operand):
            return -enclose(operand, values)
        case Sum(terms):
            total = arb(0)
            for term in terms:
                total += enclose(term, values)
            return total
        case Product(factors):
            product = arb(1)
            for factor in factors:
                product *= enclose(factor, values)
            return product
        case Quotient(above, below):
            return enclose(above, values) / enclose(below, values)
        case Power(base, Number(whole)) if whole.denominator == 1:
            return _integer_power(enclose(base, values), int(whole))
        case Power(base, exponent):
            return enclose(base, values) ** enclose(exponent, values)
        case Call(function, argument):
            return _apply(function, enclose(argument, values))


def _integer_power(base: arb, exponent: int) -> arb:
    """Return base^exponent for an exponent >= 0 by squaring.

    FLINT's power of a ball with the midpoint 0 is not finite, which its products are.
    """
    result = arb(1)
    for bit in bin(exponent)[2:]:
        result = result * result
        if bit == "1":
            result = result * base
    return result


def _unit_step(argument: arb) -> arb:
    if not argument.is_finite():
        return arb.nan()
    if argument >= 0:
        return arb(1)
    return arb(0) if argument < 0 else arb(0.5, 0.5)


def _apply(function: str, argument: arb) -> arb:
    match function:
        case "exp":
            return argument.exp()
        case "sin":
            return argument.sin()
        case "cos":
            return argument.cos()
        case "sinh":
            return argument.sinh()
        case "cosh":
            return argument.cosh()
        case "sqrt":
            return argument.sqrt()
        case "step":
            return _unit_step(argument)
        case _:
            raise ValueError(f"there is no function {function}")
