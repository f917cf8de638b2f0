"""Every statement of the driven steps, proved from what is printed.

Each is evaluated from its tree in complex balls at points of the cases it is made for, and
held against the equations as typed, and against the motion that ball arithmetic follows from
instant to instant.  Precision is doubled until all balls are narrow.
Source:  F. Johansson, Arb: efficient arbitrary-precision midpoint-radius interval
         arithmetic, IEEE Transactions on Computers 66 (2017).
"""

from __future__ import annotations

from collections.abc import Callable, Iterator, Mapping, Sequence
from functools import partial
from typing import Any

from flint import ctx

from closedform.derivation.driven.proof import (
    boundary,
    closing,
    generated,
    motion,
    periods,
    stated,
    tables,
)
from closedform.derivation.driven.proof.spot import Spot
from closedform.derivation.driven.writing import Writing
from closedform.derivation.parametric.proof.ground import Said, said_in
from closedform.derivation.proof.evaluation import expressions_in
from closedform.derivation.proof.finding import (
    Comparison,
    Fault,
    Finding,
    StatementRefutedError,
    undecided,
)
from closedform.derivation.step import Step
from closedform.model.driven.model import DrivenModel
from closedform.notation.expression import Name, names_in
from closedform.notation.jets import jet_of
from closedform.verification.record import Check, UnprovedError

__all__ = ["prove_driven_statements"]

_FIRST_BITS = 320
_MOST_BITS = 1 << 14

Prover = Callable[[Spot, Said], Iterator[Finding]]
Made = Callable[[], tuple[Spot, ...]]
"""The points of a case, made afresh at FLINT's current precision."""


def within(_spot: Spot, _said: Said) -> Iterator[Finding]:
    """Proved with the set of values that it stands in."""
    yield from ()


PROVERS: dict[str, Prover] = {
    "case condition": stated.condition,
    "equation": stated.equation,
    "driven system": stated.driven_system,
    "second order system": stated.second_order_system,
    "mass matrix": stated.second_order_matrix,
    "damping matrix": stated.second_order_matrix,
    "stiffness matrix": stated.second_order_matrix,
    "force matrix": stated.second_order_matrix,
    "coordinates": stated.state_vector,
    "initial value": stated.initial_value,
    "initial state": stated.initial_state,
    "point condition": boundary.point_condition,
    "free motion": boundary.free_motion,
    "condition equation": boundary.equation,
    "point determinant": boundary.point_determinant,
    "point divisor": boundary.divisor,
    "constant": boundary.constant,
    "input": generated.input_statement,
    "driven output": stated.output_definition,
    "named": stated.named_velocity,
    "solved": stated.solved,
    "eliminated": stated.solved,
    "state vector": stated.state_vector,
    "input vector": stated.input_vector,
    "system matrix": stated.system_matrix,
    "input matrix": stated.input_matrix,
    "named input": generated.named_input,
    "annihilation": generated.annihilation,
    "generator vector": generated.generator_vector,
    "generator": generated.generator,
    "generator matrix": generated.generator_matrix,
    "generator start": generated.generator_start,
    "waves": generated.waves,
    "tone": generated.tone,
    "readout": generated.readout,
    "readout matrix": generated.readout_matrix,
    "stacked vector": generated.stacked_vector,
    "stacked system": generated.stacked_system,
    "stacked matrix": generated.stacked_matrix,
    "blocks": motion.blocks,
    "upper left": motion.upper,
    "upper right": motion.upper,
    "lower right": motion.upper,
    "particular": motion.particular,
    "jump": motion.jump,
    "blow": motion.blow,
    "shape": motion.shape,
    "driven solution": motion.solution,
    "with unit steps": motion.solution,
    "in interval": motion.in_interval,
    "free": motion.free,
    "forced": motion.forced,
    "term": closing.term,
    "balance": closing.balance,
    "join": motion.join,
    "shared tone": closing.shared_tone,
    "polynomial of A": closing.polynomial_of_a,
    "factor of A": closing.factor_of_a,
    "Hurwitz determinant": closing.hurwitz_determinant,
    "sign": stated.condition,
    "identity": closing.identity,
    "steady": closing.steady,
    "transient": closing.transient,
    "by amplitude": closing.by_amplitude,
    "phase": closing.phase,
    "gain": closing.gain,
    "period": periods.period,
    "local time": periods.local_time,
    "one period": periods.one_period,
    "period recursion": periods.period_recursion,
    "steady equation": periods.steady_equation,
    "carried": periods.carried,
    "steady start": periods.steady_start,
    "in period": periods.in_period,
    "steady period": periods.steady_period,
    "after the periods": periods.after,
    "divisor": periods.divisor,
    "whole": periods.whole,
    "period term": periods.period_term,
    "period balance": periods.period_balance,
    "given value": within,
    "in numbers": within,
    "period in numbers": within,
}
"""What proves each statement, by what it says."""

TABLES: dict[str, Callable[[Spot, Step], Iterator[Finding]]] = {
    "stability": closing.stability,
    "driven_values": tables.value_rows,
}
"""What proves the tables and verdicts of a step, by its kind."""

_COMPARING = frozenset({"case condition", "sign", "in numbers", "period in numbers"})
"""What asks for the relation of a statement; the others prove that sides are equal."""

_OF_THE_MODEL = frozenset({"driven_model", "state_form", "input_system", "substitution"})
_OF_THE_MODEL |= {"period_substitution"}
"""Steps in which the names of the model's functions stand for themselves."""


def prove_driven_statements(
    model: DrivenModel,
    steps: Sequence[Step],
    spots: Sequence[tuple[int, Made]],
    sets: Sequence[Made] = (),
) -> Check:
    """Return the check that every statement of the driven steps holds as printed.

    `spots` are the cases by number, each with what makes its points; `sets` make the point of
    each set of values that is put in.

    Raises:  StatementRefutedError for the first that does not hold, or that uses a name that
             is not defined; UnprovedError if there is none, but some are left open;
             ValueError for a kind of statement that nothing proves.
    """
    count = max(number for number, _ in spots) + 1
    said = [s for step in steps for s in said_in(step, count)]
    for s in said:
        if s.statement.says not in PROVERS:
            raise ValueError(f"nothing proves {s.statement.says!r} of the step {s.step.kind!r}")
        if s.statement.relation != "=" and s.statement.says not in _COMPARING:
            raise ValueError(f"{s.statement.says!r} is said with {s.statement.relation!r}")
    for number, make in spots:
        mine = [s for s in said if number in s.cases]
        here = [s for s in steps if s.kind in TABLES and number in _cases(s, count)]
        _settle(model, make, partial(_findings, model, mine, here))
    for step in steps:
        rows: Any = step.facts["sets"] if step.kind == "driven_numbers" else ()
        for held, make in zip(rows, sets if rows else (), strict=True):
            _settle(model, make, partial(_of_a_set, step, held))
    return Check(
        "statements of the derivation",
        "enclosed",
        f"{len(said)} statements on equations, inputs and solution, evaluated as printed, agree "
        "with the model and with its motion, followed by ball arithmetic from instant to instant",
    )


def _cases(step: Step, count: int) -> tuple[int, ...]:
    cases: Any = step.facts.get("cases", tuple(range(count)))
    return tuple(cases)


def _findings(
    model: DrivenModel, said: Sequence[Said], steps: Sequence[Step], spot: Spot
) -> Iterator[Finding]:
    for s in said:
        yield from _undefined(model, spot, s)
        yield from PROVERS[s.statement.says](spot, s)
    for step in steps:
        yield from TABLES[step.kind](spot, step)


def _of_a_set(step: Step, held: Mapping[str, Any], spot: Spot) -> Iterator[Finding]:
    yield from tables.number_set(spot, step, held)


def _settle(model: DrivenModel, make: Made, find: Callable[[Spot], Iterator[Finding]]) -> None:
    """Prove what is found at some points, more and more finely."""
    bits = _FIRST_BITS
    while True:
        with ctx.workprec(bits):
            wide = _at_once(model, make, find)
        if not wide:
            return
        if bits >= _MOST_BITS:
            break
        bits = min(2 * bits, _MOST_BITS)
    for comparison in wide:
        if comparison.has_no_value:
            reason = f"it has no value, worked to {bits} bits"
            raise StatementRefutedError(model.name, str(comparison), reason)
    places = dict.fromkeys(map(str, wide))
    how = f"not settled by {bits} bits"
    raise UnprovedError(model.name, tuple(Check(p, "not attempted", how) for p in places))


def _at_once(
    model: DrivenModel, make: Made, find: Callable[[Spot], Iterator[Finding]]
) -> list[Comparison]:
    """Return what FLINT's current precision leaves open, at all points."""
    try:
        return [w for spot in make() for w in _wide(model, find(spot))]
    except ZeroDivisionError:  # a matrix that is regular has no inverse in balls this wide
        return [undecided("a system of equations")]


def _wide(model: DrivenModel, findings: Iterator[Finding]) -> Iterator[Comparison]:
    """Yield what this precision does not settle; raise at the first thing that is wrong."""
    for finding in findings:
        if isinstance(finding, Fault):
            raise StatementRefutedError(model.name, finding.place, finding.reason)
        if finding.is_apart:
            raise StatementRefutedError(
                model.name,
                str(finding),
                f"printed is {finding.printed.str(8)}, and true {finding.expected.str(8)}",
            )
        if not finding.is_settled:
            yield finding


def _undefined(model: DrivenModel, spot: Spot, said: Said) -> Iterator[Fault]:
    """Every name in a formula is defined in print."""
    known = {model.time, *spot.names}
    if said.step.kind == "stability":
        known.add(Writing(model).root.text)
    if said.step.kind in ("periodic", "period_substitution"):
        number, local = said.step.facts["number"], said.step.facts["local"]
        known |= {name for item in (number, local) for name in _own_names(item)}
    parts: Any = said.step.facts.get("own", ())
    own = {*model.rows, *model.unknowns, *(i.name for i in model.inputs), *parts}
    for side in said.statement.sides:
        for formula in expressions_in(side):
            for name in sorted(names_in(formula)):
                stem = jet_of(name)[0]
                of_model = stem in own or _is_label(model, name)
                if name not in known and not (said.step.kind in _OF_THE_MODEL and of_model):
                    yield Fault(said.statement.says, f"{name} is used and not defined")


def _own_names(item: Any) -> Iterator[str]:
    """The names that a step gives to the number of a period and to the time in it."""
    if isinstance(item, Name):
        yield item.text
    else:
        yield from _own_names(item.sides[0])


def _is_label(model: DrivenModel, name: str) -> bool:
    labels = {label.text for label in Writing(model).inputs}
    return jet_of(name)[0] in {jet_of(label)[0] for label in labels}
