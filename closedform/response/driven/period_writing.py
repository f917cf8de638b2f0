"""Writing what sums over periods are made of, from exact numbers: exponents, angles, amounts.

Exponents and angles are coefficient · (local time + c + k n), with coefficient, c and k exact;
sums of amounts times functions are written as the shortest formula, with placeholders for the
functions, which are put in afterwards.
"""

from __future__ import annotations

from collections.abc import Mapping, Sequence
from dataclasses import dataclass, field
from fractions import Fraction
from math import prod
from typing import Protocol

from closedform.algebra.field import Scalar
from closedform.algebra.parameter_field import ParameterField
from closedform.notation.expression import (
    ONE,
    ZERO,
    Call,
    Expression,
    Name,
    Negation,
    Number,
    Power,
    Product,
    Quotient,
    Sum,
    factors_of,
    names_in,
    operations,
    product,
)
from closedform.notation.terms import negated, opened, sum_of
from closedform.response.by_mode import ModePart
from closedform.response.driven.composition import put_in_place
from closedform.response.modes import Amount

__all__ = [
    "TIME",
    "Amounts",
    "Coefficient",
    "Held",
    "Linear",
    "Placeholders",
    "Weighted",
    "Writing",
    "joined",
    "linear",
    "put_in",
]

TIME = "?"
"""The variable of a sum with placeholders."""
Coefficient = object
"""A rate or a frequency: a surd sum or a name, or an element of the writing field."""


@dataclass(frozen=True, slots=True)
class Held:
    """One amount of a part: of t^power times its even function (1, cos, cosh) or its odd one."""

    power: int
    even: bool
    amount: Amount | Scalar


Amounts = tuple[Held, ...]


@dataclass(frozen=True, slots=True)
class Linear:
    """variable + constant + slope · number, the variable and the number by their names.

    The variable may be left out; `constant` and `slope` are elements of the model's field.
    """

    variable: str | None
    constant: Scalar
    slope: Scalar
    number: str = ""


@dataclass(frozen=True, slots=True)
class Weighted:
    """An amount times the placeholders of functions, None for 1."""

    part: ModePart
    amount: Amount | Scalar
    front: str | None
    kernel: str | None


@dataclass
class Placeholders:
    """Functions and the names that stand for them in a sum."""

    found: dict[str, Expression] = field(default_factory=dict)

    def name_of(self, formula: Expression) -> str | None:
        """Return the placeholder of a function, None for 1."""
        if formula == ONE:
            return None
        known = next((name for name, own in self.found.items() if own == formula), None)
        if known is None:
            known = f"?{len(self.found) + 1}"
            self.found[known] = formula
        return known


class Writing(Protocol):
    """How exact amounts, rates and frequencies become formulas."""

    def rate(self, part: ModePart) -> Coefficient:
        """Return the rate of a part."""

    def frequency(self, part: ModePart) -> Coefficient:
        """Return the frequency of a part that has one."""

    def amounts(self, part: ModePart) -> Amounts:
        """Return the amounts of a part, none zero."""

    def ratio(self, one: Amount | Scalar, other: Amount | Scalar) -> Fraction | None:
        """Return one / other, where that is a rational number."""

    def scaled(self, part: ModePart, factor: int) -> ModePart:
        """Return a part times a number."""

    def added(self, one: ModePart, other: ModePart) -> ModePart | None:
        """Return the sum of two parts of one mode; None where it has no short form."""

    def rational(self, amount: Amount | Scalar) -> tuple[ParameterField, Scalar] | None:
        """Return an amount as an element of rational functions, where it is one."""

    def right_angles(self, frequency: Coefficient, time: Scalar) -> int | None:
        """Return the number of right angles in frequency · time, where it is a whole one."""

    def element(self, wide: ParameterField, element: Scalar) -> Scalar:
        """Return an element of the model in a wider field of rational functions."""

    def term(
        self, coefficient: Coefficient | None, scale: Scalar, factors: Sequence[Expression]
    ) -> Expression:
        """Return a coefficient (None for 1) times an element of the model and formulas."""

    def sum(self, weighted: Sequence[Weighted]) -> Expression:
        """Return the shortest formula of a sum; its placeholders are those of `put_in`."""


def linear(
    writing: Writing,
    one: Scalar,
    coefficient: Coefficient,
    at: Linear,
    *,
    as_angle: bool = False,
) -> Expression:
    """Return coefficient · (variable + constant + slope · number), 0 where nothing is left.

    A bracket is opened where that is shorter; an angle also where it is as short.
    """
    inner: list[tuple[Scalar, Sequence[Expression]]] = []
    if at.variable is not None:
        inner.append((one, (Name(at.variable),)))
    if at.slope:
        inner.append((at.slope, (Name(at.number),)))
    if at.constant:
        inner.append((at.constant, ()))
    if not inner:
        return ZERO
    apart = opened(sum_of([writing.term(coefficient, s, factors) for s, factors in inner]))
    if len(inner) == 1:
        return apart
    inside = opened(sum_of([writing.term(None, s, factors) for s, factors in inner]))
    outside = writing.term(coefficient, one, [Name(TIME)])
    together = put_in_place(outside, {TIME: inside})  # its sign is kept outside
    forms = [apart, together] if as_angle else [together, apart]
    return min(forms, key=_length)


def _length(formula: Expression) -> int:
    """The operations of a term, a sign outside of it not counted: -(t - 32) is like 32 - t."""
    return operations(formula.operand if isinstance(formula, Negation) else formula)


def put_in(formula: Expression, functions: Mapping[str, Expression]) -> Expression:
    """Return what `Writing.sum` wrote, with the functions in the place of their placeholders.

    Their denominators join those of the products they stand in.
    """
    match formula:
        case Call(_, argument):
            found = [functions[name] for name in names_in(argument) if name in functions]
            return found[0] if found else formula
        case Negation(operand):
            return negated(put_in(operand, functions))
        case Sum(terms):
            return sum_of([put_in(term, functions) for term in terms])
        case Product(factors):
            return joined([put_in(factor, functions) for factor in factors])
        case Quotient(above, below):
            return _over(put_in(above, functions), put_in(below, functions))
        case Power(base, exponent):
            return Power(put_in(base, functions), exponent)
        case Name() | Number():
            return formula


def joined(factors: Sequence[Expression]) -> Expression:
    """The product of factors, numbers first, signs outside and one fraction of all."""
    above: list[Expression] = []
    below: list[Expression] = []
    minus = False
    for factor in factors:
        own = factor
        if isinstance(own, Negation):
            minus, own = not minus, own.operand
        if isinstance(own, Quotient):
            divisor, own = own.denominator, own.numerator
            if isinstance(divisor, Negation):
                minus, divisor = not minus, divisor.operand
            below += factors_of(divisor)
            if isinstance(own, Negation):
                minus, own = not minus, own.operand
        above += factors_of(own)
    if ZERO in above:
        return ZERO
    value = prod((f.value for f in above if isinstance(f, Number)), start=Fraction(1))
    top = product([Number(value), *(f for f in above if not isinstance(f, Number))])
    below = [f for f in below if f != ONE]
    found = top if not below else Quotient(top, product(below))
    return Negation(found) if minus else found


def _over(above: Expression, below: Expression) -> Expression:
    if isinstance(above, Negation):
        return Negation(_over(above.operand, below))
    if isinstance(above, Quotient):
        return Quotient(above.numerator, product((below, above.denominator)))
    return above if below == ONE else Quotient(above, below)
