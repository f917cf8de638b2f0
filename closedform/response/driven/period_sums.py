"""Sums over the periods as formulas: what all strokes so far add to a solution.

Strokes of one mode in the same time are added up first; real modes then share their divisors,
and straight lines and other polynomials are one polynomial.
"""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass, replace
from fractions import Fraction

from closedform.algebra.field import BaseField, Scalar
from closedform.algebra.parameter_field import ParameterField
from closedform.notation.expression import (
    ONE,
    ZERO,
    Expression,
    Negation,
    Quotient,
    number,
    operations,
)
from closedform.notation.rational_formula import rational_formula
from closedform.notation.terms import negated, opened, sum_of
from closedform.response.by_mode import ModePart
from closedform.response.driven.period_powers import power_sum
from closedform.response.driven.period_shapes import Shapes
from closedform.response.driven.period_writing import (
    Placeholders,
    Weighted,
    Writing,
    joined,
    put_in,
)
from closedform.response.driven.strokes import ONCE, Struck

__all__ = ["PeriodSums"]

Group = list[tuple[Fraction, Struck]]


@dataclass(frozen=True)
class PeriodSums:
    """The sums over periods of one solution; `period` is an element of its model's field."""

    field: BaseField
    writing: Writing
    period: Scalar
    number: str

    def total(self, struck: Sequence[Struck], variable: str | None) -> Expression:
        """Return the sum of what all strokes add, as a function of `variable`.

        Without a variable it is the value where that is 0.
        Raises:  UnwrittenSumError.
        """
        shapes = Shapes(self.field, self.writing, self.period, variable, self.number)
        merged = self._merged(struck)
        polynomial = [s for s in merged if self._is_polynomial(s)]
        rest = [s for s in merged if s not in polynomial]
        functions = Placeholders()
        weighted: list[Weighted] = []
        for group in self._gathered(rest):
            weighted += self._group(shapes, group, rest, functions)
        terms = [put_in(self.writing.sum(weighted), functions.found)] if weighted else []
        if polynomial:
            terms.append(self._polynomial(polynomial, variable))
        kept = [term for term in terms if term != ZERO]
        return opened(sum_of(kept)) if kept else ZERO

    def divisor(self, part: ModePart) -> Expression:
        """Return what the sum of a pair is divided by."""
        return Shapes(self.field, self.writing, self.period, None, self.number).divisor(part)

    def _merged(self, struck: Sequence[Struck]) -> list[Struck]:
        """The strokes with those of one mode that are alike in all but their amounts added."""
        found: list[Struck] = []
        for one in struck:
            for place, other in enumerate(found):
                same = one.part.rate == other.part.rate
                same &= one.part.frequency == other.part.frequency
                if same and replace(one, part=other.part) == other:
                    total = self.writing.added(other.part, one.part)
                    if total is not None:
                        found[place] = replace(other, part=total)
                        break
            else:
                found.append(one)
        return [own for own in found if self.writing.amounts(own.part)]

    # Polynomials

    def _is_polynomial(self, struck: Struck) -> bool:
        part = struck.part
        return (
            part.kind == "real"
            and part.rate == ZERO
            and struck.constant is None
            and not struck.count.endless
            and all(self.writing.rational(h.amount) for h in self.writing.amounts(part))
        )

    def _polynomial(self, struck: Sequence[Struck], variable: str | None) -> Expression:
        """The sum over strokes and periods of amounts times powers of the time since."""
        names = [] if variable is None else [variable]
        total, wide = None, ParameterField()
        for one in struck:
            for held in self.writing.amounts(one.part):
                known = self.writing.rational(held.amount)
                if known is None:
                    raise ValueError("only rational amounts make a polynomial")
                own, amount = known
                wide = ParameterField(parameters=(*own.parameters, *names, self.number))
                n, period = wide.symbol(self.number), self.writing.element(wide, self.period)
                theta = self.writing.element(wide, one.shift)
                theta += wide.symbol(variable) if variable is not None else 0
                theta += period * n if one.counted else 0
                fixed = one.count.fixed
                count = n - one.count.less if fixed is None else wide.scalar(fixed)
                term = own.into(wide, amount) * power_sum(held.power, theta, period, count)
                total = term if total is None else total + term
        return rational_formula(wide, total) if total else ZERO

    # What is written together

    def _gathered(self, struck: Sequence[Struck]) -> list[Group]:
        """Strokes of one real mode as multiples of the first of them; the others one by one."""
        groups: list[Group] = []
        for one in struck:
            for group in groups:
                ratio = self._multiple(one, group[0][1])
                if ratio is not None:
                    group.append((ratio, one))
                    break
            else:
                groups.append([(Fraction(1), one)])
        return groups

    def _multiple(self, one: Struck, first: Struck) -> Fraction | None:
        simple = all(_is_simple(s.part) for s in (one, first))
        if not simple or one.part.rate != first.part.rate:
            return None
        if (one.count == ONCE) != (first.count == ONCE):
            return None
        return self.writing.ratio(*(self.writing.amounts(s.part)[0].amount for s in (one, first)))

    def _group(
        self, shapes: Shapes, group: Group, others: Sequence[Struck], functions: Placeholders
    ) -> list[Weighted]:
        _, first = group[0]
        if len(group) > 1:
            forms = []
            for sign in (1, -1):
                part = self.writing.scaled(first.part, sign)
                front = self._together(shapes, [(ratio * sign, s) for ratio, s in group])
                name = functions.name_of(front)
                forms.append(Weighted(part, self.writing.amounts(part)[0].amount, name, None))
            return [min(forms, key=lambda form: self._length(form, functions))]
        held = self.writing.amounts(first.part)
        pairs = [s for s in others if _shares_divisor(s, first)]
        front, kernels = shapes.shapes(first, held, alone=len(pairs) < 2)
        if first.constant is not None and len(pairs) < 2:
            front = joined([first.constant, front])
        elif first.constant is not None:
            kernels = [joined([first.constant, kernel]) for kernel in kernels]
        name = functions.name_of(front)
        return [
            Weighted(first.part, own.amount, name, functions.name_of(kernel))
            for own, kernel in zip(held, kernels, strict=True)
            if kernel != ZERO
        ]

    def _length(self, weighted: Weighted, functions: Placeholders) -> tuple[int, bool]:
        """The operations of a formula; of equals, the one without a sign outside comes first."""
        formula = put_in(self.writing.sum([weighted]), functions.found)
        return operations(formula), isinstance(formula, Negation)

    @staticmethod
    def _together(shapes: Shapes, group: Group) -> Expression:
        """The functions of one real mode that are multiples of one another, added up."""
        _, first = group[0]
        alike = all(struck.count == first.count for _, struck in group)
        terms = []
        for ratio, struck in group:
            factors = [number(abs(ratio)), shapes.growth(struck)]
            if struck.constant is not None:
                factors.insert(1, struck.constant)
            if not alike:
                factors.append(shapes.ended(struck))
            term = joined(factors)
            terms.append(negated(term) if ratio < 0 else term)
        common = shapes.geometric(first) if alike else Quotient(ONE, shapes.one_less(first.part))
        return joined([sum_of(terms), common])


def _is_simple(part: ModePart) -> bool:
    return part.kind == "real" and part.power == 0 and part.rate != ZERO


def _shares_divisor(one: Struck, other: Struck) -> bool:
    """Whether two strokes of damped pairs are divided by the same."""
    a, b = one.part, other.part
    damped = a.kind != "real" and a.rate != ZERO and not one.resonant
    lasting = ONCE not in {one.count, other.count}
    return damped and lasting and (a.rate, a.frequency) == (b.rate, b.frequency)
