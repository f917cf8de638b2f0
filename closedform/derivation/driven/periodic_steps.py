"""The step that adds up what the periods of a repeating input leave."""

from __future__ import annotations

from collections.abc import Iterator

from closedform.derivation.driven.indices import (
    base_indices,
    moves_apart,
    repeated_indices,
    whole_statement,
)
from closedform.derivation.driven.writing import Writing
from closedform.derivation.step import Side, Statement, Step, Symbol
from closedform.model.driven.signal import Repeat
from closedform.notation.expression import ONE, ZERO, Call, Expression, Name, Sum, product
from closedform.notation.terms import negated, sum_of
from closedform.response.driven.period_formulas import PeriodicSolution, PeriodStretch
from closedform.response.driven.periodic import repeating
from closedform.response.driven.solution import DrivenSolution

__all__ = ["periodic_steps", "recursion"]

STEADY = "s"
"""The index of what a steady period begins with."""


def periodic_steps(
    writing: Writing, solution: DrivenSolution, facts: dict[str, object]
) -> Iterator[Step]:
    """State, for inputs that repeat, the response in the n-th period, and what it tends to."""
    base = moves_apart(solution)
    repeats = repeating(writing.model)
    for place, own in enumerate(solution.periodic):
        indices = repeated_indices(solution, place)
        steady = (*indices, "steady")
        last = place + 1 == len(solution.periodic)
        told = {
            **facts,
            "response": writing.response(*indices),
            "apart": writing.response(*base_indices(solution)),
            "whole_sum": whole_statement(writing, solution) if last else None,
            "place": place,
            "count": own.count,
            "period": Statement("period", (own.period,)),
            "local": _local(writing, own),
            "number": Name(own.number),
            "left": _states(writing, own, own.left, "one period"),
            "recursion": recursion(writing, repeats[place], own.number),
            "unmoved": None if own.begins is None else recursion(writing, repeats[place], None),
            "carried": _states(writing, own, own.carried, "carried"),
            "begins": None
            if own.begins is None
            else _states(writing, own, own.begins, "steady start"),
            "stretches": [_stretch(writing, own, s, "in period", indices) for s in own.stretches],
            "steady": [
                _stretch(writing, own, s, "steady period", steady) for s in own.steady or ()
            ],
            "after": None
            if own.after is None
            else [
                Statement(
                    "after the periods", (Symbol("scalar", indices, writing.t, name), formula)
                )
                for name, formula in zip(writing.model.rows, own.after, strict=True)
            ],
            "provided": [Statement("divisor", (formula,)) for formula in own.provided],
            "base": base,
            "inputs": [
                label
                for label, given in zip(writing.inputs, writing.model.inputs, strict=True)
                if given.signal.repeat is not None
            ],
        }
        yield Step("periodic", (), told, ("driven_transition",), "summary")


def _local(writing: Writing, own: PeriodicSolution) -> Statement:
    """The local time: t less the start of the n-th period."""
    periods = sum_of([Name(own.number), negated(ONE)])
    begun = [] if own.start == ZERO else [negated(own.start)]
    whole = periods if own.period == ONE else product([own.period, periods])
    return Statement("local time", (Name(own.local), Sum((writing.t, *begun, negated(whole)))))


def _states(
    writing: Writing, own: PeriodicSolution, formulas: tuple[Expression, ...], says: str
) -> Statement:
    """The states at the end of one period, of the n-th, and of the steady one."""
    index = {"one period": "1", "carried": own.number, "steady start": STEADY}[says]
    return Statement(says, (_end(writing, index), writing.column(formulas)))


def recursion(writing: Writing, repeat: Repeat, number: str | None) -> Statement:
    """State how the ends of periods follow from one another; without a number, of the steady one.

    g_n = e^(AT) g_(n-1) + g_1, and g_s = e^(AT) g_s + g_1.
    """
    before = STEADY if number is None else f"{number}-1"
    carried = (_over_a_period(writing, repeat), _end(writing, before))
    whole = Symbol("sum", parts=(carried, _end(writing, "1")))
    says = "steady equation" if number is None else "period recursion"
    return Statement(says, (_end(writing, number or STEADY), whole))


def _over_a_period(writing: Writing, repeat: Repeat) -> Side:
    """e^(AT); with one state its exponential, the exponent worked out."""
    if not writing.is_scalar:
        return Symbol("transition", argument=writing.element(repeat.period), letter="A")
    rate = writing.model.reduction.matrix.to_list()[0][0]
    return Call("exp", writing.element(rate * repeat.period)) if rate else ONE


def _end(writing: Writing, index: str) -> Symbol:
    """The states at the end of a period."""
    kind = "scalar" if writing.is_scalar else "vector"
    return Symbol(kind, (index,), None, writing.letter("g"))


def _stretch(
    writing: Writing,
    own: PeriodicSolution,
    stretch: PeriodStretch,
    says: str,
    indices: tuple[str, ...],
) -> dict[str, object]:
    local = Name(own.local)
    when = Symbol("interval", ("both",), local, parts=(stretch.start, stretch.end))
    return {
        "when": when,
        "statements": [
            Statement(says, (Symbol("scalar", indices, writing.t, name), formula))
            for name, formula in zip(writing.model.rows, stretch.rows, strict=True)
        ],
    }
