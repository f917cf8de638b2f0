"""Exact amounts, rates and frequencies of modes as they are written: numbers, or parameters."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass, replace
from fractions import Fraction
from functools import lru_cache
from itertools import zip_longest

from closedform.algebra.field import BaseField, Scalar
from closedform.algebra.parameter_field import PI, ParameterField
from closedform.algebra.surds import SurdSum
from closedform.notation.expression import ZERO, Expression, Name
from closedform.notation.rational_formula import weighted_rational
from closedform.notation.terms import weighted as as_term
from closedform.response import closed_form as of_numbers
from closedform.response.by_mode import ModePart, TermsOfMode
from closedform.response.driven.period_writing import (
    TIME,
    Amounts,
    Coefficient,
    Held,
    Weighted,
    Writing,
)
from closedform.response.modes import ZERO as NO_AMOUNT
from closedform.response.modes import Amount, Contribution
from closedform.response.parametric import closed_form as of_parameters
from closedform.response.parametric.terms import Term, gathered

__all__ = ["writing_of"]


def writing_of(field: BaseField, parts: Sequence[ModePart], number: str) -> Writing:
    """Return how the parts of one solution are written.

    `field` is that of its model, `number` the name of the number of the period.
    """
    for part in parts:
        if isinstance(part.exact, TermsOfMode):
            if not isinstance(field, ParameterField):
                raise TypeError("terms with parameters belong to a model with these")
            return _OfParameters(field, part.exact.writing, number)
    if isinstance(field, ParameterField):
        return _OfParameters(field, field, number)
    return _OfNumbers(field)


@dataclass(frozen=True)
class _OfNumbers:
    field: BaseField

    def rate(self, part: ModePart) -> Coefficient:
        return _contribution(part).mode.rate

    def frequency(self, part: ModePart) -> Coefficient:
        return _contribution(part).mode.frequency

    def amounts(self, part: ModePart) -> Amounts:
        return tuple(
            Held(power, even, amount)
            for power, pair in enumerate(_contribution(part).amounts)
            for even, amount in zip((True, False), pair, strict=True)
            if not amount.is_zero
        )

    def ratio(self, one: Amount | Scalar, other: Amount | Scalar) -> Fraction | None:
        if not isinstance(one, Amount) or not isinstance(other, Amount):
            raise TypeError("amounts of numbers are needed here")
        if replace(one, value=NO_AMOUNT.value) != replace(other, value=NO_AMOUNT.value):
            return None
        ratio = one.value / other.value
        return ratio.as_fraction() if ratio.is_rational else None

    def scaled(self, part: ModePart, factor: int) -> ModePart:
        own, scale = _contribution(part), SurdSum.rational(factor)
        amounts = tuple(
            (replace(even, value=even.value * scale), replace(odd, value=odd.value * scale))
            for even, odd in own.amounts
        )
        return replace(part, exact=replace(own, amounts=amounts))

    def added(self, one: ModePart, other: ModePart) -> ModePart | None:
        both = [_contribution(part).amounts for part in (one, other)]
        pairs: list[tuple[Amount, Amount]] = []
        for a, b in zip_longest(*both, fillvalue=(NO_AMOUNT, NO_AMOUNT)):
            sums = [_sum(x, y) for x, y in zip(a, b, strict=True)]
            if sums[0] is None or sums[1] is None:
                return None
            pairs.append((sums[0], sums[1]))
        while pairs and all(amount.is_zero for amount in pairs[-1]):
            pairs.pop()
        exact = replace(_contribution(one), amounts=tuple(pairs))
        return replace(one, exact=exact, power=max(len(pairs) - 1, 0))

    def rational(self, amount: Amount | Scalar) -> tuple[ParameterField, Scalar] | None:
        if not isinstance(amount, Amount):
            raise TypeError("an amount of numbers is needed here")
        plain = replace(amount, value=NO_AMOUNT.value) == NO_AMOUNT
        if not (plain and amount.value.is_rational):
            return None
        field = ParameterField()
        return field, field.scalar(amount.value)

    def right_angles(self, frequency: Coefficient, time: Scalar) -> int | None:
        _ = frequency  # its product with another time is algebraic, and pi is not
        return None if time else 0

    def element(self, wide: ParameterField, element: Scalar) -> Scalar:
        return wide.scalar(self.field.surds(element))

    def term(
        self, coefficient: Coefficient | None, scale: Scalar, factors: Sequence[Expression]
    ) -> Expression:
        value, named = self.field.surds(scale), list(factors)
        if isinstance(coefficient, str):
            named.insert(0, Name(coefficient))
        elif isinstance(coefficient, SurdSum):
            value = value * coefficient
        return ZERO if value.is_zero else as_term(value, named, [])

    def sum(self, weighted: Sequence[Weighted]) -> Expression:
        return of_numbers.closed_form(
            [
                Contribution(
                    replace(
                        _contribution(w.part).mode,
                        kind="real" if w.kernel is None else "circular",
                        rate=w.front or NO_AMOUNT.value,
                        frequency=w.kernel,
                    ),
                    ((w.amount, NO_AMOUNT),),
                )
                for w in weighted
            ],
            TIME,
        )


@dataclass(frozen=True)
class _OfParameters:
    field: ParameterField
    writing: ParameterField
    number: str

    def rate(self, part: ModePart) -> Coefficient:
        return _terms(part)[0].rate

    def frequency(self, part: ModePart) -> Coefficient:
        return _terms(part)[0].frequency

    def amounts(self, part: ModePart) -> Amounts:
        return tuple(
            Held(term.power, term.kernel not in ("sin", "sinh"), term.amount)
            for term in _terms(part)
        )

    def ratio(self, one: Scalar, other: Scalar) -> Fraction | None:
        return self.writing.constant(one / other)

    def scaled(self, part: ModePart, factor: int) -> ModePart:
        own = TermsOfMode(
            self.writing,
            tuple(replace(t, amount=t.amount * factor) for t in _terms(part)),
        )
        return replace(part, exact=own)

    def added(self, one: ModePart, other: ModePart) -> ModePart | None:
        terms = gathered(self.writing, (*_terms(one), *_terms(other)))
        power = max((term.power for term in terms), default=0)
        return replace(one, exact=TermsOfMode(self.writing, terms), power=power)

    def rational(self, amount: Amount | Scalar) -> tuple[ParameterField, Scalar] | None:
        return self.writing, amount

    def right_angles(self, frequency: Coefficient, time: Scalar) -> int | None:
        if not time:
            return 0
        if PI not in self.writing.parameters:
            return None
        angle = _into(self.field, self.writing, time) * frequency
        turns = self.writing.constant(2 * angle / self.writing.symbol(PI))
        return int(turns) if turns is not None and turns.denominator == 1 else None

    def element(self, wide: ParameterField, element: Scalar) -> Scalar:
        return _into(self.field, wide, element)

    def term(
        self, coefficient: Coefficient | None, scale: Scalar, factors: Sequence[Expression]
    ) -> Expression:
        value = _into(self.field, self.writing, scale)
        if coefficient is not None:
            value = value * coefficient
        if not value:
            return ZERO
        if list(factors) == [Name(self.number)]:  # it goes before the parameters: n*k*T
            wide = ParameterField(parameters=(self.number, *self.writing.parameters))
            value = _into(self.writing, wide, value) * wide.symbol(self.number)
            return weighted_rational(wide, value, (), ())
        return weighted_rational(self.writing, value, factors, ())

    def sum(self, weighted: Sequence[Weighted]) -> Expression:
        held = dict.fromkeys(n for w in weighted for n in (w.front, w.kernel) if n is not None)
        wide = ParameterField(parameters=(*self.writing.parameters, *held))
        zero = wide.scalar(0)
        return of_parameters.closed_form(
            wide,
            [
                Term(
                    _into(self.writing, wide, w.amount),
                    0,
                    zero if w.front is None else wide.symbol(w.front),
                    None if w.kernel is None else "cos",
                    None if w.kernel is None else wide.symbol(w.kernel),
                )
                for w in weighted
            ],
            TIME,
        )


@lru_cache(maxsize=4096)
def _into(field: ParameterField, wide: ParameterField, element: Scalar) -> Scalar:
    return field.into(wide, element)


def _sum(one: Amount, other: Amount) -> Amount | None:
    """The sum of amounts of one name."""
    if one.is_zero or other.is_zero:
        return one if other.is_zero else other
    if replace(one, value=NO_AMOUNT.value) != replace(other, value=NO_AMOUNT.value):
        return None
    value = one.value + other.value
    return NO_AMOUNT if value.is_zero else replace(one, value=value)


def _contribution(part: ModePart) -> Contribution:
    if not isinstance(part.exact, Contribution):
        raise TypeError("a part without parameters is needed here")
    return part.exact


def _terms(part: ModePart) -> tuple[Term, ...]:
    if not isinstance(part.exact, TermsOfMode):
        raise TypeError("a part with parameters is needed here")
    return part.exact.terms
