"""The response to inputs that repeat: one period exactly, and the sums over periods in numbers.

One period, from rest, is a driven solution like any other and proved as such.  After n - 1
periods the state is X_(n-1), with X_n = e^(AT) X_(n-1) + x_1(T); the n-th period is the
response to one of them from rest, and the free response to X_(n-1).  A formula in n is a sum of
terms c q^n and c n q^n, two for each mode, and so is this: if they agree for more values of n
than there are such terms, they agree for all (R. P. Stanley, Enumerative Combinatorics,
volume 1, 1997, chapter 4).
"""

from __future__ import annotations

from collections.abc import Iterator, Sequence
from dataclasses import dataclass, field, replace

from flint import arb, arb_mat, ctx

from closedform.algebra.field import Scalar
from closedform.algebra.waves import Constant
from closedform.model.driven.model import DrivenModel, Input
from closedform.model.driven.signal import Burst, Repeat, Signal
from closedform.notation import enclose as enclose_formula
from closedform.notation import plain, read_signal_formula
from closedform.notation.errors import FormulaError, UndeclaredNameError
from closedform.notation.expression import Expression
from closedform.response.driven.period_formulas import PeriodicSolution, PeriodStretch
from closedform.response.driven.periodic import PeriodFunctions
from closedform.response.driven.response import DrivenResponse, DrivenSolution
from closedform.verification.comparison import AGREED, Finding, Pair, check_of, compared
from closedform.verification.driven.equations import rows_residuals
from closedform.verification.driven.grounds import Ground
from closedform.verification.driven.identities import Residual, identity_check
from closedform.verification.driven.setting import Setting, setting_of
from closedform.verification.driven.stepping import Steps
from closedform.verification.driven.sums import Enclose, TimedSum
from closedform.verification.record import Check

__all__ = ["Periods", "blow_check", "period_formula_check", "period_settings"]


def period_settings(
    response: DrivenResponse, solution: DrivenSolution
) -> Iterator[tuple[Setting, PeriodFunctions, PeriodicSolution]]:
    """Yield one period by itself, as a driven model of its own, for each way to repeat."""
    whole = setting_of(response, solution)
    for functions, written in zip(solution.periods, solution.periodic, strict=True):
        one = _one_period(response.model, functions, whole)
        own = replace(solution, model=one, functions=functions.single)
        yield replace(whole, model=one, solution=own), functions, written


def _one_period(model: DrivenModel, functions: PeriodFunctions, whole: Setting) -> DrivenModel:
    """The model from rest, with the first period of what repeats so and nothing else.

    Instants are put in the order of the intervals; that this is right, and that the last is
    the end of the period, is found by the check of the intervals.
    """
    repeat = functions.repeat
    end = repeat.start + repeat.period
    inputs = tuple(_first_period(given, repeat, end) for given in model.inputs)
    instants = {end: None}
    for given in inputs:
        for burst in given.signal.bursts:
            instants |= dict.fromkeys(e for e in (burst.start, burst.end) if e is not None)
        instants |= dict.fromkeys(impulse.at for impulse in given.signal.impulses)
    instants.pop(repeat.start, None)
    places = {interval.start: k for k, interval in enumerate(functions.single.intervals)}
    last = len(places)
    timeline = sorted(instants, key=lambda at: (places.get(whole.put(at), last), at == end))
    zero = model.field.domain.zero
    return replace(
        model,
        inputs=inputs,
        start=repeat.start,
        initial=(zero,) * len(model.names),
        stated_initial=(),
        conditions=(),
        timeline=tuple(timeline),
    )


def _first_period(given: Input, repeat: Repeat, end: Scalar) -> Input:
    signal = given.signal
    if signal.repeat != repeat:
        return replace(given, signal=Signal())
    bursts = [
        Burst(
            b.waves,
            None if b.start is None or b.start == repeat.start else b.start,
            end if b.end is None else b.end,
        )
        for b in signal.bursts
    ]
    return replace(given, signal=Signal(tuple(bursts), signal.impulses))


def blow_check(setting: Setting, functions: PeriodFunctions) -> Check:
    """The functions that are summed over the periods are the free responses to the jumps."""
    parted, single, n = functions.parted, functions.single, setting.states
    zero, one = setting.field.domain.zero, setting.field.domain.one
    count = int(parted.shape[1])

    def column(place: int, constant: Constant, at: Scalar) -> TimedSum:
        unit = setting.field.matrix([[one if i == place else zero] for i in range(count)])
        terms = parted.times(unit).terms
        parts = [((constant, at, term.factor.p), term.residues) for term in terms]
        return TimedSum.of(setting.field, len(setting.model.rows), parts)

    def residuals() -> Iterator[Residual]:
        states = setting.selecting(range(n))
        for k, jump in enumerate(single.jumps):
            total = setting.nothing(len(setting.model.rows))
            for blow in functions.blows:
                if blow.step == k:
                    total = total + column(blow.place, blow.constant, blow.at)
            expected = setting.nothing(n)
            for constant, start in jump:
                expected = expected + setting.freed(start, k, constant)
            yield Residual("the free response to a jump", k, total.after(states) - expected)
            yield from rows_residuals(setting, total, k, driven=False)

    return identity_check(
        setting,
        "free responses to the jumps of a period",
        residuals(),
        "those that are summed over the periods are e^(A(t - a)) h for the jumps of one period, "
        "coefficient by coefficient",
    )


# --- formulas ------------------------------------------------------------------------------


@dataclass
class Periods:
    """The response from rest over many periods, in balls, one after the other."""

    setting: Setting
    ground: Ground
    steps: Steps = field(init=False)
    _kept: dict[tuple[int, int], list[arb]] = field(default_factory=dict)
    _matrices: dict[int, arb_mat] = field(default_factory=dict)

    def __post_init__(self) -> None:
        self.steps = Steps(self.setting, self.ground)

    def length(self, enclose: Enclose) -> arb:
        """The period."""
        return enclose(self.setting.instants[-1]) - enclose(self.setting.instants[0])

    def after(self, n: int, enclose: Enclose) -> list[arb]:
        """The states at the end of the n-th period, impulses there struck.

        X_n = e^(AT) X_(n-1) + X_1 is carried on by the n-th power of [[e^(AT), X_1], [0, 1]].
        """
        states = self.setting.states
        if (n, ctx.prec) not in self._kept:
            power = self._carrying(enclose) ** n
            self._kept[n, ctx.prec] = [power[i, states] for i in range(states)]
        return self._kept[n, ctx.prec]

    def _carrying(self, enclose: Enclose) -> arb_mat:
        """What carries states, and 1 below them, over one period."""
        if ctx.prec not in self._matrices:
            n, end = self.setting.states, enclose(self.setting.instants[-1])
            one = self.steps.rows(self.setting.last, end, enclose)[:n]
            columns = self._moved(enclose)
            rows = [[*(column[i] for column in columns), one[i]] for i in range(n)]
            self._matrices[ctx.prec] = arb_mat([*rows, [*[arb(0)] * n, arb(1)]])
        return self._matrices[ctx.prec]

    def _moved(self, enclose: Enclose) -> list[list[arb]]:
        """The columns of e^(AT)."""
        n = self.setting.states
        units = [[arb(int(i == k)) for i in range(n)] for k in range(n)]
        return [self.steps.carried_free(u, self.length(enclose), enclose) for u in units]

    def steady(self, enclose: Enclose) -> list[arb]:
        """The state X with X = e^(AT) X + x_1(T)."""
        n = self.setting.states
        columns = self._moved(enclose)
        matrix = arb_mat([[int(i == k) - columns[k][i] for k in range(n)] for i in range(n)])
        solved = matrix.solve(arb_mat(n, 1, self.after(1, enclose)))
        return [solved[i, 0] for i in range(n)]

    def rows(self, k: int, local: arb, before: list[arb], enclose: Enclose) -> list[arb]:
        """The rows at a local time in the part k of a period that begins with these states."""
        t = enclose(self.setting.instants[0]) + local
        own = self.steps.rows(k, t, enclose)
        silent = [arb(0)] * len(self.setting.model.inputs)
        free = self.steps.with_rows(
            self.steps.carried_free(before, local, enclose), silent, enclose
        )
        return [a + b for a, b in zip(own, free, strict=True)]


@dataclass(frozen=True)
class _Asked:
    """A formula of a row in part k of the n-th period (None: steady), or after them all.

    It may use the local time and the number of the period, or the time of the model.
    """

    formula: Expression
    row: int
    k: int | None
    n: int | None


def period_formula_check(setting: Setting, written: PeriodicSolution) -> Check:
    """The formulas in the n-th period, after the last and steady, read back from their text."""
    item = "formulas of inputs that repeat, as written"
    if not setting.grounds:
        return Check(item, "not attempted", "no point of this case was found to put in")
    known = setting.names | {written.number, written.local}
    most = 2 * setting.states + 3
    most = most if written.count is None else min(most, written.count)
    try:
        asked = dict(_asked(setting, written, most, known))
    except UndeclaredNameError as error:
        return Check(item, "refuted", f"{error.name} has no definition")
    except FormulaError as error:  # its text is longer or deeper than what is read
        return Check(item, "not attempted", f"a formula was not read back: {error}")
    findings = (
        _finding(setting, written, Periods(setting, ground), asked, part)
        for ground in setting.grounds
        for part in range(2)
    )
    return check_of(
        item,
        findings,
        f"agree {AGREED} with the model carried on from period to period by exponentials in "
        f"ball arithmetic, in the first {most} of them at two instants of each part"
        + ("" if written.count else "; more than there are terms in n, so that all do")
        + ("" if written.for_all_times is None else "; so does the formula for all times, in each"),
    )


def _asked(
    setting: Setting, written: PeriodicSolution, most: int, names: frozenset[str]
) -> Iterator[tuple[str, _Asked]]:
    def read(formula: Expression) -> Expression:
        return read_signal_formula(plain(formula), time=setting.model.time, constants=names)

    def stretched(
        stretches: Sequence[PeriodStretch], told: str, periods: Sequence[int | None]
    ) -> Iterator[tuple[str, _Asked]]:
        for k, stretch in enumerate(stretches):
            for row, formula in enumerate(stretch.rows):
                own = read(formula)
                for n in periods:
                    place = f"{told} {n or ''}, part {k + 1}, row {row + 1}"
                    yield place, _Asked(own, row, k, n)

    yield from stretched(written.stretches, "period", range(1, most + 1))
    yield from stretched(written.steady or (), "steady period", [None])
    for row, formula in enumerate(written.after or ()):
        yield f"after the last period, row {row + 1}", _Asked(read(formula), row, None, None)
    for row, formula in enumerate(written.for_all_times or ()):
        own, told = read(formula), f"for all times, row {row + 1}"
        yield f"after the last period, {told}", _Asked(own, row, None, None)
        for n in range(1, (written.count or 0) + 1):
            for k in range(len(written.stretches)):
                yield f"period {n}, part {k + 1}, {told}", _Asked(own, row, k, n)


def _finding(
    setting: Setting,
    written: PeriodicSolution,
    periods: Periods,
    asked: dict[str, _Asked],
    part: int,
) -> Finding:
    ground = periods.ground

    def evaluate(names: Sequence[str]) -> Iterator[Pair]:
        enclose, balls = ground.enclose(), ground.balls()
        begin = enclose(setting.instants[0])
        kept: dict[tuple[int | None, int | None], list[arb]] = {}
        for name in names:
            own = asked[name]
            values = dict(balls)
            if own.k is None:
                last = begin + periods.length(enclose) * (written.count or 0)
                since = periods.length(enclose) * (part + 1) / 3
                values[setting.model.time] = last + since
            else:
                since = setting.inside(own.k, enclose)[part] - begin
                values[written.local] = since
                values[written.number] = arb(own.n or 0)
                begun = begin + periods.length(enclose) * ((own.n or 1) - 1)
                values[setting.model.time] = begun + since
            if (own.k, own.n) not in kept:
                kept[own.k, own.n] = _expected(periods, written, own, since, enclose)
            yield enclose_formula(own.formula, values), kept[own.k, own.n][own.row]

    return compared(asked, evaluate, where=ground.told)


def _expected(
    periods: Periods, written: PeriodicSolution, own: _Asked, since: arb, enclose: Enclose
) -> list[arb]:
    if own.k is None:
        states = periods.after(written.count or 0, enclose)
        silent = [arb(0)] * len(periods.setting.model.inputs)
        carried = periods.steps.carried_free(states, since, enclose)
        return periods.steps.with_rows(carried, silent, enclose)
    before = periods.steady(enclose) if own.n is None else periods.after(own.n - 1, enclose)
    return periods.rows(own.k, since, before, enclose)
