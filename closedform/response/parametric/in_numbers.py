"""Formulas with numbers in place: what does not hang on the time is worked out."""

from __future__ import annotations

from dataclasses import dataclass
from fractions import Fraction

from closedform.algebra.enclosure import exact_decimal
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
    names_in,
    number,
    product,
)
from closedform.notation.terms import negated, sum_of
from closedform.response.parametric.known import Known

__all__ = ["InNumbers", "decimal_formula", "in_numbers"]

Part = tuple[Expression, Expression | None]
"""A weight without the time, and the function that it stands before, if any."""


@dataclass(frozen=True)
class InNumbers:
    """A formula in the time alone; `rounded` says whether a number in it is.

    A decimal is a `Name` that spells it: 0.25, or 1.2 times a power of ten.
    """

    formula: Expression
    rounded: bool


def in_numbers(formula: Expression, known: Known, time: str, digits: int) -> InNumbers:
    """Return a formula of a case with the values put in and the arithmetic done.

    Every number is rational and exact, if its decimal or its numerator and denominator have
    up to `digits` digits, and else correctly rounded to them.

    Raises UnsettledError for a number that is 0 without this being known exactly.
    """
    writer = _Writer(known, time, digits)
    written = writer.written(*writer.parted(formula))
    return InNumbers(written, writer.rounded)


def decimal_formula(text: str) -> Expression:
    """Return a decimal as a formula, its sign outside."""
    sign, digits = text.startswith("-"), text.removeprefix("-")
    mantissa, _, exponent = digits.partition("e")
    made: Expression = Name(mantissa) if "." in mantissa else number(Fraction(mantissa))
    if exponent:
        power = Power(number(10), number(int(exponent)))
        made = product([made, power])
    return Negation(made) if sign else made


class _Writer:
    """Takes a formula apart into weights without the time and the functions beside them."""

    def __init__(self, known: Known, time: str, digits: int) -> None:
        self.known, self.time, self.digits = known, time, digits
        self.rounded = False

    def parted(self, formula: Expression) -> Part:
        """Return (weight, function) with formula = weight · function, or weight alone.

        The weight is a formula without the time that is not worked out yet.
        """
        if self.time not in names_in(formula):
            return formula, None
        match formula:
            case Negation(operand):
                weight, function = self.parted(operand)
                return negated(weight), function
            case Product(factors):
                parts = [self.parted(factor) for factor in factors]
                functions = [function for _, function in parts if function is not None]
                functions.sort(key=lambda f: not isinstance(f, Name | Power))  # t e^(-t)
                whole = product(functions) if functions else None
                return product(weight for weight, _ in parts), whole
            case Quotient(above, below):
                return self._quotient(self.parted(above), self.parted(below))
            case Power(base, exponent):
                weight, function = self.parted(base)
                raised = None if function is None else Power(function, exponent)
                return Power(weight, exponent), raised
            case Call(name, argument):
                inside = self.written(*self.parted(argument))
                if inside == ZERO:
                    return (ONE if name in ("exp", "cos", "cosh") else ZERO), None
                return ONE, Call(name, inside)
            case Sum(terms):
                return self._sum([self.parted(term) for term in terms])
        return ONE, formula

    def _quotient(self, above: Part, below: Part) -> Part:
        weight = Quotient(above[0], below[0])
        if below[1] is None:
            return weight, above[1]
        return weight, Quotient(ONE if above[1] is None else above[1], below[1])

    def _sum(self, parts: list[Part]) -> Part:
        """Add up the constants, then the weights of one function; leave out what is zero."""
        weights: dict[Expression | None, list[Expression]] = {}
        for weight, function in parts:
            weights.setdefault(function, []).append(weight)
        standing = []
        for function, several in weights.items():
            total = several[0] if len(several) == 1 else Sum(tuple(several))
            value = self.known.value(total)
            if value is None or not value.is_zero:
                standing.append((total, function))
        if not standing:
            return ZERO, None
        if len(standing) == 1:
            return standing[0]
        return ONE, sum_of([self.written(*part) for part in standing])

    def written(self, weight: Expression, function: Expression | None) -> Expression:
        """Return weight · function with the weight as one number."""
        value = self._number(weight)
        if function is None or value == ZERO:
            return value
        size = value.operand if isinstance(value, Negation) else value
        whole: Expression = product([size, function])
        if isinstance(size, Number) and size.value.denominator > 1:
            above = product([number(size.value.numerator), function])
            whole = Quotient(above, number(size.value.denominator))
        return Negation(whole) if isinstance(value, Negation) else whole

    def _number(self, formula: Expression) -> Expression:
        value = self.known.value(formula)
        if value is not None and value.is_rational:
            return self._rational(value.as_fraction())
        self.rounded = True
        return decimal_formula(self.known.decimal(formula, self.digits))

    def _rational(self, value: Fraction) -> Expression:
        text = exact_decimal(value, self.digits)
        if Fraction(text) == value:
            return decimal_formula(text)
        if len(str(abs(value.numerator))) + len(str(value.denominator)) <= self.digits:
            return number(value)
        self.rounded = True
        return decimal_formula(text)
