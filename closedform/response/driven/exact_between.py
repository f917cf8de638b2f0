"""Values of solutions that conditions at points determine, where they are algebraic, exactly."""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import replace
from functools import reduce
from operator import mul
from typing import Any

from closedform.algebra.adjoined import Adjoined, Recorder, adjoined
from closedform.algebra.field import Scalar
from closedform.algebra.parameter_field import ParameterField
from closedform.algebra.surds import SurdSum
from closedform.response.driven.in_field import Spot
from closedform.response.driven.point_values import constant_value, value_at_instant
from closedform.response.driven.solution import DrivenSolution

__all__ = ["exact_between"]


def exact_between(solution: DrivenSolution, row: int, spot: Spot, t: SurdSum) -> SurdSum | None:
    """Return a row at t as a surd sum, or None if none is found.

    The constants and the value are written with the same adjoined numbers, and their relations
    worked in.  Only for a model without parameters or pi, and t in its field.
    """
    field, points = solution.model.field, solution.points
    if points is None or isinstance(field, ParameterField) or not t.is_rational:
        return None
    numbers = points.found.numbers
    if any(n.kind in ("root", "cosine") for n in numbers.numbers):
        return None
    if any(term.factor.degree > len("bc") for term in solution.functions.columns.terms):
        return None
    recorder = Recorder(field)
    _named(numbers, recorder)
    _total(solution, row, spot, t, recorder, {})
    joint = adjoined(field, recorder.exponents, recorder.angles)
    values = _named(numbers, joint)
    constants = {c.name: _composed(numbers, c.element, values, joint) for c in points.constants}
    value = joint.lowered(_total(solution, row, spot, t, joint, constants))
    return None if value is None else field.number(value)


def _named(old: Adjoined, numbers: Adjoined | Recorder) -> dict[str, Scalar]:
    """The adjoined numbers of the constants, by name, among others."""
    found: dict[str, Scalar] = {}
    for own in old.numbers:
        if own.kind == "exp":
            found[own.name] = numbers.power(own.amount)
        else:
            pair = numbers.turn(own.core, own.amount)
            found[own.name] = pair[own.kind == "odd"]
    return found


def _total(
    solution: DrivenSolution,
    row: int,
    spot: Spot,
    t: SurdSum,
    numbers: Adjoined | Recorder,
    constants: Mapping[str, Scalar],
) -> Scalar:
    field, columns = solution.model.field, solution.functions.columns
    rows, count = columns.shape
    zero, one = field.domain.zero, field.domain.one
    weights = [one if k == row else zero for k in range(rows)]
    total = numbers.lift(zero)
    for summand in solution.functions.intervals[spot.interval].summands:
        unit = field.matrix([[one if k == summand.place else zero] for k in range(count)])
        since = field.scalar(t) - summand.origin
        held = value_at_instant(numbers, weights, columns.times(unit), since)
        held = held * constant_value(numbers, field, replace(summand.constant, named=""))
        total = total + held * constants.get(summand.constant.named, numbers.lift(one))
    return total


def _composed(
    old: Adjoined, element: Scalar, values: Mapping[str, Scalar], numbers: Adjoined
) -> Scalar:
    """An element with the adjoined numbers in the place of their names."""

    def value(polynomial: Any) -> Scalar:
        total = numbers.field.domain.zero
        for monomial, coefficient in polynomial.iterterms():
            powers = zip(old.field.parameters, monomial, strict=True)
            factors = [values[name] ** exponent for name, exponent in powers if exponent]
            total += reduce(mul, factors, numbers.field.domain.convert(coefficient))
        return total

    return value(element.numer) / value(element.denom)
