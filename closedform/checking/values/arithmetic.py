"""Sums, products and quotients of exact values, numbers or matrices."""

from __future__ import annotations

from collections.abc import Callable

from closedform.algebra.elementary import Element
from closedform.checking.errors import NotJudgedError
from closedform.checking.values.matrices import ExactMatrix
from closedform.checking.values.scope import Value

__all__ = ["added", "difference_of", "entrywise", "limit_of", "product_of", "quotient_of"]


def added(one: Value, other: Value) -> Value:
    """Return a sum.  Raises NotJudgedError for a matrix and a number that is not zero."""
    match one, other:
        case Element(), Element():
            return one + other
        case ExactMatrix(), ExactMatrix():
            return one + other
        case ExactMatrix(), Element():
            matrix, number = one, other
        case Element(), ExactMatrix():
            matrix, number = other, one
    if number.is_zero:
        return matrix
    raise NotJudgedError("a number is added to a matrix")


def difference_of(one: Value, other: Value) -> Value:
    """Return a difference, under the conditions of `added`."""
    return added(one, -other)


def product_of(values: list[Value]) -> Value:
    """Return the product of one or more values, in their order."""
    result = values[0]
    for value in values[1:]:
        match result, value:
            case Element(), Element():
                result = result * value
            case Element(), ExactMatrix():
                result = value.scaled(result)
            case ExactMatrix(), Element():
                result = result.scaled(value)
            case ExactMatrix(), ExactMatrix():
                if result.shape == (1, 1) and value.shape[0] != 1:
                    result = value.scaled(result.rows[0][0])
                else:
                    result = result @ value
    return result


def quotient_of(above: Value, below: Value) -> Value:
    """Return a quotient.  Raises NotJudgedError for a matrix below, ZeroDivisionError."""
    if isinstance(below, ExactMatrix):
        raise NotJudgedError("something is divided by a matrix")
    if isinstance(above, ExactMatrix):
        return above.mapped(lambda entry: entry / below)
    return above / below


def limit_of(value: Element) -> Element:
    """Return the limit as the time goes on.  Raises NotJudgedError where there is none."""
    found = value.limit()
    if found is None:
        raise NotJudgedError("it has no limit as the time goes on, or none that is decided")
    return found


def entrywise(value: Value, change: Callable[[Element], Element]) -> Value:
    """Return a number, or every entry of a matrix, with a function applied to it."""
    return value.mapped(change) if isinstance(value, ExactMatrix) else change(value)
