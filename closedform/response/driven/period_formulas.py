"""Formulas of the response to inputs that repeat: in the n-th period, after it, and steady."""

from __future__ import annotations

from collections.abc import Iterator
from dataclasses import dataclass, replace

from closedform.algebra.field import Scalar
from closedform.errors import InputError
from closedform.model.driven.model import DrivenModel
from closedform.notation.expression import ZERO, Expression
from closedform.notation.plain import plain
from closedform.notation.terms import opened, sum_of
from closedform.response.by_mode import ByMode, ModePart
from closedform.response.driven.composition import (
    constant_formula,
    element_formula,
    renamed,
    step_formula,
    summed,
)
from closedform.response.driven.functions import Interval, Summand, Switch
from closedform.response.driven.period_amounts import writing_of
from closedform.response.driven.period_guards import Guards
from closedform.response.driven.period_sums import PeriodSums
from closedform.response.driven.periodic import Blow, PeriodFunctions
from closedform.response.driven.stability import Stability
from closedform.response.driven.strokes import (
    ENDLESS,
    ONCE,
    Count,
    Struck,
    UnwrittenSumError,
)
from closedform.response.parametric.case import Case

__all__ = ["PeriodStretch", "PeriodicSolution", "RepeatedModeError", "periodic_solution"]

Rows = tuple[tuple[Expression, ...], ...]

MOST_PERIODS_WRITTEN = 24
"""Up to so many periods are written in one formula for all times."""


class RepeatedModeError(InputError):
    """A repeated pair whose sum over periods is not written."""

    def __init__(self, model: str, mode: str) -> None:
        super().__init__(model, mode)
        self.model, self.mode = model, mode

    def __str__(self) -> str:
        return (
            f"{self.model}: an input repeats, and the pair {self.mode} of eigenvalues is repeated "
            "too; sums over periods are written for simple pairs and for real eigenvalues. State "
            "a number of periods as pieces of the input."
        )


@dataclass(frozen=True, slots=True)
class PeriodStretch:
    """A formula per row for the part of each period between two local times, `end` excluded.

    Local time is counted from the start of the period.
    """

    start: Expression
    end: Expression
    rows: tuple[Expression, ...]


@dataclass(frozen=True)
class PeriodicSolution:
    """The response from rest to the inputs that repeat with one period.

    The n-th period, n = 1, 2, … up to `count`, begins at start + (n - 1) period; `number` and
    `local` are the names of n and of the local time.  `stretches` hold in the n-th period,
    `after` for the time t once all periods are over (None if they go on).  `left` are the
    states at the end of one period by itself, which began at rest: what strikes at its start
    is in it, what strikes at the next one's start is not; `carried` are these after n periods.

    `steady` is what `stretches` tend to, and `begins` what `carried` tends to,
    (I - e^(AT))^(-1) `left`: where all modes decay and the periods go on, None elsewhere.
    Every formula in `provided` is a divisor: where one vanishes, a pair of eigenvalues ± i w
    has a whole number of turns in a period, and there is resonance.  `meets` are the
    frequencies of pairs of which that is so throughout.

    `for_all_times` are the formulas in one, with unit steps: up to a number of periods.
    """

    period: Expression
    start: Expression
    count: int | None
    number: str
    local: str
    stretches: tuple[PeriodStretch, ...]
    after: tuple[Expression, ...] | None
    steady: tuple[PeriodStretch, ...] | None
    provided: tuple[Expression, ...]
    left: tuple[Expression, ...] = ()
    carried: tuple[Expression, ...] = ()
    begins: tuple[Expression, ...] | None = None
    meets: tuple[Expression, ...] = ()
    for_all_times: tuple[Expression, ...] | None = None


def periodic_solution(
    model: DrivenModel,
    functions: PeriodFunctions,
    columns: Rows,
    by_mode: ByMode,
    *,
    stability: Stability,
    case: Case | None,
) -> PeriodicSolution:
    """Return the formulas of the response to repeating inputs, in one case of its parameters.

    `columns` are those of `functions.single`, `by_mode` of `functions.parted`; `case` is None
    without parameters.

    Raises:  RepeatedModeError; VanishingRateError where a real rate may be 0.
    """
    writer = _Writer(model, functions, columns, by_mode, stability, case)
    writer.guards.require_rates()
    count = functions.repeat.count
    lasting = stability.verdict == "stable" and count is None
    number = Count(writer.number)
    try:
        return PeriodicSolution(
            period=writer.period,
            start=writer.start,
            count=count,
            number=writer.number,
            local=writer.local,
            stretches=writer.stretches(number),
            after=None if count is None else writer.after(count),
            steady=writer.stretches(ENDLESS) if lasting else None,
            provided=writer.provided(),
            left=writer.at_end(ONCE),
            carried=writer.at_end(number),
            begins=writer.at_end(ENDLESS) if lasting else None,
            meets=writer.meets(),
            for_all_times=None if count is None else writer.for_all_times(count),
        )
    except UnwrittenSumError as error:
        raise RepeatedModeError(model.name, _mode(error.part)) from error


class _Writer:
    """The formulas of one response, by what they are made of."""

    def __init__(
        self,
        model: DrivenModel,
        functions: PeriodFunctions,
        columns: Rows,
        by_mode: ByMode,
        stability: Stability,
        case: Case | None,
    ) -> None:
        self.model, self.functions = model, functions
        self.columns, self.by_mode = columns, by_mode
        field = self.field = model.field
        taken = _taken(model, case)
        self.number = next(n for n in ("n", "n_p", "n_period") if n not in taken)
        self.local = next(n for n in ("tau", "t_n", "t_local") if n not in taken)
        single = functions.single.intervals
        self.first = single[0].start
        self.length = single[-1].start - self.first
        self.start = element_formula(field, self.first)
        self.period = element_formula(field, self.length)
        self.guards = Guards(model, case, stability, self.length)
        self.parts = tuple(part for row in by_mode for entry in row for part in entry)
        writing = writing_of(field, self.parts, self.number)
        self.sums = PeriodSums(field, writing, self.length, self.number)

    def stretches(self, count: Count) -> tuple[PeriodStretch, ...]:
        """The formulas in each part of a period, in local time."""
        single = self.functions.single.intervals
        found = []
        for k, interval in enumerate(single[:-1]):  # the last one is after the period
            rows = tuple(self._row(row, k, count) for row in range(len(self.columns)))
            start, end = (
                element_formula(self.field, at - self.first)
                for at in (interval.start, single[k + 1].start)
            )
            found.append(PeriodStretch(start, end, rows))
        return tuple(found)

    def _row(self, row: int, k: int, count: Count) -> Expression:
        held = [
            replace(summand, origin=summand.origin - self.first)
            for summand in self.functions.single.sustained[k].summands
        ]
        own = renamed(
            summed(self.field, self.columns, row, held, self.model.time),
            self.model.time,
            self.local,
        )
        free = self.sums.total(list(self._struck(row, k, count)), self.local)
        kept = [term for term in (own, free) if term != ZERO]
        return opened(sum_of(kept)) if kept else ZERO

    def _struck(self, row: int, k: int, count: Count) -> Iterator[Struck]:
        """What every blow adds in a period: those to come have struck once less.

        A blow at the end strikes at the start of the next period: it has struck as often as
        those at the start, but for the very first start.
        """
        earlier = count if count.endless else replace(count, less=count.less + 1)
        last = len(self.functions.single.intervals) - 1
        for blow, part in self._blows(row):
            since = self.first - blow.at
            if blow.step <= k:
                yield self._of(blow, part, since, count)
            elif blow.step < last:
                yield self._of(blow, part, since + self.length, earlier)
            else:
                yield self._of(blow, part, since + self.length, count)
                if not count.endless:
                    gone = self.sums.writing.scaled(part, -1)
                    first = self._of(blow, gone, since, ONCE)
                    yield replace(first, counted=True)

    def at_end(self, count: Count) -> tuple[Expression, ...]:
        """The states at the end of a period, all blows of it included."""
        return tuple(
            self.sums.total(
                [
                    self._of(blow, part, self.first + self.length - blow.at, count)
                    for blow, part in self._blows(row)
                ],
                None,
            )
            for row in range(len(self.model.names))
        )

    def after(self, count: int) -> tuple[Expression, ...]:
        """The formulas once all periods are over, in the model's time."""
        begun = self.length * (count - 1)
        return tuple(
            self.sums.total(
                [
                    self._of(blow, part, -(blow.at + begun), Count(fixed=count))
                    for blow, part in self._blows(row)
                ],
                self.model.time,
            )
            for row in range(len(self.columns))
        )

    def for_all_times(self, count: int) -> tuple[Expression, ...] | None:
        """The formulas in the model's time, one period after the other; None for too many."""
        if count > MOST_PERIODS_WRITTEN:
            return None
        single = self.functions.single
        begun = [(self.first, single.intervals[0].summands)]
        begun += [(switch.at, switch.summands) for switch in single.switches]
        joined: dict[Scalar, tuple[Summand, ...]] = {}
        for k in range(count):
            later = self.length * k
            for at, summands in begun:
                moved = tuple(replace(s, origin=s.origin + later) for s in summands)
                joined[at + later] = (*joined.get(at + later, ()), *moved)
        begins = self.functions.repeat.start == self.model.start
        at_start = joined.pop(self.first) if begins else ()
        switches = [Switch(at, summands, jump=False) for at, summands in joined.items()]
        return tuple(
            step_formula(
                self.field,
                self.columns,
                row,
                Interval(self.first, None, at_start),
                switches,
                self.model.time,
            )
            for row in range(len(self.columns))
        )

    def _blows(self, row: int) -> Iterator[tuple[Blow, ModePart]]:
        """The parts of a row: those of one mode follow one another."""
        found = [
            (blow, part) for blow in self.functions.blows for part in self.by_mode[row][blow.place]
        ]
        modes = list(dict.fromkeys((part.rate, part.frequency) for _, part in found))
        yield from sorted(found, key=lambda pair: modes.index((pair[1].rate, pair[1].frequency)))

    def _of(self, blow: Blow, part: ModePart, shift: Scalar, count: Count) -> Struck:
        constant = constant_formula(self.field, blow.constant)
        meets = self.guards.meeting(part) == "always"
        return Struck(part, constant, shift, count, resonant=meets)

    def provided(self) -> tuple[Expression, ...]:
        """Divisors of pairs that may meet the period."""
        found = [self.sums.divisor(p) for p in self.parts if self.guards.may_vanish(p)]
        return tuple(dict.fromkeys(found))

    def meets(self) -> tuple[Expression, ...]:
        """The frequencies that meet the period."""
        found = [p.frequency for p in self.parts if self.guards.meeting(p) == "always"]
        return tuple(dict.fromkeys(f for f in found if f is not None))


def _mode(part: ModePart) -> str:
    if part.frequency is None:
        return plain(part.rate)
    imaginary = f"{plain(part.frequency)}*i"
    return f"± {imaginary}" if part.rate == ZERO else f"{plain(part.rate)} ± {imaginary}"


def _taken(model: DrivenModel, case: Case | None) -> set[str]:
    """Every name of the model and of the case."""
    parameters = getattr(model.field, "parameters", ())
    inputs = (given.name for given in model.inputs)
    quantities = () if case is None else (q.name for q in case.quantities)
    return {
        model.time,
        *model.stacked.states,
        *model.rows,
        *parameters,
        *inputs,
        *quantities,
    }
