"""The driven solution over a field of numbers: what it is made of, parameters put in."""

from __future__ import annotations

from collections.abc import Callable, Iterable, Mapping, Sequence
from dataclasses import dataclass, replace
from fractions import Fraction

from flint import acb, ctx

from closedform.algebra.enclosure import exact_end
from closedform.algebra.exponential import ExponentialMatrix
from closedform.algebra.field import BaseField, Polynomial, Scalar, TooManyRootsError, base_field
from closedform.algebra.parameter_field import ParameterField
from closedform.algebra.roots import enclosed_roots
from closedform.algebra.surds import SurdSum
from closedform.algebra.value_field import FieldWithPi, element_at, value_field
from closedform.notation.terms import square_root_of_surd
from closedform.response.driven.functions import DrivenFunctions, Interval, Summand
from closedform.response.driven.periodic import PeriodFunctions

__all__ = ["FieldPart", "InField", "Spot", "ValueTerm", "in_field", "root_in"]

_BITS = 256


@dataclass(frozen=True)
class ValueTerm:
    """What the roots of a polynomial p contribute to each entry of the columns.

    `parts` are polynomials whose product p is, irreducible where that is known; for
    p = (x - a)^2 it is x - a alone.  `entries` has, by row and column, the coefficients of
    R_0, R_1, …, lowest power of lambda first.
    """

    p: Polynomial
    parts: tuple[Polynomial, ...]
    entries: tuple[tuple[tuple[tuple[Scalar, ...], ...], ...], ...]

    @property
    def is_square(self) -> bool:
        """Whether p = (x - a)^2."""
        return sum(int(part.degree()) for part in self.parts) < int(self.p.degree())


@dataclass(frozen=True)
class FieldPart:
    """A driven solution, or that to one period of inputs that repeat, over a field of numbers.

    `period` and `count` are those of the repeat (count None: for ever); period is None for
    what does not repeat.
    """

    terms: tuple[ValueTerm, ...]
    intervals: tuple[Interval, ...]
    period: Scalar | None = None
    count: int | None = None


@dataclass(frozen=True, slots=True)
class Spot:
    """An interval of a part, `shift` periods later than it stands there."""

    part: int
    interval: int
    shift: int = 0


@dataclass(frozen=True)
class InField:
    """The functions of a driven solution with numbers in the place of parameters.

    All numbers are elements of `field`: those of the terms, the instants, the origins and
    the constants of the intervals, and the instants of the time that were named.  The first
    part is all but inputs that repeat, the others are one period of these each.  `fixed` are
    values that conditions state: an instant, a row and the value.
    """

    field: BaseField
    parts: tuple[FieldPart, ...]
    fixed: tuple[tuple[Scalar, int, Scalar], ...] = ()

    def interval_at(self, t: SurdSum) -> int:
        """Return the interval of the first part at an instant; at a switching the later one."""
        return self._interval(self.parts[0], self.field.scalar(t))

    def spots_at(self, t: SurdSum) -> list[Spot]:
        """Return what adds up to the solution at an instant: every period so far by itself."""
        found = [Spot(0, self.interval_at(t))]
        for place, part in enumerate(self.parts[1:], start=1):
            for k in range(self.periods_at(place, t)):
                local = self.field.scalar(t) - self._later(part, k)
                found.append(Spot(place, self._interval(part, local), k))
        return found

    def periods_at(self, place: int, t: SurdSum) -> int:
        """Return how many periods of a part have begun at an instant."""
        part, field = self.parts[place], self.field
        if part.period is None:
            return 0
        ratio = (field.scalar(t) - part.intervals[0].start) / part.period
        with ctx.workprec(_BITS):
            count = int(exact_end(field.enclose(ratio).mid())) + 2
        while count > 0 and field.sign(ratio - field.scalar(count - 1)) < 0:
            count -= 1
        return count if part.count is None else min(count, part.count)

    def since(self, spot: Spot, origin: Scalar, t: SurdSum) -> Scalar:
        """Return the time since an origin of a spot."""
        return self.field.scalar(t) - origin - self._later(self.parts[spot.part], spot.shift)

    def roots(self) -> list[acb]:
        """Return balls around all eigenvalues, those of the inputs too."""
        parts = dict.fromkeys(part for term in self.parts[0].terms for part in term.parts)
        return [z for part in parts for z in enclosed_roots(self.field, part)]

    def _later(self, part: FieldPart, shift: int) -> Scalar:
        zero = self.field.domain.zero
        return zero if part.period is None else part.period * self.field.scalar(shift)

    def _interval(self, part: FieldPart, at: Scalar) -> int:
        later = [k for k, own in enumerate(part.intervals) if self.field.sign(at - own.start) >= 0]
        return max(later, default=0)


def in_field(
    source: BaseField,
    functions: DrivenFunctions,
    periods: Sequence[PeriodFunctions] = (),
    *,
    values: Mapping[str, SurdSum] | None = None,
    times: Iterable[SurdSum] = (),
    fixed: Sequence[tuple[Scalar, int, Scalar]] = (),
) -> InField:
    """Return the functions of a solution over the field of their numbers.

    `source` is the field of the model; `values` gives each parameter of it a value, and is
    not needed without any.  `times` are those at which values will be asked for, `fixed` the
    values that conditions state.
    Raises TooManyRootsError where all of these need too large a field.
    """
    parts = [functions, *(own.single for own in periods)]
    elements = [e for part in parts for e in _elements(part)]
    elements += [own.repeat.period for own in periods]
    elements += [e for at, _, value in fixed for e in (at, value)]
    instants, given = list(times), dict(values or {})
    small = _field_of(source, elements, given, instants)
    roots = _roots_of_discriminants(small, functions, _into(source, small, given))
    field = _widened(source, elements, given, instants, roots) or small
    put = _into(source, field, given)
    made = [
        FieldPart(
            tuple(_terms(field, part.columns, put)),
            tuple(_interval(own, put) for own in part.intervals),
        )
        for part in parts
    ]
    repeated = [
        replace(part, period=put(own.repeat.period), count=own.repeat.count)
        for part, own in zip(made[1:], periods, strict=True)
    ]
    stated = tuple((put(at), row, put(value)) for at, row, value in fixed)
    return InField(field, (made[0], *repeated), stated)


def root_in(field: BaseField, square: Scalar) -> Scalar | None:
    """Return the square root of a number >= 0 as an element, or None if none is found."""
    number, scale = field.number(square), field.domain.one
    if number is None and isinstance(field, FieldWithPi):
        number, scale = field.number(square / field.pi**2), field.pi
    root = None if number is None else square_root_of_surd(number) if number.terms else number
    return None if root is None or not _holds(field, root) else field.scalar(root) * scale


def _holds(field: BaseField, number: SurdSum) -> bool:
    own = SurdSum.of(dict.fromkeys(field.radicands, Fraction(1)))
    wider = base_field([own, number])
    return len(wider.radicands) == len(field.radicands)


def _field_of(
    source: BaseField,
    elements: Sequence[Scalar],
    values: Mapping[str, SurdSum],
    others: Sequence[SurdSum],
) -> BaseField:
    if isinstance(source, ParameterField):
        return value_field(source, elements, values, others=others)
    return base_field([*(source.surds(e) for e in elements), *others])


def _widened(
    source: BaseField,
    elements: Sequence[Scalar],
    values: Mapping[str, SurdSum],
    times: Sequence[SurdSum],
    roots: Sequence[SurdSum],
) -> BaseField | None:
    """The field with the roots adjoined, or None if these are too many: they can be missed."""
    try:
        return _field_of(source, elements, values, [*times, *roots])
    except TooManyRootsError:
        return None


def _into(
    source: BaseField, field: BaseField, values: Mapping[str, SurdSum]
) -> Callable[[Scalar], Scalar]:
    def put(element: Scalar) -> Scalar:
        if isinstance(source, ParameterField):
            return element_at(source, element, values, field)
        return field.scalar(source.surds(element))

    return put


def _elements(functions: DrivenFunctions) -> Iterable[Scalar]:
    for term in functions.columns.terms:
        yield from term.factor.polynomial
        for residue in term.residues:
            for matrix in residue.coefficients:
                for row in matrix.to_list():
                    yield from row
    for interval in functions.intervals:
        yield interval.start
        for summand in interval.summands:
            yield from (summand.origin, summand.constant.growth, summand.constant.angle)


def _interval(own: Interval, put: Callable[[Scalar], Scalar]) -> Interval:
    return Interval(
        put(own.start),
        None if own.end is None else put(own.end),
        tuple(
            Summand(
                s.place,
                put(s.origin),
                replace(s.constant, growth=put(s.constant.growth), angle=put(s.constant.angle)),
            )
            for s in own.summands
        ),
    )


def _terms(
    field: BaseField, columns: ExponentialMatrix, put: Callable[[Scalar], Scalar]
) -> Iterable[ValueTerm]:
    rows, count = columns.shape
    for term in columns.terms:
        p = field.polynomial([put(c) for c in term.factor.polynomial])
        entries = tuple(
            tuple(
                tuple(
                    tuple(put(entry.nth(k)) for k in range(term.factor.degree))
                    for residue in term.residues
                    for entry in (residue.entry(row, place),)
                )
                for place in range(count)
            )
            for row in range(rows)
        )
        yield ValueTerm(p, _parts(field, p), entries)


def _parts(field: BaseField, p: Polynomial) -> tuple[Polynomial, ...]:
    """The factors of p.  Of a degree above 2 they are left together where pi is in the field."""
    degree = int(p.degree())
    if degree == 1 or (degree > len("bc") and isinstance(field, FieldWithPi)):
        return (p,)
    if degree > len("bc"):
        return tuple(part.monic() for part, _ in p.factor_list()[1])
    one, half = field.domain.one, p.nth(1) / field.domain.convert(2)
    square = half**2 - p.nth(0)
    if not square:
        return (field.polynomial([one, half]),)
    root = root_in(field, square) if field.sign(square) > 0 else None
    if root is None:
        return (p,)
    return tuple(field.polynomial([one, half + sign]) for sign in (root, -root))


def _roots_of_discriminants(
    field: BaseField, functions: DrivenFunctions, put: Callable[[Scalar], Scalar]
) -> list[SurdSum]:
    """The square roots in the roots of quadratic factors, as far as they are surds."""
    found = []
    for term in functions.columns.terms:
        if term.factor.degree != len("bc"):
            continue
        _, b, c = (put(e) for e in term.factor.polynomial)
        square = (b / field.domain.convert(2)) ** 2 - c
        number = field.number(square)
        if number is None and isinstance(field, FieldWithPi):
            number = field.number(square / field.pi**2)
        if number is None or number.is_zero:
            continue
        own = base_field([number])
        root = square_root_of_surd(number if own.sign(own.scalar(number)) > 0 else -number)
        if root is not None:
            found.append(root)
    return found
