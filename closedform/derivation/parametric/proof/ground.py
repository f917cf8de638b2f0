"""What printed statements are held against: one case at one of its points.

Names are taken from their definitions as they are printed; A and x0 from the model's own
elements; e^(At) from the Taylor series of acb_mat.
"""

from __future__ import annotations

from collections.abc import Iterator, Mapping, Sequence
from dataclasses import dataclass, replace
from functools import cached_property
from itertools import pairwise
from typing import Any, Protocol

from flint import acb, acb_mat, acb_poly, arb, arb_mat, ctx

from closedform.algebra.enclosure import ball_of
from closedform.algebra.field import Scalar
from closedform.derivation.proof.evaluation import ball_at, matrix_at
from closedform.derivation.proof.finding import Comparison, Finding
from closedform.derivation.step import Matrix, Side, Statement, Step, Symbol
from closedform.notation.expression import (
    Expression,
    Name,
    Negation,
    Number,
    Power,
    Product,
    Quotient,
    Sum,
    is_expression,
    names_in,
)
from closedform.response.parametric.case import Case
from closedform.response.parametric.response import ParametricResponse
from closedform.verification.parametric.values import trial_times

__all__ = [
    "Defined",
    "Ground",
    "Said",
    "coefficients_at",
    "defined_in",
    "said_in",
    "unknown_in",
    "variable_of",
    "zeros_of",
]


@dataclass(frozen=True)
class Said:
    """A statement where it stands: in which step, in which row, of which cases it is said."""

    step: Step
    row: Mapping[str, Any]
    statement: Statement
    cases: tuple[int, ...]


def said_in(step: Step, count: int) -> Iterator[Said]:
    """Yield every statement of a step: its own, and those in its facts, however deep.

    `count` is the number of cases; a step or row that names none is about all of them.
    """
    cases = step.facts.get("cases", tuple(range(count)))
    for statement in step.statements:
        yield Said(step, step.facts, statement, _numbers(cases))
    yield from _inside(step, step.facts, step.facts, _numbers(cases))


def _inside(
    step: Step, row: Mapping[str, Any], item: object, cases: tuple[int, ...]
) -> Iterator[Said]:
    if isinstance(item, Statement):
        yield Said(step, row, item, cases)
    elif isinstance(item, Mapping):
        own = _numbers(item.get("cases", cases))
        for value in item.values():
            yield from _inside(step, item, value, own)
    elif isinstance(item, list | tuple):
        for value in item:
            yield from _inside(step, row, value, cases)


def _numbers(cases: object) -> tuple[int, ...]:
    if not isinstance(cases, tuple):
        raise TypeError(f"{cases} are no numbers of cases")
    return cases


def variable_of(said: Said) -> Name:
    """Return the name in brackets after the symbol on the left.  Raises TypeError for none."""
    first = said.statement.sides[0]
    if isinstance(first, Symbol) and isinstance(first.argument, Name):
        return first.argument
    raise TypeError(f"{first} has no variable")


@dataclass(frozen=True)
class Defined:
    """A name with its definition in print: a formula, or a zero of a polynomial in one name.

    Of a zero it may be a part, or `weight` times a part of numerator/p' there; with `whole` p is
    not the polynomial with this zero, but the characteristic one.
    """

    name: str
    formula: Expression
    cases: tuple[int, ...]
    place: int | None = None
    turned: bool = False
    part: str = ""
    numerator: Expression | None = None
    weight: int = 1
    whole: bool = False


def defined_in(steps: Sequence[Step], count: int) -> Iterator[Defined]:
    """Yield the definitions in print, zeros of polynomials before formulas."""
    said = [s for step in steps for s in said_in(step, count)]
    for s in said:
        if s.statement.says == "named zeros":
            for name, place in zip(s.row["names"], s.row["places"], strict=True):
                first = _formula(s.statement.sides[0])
                yield Defined(name.text, first, s.cases, place, bool(s.row["turned"]))
        elif s.statement.says == "known zeros":
            first = _formula(s.statement.sides[0])
            for line in s.row["table"]:
                name, place = line["name"].text, line["place"]
                yield Defined(name, first, s.cases, place, part=line["part"])
        elif s.statement.says == "amount":
            numerator = _formula(s.statement.sides[-1])
            first = _formula(s.row["polynomial"].sides[0])
            for line in s.row["constants"]:
                yield Defined(
                    line["name"].text,
                    first,
                    s.cases,
                    s.row["place"],
                    part=line["part"],
                    numerator=numerator,
                    weight=line["weight"],
                    whole=s.row["whole"],
                )
    for s in said:
        left = s.statement.sides[0]
        if s.statement.says in ("definition", "abbreviation", "restated"):
            if not isinstance(left, Name):
                raise TypeError(f"{left} is no name")
            yield Defined(left.text, _formula(s.statement.sides[-1]), s.cases)


def _formula(side: Side) -> Expression:
    if not is_expression(side):
        raise TypeError(f"{side} is no formula")
    return side


class Place(Protocol):
    """Where the parameters have values: a sampled point, or the values of the user."""

    def balls(self) -> dict[str, arb]:
        """Return a ball for every parameter at FLINT's current precision."""


@dataclass(frozen=True)
class Ground:
    """One case at one point, at FLINT's current precision.

    Nothing here may outlive the precision at which it was made: see `afresh`.
    """

    response: ParametricResponse
    case: Case
    point: Place
    definitions: tuple[Defined, ...]

    def afresh(self) -> Ground:
        """Return the same at another precision: nothing is worked out yet."""
        return replace(self)

    @cached_property
    def names(self) -> dict[str, Any]:
        """The parameters, and every name that is defined in print for this case."""
        found: dict[str, Any] = {name: acb(ball) for name, ball in self.point.balls().items()}
        for defined in self.definitions:
            if self.case.number not in defined.cases:
                continue
            if defined.place is None:
                found[defined.name] = ball_at(defined.formula, found)
            else:
                whole = self.characteristic if defined.whole else None
                found[defined.name] = _zero(defined, found, whole)
        return found

    @cached_property
    def _parameters(self) -> dict[str, arb]:
        return self.point.balls()

    def element(self, element: Scalar) -> acb:
        """Return the value of an element of the field."""
        return acb(self.response.model.field.enclose_at(element, self._parameters))

    @cached_property
    def matrix(self) -> acb_mat:
        """A, from the model's own elements."""
        return acb_mat([[self.element(e) for e in row] for row in self.response.model.matrix])

    @cached_property
    def initial(self) -> acb_mat:
        """x0, from the model's own elements."""
        return acb_mat([[self.element(e)] for e in self.response.model.initial])

    @cached_property
    def characteristic(self) -> acb_poly:
        """det(lambda I - A)."""
        return self.matrix.charpoly()

    @cached_property
    def instants(self) -> tuple[tuple[acb, acb_mat], ...]:
        """Two rational times, and e^(At) then."""
        n = self.matrix.nrows()
        real = arb_mat(n, n, [e.real for e in self.matrix.entries()])
        times = [acb(ball_of(t)) for t in trial_times(real)]
        return tuple((t, (self.matrix * t).exp()) for t in times)

    def at_time(self, time: acb) -> dict[str, Any]:
        """Return the names with a value for the time."""
        return self.names | {self.response.model.time: time}

    def values(self, side: Side) -> list[acb]:
        """Return what a side stands for: two numbers of a pair, one of a formula."""
        if isinstance(side, Symbol) and side.kind in ("pair", "real pair"):
            middle, distance = (ball_at(_formula(part), self.names) for part in side.parts)
            if side.kind == "pair":
                distance = distance * acb(0, 1)
            return [middle + distance, middle - distance]
        return [acb(ball_at(_formula(side), self.names))]

    def matrix_of(self, matrix: Matrix, names: Mapping[str, Any] | None = None) -> acb_mat:
        """Return the value of a matrix of formulas."""
        return matrix_at(matrix, self.names if names is None else names)

    def vanishing(self, place: str, value: acb) -> Finding:
        """Return the finding that a number is 0, measured by the size of A."""
        scale = max((abs(e).upper() for e in self.matrix.entries()), default=arb(1))
        size = (1 + scale) ** self.matrix.nrows()
        return Comparison(place, value, acb(0), scale=size)


def coefficients_at(formula: Expression, variable: str, names: Mapping[str, Any]) -> acb_poly:
    """Return a formula as a polynomial in one of its names, by interpolation."""
    degree = _degree(formula, variable)
    points = [acb(k) for k in range(degree + 1)]
    values = [acb(ball_at(formula, {**names, variable: x})) for x in points]
    return acb_poly.interpolate(points, values)


def _degree(formula: Expression, variable: str) -> int:
    """A bound of the degree: powers in polynomials add up."""
    match formula:
        case Name(text):
            return int(text == variable)
        case Number():
            return 0
        case Negation(inside) | Quotient(inside, _):
            return _degree(inside, variable)
        case Sum(parts):
            return max(_degree(part, variable) for part in parts)
        case Product(parts):
            return sum(_degree(part, variable) for part in parts)
        case Power(base, Number(exponent)):
            return int(exponent) * _degree(base, variable)
    return 0


def unknown_in(formula: Expression, names: Mapping[str, Any]) -> str:
    """Return the one name without a value.  Raises ValueError if there is none, or several."""
    unknown = sorted(names_in(formula) - set(names))
    if len(unknown) != 1:
        raise ValueError(f"one variable is expected in {formula}")
    return unknown[0]


def zeros_of(polynomial: acb_poly) -> list[acb] | None:
    """Return the isolated zeros by real part; None where they are not told apart."""
    try:
        roots: Any = polynomial.roots(tol=arb(2) ** (-3 * ctx.prec // 4))
    except ValueError:  # not isolated at this precision
        return None
    found = sorted(roots, key=lambda z: float(z.real.mid()))
    apart = all(not a.overlaps(b) for i, a in enumerate(found) for b in found[:i])
    return found if apart else None


def _part(defined: Defined, names: Mapping[str, Any], whole: acb_poly | None) -> acb:
    """A part of the zero at a place, by real and then imaginary part, or of numerator/p' there."""
    variable = unknown_in(defined.formula, names)
    polynomial = coefficients_at(defined.formula, variable, names)
    zeros = _in_order(zeros_of(polynomial) or [])
    if zeros is None or defined.place is None or len(zeros) < defined.place:
        return acb("nan")
    value = zeros[defined.place - 1]
    if defined.numerator is not None:
        above = ball_at(defined.numerator, {**names, variable: value})
        slope = (polynomial if whole is None else whole).derivative()
        value = above / slope(value)
    return acb(defined.weight * (value.real if defined.part == "real" else value.imag))


def _in_order(zeros: list[acb]) -> list[acb] | None:
    """Zeros that are sorted by real part, those of one real part by imaginary part."""
    groups: list[list[acb]] = []
    for zero in zeros:
        if groups and any(z.real.overlaps(zero.real) for z in groups[-1]):
            groups[-1].append(zero)
        else:
            groups.append([zero])
    for group in groups:
        group.sort(key=lambda z: z.imag.mid())
        if any(a.imag.overlaps(b.imag) for a, b in pairwise(group)):
            return None
    return [zero for group in groups for zero in group]


def _zero(defined: Defined, names: Mapping[str, Any], whole: acb_poly | None) -> acb:
    """The real zero at a place, counted by real part; not finite where it is not told apart."""
    if defined.part:
        return _part(defined, names, whole)
    zeros = zeros_of(coefficients_at(defined.formula, unknown_in(defined.formula, names), names))
    for zero in zeros or ():
        if not zero.imag.contains(0):
            continue
        others = [z for z in zeros or () if z is not zero]
        if any(z.overlaps(zero.conjugate()) for z in others):
            continue
        below = sum(bool(z.real < zero.real) for z in others)
        same = sum(bool(z.real.overlaps(zero.real)) for z in others)
        if below + same // 2 + 1 == defined.place:
            return acb(-zero.real if defined.turned else zero.real)
    return acb("nan")
