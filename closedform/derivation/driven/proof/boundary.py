"""Conditions at points and the constants that they determine, as printed."""

from __future__ import annotations

from collections.abc import Iterator
from typing import Any

from flint import acb, acb_mat

from closedform.derivation.driven.boundary_steps import DETERMINANT, constant_names, state_side
from closedform.derivation.driven.proof.spot import Spot
from closedform.derivation.driven.proof.values import column_at, equal
from closedform.derivation.driven.writing import Writing
from closedform.derivation.parametric.proof.ground import Said
from closedform.derivation.parametric.proof.model import formula_of
from closedform.derivation.proof.evaluation import ball_at
from closedform.derivation.proof.finding import Fault, Finding, whether
from closedform.derivation.step import Side, Symbol

__all__ = [
    "constant",
    "divisor",
    "equation",
    "free_motion",
    "point_condition",
    "point_determinant",
]


def point_condition(spot: Spot, said: Said) -> Iterator[Finding]:
    """A condition as stated, at the true motion."""
    writing, (left, right) = Writing(spot.model), said.statement.sides
    places = [
        k
        for k, c in enumerate(spot.model.conditions)
        if left == state_side(writing, c) and right == writing.element(c.value)
    ]
    yield from whether(bool(places), "condition", "it is none of the model")
    for k in places:
        total = _row(spot, k) * spot.state_of_condition(k)
        yield equal("condition", total[0, 0], spot.element(spot.model.conditions[k].value))


def free_motion(spot: Spot, said: Said) -> Iterator[Finding]:
    """x_h is made of motions without input, as many as there are constants, all independent."""
    left, right = said.statement.sides
    writing = Writing(spot.model)
    yield from whether(left == writing.response("h"), "free motion", "of something else")
    parts = right.parts if isinstance(right, Symbol) and right.kind == "sum" else (right,)
    yield from whether(len(parts) == spot.a.nrows(), "free motion", "it has other constants")
    for k, part in enumerate(parts):
        t = spot.times(0)[0]
        value = _printed_motion(spot, said, part, k, t)
        if isinstance(value, Fault):
            yield value
            continue
        expected = spot.basis_at(k, t)
        for i in range(spot.a.nrows()):
            yield equal("free motion", value[i, 0], expected[i, 0])


def _printed_motion(spot: Spot, said: Said, part: Side, k: int, t: acb) -> acb_mat | Fault:
    """e^(A (t - origin)) column, as printed, at an instant."""
    names = _names(spot)
    factors = part if isinstance(part, tuple) else (part,)
    if not factors or factors[0] != names[k]:
        return Fault(said.statement.says, "it has another constant")
    now = {**spot.names, spot.model.time: t}
    state = acb_mat(spot.a.nrows(), 1)
    column = [factor for factor in factors[1:] if not isinstance(factor, Symbol)]
    if spot.a.nrows() == 1:
        state[0, 0] = acb(1)
        for factor in column:
            state[0, 0] *= ball_at(formula_of(factor), now)
        return state
    for factor in column:
        state = acb_mat([[e] for e in column_at(factor, spot.names, spot.names)])
    for symbol in (factor for factor in factors[1:] if isinstance(factor, Symbol)):
        argument = symbol.argument
        if argument is not None:
            state = (spot.a * ball_at(argument, now)).exp() * state
    return state


def equation(spot: Spot, said: Said) -> Iterator[Finding]:
    """One equation for the constants: coefficient by coefficient, and its right side."""
    left, right = map(formula_of, said.statement.sides)
    place, names = said.row["condition"], _names(spot)
    matrix, values = spot.point_equations
    zero: dict[str, Any] = {name.text: acb(0) for name in names}
    for k, name in enumerate(names):
        now = {**spot.names, **zero, name.text: acb(1)}
        yield equal("equation of a condition", ball_at(left, now), matrix[place, k])
    yield equal("equation of a condition", ball_at(right, spot.names), values[place, 0])


def constant(spot: Spot, said: Said) -> Iterator[Finding]:
    """A constant, by the equations solved in balls."""
    left, right = said.statement.sides
    k = said.row["constant"]
    yield from whether(left == _names(spot)[k], "constant", "it is another")
    yield equal("constant", ball_at(formula_of(right), spot.names), spot.point_constants[k, 0])


def point_determinant(spot: Spot, said: Said) -> Iterator[Finding]:
    """The determinant of the equations of a block."""
    matrix, _ = spot.point_equations
    same = said.statement.sides[0] == DETERMINANT
    yield from whether(same, "determinant", "it has another letter")
    rows, columns = said.row["conditions"], said.row["constants"]
    block = acb_mat([[matrix[i, k] for k in columns] for i in rows])
    printed = ball_at(formula_of(said.statement.sides[1]), spot.names)
    yield equal("determinant", printed, block.det())


def divisor(spot: Spot, said: Said) -> Iterator[Finding]:
    """What must not be zero is not, at the points of the case."""
    (formula,) = map(formula_of, said.statement.sides)
    points = spot.solution.points
    known = points is not None and formula in points.provided
    yield from whether(known, "divisor", "nothing is divided by it")
    yield from whether(not acb(ball_at(formula, spot.names)).is_zero(), "divisor", "it is zero")


def _names(spot: Spot) -> Any:
    points = spot.solution.points
    if points is None:
        raise ValueError("without conditions at points there are no constants")
    return constant_names(Writing(spot.model), points)


def _row(spot: Spot, place: int) -> acb_mat:
    return acb_mat([[spot.element(w) for w in spot.model.conditions[place].of_states]])
