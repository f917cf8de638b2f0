"""Formulas in printed numbers: their values, and how fast they change with each number.

The unknowns are real, so parts and absolute values of complex numbers have slopes too.
"""

from __future__ import annotations

from collections.abc import Callable, Iterable, Mapping, Sequence

from flint import acb, arb

from closedform.checking.balls.enclosing import enclose_written
from closedform.checking.balls.functions import NoValueError, apply_function, power
from closedform.checking.digits.unknowns import index_of
from closedform.notation.written.tree import (
    EULER,
    Apply,
    Negation,
    Power,
    Product,
    Quotient,
    Sum,
    Written,
    walk,
)

__all__ = ["Plan", "Slopes", "planned"]

Slopes = dict[int, acb]
"""The derivative by each unknown that matters, by its index."""
Varied = tuple[acb, Slopes]
Plan = Callable[[Sequence[acb]], Varied]
"""From values of the unknowns to the value of a formula and its slopes."""


def planned(tree: Written, environment: Mapping[str, arb | acb | list[list[acb]]]) -> Plan:
    """Return a formula, its unknowns numbered, as a function of them.

    All else is worked out once, at FLINT's current precision.
    Raises:  NoValueError as `enclose_written` does.
    """

    def plan(node: Written) -> Plan:
        index = index_of(node)
        if index is not None:
            return lambda u: (u[index], {index: acb(1)})
        if all(index_of(part) is None for part in walk(node)):
            value = enclose_written(node, environment)
            return lambda _: (value, {})
        match node:
            case Sum(terms):
                return _sum([plan(term) for term in terms])
            case Product(factors):
                return _product([plan(factor) for factor in factors])
            case Negation(operand):
                return _chain(plan(operand), lambda z: (-z, acb(-1)))
            case Quotient(above, below):
                return _product([plan(above), _chain(plan(below), _inverse)])
            case Power(base, exponent) if base == EULER:
                return _chain(plan(exponent), _exponential)
            case Power(base, exponent):
                return _power(plan(base), plan(exponent))
            case Apply(function, arguments):
                return _applied(function, [plan(a) for a in arguments])
            case _:
                raise NoValueError("a printed number", "nothing follows from a change of it here")

    return plan(tree)


def _sum(parts: Sequence[Plan]) -> Plan:
    def total(u: Sequence[acb]) -> Varied:
        values, slopes = zip(*(part(u) for part in parts), strict=True)
        return sum(values, acb(0)), _merged(slopes)

    return total


def _merged(several: Iterable[Slopes]) -> Slopes:
    merged: Slopes = {}
    for slopes in several:
        merged.update(slopes)  # no unknown stands in two places
    return merged


def _product(parts: Sequence[Plan]) -> Plan:
    def product(u: Sequence[acb]) -> Varied:
        value, slopes = parts[0](u)
        for part in parts[1:]:
            other, others = part(u)
            slopes = {i: d * other for i, d in slopes.items()}
            slopes.update({i: value * d for i, d in others.items()})
            value = value * other
        return value, slopes

    return product


def _chain(inner: Plan, outer: Callable[[acb], tuple[acb, acb]]) -> Plan:
    def chained(u: Sequence[acb]) -> Varied:
        z, slopes = inner(u)
        value, slope = outer(z)
        return value, {i: slope * d for i, d in slopes.items()}

    return chained


def _inverse(z: acb) -> tuple[acb, acb]:
    value = 1 / z
    return value, -value * value


def _exponential(z: acb) -> tuple[acb, acb]:
    value = z.exp()
    return value, value


def _power(base: Plan, exponent: Plan) -> Plan:
    def raised(u: Sequence[acb]) -> Varied:
        (b, slopes), (e, others) = base(u), exponent(u)
        value = power(b, e)
        found: Slopes = {}
        if slopes:
            slope = e * power(b, e - 1)
            found = {i: slope * d for i, d in slopes.items()}
        if others:
            slope = value * b.log()
            found.update({i: slope * d for i, d in others.items()})
        return value, found

    return raised


def _applied(function: str, parts: Sequence[Plan]) -> Plan:
    def applied(u: Sequence[acb]) -> Varied:
        arguments, slopes = zip(*(part(u) for part in parts), strict=True)
        value = apply_function(function, list(arguments))
        if function in _FACTORS:
            factor = _FACTORS[function](arguments[0], value)
            return value, {i: factor * d for i, d in slopes[0].items()}
        if function in _PARTS:
            change = _PARTS[function]
            return value, {i: acb(change(arguments[0], d)) for i, d in slopes[0].items()}
        if function == "atan2":
            y, x = arguments
            square = x * x + y * y
            return value, {
                **{i: x * d / square for i, d in slopes[0].items()},
                **{i: -y * d / square for i, d in slopes[1].items()},
            }
        chosen = [j for j, z in enumerate(arguments) if z.overlaps(value)]
        if len(chosen) == 1 and function in ("min", "max"):
            return value, slopes[chosen[0]]
        return value, {i: acb(arb.nan()) for found in slopes for i in found}

    return applied


def _logarithm_of_ten() -> arb:
    return arb(10).log()


_FACTORS: dict[str, Callable[[acb, acb], acb]] = {
    "exp": lambda _, v: v,
    "sin": lambda z, _: z.cos(),
    "cos": lambda z, _: -z.sin(),
    "tan": lambda _, v: 1 + v * v,
    "cot": lambda _, v: -1 - v * v,
    "sec": lambda z, v: v * z.tan(),
    "csc": lambda z, v: -v * z.cot(),
    "sinh": lambda z, _: z.cosh(),
    "cosh": lambda z, _: z.sinh(),
    "tanh": lambda _, v: 1 - v * v,
    "coth": lambda _, v: 1 - v * v,
    "asin": lambda z, _: 1 / (1 - z * z).sqrt(),
    "acos": lambda z, _: -1 / (1 - z * z).sqrt(),
    "atan": lambda z, _: 1 / (1 + z * z),
    "asinh": lambda z, _: 1 / (1 + z * z).sqrt(),
    "acosh": lambda z, _: 1 / ((z - 1).sqrt() * (z + 1).sqrt()),
    "atanh": lambda z, _: 1 / (1 - z * z),
    "ln": lambda z, _: 1 / z,
    "log10": lambda z, _: 1 / (z * _logarithm_of_ten()),
    "sqrt": lambda _, v: 1 / (2 * v),
    "factorial": lambda z, v: v * (z + 1).digamma(),
}
"""The derivative of a function at z, where it has the value v."""
_PARTS: dict[str, Callable[[acb, acb], acb | arb]] = {
    "re": lambda _, d: d.real,
    "im": lambda _, d: d.imag,
    "conj": lambda _, d: d.conjugate(),
    "abs": lambda z, d: (z.conjugate() * d).real / abs(z),
    "arg": lambda z, d: (z.conjugate() * d).imag / abs(z) ** 2,
    "sign": lambda z, _: arb(0) if not z.real.contains(0) else arb.nan(),
    "step": lambda z, _: arb(0) if not z.real.contains(0) else arb.nan(),
    "delta": lambda z, _: arb(0) if not z.real.contains(0) else arb.nan(),
}
"""The change of a function at z as z changes by d and stays on a curve of a real unknown."""
