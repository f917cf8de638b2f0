"""The exact value of what was written: a number, a function of time, or a matrix of such."""

from __future__ import annotations

from collections.abc import Callable, Mapping
from dataclasses import dataclass, replace
from dataclasses import field as dataclass_field
from fractions import Fraction

from closedform.algebra.elementary import Element, ElementaryField, NotElementaryError
from closedform.checking.errors import NotJudgedError, UnknownNameError
from closedform.checking.values.blocks import block_diagonal, block_matrix
from closedform.checking.values.matrices import ExactMatrix, identity
from closedform.notation.written.tree import (
    EULER,
    INFINITY,
    Apply,
    Array,
    Constant,
    Derivative,
    Evaluated,
    Identity,
    Integral,
    Jet,
    Limit,
    Literal,
    Negation,
    Piecewise,
    PlusMinus,
    Power,
    Product,
    Quotient,
    Range,
    Sum,
    Symbol,
    Transform,
    Written,
    walk,
)

__all__ = ["HELD", "Scope", "Value", "applies", "exact"]

Value = Element | ExactMatrix
HELD = "held time"
"""The name of the time where an integral over another variable holds it."""
NUMERIC = frozenset({"exp", "ln", "sin", "cos", "tan", "sinh", "cosh", "tanh", "atan", "asin"})
NUMERIC |= {"acos", "sqrt", "abs", "re", "im", "conj", "arg", "asinh", "acosh", "atanh"}


@dataclass(frozen=True)
class Scope:
    """What names mean where a formula is evaluated.

    `symbols` are numbers and matrices, `jets` functions of time by (name, order).  Where steps
    and pieces occur, the value is that on the interval in which `instant` lies, which may be
    compared with constants by `below`.  `exponential` gives e^(Mt) for a constant matrix M.
    """

    field: ElementaryField
    time: str
    symbols: Mapping[str, Value] = dataclass_field(default_factory=dict)
    jets: Mapping[tuple[str, int], Value] = dataclass_field(default_factory=dict)
    instant: Element | None = None
    exponential: Callable[[ExactMatrix], ExactMatrix] | None = None
    size: int | None = None
    moment: Callable[[str, int, Element | None], Value | None] | None = None
    """Value of a function of time at an instant, on whichever interval; None is infinity."""
    in_pieces: bool = False
    """Whether the functions have other formulas on other intervals."""

    def with_symbols(self, more: Mapping[str, Value]) -> Scope:
        """Return the scope with further names, which win over its own."""
        return replace(self, symbols={**self.symbols, **more})


def exact(node: Written, scope: Scope) -> Value:
    """Return the exact value of a formula.

    Raises:  UnknownNameError for a name without meaning; SizeError for matrices that do not
             fit; NotElementaryError for what lies outside the exact algebra;
             NotJudgedError for kinds of formulas that have no value here; ZeroDivisionError.
    """
    match node:
        case Literal(value):
            return scope.field.number(value)
        case Symbol(name):
            return _symbol(name, scope)
        case Negation(operand):
            return -exact(operand, scope)
        case Sum(terms):
            return _sum(terms, scope)
        case Product(factors):
            return _product([exact(factor, scope) for factor in factors])
        case Quotient(above, below):
            return _quotient(exact(above, scope), exact(below, scope))
        case Power():
            return _power(node, scope)
        case Apply():
            return _apply(node, scope)
    return _other(node, scope)


def _other(node: Written, scope: Scope) -> Value:
    match node:
        case Constant():
            return _constant(node, scope)
        case Jet():
            return _jet(node, scope)
        case Array(rows):
            return block_matrix([[exact(e, scope) for e in row] for row in rows], scope.field)
        case Identity(size):
            if size is None and scope.size is None:
                raise NotJudgedError("the size of the unit matrix is not known")
            return identity(scope.field, size or scope.size or 1)
    return _rarer(node, scope)


def _rarer(node: Written, scope: Scope) -> Value:
    match node:
        case Piecewise(pieces):
            for inside, ranges in pieces:
                if ranges is None or all(applies(range_, scope) for range_ in ranges):
                    return exact(inside, scope)
            return scope.field.zero
        case Evaluated(body, variable, at, lower):
            upper = _put(body, variable, at, scope)
            return (
                upper if lower is None else _difference(upper, _put(body, variable, lower, scope))
            )
        case Derivative(body, variable, order) if variable == scope.time:
            value = exact(body, scope)
            for _ in range(order):
                value = _entrywise(value, Element.derivative)
            return value
        case Limit(body, variable, Constant("oo")) if variable == scope.time:
            return _entrywise(exact(body, scope), _limit)
        case Integral(body, variable, lower, upper) if lower is not None and upper is not None:
            return _integral(body, variable, lower, upper, scope)
        case PlusMinus():
            raise NotJudgedError("plus-or-minus stands for two values where one is wanted")
    kind = {Transform: "a transform", Range: "a comparison"}.get(type(node), "it")
    raise NotJudgedError(f"{kind} has no value that can be decided exactly here")


def _constant(node: Constant, scope: Scope) -> Element:
    match node.name:
        case "e":
            return scope.field.e
        case "i":
            return scope.field.i
        case "pi":
            return scope.field.pi
    raise NotJudgedError("infinity is no number")


def _symbol(name: str, scope: Scope) -> Value:
    if name in scope.symbols:
        return scope.symbols[name]
    if name == scope.time:
        return scope.field.t
    raise UnknownNameError(name)


def _jet(node: Jet, scope: Scope) -> Value:
    known = scope.jets.get((node.name, node.order))
    if known is None:
        found = [order for name, order in scope.jets if name == node.name and order < node.order]
        if not found:
            raise UnknownNameError(node.name + "'" * node.order)
        known = scope.jets[node.name, max(found)]
        for _ in range(node.order - max(found)):
            known = _entrywise(known, Element.derivative)
    if node.at is None or node.at == Symbol(scope.time):
        return known
    endless = node.at == INFINITY
    at = None if endless else exact(node.at, scope)
    if isinstance(at, ExactMatrix):
        raise NotJudgedError("an instant is a number, not a matrix")
    if scope.moment is not None and (at is None or at.is_constant):
        value = scope.moment(node.name, node.order, at)
        if value is not None:
            return value
    if at is None:
        return _entrywise(known, _limit)
    return _entrywise(known, lambda value: value.at(at))


def _sum(terms: tuple[Written, ...], scope: Scope) -> Value:
    total: Value | None = None
    for term in terms:
        value = exact(term, scope)
        total = value if total is None else _added(total, value)
    assert total is not None  # noqa: S101  a sum has terms
    return total


def _added(one: Value, other: Value) -> Value:
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


def _difference(one: Value, other: Value) -> Value:
    return _added(one, -other)


def _product(values: list[Value]) -> Value:
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


def _quotient(above: Value, below: Value) -> Value:
    if isinstance(below, ExactMatrix):
        raise NotJudgedError("something is divided by a matrix")
    if isinstance(above, ExactMatrix):
        return above.mapped(lambda entry: entry / below)
    return above / below


def _power(node: Power, scope: Scope) -> Value:
    if node.base == EULER:
        return _exponential(exact(node.exponent, scope), scope)
    base, exponent = exact(node.base, scope), exact(node.exponent, scope)
    if isinstance(exponent, ExactMatrix):
        raise NotJudgedError("a matrix stands in an exponent of something else than e")
    rational = exponent.as_fraction()
    if isinstance(base, ExactMatrix):
        if rational is None or rational.denominator != 1:
            raise NotJudgedError("a matrix has a power that is no integer")
        return base.power(int(rational))
    if rational == 0 and base.is_zero:
        raise NotJudgedError("zero to the power of zero, which has no agreed value")
    if rational is not None and rational.denominator == 1:
        return base ** int(rational)
    if rational is not None:
        return scope.field.root(base, rational.denominator) ** rational.numerator
    return scope.field.exp(exponent * scope.field.ln(base))


def _exponential(exponent: Value, scope: Scope) -> Value:
    if isinstance(exponent, Element):
        return scope.field.exp(exponent)
    rate = exponent.mapped(Element.derivative)
    if scope.exponential is None or not rate.is_constant:
        raise NotElementaryError("the exponential of this matrix is not worked out")
    if not (exponent - rate.scaled(scope.field.t)).is_zero:
        raise NotElementaryError("the exponential of this matrix is not worked out")
    return scope.exponential(rate)


def _apply(node: Apply, scope: Scope) -> Value:
    name, values = node.function, [exact(argument, scope) for argument in node.arguments]
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
            return _exponential(value, scope)
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


def applies(range_: Range, scope: Scope) -> bool:
    """Whether a range holds at the instant of the scope."""
    if scope.instant is None:
        raise NotJudgedError("a formula by pieces stands where no time goes on")
    members = [exact(member, scope) for member in range_.members]
    for one, sign, other in zip(members, range_.signs, members[1:], strict=False):
        if isinstance(one, ExactMatrix) or isinstance(other, ExactMatrix):
            raise NotJudgedError("matrices are compared")
        gap = (other - one).at(scope.instant)
        difference = gap.sign()
        if difference is None and sign in ("=", "≠") and not gap.is_zero:
            difference = 1
        if difference is None:
            raise NotJudgedError("the parameters do not decide in which piece an instant lies")
        if not {
            "<": difference > 0,
            "≤": difference >= 0,
            ">": difference < 0,
            "≥": difference <= 0,
            "=": difference == 0,
            "≠": difference != 0,
        }.get(sign, False):
            return False
    return True


def _factorial(value: Element, scope: Scope) -> Element:
    whole = value.as_fraction()
    if whole is None or whole.denominator != 1 or not 0 <= whole <= 100:
        raise NotJudgedError("a factorial is taken of something else than a small integer")
    result = 1
    for k in range(2, int(whole) + 1):
        result *= k
    return scope.field.number(Fraction(result))


def _limit(value: Element) -> Element:
    found = value.limit()
    if found is None:
        raise NotJudgedError("it has no limit as the time goes on, or none that is decided")
    return found


def _entrywise(value: Value, change: Callable[[Element], Element]) -> Value:
    return value.mapped(change) if isinstance(value, ExactMatrix) else change(value)


def _put(body: Written, variable: str, at: Written, scope: Scope) -> Value:
    """Return a body at a value of a variable."""
    if variable == scope.time:
        instant = exact(at, scope)
        if isinstance(instant, ExactMatrix):
            raise NotJudgedError("an instant is a number, not a matrix")
        return _entrywise(exact(body, scope), lambda value: value.at(instant))
    return exact(body, scope.with_symbols({variable: exact(at, scope)}))


def _integral(body: Written, variable: str, lower: Written, upper: Written, scope: Scope) -> Value:
    """Return a definite integral over a variable, as that of a function of time.

    The variable takes the time's place; where the time itself occurs in the body, it is a
    constant meanwhile.
    """
    if scope.in_pieces and any(isinstance(node, Jet) for node in walk(body)):
        raise NotJudgedError("an integral runs over functions that are given by pieces")
    field_, held = scope.field, f"{HELD} {scope.time}"
    inner = replace(scope, time=variable, instant=None)
    inner = inner.with_symbols({scope.time: field_.name(held)})
    value = exact(body, inner)
    if isinstance(value, ExactMatrix):
        raise NotJudgedError("an integral of a matrix has no value here")
    antiderivative = value.integral()
    ends = []
    for end in (upper, lower):
        if end == INFINITY:
            ends.append(_limit(antiderivative))
            continue
        at = exact(end, scope)
        if isinstance(at, ExactMatrix):
            raise NotJudgedError("a bound of an integral is a number, not a matrix")
        ends.append(antiderivative.at(at).substituted({held: field_.t}))
    return ends[0] - ends[1]
