"""The step that states a driven model as it was typed."""

from __future__ import annotations

from collections.abc import Iterator, Sequence

from closedform.algebra.field import Scalar
from closedform.derivation.driven.boundary_steps import point_conditions
from closedform.derivation.driven.signals import signal_side
from closedform.derivation.driven.writing import Writing, bold, calls_in
from closedform.derivation.proof.evaluation import expressions_in
from closedform.derivation.step import Side, Statement, Step, Symbol
from closedform.model.driven.model import DrivenModel, Input
from closedform.notation.expression import Name

__all__ = ["SECOND_ORDER", "driven_model_step", "second_order_matrices"]

SECOND_ORDER = ("mass matrix", "damping matrix", "stiffness matrix", "force matrix")
"""The matrices of a model of second order, by what is said of them."""


def driven_model_step(writing: Writing) -> Step:
    """State the equations, the inputs and the initial values."""
    model = writing.model
    statements: list[Statement] = []
    if model.form == "second order":
        statements += _second_order(writing)
    elif model.balances:
        statements += [Statement("equation", (b.left, b.right)) for b in model.balances]
    else:
        statements += _state_form(writing)
    statements += _initial(writing)
    declared = list(_declared(writing))
    statements += [statement for statement, _ in declared]
    statements += [
        Statement(
            "driven output",
            (
                Name(output.name),
                writing.combination(
                    (output.of_states, writing.states), (output.of_inputs, writing.inputs)
                ),
            ),
        )
        for output in model.outputs
    ]
    facts = {
        "title": model.title,
        "summary": model.stacked.summary,
        "time": model.time,
        "form": "equations" if model.balances and model.form != "second order" else model.form,
        "unknowns": [Name(name) for name in model.unknowns],
        "states": [Name(name) for name in model.names],
        "inputs": [_told(writing, given) for _, given in declared],
        "as_typed": any(_has_steps(side) for s in statements for side in s.sides),
        "numbers": model.domain is None,
        "struck": any(
            impulse.at == model.start for g in model.inputs for impulse in g.signal.impulses
        ),
        "impulses": any(given.signal.impulses for given in model.inputs),
        "start": writing.element(model.start),
        "later": bool(model.start),
        "points": list(point_conditions(writing)),
    }
    return Step("driven_model", tuple(statements), facts, depth="summary")


def _has_steps(side: Side) -> bool:
    """Whether a unit step stands in a formula as typed."""
    return any("step" in calls_in(formula) for formula in expressions_in(side))


def _told(writing: Writing, given: Input) -> dict[str, object]:
    repeat = given.signal.repeat
    return {
        "name": Name(given.name) if given.name else None,
        "meaning": given.meaning,
        "unit": given.unit,
        "count": None if repeat is None else repeat.count,
        "repeats": repeat is not None,
        "period": None if repeat is None else writing.element(repeat.period),
    }


def _state_form(writing: Writing) -> Iterator[Statement]:
    reduction, t = writing.model.reduction, writing.t
    if writing.is_scalar:
        parts = [(reduction.matrix.to_list()[0], writing.states)]
        if reduction.input_matrix is not None:
            parts.append((reduction.input_matrix.to_list()[0], writing.inputs))
        yield Statement("solved", (Name(f"{writing.model.names[0]}'"), writing.combination(*parts)))
        return
    a, b = Symbol("matrix", letter="A"), Symbol("matrix", letter="B")
    right: Side = (a, bold("x", t))
    if reduction.input_matrix is not None:
        right = Symbol("sum", parts=(right, (b, bold("u", t))))
    yield Statement("driven system", (Symbol("dotted", argument=t, letter="x"), right))
    yield Statement("system matrix", (a, writing.matrix(reduction.matrix)))
    if reduction.input_matrix is not None:
        yield Statement("input matrix", (b, writing.matrix(reduction.input_matrix)))
        yield Statement("input vector", (bold("u"), writing.column(writing.inputs)))


def _second_order(writing: Writing) -> Iterator[Statement]:
    t = writing.t
    mass, damping, stiffness, force = second_order_matrices(writing.model)
    given = [("M", 2, mass), ("C", 1, damping), ("K", 0, stiffness)]
    terms: list[Side] = []
    for letter, order, rows in given:
        if any(e for row in rows for e in row):
            vector = Symbol("dotted", argument=t, letter="q", order=order)
            terms.append((Symbol("matrix", letter=letter), vector if order else bold("q", t)))
    right: Side = (Symbol("matrix", letter="G"), bold("u", t)) if force else Symbol("zero")
    yield Statement("second order system", (Symbol("sum", parts=tuple(terms)), right))
    named = dict(zip(SECOND_ORDER, "MCKG", strict=True))
    for says, rows in zip(SECOND_ORDER, (mass, damping, stiffness, force), strict=True):
        if rows and any(e for row in rows for e in row):
            symbol = Symbol("matrix", letter=named[says])
            yield Statement(says, (symbol, _matrix(writing, rows)))
    unknowns = [Name(name) for name in writing.model.unknowns]
    yield Statement("coordinates", (bold("q"), writing.column(unknowns)))
    if force:
        yield Statement("input vector", (bold("u"), writing.column(writing.inputs)))


def _matrix(writing: Writing, rows: Sequence[Sequence[Scalar]]) -> Side:
    return writing.matrix(writing.model.field.matrix(rows))


def second_order_matrices(
    model: DrivenModel,
) -> tuple[list[list[Scalar]], list[list[Scalar]], list[list[Scalar]], list[list[Scalar]]]:
    """Return M, C, K and G of M q'' + C q' + K q = G u, as the balances have them."""
    zero = model.field.domain.zero
    by_order = [
        [
            [
                {(jet.name, jet.order): weight for jet, weight in balance.of_unknowns}.get(
                    (name, order), zero
                )
                for name in model.unknowns
            ]
            for balance in model.balances
        ]
        for order in (2, 1, 0)
    ]
    force = [
        [-dict(balance.of_inputs).get(place, zero) for place in range(len(model.inputs))]
        for balance in model.balances
        if model.inputs
    ]
    return by_order[0], by_order[1], by_order[2], force


def _initial(writing: Writing) -> Iterator[Statement]:
    model = writing.model
    start = writing.element(model.start)
    if model.initial is None:
        return
    for name, value in zip(model.names, model.initial, strict=True):
        symbol = Symbol("scalar", letter=name, argument=start)
        yield Statement("initial value", (symbol, writing.element(value)))


def _declared(writing: Writing) -> Iterator[tuple[Statement, Input]]:
    """What each input is, one statement for each name or formula."""
    seen: set[str] = set()
    for given, label in zip(writing.model.inputs, writing.inputs, strict=True):
        if given.definition is not None and given.name:
            if given.name not in seen:
                seen.add(given.name)
                left = writing.function(given.name)
                yield Statement("input", (left, given.definition)), given
        elif given.formula == label:
            left = writing.function(label.text)
            yield Statement("input", (left, signal_side(writing, given.signal))), given
        elif given.name:
            yield Statement("input", (given.formula, signal_side(writing, given.signal))), given
