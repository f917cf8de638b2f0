"""Formulas of the response to inputs that repeat: in the n-th period, after it, and steady."""

from __future__ import annotations

from dataclasses import dataclass

from closedform.errors import InputError
from closedform.model.driven.model import DrivenModel
from closedform.notation.expression import (
    ONE,
    ZERO,
    Call,
    Expression,
    Name,
    Quotient,
    number,
    product,
)
from closedform.notation.plain import plain
from closedform.notation.terms import negated, opened, sum_of
from closedform.response.by_mode import ByMode, ModePart
from closedform.response.driven.composition import (
    constant_formula,
    element_formula,
    renamed,
    scaled,
    shifted,
    summed,
)
from closedform.response.driven.periodic import Blow, PeriodFunctions

__all__ = ["PeriodStretch", "PeriodicSolution", "RepeatedModeError", "periodic_solution"]

Rows = tuple[tuple[Expression, ...], ...]


class RepeatedModeError(InputError):
    """A repeated mode whose sum over periods is not written."""

    def __init__(self, model: str, mode: str) -> None:
        super().__init__(model, mode)
        self.model, self.mode = model, mode

    def __str__(self) -> str:
        return (
            f"{self.model}: an input repeats, and the mode {self.mode} of the model is repeated "
            "too; sums over periods are written for simple modes, for t e^(rate t) and for "
            "straight lines. State a finite number of periods as pieces of the input."
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
    `after` for the time t once all periods are over (None if they go on), `steady` is what
    `stretches` tend to where all modes decay, None elsewhere.  Every formula in `provided`
    is a divisor that must not vanish.
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


def periodic_solution(
    model: DrivenModel,
    functions: PeriodFunctions,
    columns: Rows,
    by_mode: ByMode,
    *,
    decays: bool,
) -> PeriodicSolution:
    """Return the formulas of the response to repeating inputs.

    `columns` are those of `functions.single`, `by_mode` of `functions.parted`.  `decays` says
    that every mode of the model is known to decay.

    Raises:  RepeatedModeError.
    """
    writer = _Writer(model, functions, columns, by_mode)
    repeat = functions.repeat
    count = repeat.count
    return PeriodicSolution(
        period=writer.period,
        start=writer.start,
        count=count,
        number=writer.number,
        local=writer.local,
        stretches=writer.stretches(steady=False),
        after=None if count is None else writer.after(count),
        steady=writer.stretches(steady=True) if decays and count is None else None,
        provided=writer.provided(),
    )


class _Writer:
    """The formulas of one response, by what they are made of."""

    def __init__(
        self, model: DrivenModel, functions: PeriodFunctions, columns: Rows, by_mode: ByMode
    ) -> None:
        self.model, self.functions = model, functions
        self.columns, self.by_mode = columns, by_mode
        field = self.field = model.field
        self.time = model.time
        taken = _taken(model)
        self.number = next(n for n in ("n", "n_p", "n_period") if n not in taken)
        self.local = next(n for n in ("tau", "t_n", "t_local") if n not in taken)
        single = functions.single.intervals
        self.start = element_formula(field, single[0].start)
        self.length = single[-1].start - single[0].start
        self.period = element_formula(field, self.length)

    def stretches(self, *, steady: bool) -> tuple[PeriodStretch, ...]:
        """The formulas in each part of a period, in local time."""
        single = self.functions.single
        inside = single.intervals[:-1]  # the last one is after the period
        found = []
        for k, interval in enumerate(inside):
            end = single.intervals[k + 1].start
            rows = tuple(self._row(row, k, steady=steady) for row in range(len(self.columns)))
            first = single.intervals[0].start
            found.append(
                PeriodStretch(
                    element_formula(self.field, interval.start - first),
                    element_formula(self.field, end - first),
                    rows,
                )
            )
        return tuple(found)

    def _row(self, row: int, k: int, *, steady: bool) -> Expression:
        held = self.functions.single.sustained[k].summands
        current = summed(self.field, self.columns, row, held, self.time)
        terms = [self._in_local_time(current)]
        n: Expression = Name(self.number)
        before = sum_of([n, negated(ONE)])
        for blow in self.functions.blows:
            for part in self.by_mode[row][blow.place]:
                here, so_far = self._at(part, blow, k, n, before)
                total = self._series(here, part, None if steady else so_far)
                constant = constant_formula(self.field, blow.constant)
                terms.append(total if constant is None else scaled(constant, total))
        kept = [term for term in terms if term != ZERO]
        return opened(sum_of(kept)) if kept else ZERO

    def _at(
        self, part: ModePart, blow: Blow, k: int, n: Expression, before: Expression
    ) -> tuple[Expression, Expression]:
        """The part in local time since the blow's last stroke, and the number of strokes."""
        since = element_formula(self.field, blow.at - self.functions.single.intervals[0].start)
        moved = shifted(renamed(part.formula, self.time, self.local), self.local, since)
        if blow.step <= k:
            return moved, n
        return shifted(moved, self.local, negated(self.period)), before

    def after(self, count: int) -> tuple[Expression, ...]:
        """The formulas once all periods are over, in the model's time."""
        found = []
        for row in range(len(self.columns)):
            terms = []
            for blow in self.functions.blows:
                last = blow.at + self.length * (count - 1)
                for part in self.by_mode[row][blow.place]:
                    moved = shifted(part.formula, self.time, element_formula(self.field, last))
                    total = self._series(moved, part, number(count), self.time)
                    constant = constant_formula(self.field, blow.constant)
                    terms.append(total if constant is None else scaled(constant, total))
            kept = [term for term in terms if term != ZERO]
            found.append(opened(sum_of(kept)) if kept else ZERO)
        return tuple(found)

    def _series(
        self,
        f: Expression,
        part: ModePart,
        n: Expression | None,
        variable: str | None = None,
    ) -> Expression:
        """The sum of f(theta + k T) for k = 0 … n-1, or for all k where n is None."""
        name = variable or self.local
        if f == ZERO:
            return ZERO
        if part.rate == ZERO and part.kind == "real":
            return self._line(f, part, n, name)
        whole = self._divisor(part)
        if part.kind == "real" and part.power == 0:
            if n is None:
                return _over(f, whole)
            left = sum_of([ONE, negated(Call("exp", self._grown(part.rate, n)))])
            return _over(scaled(left, f), whole)
        if part.power > (1 if part.kind == "real" else 0):
            raise RepeatedModeError(self.model.name, self._mode(part))
        twice = self._exponential(part, 2)
        earlier = shifted(f, name, self.period)
        head = sum_of([f, negated(_scaled_by(twice, earlier))])
        if n is None:
            return _over(head, whole)
        end = self._later(f, n, name)
        one_less = self._later(f, sum_of([n, negated(ONE)]), name)
        tail = sum_of([negated(end), _scaled_by(twice, one_less)])
        return _over(sum_of([head, tail]), whole)

    def _line(self, f: Expression, part: ModePart, n: Expression | None, name: str) -> Expression:
        if n is None or part.power > 1:
            raise RepeatedModeError(self.model.name, "0")
        if part.power == 0:
            return scaled(n, f)
        last = self._later(f, sum_of([n, negated(ONE)]), name)
        return Quotient(scaled(n, sum_of([f, last])), number(2))

    def _later(self, f: Expression, periods: Expression, name: str) -> Expression:
        return shifted(f, name, negated(product((periods, self.period))))

    def _divisor(self, part: ModePart) -> Expression:
        once = self._exponential(part, 1)
        if part.kind == "real":
            simple = sum_of([ONE, negated(once if once is not None else ONE)])
            return simple if part.power == 0 else product((simple, simple))
        if part.frequency is None:
            raise ValueError("a pair has a frequency")
        kernel = Call(
            "cos" if part.kind == "circular" else "cosh", product((part.frequency, self.period))
        )
        if once is None:  # 1 - 2 cos + 1
            return product((number(2), sum_of([ONE, negated(kernel)])))
        twice = self._exponential(part, 2)
        if twice is None:
            raise ValueError("a square of an exponential is one")
        return sum_of([ONE, negated(product((number(2), once, kernel))), twice])

    def _exponential(self, part: ModePart, times: int) -> Expression | None:
        """e^(times · rate · T), None for 1."""
        if part.rate == ZERO:
            return None
        return Call("exp", self._grown(part.rate, number(times)))

    def _grown(self, rate: Expression, times: Expression) -> Expression:
        if rate == ZERO:
            return ZERO
        sign = rate != opened(rate) or plain(rate).startswith("-")
        inner = negated(rate) if sign else rate
        moved = scaled(product((times, self.period)), inner)
        return negated(moved) if sign else moved

    def _mode(self, part: ModePart) -> str:
        if part.frequency is None:
            return plain(part.rate)
        return f"{plain(part.rate)} ± {plain(part.frequency)} i"

    def provided(self) -> tuple[Expression, ...]:
        """Divisors that an undamped pair brings: they vanish where it meets the period."""
        found = [
            self._divisor(part)
            for row in self.by_mode
            for entry in row
            for part in entry
            if part.kind == "circular" and part.rate == ZERO
        ]
        return tuple(dict.fromkeys(found))

    def _in_local_time(self, formula: Expression) -> Expression:
        """A formula in the time of the first period, in local time: t = start + local."""
        local = renamed(formula, self.time, self.local)
        return shifted(local, self.local, negated(self.start))


def _taken(model: DrivenModel) -> set[str]:
    """Every name of the model."""
    parameters = getattr(model.field, "parameters", ())
    inputs = (given.name for given in model.inputs)
    return {model.time, *model.stacked.states, *model.rows, *parameters, *inputs}


def _over(above: Expression, below: Expression) -> Expression:
    if isinstance(above, Quotient):
        return Quotient(above.numerator, product((above.denominator, below)))
    return Quotient(above, below)


def _scaled_by(factor: Expression | None, formula: Expression) -> Expression:
    return formula if factor is None else scaled(factor, formula)
