"""Points of a domain: values of the parameters at which every condition holds.

They are rational, but for those that an equation with the number pi gives.
"""

from __future__ import annotations

import random
from collections.abc import Iterable, Iterator, Mapping, Sequence
from dataclasses import dataclass
from fractions import Fraction

from closedform.algebra.cell_points import only_name, points_in_cells
from closedform.algebra.field import Scalar, rational
from closedform.algebra.parameter_field import PI, ParameterField, ParameterPolynomial
from closedform.algebra.sign_argument import Comparison, relation_values
from closedform.algebra.squares import coefficients_in

__all__ = ["PointValue", "holds_at", "sample_points", "value_at"]

PointValue = Fraction | Scalar
"""A rational number, or an element of the field in pi alone."""

FEW = 5
"""So many points at most are looked for in cells."""
TRIES = 200
"""Tries for each point asked for, and at least ten times as many in all."""
SCALES = ((6, 1), (9, 2), (20, 4), (40, 10), (100, 1), (6, 20), (9, 200), (3000, 1))
"""The largest numerator and denominator of each scale."""

Terms = tuple[tuple[Fraction, tuple[tuple[str, int], ...]], ...]
"""A polynomial as its coefficients and the powers of parameters beside them."""


def value_at(element: Scalar, point: Mapping[str, Fraction]) -> Fraction | None:
    """Return the value of an element at a point, or None where it is not defined.

    Raises KeyError for a parameter of the element that has no value.
    """
    return _quotient(_terms(element.numer), _terms(element.denom), point)


def holds_at(comparison: Comparison, point: Mapping[str, PointValue]) -> bool:
    """Return whether a comparison is defined and holds at a point."""
    names = tuple(map(str, comparison.element.field.symbols))
    if PI in names:
        field = ParameterField(parameters=names)
        return _holds_over_pi(field, comparison, _as_elements(field, point))
    return _holds(value_at(comparison.element, point), comparison)


def _holds(value: Fraction | None, comparison: Comparison) -> bool:
    if value is None:
        return False
    return (value > 0) - (value < 0) in relation_values(comparison.relation)


def _as_elements(field: ParameterField, point: Mapping[str, PointValue]) -> dict[str, Scalar]:
    return {n: field.scalar(v) if isinstance(v, Fraction) else v for n, v in point.items()}


def _holds_over_pi(
    field: ParameterField, comparison: Comparison, point: Mapping[str, Scalar]
) -> bool:
    try:
        value = field.substituted(comparison.element, point)
    except ZeroDivisionError:  # it is not defined there
        return False
    return field.sign(value) in relation_values(comparison.relation)


def _terms(polynomial: ParameterPolynomial) -> Terms:
    names = [str(s) for s in polynomial.ring.symbols]
    return tuple(
        (rational(c), tuple((n, e) for n, e in zip(names, m, strict=True) if e))
        for m, c in polynomial.iterterms()
    )


def _quotient(above: Terms, below: Terms, point: Mapping[str, Fraction]) -> Fraction | None:
    divisor = _sum(below, point)
    return _sum(above, point) / divisor if divisor else None


def _sum(terms: Terms, point: Mapping[str, Fraction]) -> Fraction:
    total = Fraction(0)
    for coefficient, powers in terms:
        term = coefficient
        for name, exponent in powers:
            term *= point[name] ** exponent
        total += term
    return total


def sample_points(
    field: ParameterField, conditions: Sequence[Comparison], count: int, seed: int
) -> list[dict[str, PointValue]]:
    """Return up to `count` different points at which the conditions hold.

    Equations are solved for a parameter in which one of their factors is linear; the
    others are drawn, different from each other, until the conditions hold.  Where this finds
    few points, all parameters but one are drawn, and the last one is taken from what the
    conditions leave to it then.
    """
    found: list[dict[str, PointValue]] = []
    solved = _solved(field, conditions)
    if solved is not None:
        drawn = _drawn_points(field, conditions, solved, TRIES * max(count, 10), seed)
        _keep(_asked(field, conditions, solved), drawn, count, found)
    few = min(count, FEW)
    if len(found) < few:
        alone = [c for c in conditions if c.relation == "=" and only_name(field, c)]
        kept = frozenset(n for c in alone for n in only_name(field, c))
        solved = _solved(field, [c for c in conditions if c not in alone], kept)
        if solved is not None:
            drawn = points_in_cells(field, conditions, solved, seed)
            _keep(_asked(field, conditions, solved), drawn, few, found)
    return found


@dataclass(frozen=True)
class _Asked:
    """What is asked of a point: values of solved parameters to put in, and conditions."""

    names: tuple[str, ...]
    solved: dict[str, tuple[Terms, Terms]]
    conditions: tuple[tuple[Comparison, Terms, Terms], ...]

    @classmethod
    def of(
        cls,
        field: ParameterField,
        conditions: Sequence[Comparison],
        solved: dict[str, Scalar],
    ) -> _Asked:
        put = {n: (_terms(e.numer), _terms(e.denom)) for n, e in reversed(solved.items())}
        asked = [(c, _terms(c.element.numer), _terms(c.element.denom)) for c in conditions]
        return cls(field.parameters, put, tuple(asked))

    def completed(self, point: dict[str, Fraction]) -> dict[str, PointValue] | None:
        """Return the point with all parameters, or None where a condition does not hold."""
        if not _completed(point, self.solved):
            return None
        if all(_holds(_quotient(above, below, point), c) for c, above, below in self.conditions):
            return {n: point[n] for n in self.names}
        return None


@dataclass(frozen=True)
class _AskedOverPi:
    """The same in a field with the number pi."""

    field: ParameterField
    solved: Mapping[str, Scalar]
    conditions: Sequence[Comparison]

    def completed(self, point: dict[str, Fraction]) -> dict[str, PointValue] | None:
        """Return the point with all parameters, or None where a condition does not hold."""
        field, whole = self.field, _as_elements(self.field, point)
        for name, element in reversed(list(self.solved.items())):
            try:
                whole[name] = field.substituted(element, whole)
            except ZeroDivisionError:  # it is not defined there
                return None
        if not all(_holds_over_pi(field, c, whole) for c in self.conditions):
            return None
        return {n: _plain(field, whole[n]) for n in field.free}


def _plain(field: ParameterField, element: Scalar) -> PointValue:
    value = field.constant(element)
    return element if value is None else value


def _asked(
    field: ParameterField, conditions: Sequence[Comparison], solved: dict[str, Scalar]
) -> _Asked | _AskedOverPi:
    if PI in field.parameters:
        return _AskedOverPi(field, solved, conditions)
    return _Asked.of(field, conditions, solved)


def _keep(
    asked: _Asked | _AskedOverPi,
    points: Iterable[dict[str, Fraction]],
    count: int,
    found: list[dict[str, PointValue]],
) -> None:
    """Add points at which all conditions hold until there are `count` different ones."""
    if len(found) >= count:
        return
    for point in points:
        whole = asked.completed(point)
        if whole is not None and whole not in found:
            found.append(whole)
            if len(found) >= count:
                return


def _drawn_points(
    field: ParameterField,
    conditions: Sequence[Comparison],
    solved: Mapping[str, Scalar],
    tries: int,
    seed: int,
) -> Iterator[dict[str, Fraction]]:
    """Yield values of the parameters that are not solved."""
    signs = _drawn_signs(field, conditions)
    free = [n for n in field.free if n not in solved]
    draw = random.Random(seed)  # noqa: S311  (points to look at, no secret)
    for attempt in range(tries):
        one = SCALES[attempt % len(SCALES)]
        scales = {n: draw.choice(SCALES) if attempt % 2 else one for n in free}
        yield _drawn(scales, signs, draw)


def _completed(point: dict[str, Fraction], put: Mapping[str, tuple[Terms, Terms]]) -> bool:
    """Give the solved parameters their values; False where one is not defined."""
    for name, (above, below) in put.items():
        value = _quotient(above, below, point)
        if value is None:
            return False
        point[name] = value
    return True


def _solved(
    field: ParameterField, conditions: Sequence[Comparison], kept: frozenset[str] = frozenset()
) -> dict[str, Scalar] | None:
    """The parameters that equations give, each by those that are not solved before it.

    Those of `kept` are not solved.  None where an equation is linear in no other.
    """
    solved: dict[str, Scalar] = {}
    for condition in conditions:
        if condition.relation != "=":
            continue
        element = field.of_polynomial(condition.element.numer)
        for name, value in solved.items():
            element = field.substituted(element, {name: value})
        if not element:
            continue
        found = _linear_root(field, element, kept)
        if found is None:
            return None
        solved[found[0]] = found[1]
    return solved


def _linear_root(
    field: ParameterField, element: Scalar, kept: frozenset[str]
) -> tuple[str, Scalar] | None:
    for factor, exponent in field.factored(element).factors:
        if exponent < 0:
            continue
        for place, name in reversed(list(enumerate(field.parameters))):
            if name != PI and name not in kept and factor.degree(factor.ring.gens[place]) == 1:
                free, slope = map(field.of_polynomial, coefficients_in(factor, place))
                return name, -free / slope
    return None


def _drawn_signs(field: ParameterField, conditions: Sequence[Comparison]) -> dict[str, int]:
    """The sign of each parameter that a condition on it alone fixes."""
    signs = {}
    for name in field.free:
        x = field.symbol(name)
        for condition in conditions:
            multiple = field.number_sign(condition.element / x)
            if multiple and condition.relation in {">", ">="}:
                signs[name] = multiple
    return signs


def _drawn(
    scales: Mapping[str, tuple[int, int]], signs: Mapping[str, int], draw: random.Random
) -> dict[str, Fraction]:
    """Different values for the names, none of them 0."""
    point: dict[str, Fraction] = {}
    for name, (top, bottom) in scales.items():
        while True:
            value = Fraction(draw.randint(1, top + len(scales)), draw.randint(1, bottom))
            value *= signs.get(name) or draw.choice((1, -1))
            if value not in point.values():
                break
        point[name] = value
    return point
