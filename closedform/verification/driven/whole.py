"""One formula for all times where inputs repeat: what does not repeat, and what all periods add."""

from __future__ import annotations

from collections.abc import Callable, Iterator, Sequence
from functools import partial

from flint import arb

from closedform.notation import enclose as enclose_formula
from closedform.notation import plain, read_signal_formula
from closedform.notation.errors import FormulaError, UndeclaredNameError
from closedform.notation.expression import Expression
from closedform.response.driven.period_formulas import PeriodicSolution
from closedform.verification.comparison import AGREED, Finding, Pair, check_of, compared
from closedform.verification.driven.grounds import Ground
from closedform.verification.driven.setting import Setting
from closedform.verification.driven.sums import Enclose
from closedform.verification.record import Check

__all__ = ["whole_check"]

Instant = Callable[[Enclose], arb]
"""What gives a ball for an instant."""


def whole_check(setting: Setting, repeated: Sequence[tuple[Setting, PeriodicSolution]]) -> Check:
    """The formula for all times is the sum of its parts, which have checks of their own.

    `setting` is that of the whole model; `repeated` has for each way to repeat one period by
    itself, and its formulas for all times.
    """
    item, solution = "one formula for all times", setting.solution
    if not setting.grounds:
        return Check(item, "not attempted", "no point of this case was found to put in")
    columns = [solution.solution, solution.base, *(own.for_all_times or () for _, own in repeated)]
    try:
        whole, *parts = (
            [
                read_signal_formula(plain(f), time=setting.model.time, constants=setting.names)
                for f in column
            ]
            for column in columns
        )
    except UndeclaredNameError as error:
        return Check(item, "refuted", f"{error.name} has no definition")
    except FormulaError as error:  # its text is longer or deeper than what is read
        return Check(item, "not attempted", f"a formula was not read back: {error}")
    findings = (
        _finding(setting, ground, whole, parts, instant)
        for ground in setting.grounds
        for instant in _instants(repeated)
    )
    return check_of(
        item,
        findings,
        f"agrees {AGREED} with what does not repeat and what each way to repeat adds for all "
        "times, at an instant of each part of each period and after the last",
    )


def _finding(
    setting: Setting,
    ground: Ground,
    whole: Sequence[Expression],
    parts: Sequence[Sequence[Expression]],
    instant: Instant,
) -> Finding:
    rows = dict(zip(setting.model.rows, range(len(whole)), strict=True))

    def evaluate(names: Sequence[str]) -> Iterator[Pair]:
        t = instant(ground.enclose())
        known = {**ground.balls(), setting.model.time: t}
        for name in names:
            row = rows[name]
            expected = sum((enclose_formula(part[row], known) for part in parts), arb(0))
            yield enclose_formula(whole[row], known), expected

    return compared(rows, evaluate, where=ground.told)


def _instants(repeated: Sequence[tuple[Setting, PeriodicSolution]]) -> Iterator[Instant]:
    """An instant of each part of each period, and one after the last."""
    for single, own in repeated:
        count = own.count or 0
        for n in range(count + 1):
            for k in range(len(own.stretches) if n < count else 1):
                yield partial(_instant, single, n, k)


def _instant(single: Setting, n: int, k: int, enclose: Enclose) -> arb:
    """An instant of a part, n periods after the first."""
    begin, end = (enclose(single.instants[place]) for place in (0, -1))
    return single.inside(k, enclose)[0] + n * (end - begin)
