"""The step that puts the solution into the equations as typed, term by term."""

from __future__ import annotations

from collections.abc import Iterator, Sequence
from dataclasses import dataclass, replace

from closedform.algebra.field import Scalar
from closedform.derivation.driven.differentiation import derivative_of, times
from closedform.derivation.driven.signals import waves_formula, waves_in
from closedform.derivation.driven.writing import Writing
from closedform.derivation.step import Depth, Statement, Step
from closedform.model.driven.model import DrivenModel, Jet
from closedform.notation.expression import ZERO, Expression, Name
from closedform.response.driven.balance_terms import balance_terms
from closedform.response.driven.response import DrivenResponse, DrivenSolution

__all__ = ["Stated", "best_equation", "stated_equations", "substitution_steps", "term_of"]


@dataclass(frozen=True)
class Stated:
    """sum of weight · jet = sum of weight · input; `number` counts the typed ones from 1."""

    number: int
    of_unknowns: tuple[tuple[Jet, Scalar], ...]
    of_inputs: tuple[tuple[int, Scalar], ...]


def substitution_steps(
    response: DrivenResponse, solution: DrivenSolution, facts: dict[str, object]
) -> Iterator[Step]:
    """Show what each term of an equation is in one interval, and that they add up.

    The most telling equation comes first; the others are for full documents.
    """
    writing = Writing(response.model)
    equations = stated_equations(writing.model)
    first = best_equation(writing.model, equations)
    for equation in (first, *(e for e in equations if e is not first)):
        depth: Depth = "working" if equation is first else "full"
        yield _step(response, solution, facts, equation, depth)


def best_equation(model: DrivenModel, equations: Sequence[Stated]) -> Stated:
    """Return the equation that tells most: with a highest derivative, an input, many terms."""
    return max(
        equations,
        key=lambda e: (_tops(model, e), bool(e.of_inputs), len(e.of_unknowns), -e.number),
    )


def _step(
    response: DrivenResponse,
    solution: DrivenSolution,
    facts: dict[str, object],
    equation: Stated,
    depth: Depth,
) -> Step:
    writing = Writing(response.model)
    place = _busiest(writing, solution, equation)
    statements = [
        Statement("term", (_weighted(writing, solution, jet, weight), formula))
        for (jet, weight), formula in zip(
            equation.of_unknowns, _terms(response, solution, equation, place), strict=True
        )
    ]
    statements.append(_balance(writing, solution, equation, place))
    told = {
        **facts,
        "place": place,
        "when": writing.within(place) if len(solution.functions.intervals) > 1 else None,
        "number": equation.number,
        "typed": bool(writing.model.balances),
        "several": len(stated_equations(writing.model)) > 1,
    }
    return Step("substitution", tuple(statements), told, ("driven_solution",), depth)


def _terms(
    response: DrivenResponse, solution: DrivenSolution, equation: Stated, place: int
) -> Iterator[Expression]:
    """The terms in the shortest form; where that needs names of its own, derived one by one."""
    interval = solution.functions.intervals[place]
    found = balance_terms(response, solution, equation.of_unknowns, interval)
    if found is not None:
        yield from (term.formula for term in found)
        return
    writing = Writing(response.model)
    for jet, weight in equation.of_unknowns:
        yield term_of(writing, solution, jet, weight, solution.pieces[place], writing.t)


def term_of(
    writing: Writing,
    solution: DrivenSolution,
    jet: Jet,
    weight: Scalar,
    rows: Sequence[Expression],
    variable: Name,
) -> Expression:
    """Return weight · jet by the formulas of the rows, one of them derived where it has to be."""
    row, derived = _row_of(writing.model, jet)
    formula = derivative_of(rows[row], variable.text) if derived else rows[row]
    put = solution.put(weight)
    return times([writing.element(put), formula]) if put else ZERO


def _row_of(model: DrivenModel, jet: Jet) -> tuple[int, bool]:
    """The row that a jet is, or that it is the derivative of."""
    jets = list(model.reduction.jets)
    if jet in jets:
        return jets.index(jet), False
    if jet.order == 0:
        return len(model.names) + model.reduction.eliminated.index(jet.name), False
    return jets.index(Jet(jet.name, jet.order - 1)), True


def stated_equations(model: DrivenModel) -> list[Stated]:
    """Return the equations as typed, or the rows of the state form where that was stated."""
    if model.balances:
        return [
            Stated(k, b.of_unknowns, tuple((i, -w) for i, w in b.of_inputs))
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
        found.append(Stated(k + 1, (top, *others), fed))
    return found


def _tops(model: DrivenModel, equation: Stated) -> bool:
    """Whether a highest derivative stands in the equation, which is no state."""
    jets = model.reduction.jets
    return any(jet.order and jet not in jets for jet, _ in equation.of_unknowns)


def _busiest(writing: Writing, solution: DrivenSolution, equation: Stated) -> int:
    """The first interval in which an input of the equation is on; else in which anything moves."""
    places = range(len(writing.model.timeline) + 1)
    fed = (
        place
        for place in places
        if any(waves_in(writing, column, place) for column, _ in equation.of_inputs)
    )
    moved = (place for place in places if any(row != ZERO for row in solution.pieces[place]))
    return next(fed, next(moved, 0))


def _weighted(writing: Writing, solution: DrivenSolution, jet: Jet, weight: Scalar) -> Expression:
    put = solution.put(weight)
    return writing.term(put, [Name(jet.text)]) if put else ZERO


def _balance(writing: Writing, solution: DrivenSolution, equation: Stated, place: int) -> Statement:
    """The sum of the terms, by names, is what the inputs are, by name and as a formula."""
    unknowns = equation.of_unknowns
    left = writing.combination(
        ([solution.put(w) for _, w in unknowns], [Name(jet.text) for jet, _ in unknowns])
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
