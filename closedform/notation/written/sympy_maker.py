"""Making SymPy objects of trees: one method for each family of nodes."""

from __future__ import annotations

from collections.abc import Callable, Mapping
from functools import reduce
from operator import add, mul
from typing import Any

import sympy

from closedform.notation.written.sympy_names import FUNCTIONS, RELATIONS, named
from closedform.notation.written.tree import (
    EULER,
    Apply,
    Array,
    Constant,
    Declared,
    Derivative,
    Evaluated,
    Identity,
    Integral,
    Jet,
    Limit,
    Listing,
    Literal,
    Negation,
    Piecewise,
    PlusMinus,
    Power,
    Product,
    Quotient,
    Range,
    Sum,
    SumOver,
    Symbol,
    Transform,
    Written,
    walk,
)

__all__ = ["Maker", "Sizes"]

CONSTANTS = {"e": sympy.E, "i": sympy.I, "pi": sympy.pi, "oo": sympy.oo}
LAPLACE = sympy.Symbol("s")
Sizes = Mapping[str, tuple[int, int]]


class Maker:
    """Makes SymPy objects of trees, with the upper or the lower of the signs ±."""

    def __init__(self, declared: Declared, sizes: Sizes, sign: int) -> None:
        self.declared, self.sizes, self.sign = declared, sizes, sign
        self.time = sympy.Symbol(named(declared.time))

    def of(self, node: Written, unit: int | None = None) -> Any:
        """Return a tree as an object; `unit` is the size of a unit matrix inside, if known."""
        match node:
            case Literal(value):
                return sympy.Rational(value.numerator, value.denominator)
            case Constant(name):
                return CONSTANTS[name]
            case Symbol(name):
                return self._name(name)
            case Jet(name, order, at):
                return self._jet(name, order, at)
            case Negation(operand):
                return -self.of(operand, unit)
            case PlusMinus(operand, upper):
                return self.of(operand, unit) * (self.sign * upper)
            case Sum(terms):
                return self._combined(add, terms, unit)
            case Product(factors):
                return self._combined(mul, factors, unit)
            case Quotient(above, below):
                return _over(self.of(above, unit), self.of(below))
            case Power(base, exponent):
                return self._power(base, exponent, unit)
            case Apply(function, arguments):
                return self._applied(function, arguments)
            case Identity(size):
                n = size or unit
                return sympy.eye(n).as_immutable() if n else sympy.Identity(sympy.Symbol("n"))
        return self._other(node)

    def _other(self, node: Written) -> Any:
        match node:
            case Array(rows):
                return self._array(rows)
            case Listing(items):
                return [self.of(item) for item in items]
            case Range():
                return self._range(node)
            case Piecewise(pieces):
                return sympy.Piecewise(
                    *((self.of(v), sympy.And(*map(self._range, r or ()))) for v, r in pieces)
                )
            case Integral(body, variable, lower, upper):
                return sympy.Integral(self.of(body), self._bounds(variable, lower, upper))
            case SumOver(body, variable, lower, upper):
                return sympy.Sum(self.of(body), self._bounds(variable, lower, upper))
            case Limit(body, variable, point):
                at = self.of(point)
                return sympy.Limit(self.of(body), self._name(variable), at)
            case Transform(Jet(name, 0, None), False):
                return sympy.Symbol(f"L{named(name)}")
            case Transform(body, back):
                if back:
                    return sympy.InverseLaplaceTransform(self.of(body), LAPLACE, self.time, None)
                return sympy.LaplaceTransform(self.of(body), self.time, LAPLACE)
            case Evaluated(body, variable, at_, lower):
                made, name = self.of(body), self._name(variable)
                value = sympy.Subs(made, name, self.of(at_))
                return value if lower is None else value - sympy.Subs(made, name, self.of(lower))
            case Derivative(body, variable, order):
                return _derived(self.of(body), (self._name(variable), order))
        raise ValueError(f"no SymPy form of {type(node).__name__}")

    def _name(self, name: str) -> Any:
        if name not in self.declared.matrices:
            return sympy.Symbol(self._spelled(name))
        n = sympy.Symbol("n", integer=True, positive=True)
        return sympy.MatrixSymbol(named(name), *self.sizes.get(name, (n, n)))

    def _spelled(self, name: str) -> str:
        """Return a declared name as it is declared; another in the spelling of Python."""
        declared = name in self.declared.names and name != "lambda"
        return name if declared else named(name)

    def _jet(self, name: str, order: int, at: Written | None) -> Any:
        function = sympy.Function(self._spelled(name))
        if not order:
            return function(self.time if at is None else self.of(at))
        derived = sympy.Derivative(function(self.time), (self.time, order))
        return derived if at is None else sympy.Subs(derived, self.time, self.of(at))

    def _combined(
        self, operation: Callable[[Any, Any], Any], parts: tuple[Written, ...], unit: int | None
    ) -> Any:
        """Return a sum or product; what has a shape tells a unit matrix beside it its size."""
        unit = unit or next(filter(None, map(self._height, parts)), None)
        return reduce(operation, (self.of(part, unit) for part in parts))

    def _height(self, node: Written) -> int | None:
        """Return how many rows a matrix has that is written out or whose size is given."""
        for part in walk(node):
            if isinstance(part, Array):
                return len(part.rows)
            if isinstance(part, Symbol) and part.name in self.sizes:
                return self.sizes[part.name][0]
            if isinstance(part, Identity) and part.size:
                return part.size
        return None

    def _power(self, base: Written, exponent: Written, unit: int | None) -> Any:
        raised = self.of(exponent, unit)
        if base == EULER:
            return _exponential(raised)
        return self.of(base, unit) ** raised

    def _applied(self, function: str, arguments: tuple[Written, ...]) -> Any:
        if function == "det" and (name := _characteristic(arguments[0])):
            return sympy.Symbol(name)
        made = [self.of(a, self._height(a)) for a in arguments]
        if function == "exp":
            return _exponential(made[0])
        if function not in FUNCTIONS:
            raise ValueError(f"no SymPy form of the function {function}")
        return FUNCTIONS[function](*made)

    def _array(self, rows: tuple[tuple[Written, ...], ...]) -> Any:
        made = [[self.of(entry) for entry in row] for row in rows]
        if any(isinstance(e, sympy.MatrixBase) for row in made for e in row):
            return sympy.ImmutableMatrix(sympy.BlockMatrix(made).as_explicit())
        return sympy.ImmutableMatrix(made)

    def _range(self, given: Range) -> Any:
        made = [self.of(member) for member in given.members]
        pairs = zip(made, given.signs, made[1:], strict=False)
        return sympy.And(*(RELATIONS[sign](left, right) for left, sign, right in pairs))

    def _bounds(self, variable: str, lower: Written | None, upper: Written | None) -> Any:
        name = self._name(variable)
        return name if lower is None or upper is None else (name, self.of(lower), self.of(upper))


def _exponential(exponent: Any) -> Any:
    whole = isinstance(exponent, sympy.MatrixBase | sympy.MatrixExpr)
    return sympy.exp(exponent, evaluate=False) if whole else sympy.exp(exponent)


def _over(above: Any, below: Any) -> Any:
    whole = isinstance(below, sympy.MatrixBase | sympy.MatrixExpr)
    return above * below**-1 if whole else above / below


def _derived(made: Any, by: tuple[Any, int]) -> Any:
    if isinstance(made, sympy.MatrixBase):
        return made.applyfunc(lambda entry: sympy.Derivative(entry, by))
    return sympy.Derivative(made, by)


def _characteristic(node: Written) -> str:
    """Return the name of a characteristic polynomial det(s*I - A), empty if it is none."""
    match node:
        case Sum((scaled, Negation(Symbol(name)))) if _is_scaled_unit(scaled):
            return f"charpoly_{named(name)}"
        case Sum((Symbol(name), Negation(scaled))) if _is_scaled_unit(scaled):
            return f"charpoly_{named(name)}_neg"
    return ""


def _is_scaled_unit(node: Written) -> bool:
    match node:
        case Product((Symbol(), Identity())) | Product((Identity(), Symbol())):
            return True
    return False
