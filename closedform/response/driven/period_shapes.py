"""The function that a stroke of one mode adds, summed over the periods.

With q = e^(rate T) and N strokes so far, the sums over k = 0 … N-1 of f(theta + k T) are

    e^(rate theta) (1 - q^N)/(1 - q)                      for f = e^(rate theta),
    [(theta + T/(1/q - 1)) (1 - q^N) - N T q^N] e^(rate theta)/(1 - q)   for theta times that,
    N,  N (2 theta + (N - 1) T)/2, …                      for 1, theta, …,
    sin(N w T/2)/sin(w T/2) g(theta + (N - 1) T/2)        for g = cos or sin of w theta,
    e^(rate theta) [h(theta) - q^N h(theta + N T)]/(1 - 2 q cos(w T) + q^2)
                                                          for f = e^(rate theta) g(theta),

with h(theta) = g(theta) - q g(theta - T); cosh and sinh go like cos and sin.  Where w T is a
multiple of 2 pi, g repeats with the period, and e^(rate theta) is summed alone.
Source:  common practice (geometric sums).
"""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass, replace
from fractions import Fraction

from closedform.algebra.field import BaseField, Scalar
from closedform.notation.expression import (
    ONE,
    ZERO,
    Call,
    Expression,
    Name,
    Negation,
    Quotient,
    number,
    power_of,
)
from closedform.notation.terms import negated, opened, sum_of
from closedform.response.by_mode import ModePart
from closedform.response.driven.period_powers import power_sum_formula, weighted_power_sum
from closedform.response.driven.period_writing import Held, Linear, Writing, joined, linear
from closedform.response.driven.strokes import ONCE, Count, Struck, UnwrittenSumError

__all__ = ["Shapes", "exponential"]


@dataclass(frozen=True)
class Shapes:
    """The functions of one solution; `period` is an element of its model's field.

    `variable` is the name of the time they are functions of, None for the value where it is
    0; `number` that of the number of the period.
    """

    field: BaseField
    writing: Writing
    period: Scalar
    variable: str | None
    number: str

    def shapes(
        self, struck: Struck, held: Sequence[Held], *, alone: bool
    ) -> tuple[Expression, list[Expression]]:
        """Return what all amounts of a part are multiplied by, and what each of them is.

        A pair that is not `alone` shares its divisor with others, and that alone.
        Raises:  UnwrittenSumError.
        """
        part, count = struck.part, struck.count
        growth, at = self.growth(struck), self._at(struck)
        if count == ONCE or struck.resonant:
            if part.power and count != ONCE:
                raise UnwrittenSumError(part)
            own = [joined([self._power_of(at, h.power), self._kernel(part, h, at)]) for h in held]
            return joined([growth, self.geometric(struck)]), own
        if part.kind == "real":
            return self._real(struck, held)
        if part.power:
            raise UnwrittenSumError(part)
        if part.rate == ZERO:
            return self._undamped(struck, held)
        kernels = [self._damped(struck, h) for h in held]
        below = Quotient(ONE, self.divisor(part))
        if alone:
            return joined([growth, below]), kernels
        return below, [joined([growth, kernel]) for kernel in kernels]

    def growth(self, struck: Struck) -> Expression:
        """Return e^(rate theta)."""
        rate = self.writing.rate(struck.part)
        return exponential(linear(self.writing, self._one, rate, self._at(struck)))

    def geometric(self, struck: Struck) -> Expression:
        """Return the sum of q^k: (1 - q^N)/(1 - q), or N where q is 1."""
        part, count = struck.part, struck.count
        if count == ONCE:
            return ONE
        if part.rate == ZERO:
            return count.formula
        return Quotient(self.ended(struck), self.one_less(part))

    def ended(self, struck: Struck) -> Expression:
        """Return 1 - q^N, 1 where there is no first stroke."""
        if struck.count.endless:
            return ONE
        return sum_of([ONE, negated(self._power(struck.part, struck.count))])

    def one_less(self, part: ModePart) -> Expression:
        """Return 1 - q."""
        return sum_of([ONE, negated(self._power(part, ONCE))])

    def divisor(self, part: ModePart) -> Expression:
        """Return what the sum of a pair is divided by."""
        if part.rate == ZERO:
            return self._function(part, Linear(None, self.period / 2, self._zero), even=False)
        kernel = self._function(part, Linear(None, self.period, self._zero), even=True)
        once, twice = (self._power(part, Count(fixed=k)) for k in (1, 2))
        middle = negated(joined([number(2), once, kernel]))
        return sum_of([term for term in (ONE, middle, twice) if term not in _NOTHING])

    def _real(self, struck: Struck, held: Sequence[Held]) -> tuple[Expression, list[Expression]]:
        part, count, at = struck.part, struck.count, self._at(struck)
        shift, length = self._rational(struck.shift), self._rational(self.period)
        theta = (self._time(at), None) if shift is None else (_name(self.variable), shift)
        period = (self._length, None) if length is None else (ZERO, length)
        if part.rate == ZERO:
            n = (ZERO, count.fixed) if count.name is None else (Name(count.name), -count.less)
            return ONE, [power_sum_formula(h.power, theta, period, n) for h in held]
        if part.power == 0:
            return joined([self.growth(struck), self.geometric(struck)]), [ONE]
        inverse = self._power(part, ONCE, sign=-1)
        strokes = None if count.endless else (count.formula, self._power(part, count))
        return joined([self.growth(struck), Quotient(ONE, self.one_less(part))]), [
            weighted_power_sum(h.power, theta, period, inverse, strokes) for h in held
        ]

    def _undamped(
        self, struck: Struck, held: Sequence[Held]
    ) -> tuple[Expression, list[Expression]]:
        """sin(N w T/2)/sin(w T/2), and the kernels (N - 1) T/2 later."""
        part, count, half = struck.part, struck.count, self.period / 2
        w = self.writing.frequency(part)
        if count.fixed is not None:
            angle = self.writing.term(w, half * count.fixed, [])
            at = self._later(struck, half * (count.fixed - 1), self._zero)
        else:
            angle = self.writing.term(w, half, [count.formula])
            at = self._later(struck, -half * (1 + count.less), half)
        function = "sin" if part.kind == "circular" else "sinh"
        front = joined([Call(function, angle), Quotient(ONE, self.divisor(part))])
        return front, [self._kernel(part, h, at) for h in held]

    def _damped(self, struck: Struck, held: Held) -> Expression:
        """h(theta) - q^N h(theta + N T) with h(theta) = g(theta) - q g(theta - T)."""
        part, count, period = struck.part, struck.count, self.period
        once = self._power(part, ONCE)

        def h(later: Scalar, slope: Scalar) -> Expression:
            now, before = (
                self._kernel(part, held, self._later(struck, later - back, slope))
                for back in (self._zero, period)
            )
            return _difference(now, joined([once, before]))

        first = h(self._zero, self._zero)
        if count.endless:
            return first
        if count.fixed is not None:
            last = h(period * count.fixed, self._zero)
        else:
            last = h(-period * count.less, period)
        return _difference(first, joined([self._power(part, count), last]))

    def _power(self, part: ModePart, count: Count, sign: int = 1) -> Expression:
        """q^N, or q^-N."""
        rate, length = self.writing.rate(part), self.period * sign
        if count.fixed is not None:
            return exponential(self.writing.term(rate, length * count.fixed, []))
        return exponential(self.writing.term(rate, length, [count.formula]))

    def _kernel(self, part: ModePart, held: Held, at: Linear) -> Expression:
        """1 of a real mode; cos, sin, cosh or sinh of w times a time of a pair."""
        return ONE if part.kind == "real" else self._function(part, at, even=held.even)

    def _function(self, part: ModePart, at: Linear, *, even: bool) -> Expression:
        """The even or the odd function of a pair, right angles worked out, a sign outside."""
        w = self.writing.frequency(part)
        turns = self.writing.right_angles(w, at.constant) if part.kind == "circular" else None
        minus = False
        if turns is not None:
            at = replace(at, constant=self._zero)
            minus = turns % 4 in ((1, 2) if even else (2, 3))
            even = even != bool(turns % 2)
        names = ("cos", "sin") if part.kind == "circular" else ("cosh", "sinh")
        angle = linear(self.writing, self._one, w, at, as_angle=True)
        if isinstance(angle, Negation):
            angle, minus = angle.operand, minus != (not even)
        value: Expression = Call(names[0] if even else names[1], angle)
        if angle == ZERO:
            value = ONE if even else ZERO
        return Negation(value) if minus and value != ZERO else value

    def _at(self, struck: Struck) -> Linear:
        """The time since the last stroke."""
        slope = self.period if struck.counted else self._zero
        return Linear(self.variable, struck.shift, slope, self.number)

    def _later(self, struck: Struck, constant: Scalar, slope: Scalar) -> Linear:
        """A time after the last stroke."""
        return Linear(self.variable, struck.shift + constant, slope, self.number)

    def _power_of(self, at: Linear, power: int) -> Expression:
        return power_of(self._time(at), power) if power else ONE

    def _time(self, at: Linear) -> Expression:
        return linear(self.writing, self._one, None, at)

    def _rational(self, element: Scalar) -> Fraction | None:
        value = self.field.number(element)
        return value.as_fraction() if value is not None and value.is_rational else None

    @property
    def _length(self) -> Expression:
        return self.writing.term(None, self.period, [])

    @property
    def _zero(self) -> Scalar:
        return self.field.domain.zero

    @property
    def _one(self) -> Scalar:
        return self.field.domain.one


_NOTHING = (ZERO, Negation(ZERO))


def exponential(exponent: Expression) -> Expression:
    """Return e to an exponent."""
    return ONE if exponent == ZERO else Call("exp", exponent)


def _name(variable: str | None) -> Expression:
    return ZERO if variable is None else Name(variable)


def _difference(one: Expression, other: Expression) -> Expression:
    kept = [term for term in (one, negated(other)) if term not in _NOTHING]
    return opened(sum_of(kept)) if kept else ZERO
