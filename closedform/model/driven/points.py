"""Values at single instants, in the place of initial values."""

from __future__ import annotations

from collections.abc import Mapping, Sequence
from dataclasses import dataclass
from typing import Generic, TypeVar

from closedform.algebra.field import Scalar
from closedform.errors import Place
from closedform.model.driven.initial_errors import (
    EarlyPointError,
    NoInstantError,
    PointConstantError,
    PointCountError,
    PointInputError,
    PointJetError,
    SeveralInstantsError,
)
from closedform.model.driven.instants import Order
from closedform.model.driven.jet_rows import JetRows
from closedform.model.driven.model import Jet, PointCondition
from closedform.model.driven.numerals import Numerals
from closedform.model.entries import kind_of
from closedform.model.errors import WrongKindError
from closedform.model.source import Source
from closedform.model.statement import array_of
from closedform.notation.equation import read_equation
from closedform.notation.expression import (
    Call,
    Expression,
    Name,
    Negation,
    Power,
    Product,
    Quotient,
    Sum,
)
from closedform.notation.jets import jet_of
from closedform.notation.linear import affine
from closedform.notation.plain import plain

__all__ = ["Point", "conditions_at", "stated_points"]

T = TypeVar("T")


@dataclass(frozen=True, slots=True)
class Point(Generic[T]):
    """Weights of jets at an instant that add up to a value; `key` is where it stands."""

    text: str
    at: T
    of_jets: tuple[tuple[Jet, T], ...]
    value: T
    key: str


def stated_points(
    value: object, unknowns: Sequence[str], numerals: Numerals[T]
) -> tuple[Point[T], ...]:
    """Return the conditions of an array of equations such as x(0) = 1.

    Raises:  NoInstantError, SeveralInstantsError, PointConstantError, WrongKindError, and what
             the reader of equations and the arithmetic raise.
    """
    source = numerals.source
    expected = 'an array of conditions in quotation marks, as ["x(0) = 1"],'
    found = []
    for k, text in enumerate(array_of(value, expected, "at_points", source), start=1):
        key = f"at_points[{k}]"
        if not isinstance(text, str):
            raise WrongKindError(source.at(key), "a condition in quotation marks", kind_of(text))
        found.append(_point(text, key, unknowns, numerals))
    return tuple(found)


def _point(text: str, key: str, unknowns: Sequence[str], numerals: Numerals[T]) -> Point[T]:
    arithmetic = numerals.arithmetic

    def work(place: Place) -> Point[T]:
        left, right = read_equation(
            text,
            time=numerals.names.time,
            constants=numerals.constants,
            functions=frozenset(unknowns),
            place=place,
        )
        numerals.note(left, right)
        instants: dict[str, list[Expression]] = {}
        apart = _without_instants(Sum((left, Negation(right))), unknowns, instants, place)
        if not instants:
            raise PointConstantError(place, text)
        jets = tuple(instants)
        weights, constant = affine(apart, jets, arithmetic, place)
        known = {
            arithmetic.value(instant, place): plain(instant)
            for several in instants.values()
            for instant in several
        }
        if len(known) > 1:
            raise SeveralInstantsError(place, text, *list(known.values())[:2])
        zero = arithmetic.added(constant, arithmetic.negated(constant), apart, place)
        parts = tuple(
            (Jet(*jet_of(jet)), weight)
            for jet, weight in zip(jets, weights, strict=True)
            if weight != zero
        )
        if not parts:
            raise PointConstantError(place, text)
        shown = " ".join(text.split())
        return Point(shown, next(iter(known)), parts, arithmetic.negated(constant), key)

    return numerals.read(text, key, work)


def _without_instants(
    expression: Expression,
    unknowns: Sequence[str],
    instants: dict[str, list[Expression]],
    place: Place,
) -> Expression:
    """The formula with x(0) as x; the instants are kept by their jets."""

    def inside(part: Expression) -> Expression:
        return _without_instants(part, unknowns, instants, place)

    match expression:
        case Call(function, argument) if jet_of(function)[0] in unknowns:
            instants.setdefault(function, []).append(argument)
            return Name(function)
        case Name(text) if jet_of(text)[0] in unknowns:
            raise NoInstantError(place, text)
        case Negation(operand):
            return Negation(inside(operand))
        case Sum(terms):
            return Sum(tuple(map(inside, terms)))
        case Product(factors):
            return Product(tuple(map(inside, factors)))
        case Quotient(above, below):
            return Quotient(inside(above), inside(below))
        case Power(base, exponent):
            return Power(inside(base), inside(exponent))
        case Call(function, argument):
            return Call(function, inside(argument))
        case _:
            return expression


def conditions_at(
    points: Sequence[Point[Scalar]],
    rows: JetRows,
    inputs: Sequence[str],
    start: tuple[Scalar, str],
    order: Order,
    source: Source,
) -> tuple[PointCondition, ...]:
    """Return the conditions as weights of states; their numbers are elements of the field.

    `inputs` are the inputs as errors write them, `start` the beginning of time and its text.

    Raises:  PointCountError unless there is one for each state, PointJetError,
             PointInputError, EarlyPointError.
    """
    states = rows.reduction.jets
    if len(points) != len(states):
        names = tuple(jet.text for jet in states)
        raise PointCountError(source.at("at_points"), len(points), names)
    found = []
    for point in points:
        place = source.at(point.key)
        row = rows.combined(dict(point.of_jets))
        if row is None:
            raise PointJetError(place, point.text)
        if row.of_inputs:
            acting = tuple(inputs[k] for k in sorted(row.of_inputs))
            raise PointInputError(place, point.text, acting)
        if not row.of_states:
            raise PointConstantError(place, point.text)
        if order.known(point.at, start[0]) == -1:
            raise EarlyPointError(place, point.text, start[1])
        found.append(_condition(point, row.of_states, rows))
    return tuple(found)


def _condition(
    point: Point[Scalar], weights: Mapping[int, Scalar], rows: JetRows
) -> PointCondition:
    zero = rows.field.domain.zero
    of_states = tuple(weights.get(k, zero) for k in range(len(rows.reduction.jets)))
    return PointCondition(point.text, point.at, of_states, point.value)
