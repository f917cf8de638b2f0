"""Functions that go by a name, as sin, det or the unit step, of exact values."""

from __future__ import annotations

from fractions import Fraction

from closedform.algebra.elementary import Element, NotElementaryError
from closedform.checking.errors import NotJudgedError
from closedform.checking.values.blocks import block_diagonal
from closedform.checking.values.matrices import ExactMatrix
from closedform.checking.values.scope import Scope, Value

__all__ = ["applied", "exponential_of"]

NUMERIC = frozenset({"exp", "ln", "sin", "cos", "tan", "sinh", "cosh", "tanh", "atan", "asin"})
NUMERIC |= {"acos", "sqrt", "abs", "re", "im", "conj", "arg", "asinh", "acosh", "atanh"}


def exponential_of(exponent: Value, scope: Scope) -> Value:
    """Return e to the power of a number, or of M t by the scope's exponential."""
    if isinstance(exponent, Element):
        return scope.field.exp(exponent)
    rate = exponent.mapped(Element.derivative)
    if scope.exponential is None or not rate.is_constant:
        raise NotElementaryError("the exponential of this matrix is not worked out")
    if not (exponent - rate.scaled(scope.field.t)).is_zero:
        raise NotElementaryError("the exponential of this matrix is not worked out")
    return scope.exponential(rate)


def applied(name: str, values: list[Value], scope: Scope) -> Value:
    """Return the value of a function by its name.  Raises NotJudgedError for an unknown one."""
    if name == "diag":
        return block_diagonal(values, scope.field)
    value = values[0]
    if isinstance(value, ExactMatrix):
        return _of_matrix(name, value, scope)
    match name:
        case "atan2":
            second = values[1]
            if isinstance(second, ExactMatrix):
                raise NotJudgedError("atan2 is applied to a matrix")
            return scope.field.atan2(value, second)
        case "step":
            return _step(value, scope)
        case "factorial":
            return _factorial(value, scope)
        case "transpose":
            return value
        case "cot" | "sec" | "csc" | "coth":
            over = {"cot": ("cos", "sin"), "sec": (None, "cos"), "csc": (None, "sin")}
            above, below = over.get(name, ("cosh", "sinh"))
            one = getattr(scope.field, above)(value) if above else scope.field.one
            return _checked(one) / _checked(getattr(scope.field, below)(value))
        case "inverse":
            return scope.field.one / value
        case _ if name in NUMERIC:
            return _checked(getattr(scope.field, name)(value))
    raise NotJudgedError(f"{name} has no value that can be decided exactly here")


def _checked(value: object) -> Element:
    if not isinstance(value, Element):
        raise TypeError(value)
    return value


def _of_matrix(name: str, value: ExactMatrix, scope: Scope) -> Value:
    match name:
        case "det":
            return value.determinant()
        case "trace":
            return value.trace()
        case "transpose":
            return value.transposed
        case "inverse":
            return value.inverse()
        case "adj":
            return value.inverse().scaled(value.determinant())
        case "exp":
            return exponential_of(value, scope)
        case "rank":
            return scope.field.number(Fraction(value.rank()))
        case "re" | "im" | "conj":
            return value.mapped(lambda entry: _checked(getattr(scope.field, name)(entry)))
    raise NotJudgedError(f"{name} of a matrix has no value here")


def _step(argument: Element, scope: Scope) -> Element:
    if scope.instant is None:
        raise NotJudgedError("a unit step stands where no time goes on")
    sign = argument.at(scope.instant).sign() if not argument.is_constant else argument.sign()
    if sign is None:
        raise NotJudgedError("it is not decided on which side of its instant a unit step is")
    return scope.field.one if sign >= 0 else scope.field.zero


def _factorial(value: Element, scope: Scope) -> Element:
    whole = value.as_fraction()
    if whole is None or whole.denominator != 1 or not 0 <= whole <= 100:
        raise NotJudgedError("a factorial is taken of something else than a small integer")
    result = 1
    for k in range(2, int(whole) + 1):
        result *= k
    return scope.field.number(Fraction(result))
