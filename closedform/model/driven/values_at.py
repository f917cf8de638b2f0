"""Values of signals at an instant, exactly: sums of constants with weights in the field.

Constants e^g, e^g cos(a) and e^g sin(a) with different algebraic g, ±a are independent over
the algebraic numbers (F. Lindemann, Ueber die Zahl pi, 1882; K. Weierstrass, Zu Lindemann's
Abhandlung, 1885), so that a sum of them is zero only if every weight is.
"""

from __future__ import annotations

from collections.abc import Iterator

from closedform.algebra.field import BaseField, Scalar
from closedform.algebra.parameter_field import PI, ParameterField
from closedform.algebra.waves import ONE, Constant, Wave
from closedform.model.driven.instants import Order
from closedform.model.driven.signal import Signal
from closedform.notation.expression import Call, Expression, Negation, product
from closedform.notation.rational_formula import rational_formula
from closedform.notation.terms import negated, sum_of, surd_formula

__all__ = ["ConstantSum", "element_text", "value_at"]

MOST_PERIODS = 1_000
"""Periods that are counted until one holds an instant."""


class ConstantSum:
    """A number as a sum of constants with weights in a field, to which parts are added."""

    def __init__(self, field: BaseField) -> None:
        self.field = field
        self.weights: dict[Constant, Scalar] = {}

    @property
    def is_zero(self) -> bool:
        """Whether every weight is zero."""
        return not self.weights

    def add_number(self, number: Scalar) -> None:
        """Add an element of the field."""
        self._add(ONE(self.field), number)

    def add(self, other: ConstantSum, weight: Scalar) -> None:
        """Add a multiple of another sum."""
        for constant, own in other.weights.items():
            self._add(constant, own * weight)

    def add_wave(self, wave: Wave, at: Scalar) -> None:
        """Add the value of a wave at an instant."""
        passed = at - wave.origin
        zero = self.field.domain.zero
        weight = wave.amount
        if wave.power:  # elements of fields of functions refuse 0**0
            weight *= passed**wave.power
        growth, angle = wave.rate * passed, wave.frequency * passed
        if wave.kernel == "one":
            self._add(Constant(growth, "one", zero), weight)
            return
        turns = _quarter_turns(self.field, angle)
        if turns is not None:
            signs = (1, 0, -1, 0) if wave.kernel == "cos" else (0, 1, 0, -1)
            number = self.field.domain.convert(signs[turns % 4])
            self._add(Constant(growth, "one", zero), weight * number)
            return
        turned = Constant(growth, wave.kernel, -angle)
        if turned in self.weights:
            self._add(turned, weight if wave.kernel == "cos" else -weight)
        else:
            self._add(Constant(growth, wave.kernel, angle), weight)

    def _add(self, constant: Constant, weight: Scalar) -> None:
        total = self.weights.get(constant, self.field.domain.zero) + weight
        if total:
            self.weights[constant] = total
        else:
            self.weights.pop(constant, None)

    @property
    def formula(self) -> Expression:
        """The number as it is written."""
        return sum_of([_term(self.field, c, w) for c, w in self.weights.items()])


def value_at(
    field: BaseField, signal: Signal, at: Scalar, order: Order, *, before: bool
) -> ConstantSum:
    """Return what a signal is right after an instant, or right before it; impulses are not told.

    Raises UnknownOrderError where it is not known whether a burst is on.
    """
    at, first = _in_first_period(signal, at, order, before=before)
    total = ConstantSum(field)
    for burst in signal.bursts:
        begins = -1 if burst.start is None else order.compared(burst.start, at)
        ends = 1 if burst.end is None else order.compared(burst.end, at)
        on = (begins < 0 and ends >= 0) if before else (begins <= 0 and ends > 0)
        if on and first:
            for wave in burst.waves:
                total.add_wave(wave, at)
    return total


def _in_first_period(
    signal: Signal, at: Scalar, order: Order, *, before: bool
) -> tuple[Scalar, bool]:
    """The instant of the first period that is like another, and whether the signal is on."""
    repeat = signal.repeat
    if repeat is None:
        return at, True
    passed = order.compared(at, repeat.start)
    if passed < 0 or (passed == 0 and before):
        return at, False
    count = 0
    while order.compared(at, repeat.start + repeat.period) >= (1 if before else 0):
        at, count = at - repeat.period, count + 1
        if count == repeat.count or count > MOST_PERIODS:
            return at, False
    return at, True


def _quarter_turns(field: BaseField, angle: Scalar) -> int | None:
    """The number of right angles in an angle, if it is whole."""
    if not angle:
        return 0
    if not isinstance(field, ParameterField) or PI not in field.parameters:
        return None
    turns = field.constant(2 * angle / field.symbol(PI))
    return None if turns is None or turns.denominator != 1 else int(turns)


def element_text(field: BaseField, element: Scalar) -> Expression:
    """Return an element of the field as it is written."""
    if isinstance(field, ParameterField):
        return rational_formula(field, element)
    return surd_formula(field.surds(element))


def _term(field: BaseField, constant: Constant, weight: Scalar) -> Expression:
    factors = list(_factors(field, constant))
    front = element_text(field, weight)
    if isinstance(front, Negation):
        return negated(product([front.operand, *factors]))
    return product([front, *factors])


def _factors(field: BaseField, constant: Constant) -> Iterator[Expression]:
    if constant.growth:
        yield Call("exp", element_text(field, constant.growth))
    if constant.kernel != "one":
        yield Call(constant.kernel, element_text(field, constant.angle))
