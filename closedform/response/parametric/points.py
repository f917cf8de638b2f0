"""Admissible points of a case: values of all parameters at which it is put to the test."""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import dataclass, replace
from fractions import Fraction

from flint import arb

from closedform.algebra.domain import Comparison, ParameterDomain
from closedform.algebra.enclosure import ball_of
from closedform.algebra.field import Scalar
from closedform.algebra.parameter_field import PI, ParameterField
from closedform.algebra.roots import enclosed_roots
from closedform.algebra.sample import PointValue, holds_at
from closedform.algebra.squares import coefficients_in
from closedform.response.parametric.case import Case

__all__ = ["Point", "border_points", "case_points", "point_of", "points_beside"]


@dataclass(frozen=True)
class Point:
    """A value for every parameter: numbers, and at most one root of a polynomial.

    `root` is (name, coefficients highest first, place among the real roots from 0), the
    coefficients numbers of `field`: rational, or in pi alone; `derived` are parameters that
    equations give by the others, or that have the number pi in them, as elements of `field`.
    """

    values: tuple[tuple[str, Fraction], ...]
    root: tuple[str, tuple[Scalar, ...], int] | None = None
    derived: tuple[tuple[str, Scalar], ...] = ()
    field: ParameterField | None = None

    def balls(self) -> dict[str, arb]:
        """Return a ball for every name of the field, pi among them, at the current precision."""
        found = {name: ball_of(value) for name, value in self.values}
        if self.field is not None and PI in self.field.parameters:
            found[PI] = arb.pi()
        if self.root is not None and self.field is not None:
            name, coefficients, place = self.root
            found[name] = _real_roots(self.field, coefficients)[place]
        for name, element in self.derived:
            if self.field is not None:
                found[name] = self.field.enclose_at(element, found)
        return found

    def __str__(self) -> str:
        texts = [f"{name} = {value}" for name, value in self.values]
        if self.root is not None:
            texts.append(f"{self.root[0]} a root of its equation")
        for name, element in self.derived:
            number = self.field is not None and not self.field.names_in(element)
            texts.append(f"{name} = {_told(element)}" if number else f"{name} from the others")
        return ", ".join(texts)


def case_points(field: ParameterField, case: Case, count: int, *, seed: int = 1) -> list[Point]:
    """Return up to `count` points of a case, the same each time; fewer if few are found."""
    points = [_completed(field, case, values) for values in case.domain.sample(count, seed)]
    return points or _on_a_curve(field, case, count, seed)


def points_beside(field: ParameterField, case: Case, count: int) -> list[Point]:
    """Return points at which the equations of a case hold, whatever its other conditions say.

    For a case of which no point is known: its formulas are identities there too, wherever
    they have a value.
    """
    equations = tuple(c for c in case.domain.conditions if c.relation == "=")
    return case_points(field, replace(case, domain=ParameterDomain(field, equations)), count)


def border_points(field: ParameterField, case: Case) -> list[Point]:
    """Return points of a case at which one parameter is 0, where the case allows it."""
    found = []
    for values in case.domain.sample(1, 5):
        for name in field.free:
            if name in case.branch.values:
                continue
            moved: dict[str, PointValue] = {**values, name: Fraction(0)}
            if all(holds_at(condition, moved) for condition in case.domain.conditions):
                found.append(_completed(field, case, moved))
    return found


def _completed(field: ParameterField, case: Case, values: dict[str, PointValue]) -> Point:
    """Put in what the equations of the branch say."""
    whole = {n: field.scalar(v) if isinstance(v, Fraction) else v for n, v in values.items()}
    whole |= {n: field.substituted(e, whole) for n, e in case.branch.values.items()}
    return point_of(field, whole)


def point_of(field: ParameterField, values: Mapping[str, Scalar]) -> Point:
    """Return the point at which the parameters have these values, numbers of the field."""
    plain, derived = [], []
    for name in field.free:
        value = field.constant(values[name])
        if value is None:
            derived.append((name, values[name]))
        else:
            plain.append((name, value))
    return Point(tuple(plain), None, tuple(derived), field)


def _told(element: Scalar) -> str:
    return str(element).replace("**", "^")


def _on_a_curve(field: ParameterField, case: Case, count: int, seed: int) -> list[Point]:
    """Leave out one equation, and solve it for one parameter at points of the others."""
    equations = [c for c in case.domain.conditions if c.relation == "="]
    equations.sort(key=lambda c: len(c.element.numer))  # one that all others are multiples of
    if not equations or any(c.element.numer.rem(equations[0].element.numer) for c in equations):
        return []
    others = tuple(c for c in case.domain.conditions if c.relation != "=")
    wider = ParameterDomain(field, others)
    found: list[Point] = []
    for values in wider.sample(40 * count, seed):
        for name in reversed(field.parameters):
            if name not in field.names_in(equations[0].element) or name in case.branch.values:
                continue
            found += _solved(field, case, equations[0].element, values, name)
            if len(found) >= count:
                return found[:count]
    return found


def _solved(
    field: ParameterField, case: Case, element: Scalar, values: dict[str, PointValue], name: str
) -> list[Point]:
    """The points with these values at which the equation holds and all conditions too."""
    given = case.branch.values
    put = {n: field.scalar(v) for n, v in values.items() if n != name and isinstance(v, Fraction)}
    left = field.substituted(field.of_polynomial(element.numer), put)
    if field.names_in(left) - {name}:
        return []
    parts = coefficients_in(left.numer, field.parameters.index(name))
    if len(parts) < 2:
        return []
    highest_first = tuple(field.of_polynomial(c) / left.denom for c in reversed(parts))
    found = []
    for k in range(len(_real_roots(field, highest_first))):
        rest = tuple(
            (n, v)
            for n, v in values.items()
            if n != name and n not in given and isinstance(v, Fraction)
        )
        point = Point(rest, (name, highest_first, k), tuple(given.items()), field)
        if _admissible(field, case.domain.conditions, point):
            found.append(point)
    return found


def _admissible(field: ParameterField, conditions: tuple[Comparison, ...], point: Point) -> bool:
    balls = point.balls()
    for condition in conditions:
        if condition.relation == "=":
            continue
        value = field.enclose_at(condition.element, balls)
        holds = not value.contains(0) if condition.relation == "!=" else bool(value > 0)
        if not holds:
            return False
    return True


def _real_roots(field: ParameterField, coefficients: tuple[Scalar, ...]) -> list[arb]:
    """The real roots of a polynomial in numbers, highest coefficient first, growing."""
    found = []
    for factor, _ in field.polynomial(coefficients).factor_list()[1]:
        found += [z.real for z in enclosed_roots(field, factor.monic()) if z.imag == 0]
    return sorted(found, key=lambda ball: ball.mid())
