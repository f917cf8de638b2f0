"""Every statement of a derivation with parameters, proved from what is printed.

Each statement is made for certain cases.  It is evaluated from its tree at points of each of
them, in complex balls, names from their definitions as printed, and held against the model's
own matrix there.  The precision is doubled until all balls are narrow.
Source:  F. Johansson, Arb: efficient arbitrary-precision midpoint-radius interval
         arithmetic, IEEE Transactions on Computers 66 (2017).
"""

from __future__ import annotations

from collections.abc import Callable, Iterator, Mapping, Sequence
from functools import partial
from typing import Any

from flint import ctx

from closedform.derivation.parametric.proof import exponential, model, spectrum
from closedform.derivation.parametric.proof.ground import (
    Defined,
    Ground,
    Said,
    defined_in,
    said_in,
)
from closedform.derivation.parametric.proof.numbers import Given, number_findings
from closedform.derivation.parametric.proof.provers import VARIABLES, prover_of
from closedform.derivation.proof.evaluation import expressions_in
from closedform.derivation.proof.finding import (
    Comparison,
    Fault,
    Finding,
    StatementRefutedError,
    undecided,
    whether,
)
from closedform.derivation.step import Step
from closedform.notation.expression import ZERO, names_in
from closedform.response.parametric.points import case_points
from closedform.response.parametric.response import ParametricResponse
from closedform.verification.record import Check, UnprovedError

__all__ = ["prove_case_statements"]

POINTS = 2
_FIRST_BITS = 320
_MOST_BITS = 1 << 14

_Finder = Callable[[Ground], Iterator[Finding]]
_Trial = tuple[Ground, _Finder]


def prove_case_statements(response: ParametricResponse, steps: Sequence[Step]) -> Check:
    """Return the check that every statement of the steps holds as printed, in its cases.

    Raises:  StatementRefutedError for the first that does not hold, or that uses a name that
             is not defined for one of its cases; UnprovedError if there is none, but some are
             left open; ValueError for a kind of statement that nothing proves.
    """
    count = len(response.cases)
    said = [s for step in steps for s in said_in(step, count)]
    definitions = tuple(defined_in(steps, count))
    for fault in _undefined(response, said, definitions):
        raise StatementRefutedError(response.model.name, fault.place, fault.reason)
    trials = [
        *_at_points(response, steps, said, definitions),
        *_at_values(response, steps, definitions),
    ]
    bits = _FIRST_BITS
    while True:
        with ctx.workprec(bits):
            open_ones = [w for ground, find in trials for w in _wide(ground.afresh(), find)]
        if not open_ones:
            break
        if bits >= _MOST_BITS:
            _refuse(response, open_ones, bits)
        bits = min(2 * bits, _MOST_BITS)
    return Check(
        "statements of the derivation",
        "enclosed",
        f"{len(said)} statements, evaluated as printed at {len(trials)} points of their cases, "
        "agree with the model and with the exponential of A by ball arithmetic",
    )


def _at_points(
    response: ParametricResponse,
    steps: Sequence[Step],
    said: Sequence[Said],
    definitions: tuple[Defined, ...],
) -> Iterator[_Trial]:
    """All statements at points of all cases.  Raises UnprovedError if a case has none."""
    for case in response.cases:
        points = case_points(response.model.field, case, POINTS, seed=2)
        if not points:
            how = f"no point of case {case.number + 1} was found to put in"
            check = Check("statements of the derivation", "not attempted", how)
            raise UnprovedError(response.model.name, (check,))
        for point in points:
            ground = Ground(response, case, point, definitions)
            yield ground, lambda g: _findings(g, steps, said)


def _at_values(
    response: ParametricResponse, steps: Sequence[Step], definitions: tuple[Defined, ...]
) -> Iterator[_Trial]:
    """What is said in numbers, at the values that the user gives."""
    for step in steps:
        for row in _rows(step, "sets") if step.kind == "numbers" else ():
            case = response.cases[row["case"]]
            ground = Ground(response, case, Given(row["values"]), definitions)
            yield ground, partial(number_findings, step=step, row=row)


def _refuse(response: ParametricResponse, wide: Sequence[Comparison], bits: int) -> None:
    name = response.model.name
    for comparison in wide:
        if comparison.has_no_value:
            reason = f"it has no value, worked to {bits} bits"
            raise StatementRefutedError(name, str(comparison), reason)
    places = dict.fromkeys(map(str, wide))
    how = f"not settled by {bits} bits"
    raise UnprovedError(name, tuple(Check(place, "not attempted", how) for place in places))


def _wide(ground: Ground, find: _Finder) -> Iterator[Comparison]:
    """Yield the comparisons that this precision does not settle.

    Raises StatementRefutedError at the first thing that certainly is wrong.
    """
    name = ground.response.model.name
    if not all(value.is_finite() for value in ground.names.values()):
        lost = next(n for n, value in ground.names.items() if not value.is_finite())
        yield undecided(f"{lost} of case {ground.case.number + 1}")
        return
    for finding in find(ground):
        if isinstance(finding, Fault):
            where = f"{finding.place} (case {ground.case.number + 1} at {ground.point})"
            raise StatementRefutedError(name, where, finding.reason)
        if finding.is_apart:
            raise StatementRefutedError(
                name,
                f"{finding} (case {ground.case.number + 1} at {ground.point})",
                f"printed is {finding.printed.str(8)}, and true {finding.expected.str(8)}",
            )
        if not finding.is_settled:
            yield finding


def _findings(ground: Ground, steps: Sequence[Step], said: Sequence[Said]) -> Iterator[Finding]:
    case = ground.case.number
    for s in said:
        prover = prover_of(s)
        if case in s.cases:
            yield from prover(ground, s)
    for step in steps:
        if step.kind in _TABLES and case in _of(step, ground):
            yield from _TABLES[step.kind](ground, step)


def _factors(ground: Ground, step: Step) -> Iterator[Finding]:
    for row, regime in zip(_rows(step, "rows"), ground.case.regimes, strict=True):
        yield from spectrum.factor_row(ground, row, regime.kind)


def _repeated(ground: Ground, step: Step) -> Iterator[Finding]:
    for row in _rows(step, "repeated"):
        yield from spectrum.repeated_row(ground, row)


def _cases(ground: Ground, step: Step) -> Iterator[Finding]:
    for row in _rows(step, "rows"):
        if ground.case.number in row["cases"]:
            yield from spectrum.case_row(ground, row)
            yield from exponential.functions(ground, row)
    for row in (*_rows(step, "found"), *_rows(step, "plain")):
        if ground.case.number in row["cases"]:
            yield from _exceptional_row(ground, step, row)


_TABLES: dict[str, Callable[[Ground, Step], Iterator[Finding]]] = {
    "factors": _factors,
    "cases": _cases,
    "branch": _repeated,
    "case_solution": exponential.shown,
}
"""What proves the tables of a step, by its kind."""


def _of(step: Step, ground: Ground) -> tuple[int, ...]:
    cases: Any = step.facts.get("cases", (ground.case.number,))
    return tuple(cases)


def _rows(step: Step, key: str) -> list[Mapping[str, Any]]:
    rows: Any = step.facts[key]
    return list(rows)


def _exceptional_row(ground: Ground, step: Step, row: Mapping[str, Any]) -> Iterator[Finding]:
    """Where a branch holds, not all the equations hold that lead away from it.

    What is said to contradict itself does not hold at its points either.
    """
    equations = row["vanishing"]["equations"]
    if row["fate"] != "branch":
        same = [s.sides for s in equations] == [(p, ZERO) for p in row["apart"].sides]
        yield from whether(same, "equation of a branch", "it is of another expression")
    if all(_may_hold(ground, Said(step, row, s, row["cases"])) for s in equations):
        yield undecided("equation of a branch")
    for sentence in (row["why"], row["fully"]):
        contradicted = [s for s in sentence if getattr(s, "says", "") == "contradicted"]
        held = [_may_hold(ground, Said(step, row, s, row["cases"])) for s in contradicted]
        if held and all(held):
            yield undecided("conditions that contradict each other")


def _may_hold(ground: Ground, said: Said) -> bool:
    """Whether a comparison is not refuted."""
    for finding in model.comparison(ground, said):
        if isinstance(finding, Fault) or finding.is_apart:
            return False
    return True


def _undefined(
    response: ParametricResponse, said: Sequence[Said], definitions: Sequence[Defined]
) -> Iterator[Fault]:
    """Every name in a formula is defined in print for its cases, and for each of them once."""
    m = response.model
    for case in range(len(response.cases)):
        names = [d.name for d in definitions if case in d.cases]
        for name in names:
            if names.count(name) > 1:
                yield Fault(name, f"it is defined twice for case {case + 1}")
        known = {m.time, *m.field.parameters, *names}
        for s in said:
            if case not in s.cases:
                continue
            allowed = known
            if s.step.kind == "model":
                allowed = known | {*m.states, *(o.name for o in m.outputs)}
            used = {
                name
                for side in s.statement.sides
                for formula in expressions_in(side)
                for name in names_in(formula)
            }
            unknown = sorted(used - allowed)
            if len(unknown) > VARIABLES.get(s.statement.says, 0):
                yield Fault(s.statement.says, f"{unknown[0]} is used and not defined")
