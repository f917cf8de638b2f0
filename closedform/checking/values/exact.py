"""The exact value of what was written: a number, a function of time, or a matrix of such."""

from __future__ import annotations

from dataclasses import replace

from closedform.algebra.elementary import Element
from closedform.checking.errors import NotJudgedError, UnknownNameError
from closedform.checking.values.arithmetic import (
    added,
    difference_of,
    entrywise,
    limit_of,
    product_of,
    quotient_of,
)
from closedform.checking.values.blocks import block_matrix
from closedform.checking.values.matrices import ExactMatrix, identity
from closedform.checking.values.named_functions import applied, exponential_of
from closedform.checking.values.scope import HELD, Scope, Value
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

__all__ = ["applies", "exact"]


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
            return product_of([exact(factor, scope) for factor in factors])
        case Quotient(above, below):
            return quotient_of(exact(above, scope), exact(below, scope))
        case Power():
            return _power(node, scope)
        case Apply(function, arguments):
            return applied(function, [exact(argument, scope) for argument in arguments], scope)
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
                upper if lower is None else difference_of(upper, _put(body, variable, lower, scope))
            )
        case Derivative(body, variable, order) if variable == scope.time:
            value = exact(body, scope)
            for _ in range(order):
                value = entrywise(value, Element.derivative)
            return value
        case Limit(body, variable, Constant("oo")) if variable == scope.time:
            return entrywise(exact(body, scope), limit_of)
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
            known = entrywise(known, Element.derivative)
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
        return entrywise(known, limit_of)
    return entrywise(known, lambda value: value.at(at))


def _sum(terms: tuple[Written, ...], scope: Scope) -> Value:
    total: Value | None = None
    for term in terms:
        value = exact(term, scope)
        total = value if total is None else added(total, value)
    assert total is not None  # noqa: S101  a sum has terms
    return total


def _power(node: Power, scope: Scope) -> Value:
    if node.base == EULER:
        return exponential_of(exact(node.exponent, scope), scope)
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


def _put(body: Written, variable: str, at: Written, scope: Scope) -> Value:
    """Return a body at a value of a variable."""
    if variable == scope.time:
        instant = exact(at, scope)
        if isinstance(instant, ExactMatrix):
            raise NotJudgedError("an instant is a number, not a matrix")
        return entrywise(exact(body, scope), lambda value: value.at(instant))
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
            ends.append(limit_of(antiderivative))
            continue
        at = exact(end, scope)
        if isinstance(at, ExactMatrix):
            raise NotJudgedError("a bound of an integral is a number, not a matrix")
        ends.append(antiderivative.at(at).substituted({held: field_.t}))
    return ends[0] - ends[1]
