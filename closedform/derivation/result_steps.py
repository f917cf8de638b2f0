"""The steps that state results: e^(At), the solution, outputs, values, and what was proved."""

from __future__ import annotations

from collections.abc import Sequence

from closedform.algebra.surds import SurdSum
from closedform.derivation.identities import printed_item
from closedform.derivation.step import Matrix, Side, Statement, Step, Symbol
from closedform.notation.expression import Expression, Name
from closedform.notation.plain import plain
from closedform.notation.terms import surd_formula
from closedform.response.response import LARGEST_WRITTEN_OUT, Response
from closedform.response.sampling import default_times, sampled
from closedform.verification.record import Check

__all__ = [
    "cautions_step",
    "exact_number",
    "outputs_step",
    "solution_step",
    "transition_step",
    "values_step",
    "verification_step",
]


def transition_step(response: Response, *, is_complex: bool) -> Step:
    """State e^(At) entry by entry."""
    t = Name(response.model.time)
    forms = response.closed_forms
    sides: list[Side] = [Symbol("transition", argument=t)]
    route = "resolvent"
    if response.has_chains_in_print:
        route = "form"
        index = ("R",) if is_complex else ()
        sides.append(
            (
                Symbol("matrix", letter="P", indices=index),
                Symbol("exponential", letter="J", indices=index, argument=t),
                Symbol("inverse", letter="P", indices=index),
            )
        )
    front, rows = forms.fronted_transition
    sides.append(Matrix(rows, front=front))
    rests_on = ("exponential_of_form",) if route == "form" else ("resolvent",)
    return Step(
        "transition", (Statement("exp A", tuple(sides)),), {"route": route}, rests_on=rests_on
    )


def solution_step(response: Response, *, has_transition: bool) -> Step:
    """State x(t), one formula for each state that is shown."""
    t = Name(response.model.time)
    model, forms = response.model, response.closed_forms
    shown = len(model.states)
    if shown > LARGEST_WRITTEN_OUT:
        shown = 0 if model.outputs else LARGEST_WRITTEN_OUT
    statements = [
        Statement("solution of state", (_function(state, t), formula))
        for state, formula in zip(model.states[:shown], forms.solution, strict=False)
    ]
    facts = {"shown": shown, "n": len(model.states)}
    rests_on = ("transition",) if has_transition else ("resolvent",)
    return Step("solution", tuple(statements), facts, rests_on, "summary")


def outputs_step(response: Response) -> Step:
    """State the outputs as functions of time."""
    t = Name(response.model.time)
    statements = [
        Statement("output", (_function(output.name, t), formula))
        for output, formula in zip(
            response.model.outputs, response.closed_forms.outputs, strict=True
        )
    ]
    return Step("outputs", tuple(statements), {}, ("solution",), "summary")


def _function(name: str, t: Expression) -> Symbol:
    return Symbol("scalar", letter=name, argument=t)


def values_step(response: Response, digits: int) -> Step:
    """Tabulate certified values at the instants asked for, or at some that suit."""
    model = response.model
    times = model.times or default_times(response)
    t = Name(model.time)
    few = len(model.states) <= LARGEST_WRITTEN_OUT or not model.outputs
    names = (*(model.states if few else ()), *(o.name for o in model.outputs))
    columns = [sampled(response.state, times, digits)] if few else []
    if response.output is not None:
        columns.append(sampled(response.output, times, digits))
    rows = [
        [exact_number(time), *(value for column in columns for value in column[i])]
        for i, time in enumerate(times)
    ]
    header: list[Side] = [t, *(_function(name, t) for name in names)]
    facts = {"header": header, "rows": rows, "digits": digits, "chosen": not model.times}
    return Step("values", (), facts, ("solution",), "summary")


def exact_number(time: SurdSum) -> str:
    """Return an exact number as text: a decimal if it ends, else a formula."""
    if time.is_rational:
        value = time.as_fraction()
        denominator = value.denominator
        for prime in (2, 5):
            while denominator % prime == 0:
                denominator //= prime
        if denominator == 1:
            return _terminating(value.numerator, value.denominator)
    return plain(surd_formula(time))


def _terminating(numerator: int, denominator: int) -> str:
    places = 0
    while 10**places % denominator:
        places += 1
    digits = str(abs(numerator) * 10**places // denominator).rjust(places + 1, "0")
    sign = "-" if numerator < 0 else ""
    whole, part = (digits[:-places], digits[-places:]) if places else (digits, "")
    return f"{sign}{whole}.{part}" if part else f"{sign}{whole}"


def verification_step(checks: Sequence[Check], time: str) -> Step:
    """List what was proved or enclosed, and how."""
    rows = [
        {"item": printed_item(check.item, time), "outcome": check.outcome, "how": check.how}
        for check in checks
    ]
    return Step("verification", (), {"rows": rows}, depth="summary")


def cautions_step() -> Step:
    """Say what the proof does not cover."""
    return Step("cautions", depth="summary")
