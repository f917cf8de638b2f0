"""Points of a domain: rational values of the parameters at which every condition holds."""

from __future__ import annotations

import random
from collections.abc import Mapping, Sequence
from fractions import Fraction

from closedform.algebra.field import Scalar, rational
from closedform.algebra.parameter_field import ParameterField, ParameterPolynomial
from closedform.algebra.sign_argument import Comparison, relation_values
from closedform.algebra.squares import coefficients_in

__all__ = ["holds_at", "sample_points", "value_at"]

TRIES = 400
"""Tries for each point asked for, and at least ten times as many in all."""
SCALES = ((6, 1), (9, 2), (20, 4), (40, 10), (100, 10))
"""The largest numerator and denominator of each scale; they are taken in turn."""


def value_at(element: Scalar, point: Mapping[str, Fraction]) -> Fraction | None:
    """Return the value of an element at a point, or None where it is not defined."""
    names = [str(s) for s in element.field.symbols]
    values = [point.get(n) for n in names]
    below = _value(element.denom, values)
    return _value(element.numer, values) / below if below else None


def _value(polynomial: ParameterPolynomial, values: Sequence[Fraction | None]) -> Fraction:
    total = Fraction(0)
    for monomial, coefficient in polynomial.iterterms():
        term = rational(coefficient)
        for value, exponent in zip(values, monomial, strict=True):
            if exponent:
                if value is None:
                    raise KeyError(str(polynomial))
                term *= value**exponent
        total += term
    return total


def holds_at(comparison: Comparison, point: Mapping[str, Fraction]) -> bool:
    """Return whether a comparison is defined and holds at a point."""
    value = value_at(comparison.element, point)
    if value is None:
        return False
    return (value > 0) - (value < 0) in relation_values(comparison.relation)


def sample_points(
    field: ParameterField, conditions: Sequence[Comparison], count: int, seed: int
) -> list[dict[str, Fraction]]:
    """Return up to `count` different points at which the conditions hold.

    Equations are solved for a parameter in which one of their factors is linear; the
    others are drawn, different from each other, until the conditions hold.
    """
    solved = _solved(field, conditions)
    if solved is None:
        return []
    signs = _drawn_signs(field, conditions)
    free = [n for n in field.parameters if n not in solved]
    draw = random.Random(seed)  # noqa: S311  (points to look at, no secret)
    found: list[dict[str, Fraction]] = []
    for attempt in range(TRIES * max(count, 10)):
        if len(found) >= count:
            break
        point = _drawn(free, signs, SCALES[attempt % len(SCALES)], draw)
        for name, element in reversed(solved.items()):
            value = value_at(element, point)
            if value is None:
                break
            point[name] = value
        else:
            if point not in found and all(holds_at(c, point) for c in conditions):
                found.append({n: point[n] for n in field.parameters})
    return found


def _solved(field: ParameterField, conditions: Sequence[Comparison]) -> dict[str, Scalar] | None:
    """The parameters that equations give, each by those that are not solved before it."""
    solved: dict[str, Scalar] = {}
    for condition in conditions:
        if condition.relation != "=":
            continue
        element = field.of_polynomial(condition.element.numer)
        for name, value in solved.items():
            element = field.substituted(element, {name: value})
        if not element:
            continue
        found = _linear_root(field, element)
        if found is None:
            return None
        solved[found[0]] = found[1]
    return solved


def _linear_root(field: ParameterField, element: Scalar) -> tuple[str, Scalar] | None:
    for factor, exponent in field.factored(element).factors:
        if exponent < 0:
            continue
        for place, name in reversed(list(enumerate(field.parameters))):
            if factor.degree(factor.ring.gens[place]) == 1:
                free, slope = map(field.of_polynomial, coefficients_in(factor, place))
                return name, -free / slope
    return None


def _drawn_signs(field: ParameterField, conditions: Sequence[Comparison]) -> dict[str, int]:
    """The sign of each parameter that a condition on it alone fixes."""
    signs = {}
    for name in field.parameters:
        x = field.symbol(name)
        for condition in conditions:
            multiple = field.constant(condition.element / x)
            if multiple and condition.relation in {">", ">="}:
                signs[name] = 1 if multiple > 0 else -1
    return signs


def _drawn(
    names: Sequence[str], signs: Mapping[str, int], scale: tuple[int, int], draw: random.Random
) -> dict[str, Fraction]:
    """Different values for the names, none of them 0."""
    point: dict[str, Fraction] = {}
    top, bottom = scale
    for name in names:
        while True:
            value = Fraction(draw.randint(1, top + len(names)), draw.randint(1, bottom))
            value *= signs.get(name) or draw.choice((1, -1))
            if value not in point.values():
                break
        point[name] = value
    return point
