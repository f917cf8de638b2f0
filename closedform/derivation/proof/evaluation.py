"""Values of what a derivation displays: exact where they can be, else in complex balls.

This shares no code with the routines that print, nor with `closedform.notation.evaluation`,
by which the same formulas are checked before.
"""

from __future__ import annotations

from collections.abc import Iterator, Mapping
from typing import Any

from flint import acb, acb_mat, fmpq

from closedform.algebra.surds import SurdSum
from closedform.derivation.step import Matrix, Side, Symbol
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

__all__ = ["ball_at", "exact_at", "expressions_in", "matrix_at", "unit"]


def ball_at(formula: Expression, names: Mapping[str, Any]) -> Any:
    """Return the value of a formula as a complex ball at FLINT's current precision.

    Raises:  KeyError if a name has no value; ValueError for a power that is not whole.
    """
    match formula:
        case Number(value):
            return acb(fmpq(value.numerator, value.denominator))
        case Name(text):
            return names[text]
        case Negation(operand):
            return -ball_at(operand, names)
        case Sum(terms):
            total = ball_at(terms[0], names)
            for term in terms[1:]:
                total = total + ball_at(term, names)
            return total
        case Product(factors):
            product = ball_at(factors[0], names)
            for factor in factors[1:]:
                product = product * ball_at(factor, names)
            return product
        case Quotient(above, below):
            return ball_at(above, names) / ball_at(below, names)
        case Power(base, exponent):
            return ball_at(base, names) ** _whole(exponent)
        case Call(function, argument):
            return _CALLS[function](ball_at(argument, names))


_CALLS: dict[str, Any] = {
    "exp": lambda x: x.exp(),
    "sin": lambda x: x.sin(),
    "cos": lambda x: x.cos(),
    "sqrt": lambda x: x.sqrt(),
    "sinh": lambda x: (x.exp() - (-x).exp()) / 2,
    "cosh": lambda x: (x.exp() + (-x).exp()) / 2,
}


def exact_at(formula: Expression, names: Mapping[str, SurdSum]) -> SurdSum:
    """Return the value of a formula of numbers and square roots, exactly.

    Raises:  KeyError if a name has no value; ValueError for any other function, and for
             the root of a number that is not rational.
    """
    match formula:
        case Number(value):
            return SurdSum.rational(value)
        case Name(text):
            return names[text]
        case Negation(operand):
            return -exact_at(operand, names)
        case Sum(terms):
            return sum((exact_at(term, names) for term in terms), SurdSum(()))
        case Product(factors):
            product = SurdSum.rational(1)
            for factor in factors:
                product = product * exact_at(factor, names)
            return product
        case Quotient(above, below):
            return exact_at(above, names) / exact_at(below, names)
        case Power(base, exponent):
            return exact_at(base, names).power(_whole(exponent))
        case Call("sqrt", argument):
            return exact_at(argument, names).sqrt()
    raise ValueError(f"{formula} is not made of numbers and square roots")


def _whole(exponent: Expression) -> int:
    value = exact_at(exponent, {}).as_fraction()
    if value.denominator != 1:
        raise ValueError(f"the exponent {value} is not a whole number")
    return int(value)


def matrix_at(matrix: Matrix, names: Mapping[str, Any]) -> acb_mat:
    """Return a matrix of formulas, its front multiplied in, as complex balls."""
    front = None if matrix.front is None else ball_at(matrix.front, names)
    rows = [[ball_at(entry, names) for entry in row] for row in matrix.rows]
    if front is not None:
        rows = [[front * entry for entry in row] for row in rows]
    return acb_mat(rows)


def unit(n: int) -> acb_mat:
    """Return the unit matrix."""
    return acb_mat([[acb(int(i == k)) for k in range(n)] for i in range(n)])


def expressions_in(side: Side) -> Iterator[Expression]:
    """Return every formula in a side: itself, or in the symbols and matrices it is made of."""
    if isinstance(side, tuple):
        for part in side:
            yield from expressions_in(part)
    elif isinstance(side, Matrix):
        yield from () if side.front is None else (side.front,)
        for row in side.rows:
            yield from row
    elif isinstance(side, Symbol):
        yield from () if side.argument is None else (side.argument,)
        for part in side.parts:
            yield from expressions_in(part)
    else:
        yield side
