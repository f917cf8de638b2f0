"""The model as typed and its state form, as printed."""

from __future__ import annotations

from collections.abc import Iterator
from typing import Any

from flint import acb, acb_mat

from closedform.derivation.driven.model_steps import SECOND_ORDER, second_order_matrices
from closedform.derivation.driven.proof.input_labels import with_inputs
from closedform.derivation.driven.proof.spot import Spot
from closedform.derivation.driven.proof.values import as_matrix, column_at, equal, formula_at
from closedform.derivation.driven.signals import input_formula
from closedform.derivation.driven.writing import Writing, bold, unboxed
from closedform.derivation.parametric.case_steps import case_conditions_of
from closedform.derivation.parametric.proof.ground import Said
from closedform.derivation.parametric.proof.model import formula_of
from closedform.derivation.proof.evaluation import ball_at, matrix_at
from closedform.derivation.proof.finding import (
    Comparison,
    Fault,
    Finding,
    agreeing,
    undecided,
    whether,
)
from closedform.derivation.step import Matrix, Side, Symbol
from closedform.notation.expression import Name

__all__ = [
    "condition",
    "driven_system",
    "equation",
    "initial_state",
    "initial_value",
    "input_matrix",
    "input_vector",
    "named_at",
    "named_velocity",
    "output_definition",
    "same_matrix",
    "second_order_matrix",
    "second_order_system",
    "solved",
    "state_vector",
    "system_matrix",
]


def _trial(spot: Spot) -> Iterator[tuple[int, acb, acb_mat, acb_mat]]:
    """An instant of each interval with some state, and the inputs as they are then."""
    n = spot.a.nrows()
    for place in spot.places:
        t = spot.times(place)[0]
        state = acb_mat([[acb(7 * k + 3) / (2 * k + 5 + place)] for k in range(n)])
        yield place, t, state, spot.inputs_at(place, t)


def named_at(spot: Spot, t: acb, state: acb_mat, inputs: acb_mat) -> dict[str, Any]:
    """Every name of the model at an instant: jets as they are typed and as states."""
    model = spot.model
    names: dict[str, Any] = {**spot.names, model.time: t}
    slope = spot.slope(state, inputs)
    rows = spot.rows_of(state, inputs)
    names |= dict(zip(model.rows, rows, strict=True))
    for k, jet in enumerate(model.reduction.jets):
        names[jet.text] = state[k, 0]
    for k, jet in enumerate(model.reduction.jets):
        names.setdefault(jet.name + "'" * (jet.order + 1), slope[k, 0])
    for label, value in zip(Writing(model).inputs, inputs.entries(), strict=True):
        names[label.text] = value
    return names


def equation(spot: Spot, said: Said) -> Iterator[Finding]:
    """An equation as typed, for any state: it follows from the state form."""
    for _, t, state, inputs in _trial(spot):
        names = named_at(spot, t, state, inputs)
        sides = (with_inputs(spot, formula_of(side), t) for side in said.statement.sides)
        values = [formula_at(side, names, names) for side in sides]
        yield equal("equation", *values)


def condition(spot: Spot, said: Said) -> Iterator[Finding]:
    """A comparison that selects a case holds at its points."""
    left, right = (acb(ball_at(formula_of(side), spot.names)) for side in said.statement.sides)
    gap = (left - right).real
    relation, place = said.statement.relation, said.statement.says
    case = spot.solution.case
    if place == "case condition":
        own = case is not None and said.statement in case_conditions_of(case)
        yield from whether(own, place, "it is not one of the case")
    else:
        yield Comparison(place, right, acb(0))
    if relation in ("=", "<=", ">=") and gap.contains(0):
        yield equal(place, left, right)
        return
    holds = {"<": gap < 0, "<=": gap < 0, ">": gap > 0, ">=": gap > 0, "!=": gap != 0}
    if not gap.contains(0):
        yield from whether(bool(holds.get(relation, False)), place, "it does not hold there")
    else:
        yield undecided(place)


def driven_system(spot: Spot, said: Said) -> Iterator[Finding]:
    """X' = A x + B u: nothing but this is said."""
    t = said.statement.sides[0].argument if isinstance(said.statement.sides[0], Symbol) else None
    right: Side = (Symbol("matrix", letter="A"), bold("x", t))
    if spot.b is not None:
        right = Symbol("sum", parts=(right, (Symbol("matrix", letter="B"), bold("u", t))))
    expected = (Symbol("dotted", argument=t, letter="x"), right)
    yield from whether(said.statement.sides == expected, "system", "it is another equation")


def second_order_system(spot: Spot, said: Said) -> Iterator[Finding]:
    """M q'' + C q' + K q = G u: the letters are those of the matrices in print."""
    left, right = said.statement.sides
    t = Name(spot.model.time)
    parts = left.parts if isinstance(left, Symbol) else ()
    mass, damping, stiffness, force = second_order_matrices(spot.model)
    expected: list[Side] = []
    for letter, order, rows in (("M", 2, mass), ("C", 1, damping), ("K", 0, stiffness)):
        if any(e for row in rows for e in row):
            dotted = Symbol("dotted", argument=t, letter="q", order=order)
            expected.append((Symbol("matrix", letter=letter), dotted if order else bold("q", t)))
    same = list(parts) == expected
    drive: Side = (Symbol("matrix", letter="G"), bold("u", t)) if force else Symbol("zero")
    yield from whether(same and right == drive, "system", "it is another equation")


def second_order_matrix(spot: Spot, said: Said) -> Iterator[Finding]:
    """M, C, K or G: with the others it holds for any state that follows the state form."""
    printed = matrix_at(as_matrix(said.statement.sides[-1]), spot.names)
    place = SECOND_ORDER.index(said.statement.says)
    letter = said.statement.sides[0] == Symbol("matrix", letter="MCKG"[place])
    yield from whether(letter, said.statement.says, "it is another letter")
    rows = second_order_matrices(spot.model)[place]
    expected = acb_mat([[spot.element(e) for e in row] for row in rows])
    yield from agreeing(said.statement.says, printed, expected)
    n = len(spot.model.unknowns)
    matrices = [
        acb_mat([[spot.element(e) for e in row] for row in m])
        for m in second_order_matrices(spot.model)
        if m
    ]
    where = {jet.text: k for k, jet in enumerate(spot.model.reduction.jets)}
    for _, _, state, inputs in _trial(spot):
        slope = spot.slope(state, inputs)
        jets = []
        for order in (2, 1, 0):
            column = []
            for name in spot.model.unknowns:
                text = name + "'" * order
                known = text in where
                before = where.get(text[:-1], 0)
                column.append([state[where[text], 0] if known else slope[before, 0]])
            jets.append(acb_mat(column))
        total = sum((m * j for m, j in zip(matrices, jets, strict=False)), acb_mat(n, 1))
        if len(matrices) > 3:
            total = total - matrices[3] * inputs
        for k in range(n):
            yield equal(said.statement.says, total[k, 0], acb(0))


def initial_value(spot: Spot, said: Said) -> Iterator[Finding]:
    """A state at the start."""
    symbol, formula = said.statement.sides
    if not isinstance(symbol, Symbol) or symbol.letter not in spot.model.names:
        yield Fault("initial value", "it is of no state")
        return
    place = spot.model.names.index(symbol.letter)
    yield from _at_start(spot, symbol)
    value = formula_at(formula_of(formula), spot.names, spot.names)
    yield Comparison(f"{symbol.letter} at the start", value, spot.initial[place, 0])


def _at_start(spot: Spot, symbol: Symbol) -> Iterator[Finding]:
    if symbol.argument is None:
        yield Fault("initial value", "it is of no instant")
        return
    start = ball_at(symbol.argument, spot.names)
    yield Comparison("start", start, spot.instants[0])


def initial_state(spot: Spot, said: Said) -> Iterator[Finding]:
    """x(0) = x_0 = …"""
    first, second, column = said.statement.sides
    named = isinstance(first, Symbol) and first == bold("x", first.argument)
    yield from whether(named and second == bold("x", None, "0"), "initial", "it is another vector")
    if isinstance(first, Symbol):
        yield from _at_start(spot, first)
    printed = column_at(column, spot.names, spot.names)
    yield from agreeing("initial state", acb_mat([[e] for e in printed]), spot.initial)


def output_definition(spot: Spot, said: Said) -> Iterator[Finding]:
    """An output as a combination of states and inputs."""
    name, formula = said.statement.sides
    model = spot.model
    if not isinstance(name, Name) or name.text not in model.rows:
        yield Fault("output", f"the model has no output {name}")
        return
    for _, t, state, inputs in _trial(spot):
        names = named_at(spot, t, state, inputs)
        expected = spot.rows_of(state, inputs)[model.rows.index(name.text)]
        yield equal(f"output {name.text}", ball_at(formula_of(formula), names), expected)


def named_velocity(spot: Spot, said: Said) -> Iterator[Finding]:
    """A state and the derivative it is: both are printed alike."""
    name, jet = said.statement.sides
    same = isinstance(name, Name) and isinstance(jet, Name)
    if same and isinstance(name, Name) and isinstance(jet, Name):
        pairs = zip(spot.model.names, spot.model.reduction.jets, strict=True)
        same = (name.text, jet.text) in [(state, j.text) for state, j in pairs]
    yield from whether(same, "velocity", "no state is this derivative")


def solved(spot: Spot, said: Said) -> Iterator[Finding]:
    """A highest derivative by states and inputs."""
    jet, formula = said.statement.sides
    for _, t, state, inputs in _trial(spot):
        names = named_at(spot, t, state, inputs)
        value = ball_at(formula_of(formula), names)
        yield equal("highest derivative", ball_at(formula_of(jet), names), value)


def state_vector(spot: Spot, said: Said) -> Iterator[Finding]:
    """X is the column of the states, in their order."""
    symbol, column = said.statement.sides
    expected = unboxed(Matrix(tuple((Name(name),) for name in spot.model.names)))
    same = symbol == bold("x") and column == expected
    if said.statement.says == "coordinates":
        names = unboxed(Matrix(tuple((Name(name),) for name in spot.model.unknowns)))
        same = symbol == bold("q") and column == names
    yield from whether(same, said.statement.says, "it is another column")


def input_vector(spot: Spot, said: Said) -> Iterator[Finding]:
    """U is the column of the inputs, as they are called and as they are written."""
    symbol, *columns = said.statement.sides
    writing = Writing(spot.model)
    expected = [
        writing.column(writing.inputs),
        writing.column(input_formula(writing, given) for given in spot.model.inputs),
    ]
    same = symbol == bold("u") and list(columns) == expected[: len(columns)] and bool(columns)
    yield from whether(same, "inputs", "it is another column")


def system_matrix(spot: Spot, said: Said) -> Iterator[Finding]:
    """A, number by number."""
    yield from same_matrix(spot, said, "A", spot.a)


def input_matrix(spot: Spot, said: Said) -> Iterator[Finding]:
    """B, number by number."""
    if spot.b is None:
        yield Fault("B", "the model has no inputs")
        return
    yield from same_matrix(spot, said, "B", spot.b)


def same_matrix(spot: Spot, said: Said, letter: str, expected: acb_mat) -> Iterator[Finding]:
    """A matrix by its letter, entry by entry."""
    symbol = said.statement.sides[0]
    yield from whether(symbol == Symbol("matrix", letter=letter), letter, "it is another letter")
    printed = matrix_at(as_matrix(said.statement.sides[-1]), spot.names)
    yield from agreeing(letter, printed, expected)
