"""A driven solution with parameters in numbers: values put into the case that holds.

Nothing is solved again.  Which case holds is decided exactly, and every decimal is settled
by ball arithmetic on the written formulas, or exact.
"""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass, replace

from flint import arb

from closedform.algebra.enclosure import certified_decimals
from closedform.algebra.parameter_field import ParameterField
from closedform.algebra.surds import SurdSum
from closedform.model.parametric import ParametricModel, ValueSet
from closedform.notation.expression import ZERO, Expression, Name, product
from closedform.notation.terms import opened, sum_of
from closedform.response.driven.composition import constant_formula, element_formula, shifted
from closedform.response.driven.exact_sum import exact_value
from closedform.response.driven.functions import Interval
from closedform.response.driven.in_field import InField
from closedform.response.driven.instants import suitable_instants
from closedform.response.driven.period_formulas import PeriodicSolution
from closedform.response.driven.put_in import put_in, with_constants
from closedform.response.driven.response import DrivenResponse, DrivenSolution
from closedform.response.driven.written_values import written_balls
from closedform.response.parametric.in_numbers import InNumbers, in_numbers
from closedform.response.parametric.known import Known, known_at
from closedform.response.parametric.numbers import QuantityAt, case_at
from closedform.response.parametric.response import ParametricResponse
from closedform.response.sampling import surd_decimal

__all__ = ["DrivenNumbersAt", "PeriodNumbers", "driven_numbers_at", "driven_numbers_of"]


@dataclass(frozen=True)
class DrivenNumbersAt:
    """A driven response at one value for each parameter.

    `case` is the place of the case that holds, from 0.  `instants` are the start and the
    switchings, in numbers.  Shapes: `pieces` has a formula in the time alone for each
    interval and, in it, each row of the model; `rows` has a decimal for each of `times`
    and, in it, each row; `periods` has the parts of a period for each way to repeat.
    """

    label: str
    values: tuple[tuple[str, SurdSum], ...]
    case: int
    quantities: tuple[QuantityAt, ...]
    instants: tuple[InNumbers, ...]
    pieces: tuple[tuple[InNumbers, ...], ...]
    times: tuple[SurdSum, ...]
    rows: tuple[tuple[str, ...], ...]
    periods: tuple[tuple[PeriodNumbers, ...], ...] = ()


@dataclass(frozen=True)
class PeriodNumbers:
    """A formula per row, in local time and n, between two local times of the n-th period."""

    start: InNumbers
    end: InNumbers
    rows: tuple[InNumbers, ...]


def driven_numbers_of(response: DrivenResponse, *, digits: int) -> tuple[DrivenNumbersAt, ...]:
    """Return the numbers for the values of the model, if it has any, and each row of its table.

    A model in which pi is the only name has one set of values, which is empty.  The instants
    are those of the model; or such as suit the first of the value sets, if no switching
    hangs on a parameter; or such as suit each.

    Raises:  ValuesNotCoveredError; UnsettledError where `digits` digits cannot be settled.
    """
    model, stacked = response.model, response.model.stacked
    if not isinstance(stacked, ParametricModel):
        return ()
    field = stacked.field
    sets = (*(() if stacked.values is None else (stacked.values,)), *stacked.value_sets)
    if not field.free:
        sets = (ValueSet("", ()),)
    times: tuple[SurdSum, ...] = model.times or stacked.times
    fixed = not any(field.names_in(at) for at in (model.start, *model.timeline))
    found: list[DrivenNumbersAt] = []
    for given in sets:
        found.append(driven_numbers_at(response, given, digits=digits, times=times))
        if fixed:
            times = found[0].times
    return tuple(found)


def driven_numbers_at(
    response: DrivenResponse, given: ValueSet, *, digits: int, times: Sequence[SurdSum] = ()
) -> DrivenNumbersAt:
    """Return the numbers at one value for each parameter; `times` as given, or suitable ones.

    Raises:  ValuesNotCoveredError, UnsettledError, TooManyRootsError; TypeError for a model
             without parameters.
    """
    stacked = response.stacked
    if not isinstance(stacked, ParametricResponse):
        raise TypeError("a model without parameters has its numbers already")
    field, values = stacked.model.field, dict(given.values)
    case = case_at(stacked, given)
    solution = response.solutions[case.number]
    known = with_constants(solution, known_at(field, case, values))
    instants = tuple(times) or suitable_instants(put_in(solution, values))
    exact = put_in(solution, values, instants)
    points = () if solution.points is None else solution.points.constants
    names = [*(q.name for q in case.quantities), *(c.name for c in points if not c.put_in)]
    writer = _Writer(field, solution, known, digits)
    pieces = writer.pieces()
    if any(piece.rounded for rows in pieces for piece in rows):
        pieces = replace(writer, decimals=True).pieces()
    return DrivenNumbersAt(
        given.label,
        tuple((name, values[name]) for name in field.free),
        case.number,
        tuple(
            QuantityAt(name, known.exact.get(name), known.decimal(Name(name), digits))
            for name in names
        ),
        tuple(writer.number(interval.start) for interval in solution.functions.intervals),
        pieces,
        instants,
        tuple(_row(solution, known, exact, t, digits) for t in instants),
        tuple(writer.period(own) for own in solution.periodic),
    )


@dataclass(frozen=True)
class _Writer:
    """Writes a solution with numbers in place: each column, then its origin and constant."""

    field: ParameterField
    solution: DrivenSolution
    known: Known
    digits: int
    decimals: bool = False

    def pieces(self) -> tuple[tuple[InNumbers, ...], ...]:
        """Return what each interval gives for each row."""
        rows = range(len(self.solution.model.rows))
        intervals = self.solution.functions.intervals
        return tuple(tuple(self.formula(row, interval) for row in rows) for interval in intervals)

    def number(self, element: object) -> InNumbers:
        """Return an element of the field as a number."""
        formula, time = element_formula(self.field, element), self.solution.model.time
        return in_numbers(formula, self.known, time, self.digits)

    def period(self, own: PeriodicSolution) -> tuple[PeriodNumbers, ...]:
        """Return the n-th period of what one way to repeat adds."""
        found = self._period(own)
        if any(row.rounded for part in found for row in part.rows):
            return replace(self, decimals=True)._period(own)  # noqa: SLF001  of this class
        return found

    def _period(self, own: PeriodicSolution) -> tuple[PeriodNumbers, ...]:
        known, digits, counted = self.known, self.digits, (own.number,)

        def written(formula: Expression) -> InNumbers:
            return in_numbers(
                formula, known, own.local, digits, decimals=self.decimals, others=counted
            )

        return tuple(
            PeriodNumbers(
                in_numbers(part.start, known, own.local, digits),
                in_numbers(part.end, known, own.local, digits),
                tuple(map(written, part.rows)),
            )
            for part in own.stretches
        )

    def formula(self, row: int, interval: Interval) -> InNumbers:
        """Return what an interval gives for a row."""
        time = self.solution.model.time
        terms, rounded = [], False
        for summand in interval.summands:
            column = self.solution.columns[row][summand.place]
            if column == ZERO:
                continue
            constant = constant_formula(self.field, summand.constant)
            weighted = column if constant is None else product((constant, column))
            written = self._in_numbers(weighted)
            origin = self.number(summand.origin)
            moved = shifted(written.formula, time, origin.formula)
            rounded |= written.rounded or (origin.rounded and moved != written.formula)
            terms.append(moved)
        standing = [term for term in terms if term != ZERO]
        return InNumbers(opened(sum_of(standing)) if standing else ZERO, rounded)

    def _in_numbers(self, formula: Expression) -> InNumbers:
        time = self.solution.model.time
        return in_numbers(formula, self.known, time, self.digits, decimals=self.decimals)


def _row(
    solution: DrivenSolution, known: Known, exact: InField, t: SurdSum, digits: int
) -> tuple[str, ...]:
    """The rows at one instant, those that are algebraic numbers exactly."""
    spots, time = exact.spots_at(t), solution.model.time
    rows = range(len(solution.model.rows))
    found = [exact_value(exact, row, spots, t) for row in rows]

    asked = [row for row in rows if found[row] is None]

    def balls() -> list[arb]:
        return written_balls(exact, solution.pieces, solution.periodic, known, (time, t), asked)

    decimals = iter(certified_decimals(balls, digits))
    return tuple(next(decimals) if e is None else surd_decimal(e, digits) for e in found)
