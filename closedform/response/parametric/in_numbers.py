"""Formulas with numbers in place: what does not hang on the time is worked out."""

from __future__ import annotations

from collections.abc import Sequence
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
from closedform.notation.terms import negated, opened, sum_of
from closedform.response.parametric.known import Known

__all__ = ["InNumbers", "decimal_formula", "in_numbers"]


@dataclass(frozen=True)
class _Part:
    """A weight without the time, and the functions of the time that it stands before."""

    weight: Expression
    functions: tuple[_Function, ...] = ()


@dataclass(frozen=True)
class _Terms:
    """A sum as one of several functions; a weight before it goes to each of its terms."""

    parts: tuple[_Part, ...]


_Function = Expression | _Terms


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
    written = writer.written(writer.parted(formula))
    return InNumbers(written, bool(writer.rounded & names_in(written)))


def decimal_formula(text: str) -> Expression:
    """Return a decimal as a formula, its sign outside."""
    sign, mantissa, exponent = _split(text)
    made: Expression = Name(mantissa)
    if exponent:
        made = product([made, Power(number(10), number(int(exponent)))])
    return Negation(made) if sign else made


def _split(text: str) -> tuple[bool, str, str]:
    mantissa, _, exponent = text.removeprefix("-").partition("e")
    return text.startswith("-"), mantissa, exponent


class _Writer:
    """Takes a formula apart into weights without the time and the functions beside them."""

    def __init__(self, known: Known, time: str, digits: int) -> None:
        self.known, self.time, self.digits = known, time, digits
        self.rounded: set[str] = set()

    def parted(self, formula: Expression) -> _Part:
        """Return weight and functions whose product is the formula.

        The weight is a formula without the time that is not worked out yet.
        """
        if self.time not in names_in(formula):
            return _Part(formula)
        match formula:
            case Negation(operand):
                part = self.parted(operand)
                return _Part(negated(part.weight), part.functions)
            case Product(factors):
                parts = [self.parted(factor) for factor in factors]
                functions = [function for part in parts for function in part.functions]
                functions.sort(key=lambda f: not isinstance(f, Name | Power))  # t e^(-t)
                return _Part(product(part.weight for part in parts), tuple(functions))
            case Quotient(above, below):
                return self._quotient(self.parted(above), self.parted(below))
            case Power(base, exponent):
                part = self.parted(base)
                inside = self.written(_Part(ONE, part.functions))
                raised = (Power(inside, exponent),) if part.functions else ()
                return _Part(Power(part.weight, exponent), raised)
            case Call(name, argument):
                inside = self.written(self.parted(argument))
                if inside == ZERO:
                    return _Part(ONE if name in ("exp", "cos", "cosh") else ZERO)
                return _Part(ONE, (Call(name, inside),))
            case Sum(terms):
                return self._sum([self.parted(term) for term in terms])
        return _Part(ONE, (formula,))

    def _quotient(self, above: _Part, below: _Part) -> _Part:
        weight = Quotient(above.weight, below.weight)
        if not below.functions:
            return _Part(weight, above.functions)
        sides = (self.written(_Part(ONE, part.functions)) for part in (above, below))
        return _Part(weight, (Quotient(*sides),))

    def _sum(self, parts: Sequence[_Part]) -> _Part:
        """Add up the weights of one function; leave out what is zero."""
        weights: dict[tuple[_Function, ...], list[Expression]] = {}
        for part in parts:
            weights.setdefault(part.functions, []).append(part.weight)
        standing = []
        for functions, several in weights.items():
            total = several[0] if len(several) == 1 else Sum(tuple(several))
            value = self.known.value(total)
            if value is None or not value.is_zero:
                standing.append(_Part(total, functions))
        if not standing:
            return _Part(ZERO)
        return standing[0] if len(standing) == 1 else _Part(ONE, (_Terms(tuple(standing)),))

    def written(self, part: _Part) -> Expression:
        """Return a part with one number in each of its terms."""
        sums = [f for f in part.functions if isinstance(f, _Terms)]
        plain_ones = [f for f in part.functions if not isinstance(f, _Terms)]
        if not sums:
            return self._weighted(part.weight, product(plain_ones) if plain_ones else None)
        first, *others = sums
        terms = [_Part(product([part.weight, t.weight]), t.functions) for t in first.parts]
        total = sum_of([self.written(term) for term in terms])
        if total == ZERO:
            return ZERO
        size = total.operand if isinstance(total, Negation) else total
        rest = [self.written(_Part(ONE, (other,))) for other in others]
        whole = product([*plain_ones, size, *rest])
        return opened(Negation(whole)) if isinstance(total, Negation) else whole

    def _weighted(self, weight: Expression, function: Expression | None) -> Expression:
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
            exact = self._rational(value.as_fraction())
            if exact is not None:
                return exact
        text = self.known.decimal(formula, self.digits)
        self.rounded.add(_split(text)[1])
        return decimal_formula(text)

    def _rational(self, value: Fraction) -> Expression | None:
        """Return a number that is short enough to stand as it is."""
        if value.denominator == 1 and abs(value) < 10**self.digits:
            return number(value)
        text = exact_decimal(value, self.digits)
        if Fraction(text) == value:
            return decimal_formula(text)
        length = len(str(abs(value.numerator))) + len(str(value.denominator))
        return number(value) if length <= self.digits else None
