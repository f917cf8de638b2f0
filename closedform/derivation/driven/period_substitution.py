"""The step that puts the response within a period into the equations as typed."""

from __future__ import annotations

from collections.abc import Iterator
from dataclasses import replace

from closedform.derivation.driven.indices import repeated_indices
from closedform.derivation.driven.signals import waves_formula, waves_in
from closedform.derivation.driven.substitution_steps import (
    Stated,
    best_equation,
    stated_equations,
    term_of,
)
from closedform.derivation.driven.writing import Writing
from closedform.derivation.step import Depth, Statement, Step, Symbol
from closedform.notation.expression import ZERO, Expression, Name
from closedform.notation.jets import jet_of
from closedform.response.driven.composition import renamed
from closedform.response.driven.periodic import one_period, repeating
from closedform.response.driven.solution import DrivenSolution

__all__ = ["indexed", "period_substitution_steps"]


def indexed(name: str, indices: tuple[str, ...]) -> str:
    """Return the name of a part of a function, or of a derivative of it, by its indices.

    >>> indexed("x1''", ("rep",))
    "x1_rep''"
    """
    stem, order = jet_of(name)
    return "_".join((stem, *indices)) + "'" * order


def period_substitution_steps(
    writing: Writing, solution: DrivenSolution, facts: dict[str, object]
) -> Iterator[Step]:
    """Show what each term of an equation is within a period, and that they add up.

    An impulse strikes where periods meet; within them its input is zero.
    """
    equations = stated_equations(writing.model)
    first = best_equation(writing.model, equations)
    for place in range(len(solution.periodic)):
        for equation in (first, *(e for e in equations if e is not first)):
            depth: Depth = "working" if equation is first else "full"
            yield _step(writing, solution, {**facts, "place": place}, equation, depth)


def _step(
    writing: Writing,
    solution: DrivenSolution,
    facts: dict[str, object],
    equation: Stated,
    depth: Depth,
) -> Step:
    place = int(str(facts["place"]))
    own, repeat = solution.periodic[place], repeating(writing.model)[place]
    indices = repeated_indices(solution, place)
    one = Writing(one_period(writing.model, repeat))
    fed = [
        (column, weight)
        for column, weight in equation.of_inputs
        if writing.model.inputs[column].signal.repeat == repeat
    ]
    on = (k for k, _ in enumerate(own.stretches) if any(waves_in(one, c, k) for c, _ in fed))
    part = next(on, 0)
    stretch, local = own.stretches[part], Name(own.local)
    statements, names = [], []
    for jet, weight in equation.of_unknowns:
        put = solution.put(weight)
        name = Name(indexed(jet.text, indices))
        left = writing.term(put, [name]) if put else ZERO
        formula = term_of(writing, solution, jet, weight, stretch.rows, local)
        statements.append(Statement("period term", (left, formula)))
        names.append((put, name))
    weights = [solution.put(weight) for _, weight in fed]
    labels = [writing.inputs[column] for column, _ in fed]
    waves = [
        replace(
            wave,
            amount=solution.put(wave.amount) * weight,
            origin=wave.origin - repeat.start,
        )
        for (column, _), weight in zip(fed, weights, strict=True)
        for wave in waves_in(one, column, part)
    ]
    drive = renamed(waves_formula(writing, waves), writing.model.time, own.local)
    total = writing.combination(([w for w, _ in names], [name for _, name in names]))
    named = writing.combination((weights, labels))
    sides: tuple[Expression, ...] = (total, drive) if named == drive else (total, named, drive)
    statements.append(Statement("period balance", sides))
    told = {
        **facts,
        "number": Name(own.number),
        "local": local,
        "when": Symbol("interval", ("both",), local, parts=(stretch.start, stretch.end)),
        "equation": equation.number,
        "typed": bool(writing.model.balances),
        "several": len(stated_equations(writing.model)) > 1,
        "own": tuple(jet_of(name.text)[0] for _, name in names),
        "impulses": any(
            given.signal.repeat == repeat and given.signal.impulses
            for given in writing.model.inputs
        ),
    }
    return Step("period_substitution", tuple(statements), told, ("periodic",), depth)
