"""The step from the equations to x' = A x + B u and z = C x + D u."""

from __future__ import annotations

from collections.abc import Iterator

from closedform.derivation.driven.signals import input_formula
from closedform.derivation.driven.writing import Writing, bold
from closedform.derivation.step import Side, Statement, Step, Symbol
from closedform.model.driven.model import Jet
from closedform.notation.expression import Name

__all__ = ["state_form_step"]


def state_form_step(writing: Writing) -> Step | None:
    """Solve for the highest derivatives; None where the state form was stated."""
    model = writing.model
    if model.form == "state form":
        return None
    reduction = model.reduction
    statements = [*_eliminated(writing), *_solved(writing), *_matrices(writing)]
    tops = [jet for jet in _tops(writing) if jet.order > 1]
    facts = {
        "states": list(writing.states),
        "velocities": [
            {"name": Name(name), "jet": Statement("named", (Name(name), Name(jet.text)))}
            for name, jet in zip(model.names, reduction.jets, strict=True)
            if jet.order
        ],
        "eliminated": [Name(name) for name in reduction.eliminated],
        "second": bool(tops),
        "order": max((jet.order for jet in _tops(writing)), default=1),
        "matrices": model.form == "second order",
        "inputs": len(model.inputs),
        "n": len(model.names),
        "several": len(_tops(writing)) > 1,
    }
    return Step("state_form", tuple(statements), facts, ("driven_model",), "summary")


def _tops(writing: Writing) -> list[Jet]:
    """The highest derivative of every unknown that is a state."""
    highest: dict[str, int] = {}
    for jet in writing.model.reduction.jets:
        highest[jet.name] = max(highest.get(jet.name, 0), jet.order)
    return [Jet(name, order + 1) for name, order in highest.items()]


def _solved(writing: Writing) -> Iterator[Statement]:
    reduction = writing.model.reduction
    rows = reduction.matrix.to_list()
    feeds = [] if reduction.input_matrix is None else reduction.input_matrix.to_list()
    for top in _tops(writing):
        place = reduction.jets.index(Jet(top.name, top.order - 1))
        parts = [(rows[place], writing.states)]
        if feeds:
            parts.append((feeds[place], writing.inputs))
        yield Statement("solved", (Name(top.text), writing.combination(*parts)))


def _eliminated(writing: Writing) -> Iterator[Statement]:
    reduction = writing.model.reduction
    of_states, of_inputs = reduction.eliminated_from_states, reduction.eliminated_from_inputs
    if of_states is None:
        return
    feeds = [] if of_inputs is None else of_inputs.to_list()
    for place, name in enumerate(reduction.eliminated):
        parts = [(of_states.to_list()[place], writing.states)]
        if feeds:
            parts.append((feeds[place], writing.inputs))
        yield Statement("eliminated", (Name(name), writing.combination(*parts)))


def _matrices(writing: Writing) -> Iterator[Statement]:
    model = writing.model
    reduction = model.reduction
    a, b = Symbol("matrix", letter="A"), Symbol("matrix", letter="B")
    right: Side = (a, bold("x"))
    if reduction.input_matrix is not None:
        right = Symbol("sum", parts=(right, (b, bold("u"))))
    yield Statement("driven system", (Symbol("dotted", letter="x"), right))
    yield Statement("state vector", (bold("x"), writing.column(writing.states)))
    if reduction.input_matrix is not None:
        labels = writing.inputs
        formulas = [input_formula(writing, given) for given in model.inputs]
        sides: list[Side] = [bold("u"), writing.column(labels)]
        if list(labels) != formulas:
            sides.append(writing.column(formulas))
        yield Statement("input vector", tuple(sides))
    yield Statement("system matrix", (a, writing.matrix(reduction.matrix)))
    if reduction.input_matrix is not None:
        yield Statement("input matrix", (b, writing.matrix(reduction.input_matrix)))
    if model.initial is not None:
        values = [writing.element(value) for value in model.initial]
        start = bold("x", writing.element(model.start))
        yield Statement("initial state", (start, bold("x", None, "0"), writing.column(values)))
