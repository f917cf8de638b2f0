"""Admissible points of a case: values of all parameters at which it is put to the test."""

from __future__ import annotations

from dataclasses import dataclass, replace
from fractions import Fraction
from typing import Any

from flint import arb, fmpq, fmpq_poly

from closedform.algebra.domain import Comparison, ParameterDomain
from closedform.algebra.enclosure import ball_of
from closedform.algebra.field import Scalar, rational
from closedform.algebra.parameter_field import ParameterField
from closedform.algebra.sample import holds_at
from closedform.algebra.surds import SurdSum
from closedform.response.parametric.case import Case

__all__ = ["Point", "border_points", "case_points", "points_beside"]


@dataclass(frozen=True)
class Point:
    """A value for every parameter: numbers, and at most one root of a polynomial over Q.

    `root` is (name, coefficients highest first, place among the real roots from 0); `derived`
    are parameters that equations give by the others, as elements of `field`.
    """

    values: tuple[tuple[str, Fraction], ...]
    root: tuple[str, tuple[Fraction, ...], int] | None = None
    derived: tuple[tuple[str, Scalar], ...] = ()
    field: ParameterField | None = None

    def balls(self) -> dict[str, arb]:
        """Return a ball for every parameter at FLINT's current precision."""
        found = {name: ball_of(value) for name, value in self.values}
        if self.root is not None:
            name, coefficients, place = self.root
            found[name] = _real_roots(coefficients)[place]
        for name, element in self.derived:
            if self.field is not None:
                found[name] = self.field.enclose_at(element, found)
        return found

    def __str__(self) -> str:
        texts = [f"{name} = {value}" for name, value in self.values]
        if self.root is not None:
            texts.append(f"{self.root[0]} a root of its equation")
        texts += [f"{name} from the others" for name, _ in self.derived]
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
        for name in field.parameters:
            if name in case.branch.values:
                continue
            moved = {**values, name: Fraction(0)}
            if all(holds_at(condition, moved) for condition in case.domain.conditions):
                found.append(_completed(field, case, moved))
    return found


def _completed(field: ParameterField, case: Case, values: dict[str, Fraction]) -> Point:
    """Put in what the equations of the branch say."""
    exact = {name: SurdSum.rational(value) for name, value in values.items()}
    whole = dict(values)
    for name, element in case.branch.values.items():
        whole[name] = field.exact_at(element, exact).as_fraction()
    return Point(tuple((name, whole[name]) for name in field.parameters))


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
    field: ParameterField, case: Case, element: Scalar, values: dict[str, Fraction], name: str
) -> list[Point]:
    """The points with these values at which the equation holds and all conditions too."""
    put = {n: field.scalar(v) for n, v in values.items() if n != name}
    left = field.substituted(field.of_polynomial(element.numer), put)
    place = field.parameters.index(name)
    coefficients: dict[int, Fraction] = {}
    for monomial, c in left.numer.iterterms():
        coefficients[monomial[place]] = rational(c) / rational(left.denom.LC)
    degree = max(coefficients, default=0)
    if degree < 1:
        return []
    highest_first = tuple(coefficients.get(k, Fraction(0)) for k in range(degree, -1, -1))
    found = []
    for k in range(len(_real_roots(highest_first))):
        given = case.branch.values
        rest = tuple((n, v) for n, v in values.items() if n != name and n not in given)
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


def _real_roots(coefficients: tuple[Fraction, ...]) -> list[arb]:
    """The real roots of a polynomial over Q, highest coefficient first, growing."""
    numbers = [fmpq(c.numerator, c.denominator) for c in reversed(coefficients)]
    found: list[arb] = []
    for factor, _ in fmpq_poly(numbers).numer().factor()[1]:
        pairs: Any = factor.complex_roots()  # with multiplicities, which the stubs leave out
        found += [root.real for root, _ in pairs if root.imag == 0]
    return sorted(found, key=lambda ball: ball.mid())
