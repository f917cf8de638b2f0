"""Written formulas as certified numbers and matrices: balls that contain the true value."""

from __future__ import annotations

from collections.abc import Callable, Mapping
from dataclasses import dataclass, field

from flint import acb, arb, fmpq

from closedform.checking.balls.functions import (
    NoValueError,
    SizeMismatchError,
    UnknownNameError,
    apply_function,
    power,
)
from closedform.checking.balls.matrices import (
    Grid,
    Scaled,
    Value,
    apply_to_matrix,
    block_matrix,
    diagonal,
    matrix_power,
    plus,
    times,
)
from closedform.notation.written.tree import (
    Apply,
    Array,
    Constant,
    Evaluated,
    Identity,
    Jet,
    Literal,
    Negation,
    Piecewise,
    Power,
    Product,
    Quotient,
    Range,
    Sum,
    SumOver,
    Symbol,
    Written,
)

__all__ = [
    "NoValueError",
    "Quantities",
    "SizeMismatchError",
    "UnknownNameError",
    "enclose_matrix",
    "enclose_written",
]

Entry = arb | acb | Grid
Jets = Callable[[Jet], arb | acb] | Mapping[Jet, arb | acb]
_LONGEST_SUM = 10_000


@dataclass(frozen=True)
class Quantities:
    """Names with formulas in the variables and in earlier names, as a `Truth` has them.

    A name without formula gets its ball from `enclosures`, at FLINT's current precision.
    """

    formulas: tuple[tuple[str, Written | None], ...] = ()
    enclosures: Callable[[], Mapping[str, arb | acb]] = field(default=dict)

    def environment(self, values: Mapping[str, arb | acb]) -> dict[str, Entry]:
        """Return the values of all names: those given, and those that follow."""
        found: dict[str, Entry] = {**self.enclosures(), **values}
        for name, formula in self.formulas:
            if formula is not None and name not in values:
                found[name] = enclose_written(formula, found)
        return found


def enclose_written(
    tree: Written, environment: Mapping[str, Entry], jets: Jets | None = None
) -> acb:
    """Return a ball that contains the value of a formula, at FLINT's current precision.

    `environment` gives the numbers (or matrices) that names stand for, the time among them;
    `jets` those of functions of time and their derivatives.  Powers, roots and logarithms have
    their principal values.  Where the formula has no value (a division by zero) or a ball is
    too wide to tell, the result is a ball that is not finite.

    Raises:  NoValueError where something stands for no number: UnknownNameError for a name
             without entry, SizeMismatchError for matrices that cannot be joined.
    Source:  F. Johansson, Arb: efficient arbitrary-precision midpoint-radius interval
             arithmetic, IEEE Transactions on Computers 66 (2017).

    >>> enclose_written(Power(Symbol("x"), Negation(Symbol("y"))), {"x": acb(2), "y": acb(2)})
    0.250000000000000
    """
    return _number(tree, _Scope(environment, jets))


def enclose_matrix(
    tree: Written, environment: Mapping[str, Entry], jets: Jets | None = None
) -> Grid:
    """Return the entries of a matrix, by rows, as `enclose_written` does for a number.

    Products, sums, powers, inverses, transposes, blocks, `diag` and exp are worked out; a
    singular matrix has an inverse of balls that are not finite.

    Raises:  NoValueError as there, and for what is no matrix.
    """
    value = _value(tree, _Scope(environment, jets))
    if isinstance(value, list):
        return value
    raise NoValueError("the formula", "a number stands where a matrix should")


@dataclass(frozen=True, slots=True)
class _Scope:
    names: Mapping[str, Entry]
    jets: Jets | None

    def jet(self, jet: Jet) -> acb:
        given = self.jets
        if isinstance(given, Mapping):
            found = given.get(jet)
        else:
            found = given(jet) if given is not None else None
        if found is None:
            raise UnknownNameError(jet.name + "'" * jet.order)
        return acb(found)

    def with_name(self, name: str, value: acb) -> _Scope:
        return _Scope({**self.names, name: value}, self.jets)


def _number(tree: Written, scope: _Scope) -> acb:
    value = _value(tree, scope)
    if isinstance(value, acb):
        return value
    if isinstance(value, Scaled):
        raise NoValueError("the unit matrix", "it is no number")
    if len(value) == len(value[0]) == 1:
        return value[0][0]
    raise NoValueError(f"a {len(value)}×{len(value[0])} matrix", "a number is wanted")


def _value(tree: Written, scope: _Scope) -> Value:
    match tree:
        case Literal(value):
            return acb(arb(fmpq(value.numerator, value.denominator)))
        case Symbol(name):
            return _named(name, scope)
        case Product(factors):
            product: Value = _value(factors[0], scope)
            for factor in factors[1:]:
                product = times(product, _value(factor, scope))
            return product
        case Sum(terms):
            total: Value = _value(terms[0], scope)
            for term in terms[1:]:
                total = plus(total, _value(term, scope))
            return total
        case Negation(operand):
            return times(acb(-1), _value(operand, scope))
        case Quotient(above, below):
            return times(_value(above, scope), 1 / _number(below, scope))
        case Power(base, exponent):
            return _power(base, exponent, scope)
        case Constant(name):
            return _constant(name)
        case Apply(function, arguments):
            return _apply(function, [_value(a, scope) for a in arguments])
        case _:
            return _rarer(tree, scope)


def _rarer(tree: Written, scope: _Scope) -> Value:
    match tree:
        case Array(rows):
            return block_matrix([[_value(entry, scope) for entry in row] for row in rows])
        case Jet():
            return scope.jet(tree)
        case Identity(size):
            return Scaled(acb(1)) if size is None else diagonal([[[acb(1)]]] * size)
        case Piecewise(pieces):
            return _piecewise(pieces, scope)
        case Evaluated(body, variable, at, lower):
            upper = _value(body, scope.with_name(variable, _number(at, scope)))
            if lower is None:
                return upper
            below = _value(body, scope.with_name(variable, _number(lower, scope)))
            return plus(upper, times(acb(-1), below))
        case SumOver(body, variable, lower, upper_end):
            ends = [_number(end, scope).unique_fmpz() for end in (lower, upper_end)]
            if ends[0] is None or ends[1] is None or ends[1] - ends[0] > _LONGEST_SUM:
                raise NoValueError("the sum", "its bounds are not numbers that can be counted")
            total: Value = acb(0)
            for k in range(int(ends[0]), int(ends[1]) + 1):
                term = _value(body, scope.with_name(variable, acb(k)))
                total = term if k == ends[0] else plus(total, term)
            return total
        case _:
            what = type(tree).__name__.lower()
            raise NoValueError(f"this {what}", "it is not worked out as a number")


def _named(name: str, scope: _Scope) -> Value:
    try:
        value = scope.names[name]
    except KeyError:
        raise UnknownNameError(name) from None
    return value if isinstance(value, acb | list) else acb(value)


def _constant(name: str) -> acb:
    match name:
        case "e":
            return acb(1).exp()
        case "i":
            return acb(0, 1)
        case "pi":
            return acb.pi()
        case _:
            raise NoValueError("infinity", "it is no number")


def _power(base: Written, exponent: Written, scope: _Scope) -> Value:
    raised = _value(exponent, scope)
    if base == Constant("e"):
        return _apply("exp", [raised])
    if not isinstance(raised, acb):
        raise NoValueError("a power", "its exponent is a matrix, its base is not e")
    value = _value(base, scope)
    return power(value, raised) if isinstance(value, acb) else matrix_power(value, raised)


def _apply(function: str, arguments: list[Value]) -> Value:
    if function == "diag":
        return diagonal(arguments)
    numbers = [a for a in arguments if isinstance(a, acb)]
    if len(numbers) == len(arguments):
        return apply_function(function, numbers)
    if len(arguments) == 1:
        return apply_to_matrix(function, arguments[0])
    raise NoValueError(f"{function} of several arguments", "one of them is a matrix")


def _piecewise(
    pieces: tuple[tuple[Written, tuple[Range, ...] | None], ...], scope: _Scope
) -> Value:
    """The value of the first piece that applies, or a ball around all that may apply."""
    possible: list[acb] = []
    for body, ranges in pieces:
        known = _applies(ranges, scope)
        if known is False:
            continue
        possible.append(_number(body, scope))
        if known:
            break
    if not possible:
        raise NoValueError("the function given piece by piece", "no piece of it applies")
    union = possible[0]
    for value in possible[1:]:
        union = union.union(value)
    return union


def _applies(ranges: tuple[Range, ...] | None, scope: _Scope) -> bool | None:
    """Whether all comparisons hold; None where the balls do not tell."""
    known: bool | None = True
    for found in ranges or ():
        reals = [
            arb.pos_inf() if m == Constant("oo") else _number(m, scope).real for m in found.members
        ]
        for left, sign, right in zip(reals, found.signs, reals[1:], strict=False):
            match sign:
                case "<":
                    holds, fails = left < right, left >= right
                case "≤":
                    holds, fails = left <= right, left > right
                case ">":
                    holds, fails = left > right, left <= right
                case "≥":
                    holds, fails = left >= right, left < right
                case _:
                    holds, fails = left == right, not left.overlaps(right)
            if fails:
                return False
            known = known if holds else None
    return known
