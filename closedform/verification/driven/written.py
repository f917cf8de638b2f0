"""Every formula of a driven solution as it is written, against numbers found step by step."""

from __future__ import annotations

from collections.abc import Callable, Iterator, Mapping, Sequence
from dataclasses import dataclass

from flint import arb

from closedform.notation import enclose as enclose_formula
from closedform.notation import plain, read_signal_formula
from closedform.notation.errors import FormulaError, UndeclaredNameError
from closedform.notation.expression import Expression
from closedform.verification.comparison import AGREED, Finding, Pair, check_of, compared
from closedform.verification.driven.grounds import Ground
from closedform.verification.driven.setting import Setting
from closedform.verification.driven.stepping import Steps
from closedform.verification.driven.sums import Enclose, TimedSum
from closedform.verification.record import Check

__all__ = ["formula_check", "formulas_of"]

_ITEM = "driven formulas as written"


@dataclass(frozen=True)
class _Written:
    """A formula of a row, in an interval; `value` gives what all rows of its kind have to be."""

    formula: Expression
    row: int
    value: Callable[[Steps, arb, Enclose], list[arb]]


def formula_check(setting: Setting) -> Check:
    """Pieces, the form with unit steps, free, forced and sustained parts, in every interval."""
    if not setting.grounds:
        return Check(_ITEM, "not attempted", "no point of this case was found to put in")
    try:
        parsed = [
            _read_back(dict(_written(setting, k)), setting.model.time, setting.names)
            for k in range(setting.last + 1)
        ]
    except UndeclaredNameError as error:
        return Check(_ITEM, "refuted", f"{error.name} has no definition")
    except FormulaError as error:  # its text is longer or deeper than what is read
        return Check(_ITEM, "not attempted", f"a formula was not read back: {error}")
    findings = (
        finding
        for ground in setting.grounds
        for steps in [Steps(setting, ground)]
        for k, formulas in enumerate(parsed)
        for place in range(2)
        for finding in [_finding(setting, steps, k, place, formulas)]
    )
    told = "".join(f"{';' if n else ''}{g.told}" for n, g in enumerate(setting.grounds))
    return check_of(
        _ITEM,
        findings,
        f"{sum(map(len, parsed))} formulas of {setting.last + 1} intervals were read back from "
        f"their text; agree with the model carried on from one instant to the next by "
        f"exponentials in ball arithmetic {AGREED} at two instants of each interval{told}",
    )


def formulas_of(setting: Setting) -> Iterator[Expression]:
    """Yield every formula of the solution, in the intervals and for all times."""
    for k in range(setting.last + 1):
        for _, own in _written(setting, k):
            yield own.formula


def _read_back(
    written: Mapping[str, _Written], time: str, names: frozenset[str]
) -> dict[str, _Written]:
    return {
        name: _Written(
            read_signal_formula(plain(w.formula), time=time, constants=names), w.row, w.value
        )
        for name, w in written.items()
    }


def _written(setting: Setting, k: int) -> Iterator[tuple[str, _Written]]:
    solution, functions = setting.solution, setting.solution.functions

    def whole(steps: Steps, t: arb, enclose: Enclose) -> list[arb]:
        return steps.rows(k, t, enclose)

    def free(steps: Steps, t: arb, enclose: Enclose) -> list[arb]:
        return steps.free_rows(t, enclose)

    def forced(steps: Steps, t: arb, enclose: Enclose) -> list[arb]:
        pairs = zip(steps.rows(k, t, enclose), steps.free_rows(t, enclose), strict=True)
        return [a - b for a, b in pairs]

    stepped = solution.base if solution.periodic else solution.solution
    kinds: list[tuple[str, Sequence[Expression], Callable[..., list[arb]]]] = [
        ("piece", solution.pieces[k], whole),
        ("form with unit steps", stepped, whole),
        ("free part", solution.of(functions.free), free),
        ("forced part", solution.in_interval(functions.forced[k]), forced),
    ]
    kinds += [
        ("sustained part", solution.in_interval(i), _exact(setting.total(i.summands)))
        for i in functions.sustained[k : k + 1]
    ]
    steady = solution.steady_state if k == setting.last else None
    if steady is not None:
        kinds += [
            ("steady part", steady.steady_formulas, _exact(setting.total(steady.steady))),
            ("transient part", steady.transient_formulas, _exact(setting.total(steady.transient))),
        ]
    for kind, formulas, value in kinds:
        for row, (name, formula) in enumerate(zip(setting.model.rows, formulas, strict=True)):
            yield f"{kind} of {name}", _Written(formula, row, value)


def _exact(function: TimedSum) -> Callable[[Steps, arb, Enclose], list[arb]]:
    """What is sustained, by its exact form: the equations alone leave open how it begins."""

    def value(steps: Steps, t: arb, enclose: Enclose) -> list[arb]:
        return function.enclosure(enclose, t, steps.setting.named(steps.ground))

    return value


def _finding(
    setting: Setting, steps: Steps, k: int, place: int, formulas: Mapping[str, _Written]
) -> Finding:
    ground: Ground = steps.ground

    def evaluate(names: Sequence[str]) -> Iterator[Pair]:
        enclose = ground.enclose()
        t = setting.inside(k, enclose)[place]
        known = {**ground.balls(), **setting.named(ground), setting.model.time: t}
        kept: dict[Callable[..., list[arb]], list[arb]] = {}
        for name in names:
            written = formulas[name]
            if written.value not in kept:
                kept[written.value] = written.value(steps, t, enclose)
            yield enclose_formula(written.formula, known), kept[written.value][written.row]

    return compared(formulas, evaluate, where=f"{ground.told} in interval {k + 1}")
