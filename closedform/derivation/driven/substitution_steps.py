"""The step that puts the solution into the equations as typed, term by term."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass, replace

from closedform.algebra.field import Scalar
from closedform.derivation.driven.signals import waves_formula, waves_in
from closedform.derivation.driven.writing import Writing
from closedform.derivation.step import Depth, Statement, Step
from closedform.model.driven.model import Jet
from closedform.notation.expression import ZERO, Expression, Name, operations
from closedform.response.driven.balance_terms import BalanceTerm, balance_terms
from closedform.response.driven.response import DrivenResponse, DrivenSolution

__all__ = ["substitution_step"]

LONGEST = 120
"""Operations in the terms up to which they are printed at the depth working."""


@dataclass(frozen=True)
class _Equation:
    """sum of weight · jet = sum of weight · input; `number` counts the typed ones from 1."""

    number: int
    of_unknowns: tuple[tuple[Jet, Scalar], ...]
    of_inputs: tuple[tuple[int, Scalar], ...]


def substitution_step(
    response: DrivenResponse, solution: DrivenSolution, facts: dict[str, object]
) -> Step | None:
    """Show what each term of one equation is in one interval, and that they add up.

    None if the terms cannot be written with the names of the solution.
    """
    writing = Writing(response.model)
    equations = _equations(writing)
    chosen = max(equations, key=lambda e: (_tops(writing, e), bool(e.of_inputs), -e.number))
    place = _busiest(writing, chosen)
    interval = solution.functions.intervals[place]
    terms = balance_terms(response, solution, chosen.of_unknowns, interval)
    if terms is None:
        return None
    several = len(solution.functions.intervals) > 1
    statements = [
        Statement("term", (_weighted(writing, solution, term), term.formula)) for term in terms
    ]
    statements.append(_balance(writing, solution, chosen, terms, place))
    told = {
        **facts,
        "place": place,
        "when": writing.within(place) if several else None,
        "number": chosen.number,
        "typed": bool(writing.model.balances),
        "several": len(equations) > 1,
    }
    amount = sum(operations(term.formula) for term in terms)
    depth: Depth = "working" if amount <= LONGEST else "full"
    return Step("substitution", tuple(statements), told, ("driven_solution",), depth)


def _equations(writing: Writing) -> list[_Equation]:
    model = writing.model
    if model.balances:
        return [
            _Equation(k, b.of_unknowns, tuple((i, -w) for i, w in b.of_inputs))
            for k, b in enumerate(model.balances, start=1)
        ]
    reduction, one = model.reduction, model.field.domain.one
    rows = reduction.matrix.to_list()
    feeds = [] if reduction.input_matrix is None else reduction.input_matrix.to_list()
    found = []
    for k, (jet, row) in enumerate(zip(reduction.jets, rows, strict=True)):
        others = [(j, -w) for j, w in zip(reduction.jets, row, strict=True) if w]
        fed = tuple((i, w) for i, w in enumerate(feeds[k]) if w) if feeds else ()
        top = (Jet(jet.name, jet.order + 1), one)
        found.append(_Equation(k + 1, (top, *others), fed))
    return found


def _tops(writing: Writing, equation: _Equation) -> bool:
    """Whether a highest derivative stands in the equation, which is no state."""
    jets = writing.model.reduction.jets
    return any(jet.order and jet not in jets for jet, _ in equation.of_unknowns)


def _busiest(writing: Writing, equation: _Equation) -> int:
    """The first interval in which an input of the equation is on; else the first of all."""
    for place in range(len(writing.model.timeline) + 1):
        if any(waves_in(writing, column, place) for column, _ in equation.of_inputs):
            return place
    return 0


def _weighted(writing: Writing, solution: DrivenSolution, term: BalanceTerm) -> Expression:
    weight = solution.put(term.weight)
    return writing.term(weight, [Name(term.jet.text)]) if weight else ZERO


def _balance(
    writing: Writing,
    solution: DrivenSolution,
    equation: _Equation,
    terms: Sequence[BalanceTerm],
    place: int,
) -> Statement:
    """The sum of the terms, by names, is what the inputs are, by name and as a formula."""
    left = writing.combination(
        ([solution.put(t.weight) for t in terms], [Name(t.jet.text) for t in terms])
    )
    weights = [solution.put(weight) for _, weight in equation.of_inputs]
    labels = [writing.inputs[column] for column, _ in equation.of_inputs]
    waves = [
        replace(wave, amount=solution.put(wave.amount) * weight)
        for (column, _), weight in zip(equation.of_inputs, weights, strict=True)
        for wave in waves_in(writing, column, place)
    ]
    drive = waves_formula(writing, waves)
    named = writing.combination((weights, labels))
    sides = (left, drive) if named == drive else (left, named, drive)
    return Statement("balance", sides)
