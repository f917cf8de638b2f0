"""Formulas with numbers in place: what does not hang on the time is worked out."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass
from fractions import Fraction

from flint import ctx

from closedform.algebra.enclosure import exact_decimal
from closedform.notation.evaluation import enclose
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
from closedform.notation.plain import plain
from closedform.notation.terms import opened, sum_of, surd_formula
from closedform.response.parametric.known import Known

__all__ = ["InNumbers", "decimal_formula", "in_numbers"]


HALF = Number(Fraction(1, 2))
CLOSE = 10
"""Two rates are close if their mean is so many times their distance from it."""


@dataclass(frozen=True)
class _Exponential:
    """e^(rate t), the rate a formula without the time; `variable` is t or another that is kept."""

    rate: Expression
    variable: Name


@dataclass(frozen=True)
class _Part:
    """A weight without the time, and the functions of the time that it stands before."""

    weight: Expression
    functions: tuple[_Function, ...] = ()

    def times(self, weight: Expression) -> _Part:
        """Return the part with one more factor in its weight."""
        return _Part(product([weight, self.weight]), self.functions)

    @property
    def terms(self) -> tuple[_Part, ...]:
        """The terms of a part that is a weight before a sum; else the part itself."""
        match self.functions:
            case (_Terms(parts),):
                return tuple(part.times(self.weight) for part in parts)
        return (self,)


@dataclass(frozen=True)
class _Terms:
    """A sum as one of several functions; a weight before it goes to each of its terms."""

    parts: tuple[_Part, ...]

    @property
    def has_exponential(self) -> bool:
        """Whether some term has one as its factor."""
        return any(isinstance(f, _Exponential) for part in self.parts for f in part.functions)


_Function = Expression | _Exponential | _Terms


@dataclass(frozen=True)
class InNumbers:
    """A formula in the time alone; `rounded` says whether a number in it is.

    A decimal is a `Name` that spells it: 0.25, or 1.2 times a power of ten.
    """

    formula: Expression
    rounded: bool


def in_numbers(
    formula: Expression,
    known: Known,
    time: str,
    digits: int,
    *,
    decimals: bool = False,
    others: tuple[str, ...] = (),
) -> InNumbers:
    """Return a formula of a case with the values put in and the arithmetic done.

    cosh and sinh become exponentials, for -delta + kappa may have no digit left where both
    are rounded; they stay where kappa is small, and the two rates would read alike.

    Every number is rational and exact, if its decimal or its numerator and denominator have
    up to `digits` digits, and else correctly rounded to them.  Where one is rounded all are
    decimals; so they are with `decimals`, for a formula that stands beside others.  `others`
    are names that stay beside the time, such as the number of a period.

    Raises UnsettledError for a number that is 0 without this being known exactly.
    """
    kept = (time, *others)
    writer = _Writer(known, kept, digits, decimals=decimals)
    part = writer.parted(formula)
    if writer.has_close_rates:
        writer = _Writer(known, kept, digits, splits=False, decimals=decimals)
        part = writer.parted(formula)
    written = writer.written(part)
    rounded = bool(writer.rounded & names_in(written))
    if rounded and not decimals:
        return in_numbers(formula, known, time, digits, decimals=True, others=others)
    return InNumbers(written, rounded)


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

    def __init__(
        self,
        known: Known,
        kept: tuple[str, ...],
        digits: int,
        *,
        splits: bool = True,
        decimals: bool = False,
    ) -> None:
        self.known, self.digits, self.splits = known, digits, splits
        self.kept = frozenset(kept)
        self.decimals = decimals
        self.rounded: set[str] = set()
        self.has_close_rates = False

    def parted(self, formula: Expression) -> _Part:
        """Return weight and functions whose product is the formula.

        The weight is a formula without the time that is not worked out yet.
        """
        if not self._moves(formula):
            return _Part(formula)
        match formula:
            case Negation(operand):
                return self.parted(operand).times(Negation(ONE))
            case Product(factors):
                return self._product([self.parted(factor) for factor in factors])
            case Quotient(above, below) if not self._moves(below):
                return self.parted(above).times(Quotient(ONE, below))
            case Call("exp", argument):
                return self._exponential(argument)
            case Call("cosh" | "sinh" as name, argument) if self.splits:
                sign = ONE if name == "cosh" else Negation(ONE)
                down = self._exponential(Negation(argument)).times(sign)
                return self._sum([self._exponential(argument).times(HALF), down.times(HALF)])
            case Call(name, argument):
                inside = self.written(self.parted(argument))
                if inside == ZERO:
                    return _Part(ONE if name in ("cos", "cosh") else ZERO)
                return _Part(ONE, (Call(name, inside),))
            case Sum(terms):
                return self._sum([self.parted(term) for term in terms])
            case Name() | Power(Name(), Number()):
                return _Part(ONE, (formula,))
        raise TypeError(f"{plain(formula)} is not made as solutions are")

    def _exponential(self, argument: Expression) -> _Part:
        part = self.parted(argument)
        match part.functions:
            case (Name() as variable,):
                return self._growing(part.weight, variable)
        return _Part(ONE, (Call("exp", self.written(part)),))

    def _moves(self, formula: Expression) -> bool:
        """Whether the time, or another name that stays, stands in a formula."""
        return not self.kept.isdisjoint(names_in(formula))

    def _growing(self, rate: Expression, variable: Name) -> _Part:
        """Return e^(rate t), with one way to write a rate that is known exactly."""
        value = self.known.value(rate)
        if value is None:
            return _Part(ONE, (_Exponential(rate, variable),))
        return _Part(ONE, () if value.is_zero else (_Exponential(surd_formula(value), variable),))

    def _product(self, parts: Sequence[_Part]) -> _Part:
        """Multiply; exponentials become one, also with those in the terms of a sum."""
        weight = product(part.weight for part in parts)
        functions = [function for part in parts for function in part.functions]
        rates: dict[Name, list[Expression]] = {}
        for function in functions:
            if isinstance(function, _Exponential):
                rates.setdefault(function.variable, []).append(function.rate)
        if any(len(several) > 1 for several in rates.values()):
            functions = [f for f in functions if not isinstance(f, _Exponential)]
            for variable, several in rates.items():
                if len(several) > 1:
                    self.has_close_rates |= self._is_small(several[1], several[0])
                total = several[0] if len(several) == 1 else Sum(tuple(several))
                functions += self._growing(total, variable).functions
        functions.sort(key=lambda f: not isinstance(f, Name | Power))  # t e^(-t)
        for function in functions:
            if rates and isinstance(function, _Terms) and function.has_exponential:
                rest = _Part(weight, tuple(f for f in functions if f is not function))
                return self._sum([self._product([rest, term]) for term in function.parts])
        return _Part(weight, tuple(functions))

    def _is_small(self, rate: Expression, beside: Expression) -> bool:
        """Whether two rates are close that lie around one of this size."""
        with ctx.workprec(256):  # it decides on the form only
            balls = self.known.balls()
            return bool(CLOSE * abs(enclose(rate, balls)) < abs(enclose(beside, balls)))

    def _sum(self, parts: Sequence[_Part]) -> _Part:
        """Add up the weights of one function; leave out what is zero."""
        weights: dict[tuple[_Function, ...], list[Expression]] = {}
        for part in parts:
            for term in part.terms:
                weights.setdefault(term.functions, []).append(term.weight)
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
        others = [self._function(f) for f in part.functions if not isinstance(f, _Terms)]
        if not sums:
            return self._weighted(part.weight, product(others) if others else None)
        first, *more = sums
        total = sum_of([self.written(term.times(part.weight)) for term in first.parts])
        if total == ZERO:
            return ZERO
        size = total.operand if isinstance(total, Negation) else total
        rest = [self.written(_Part(ONE, (other,))) for other in more]
        whole = product([*others, size, *rest])
        return opened(Negation(whole)) if isinstance(total, Negation) else whole

    def _function(self, function: Expression | _Exponential) -> Expression:
        if isinstance(function, _Exponential):
            return Call("exp", self._weighted(function.rate, function.variable))
        return function

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
        return number(value) if length <= self.digits and not self.decimals else None
