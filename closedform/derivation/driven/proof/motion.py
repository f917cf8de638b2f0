"""e^(At), particular response, jumps and the solution, as printed, against the true motion."""

from __future__ import annotations

from collections.abc import Iterator
from typing import Any

from flint import acb, acb_mat, acb_series

from closedform.derivation.driven.indices import base_indices
from closedform.derivation.driven.proof.spot import SERIES, Spot
from closedform.derivation.driven.proof.values import (
    NoPieceError,
    as_matrix,
    column_at,
    derivative,
    equal,
    formula_at,
    side_at,
)
from closedform.derivation.driven.writing import A_HAT, Writing
from closedform.derivation.parametric.proof.ground import Said
from closedform.derivation.parametric.proof.model import formula_of
from closedform.derivation.proof.evaluation import ball_at, matrix_at
from closedform.derivation.proof.finding import Fault, Finding, agreeing, whether
from closedform.derivation.step import Side, Symbol
from closedform.notation.expression import Name

__all__ = [
    "blocks",
    "blow",
    "forced",
    "free",
    "in_interval",
    "join",
    "jump",
    "particular",
    "row_of",
    "shape",
    "solution",
    "upper",
]


def blocks(spot: Spot, said: Said) -> Iterator[Finding]:
    """The exponential of the stacked matrix in blocks: nothing but this is said."""
    t = Name(spot.model.time)
    parts = (
        Symbol("transition", argument=t, letter="A"),
        Symbol("matrix", letter="Phi", argument=t),
        Symbol("zero"),
        Symbol("transition", argument=t, letter="S"),
    )
    expected = (
        Symbol("transition", argument=t, letter=A_HAT.letter),
        Symbol("blocks", ("2",), parts=parts),
    )
    yield from whether(said.statement.sides == expected, "blocks", "they are others")


_BLOCKS = {"upper left": ("transition", "A"), "upper right": ("matrix", "Phi")}
_BLOCKS |= {"lower right": ("transition", "S")}


def upper(spot: Spot, said: Said) -> Iterator[Finding]:
    """One block of the exponential of the stacked matrix, by that of ball arithmetic."""
    says = said.statement.says
    kind, letter = _BLOCKS[says]
    t = Name(spot.model.time)
    symbol, matrix = said.statement.sides
    expected = Symbol(kind, argument=t, letter=letter)
    yield from whether(symbol == expected, says, "it is another letter")
    n, size = spot.a.nrows(), spot.stacked.nrows()
    rows = range(n, size) if says.startswith("lower") else range(n)
    columns = range(n) if says.endswith("left") else range(n, size)
    for time in _moments(spot):
        whole = (spot.stacked * time).exp()
        block = acb_mat([[whole[i, k] for k in columns] for i in rows])
        names = {**spot.names, spot.model.time: time}
        yield from agreeing(says, matrix_at(as_matrix(matrix), names), block)


def _moments(spot: Spot) -> list[acb]:
    """Two times that suit the stacked matrix."""
    size = max((abs(e).upper() for e in spot.stacked.entries()), default=acb(1).real)
    unit = acb(1 / (1 + size.mid()))
    return [unit / 3, unit * 5 / 2]


def particular(spot: Spot, said: Said) -> Iterator[Finding]:
    """x_p of an interval satisfies x' = A x + B u there, whatever the start."""
    symbol, column = said.statement.sides
    same = symbol == Writing(spot.model).response("p")
    yield from whether(same, "particular response", "it is another vector")
    pairs = [(k, t) for k in range(said.row["place"], said.row["last"] + 1) for t in spot.times(k)]
    for place, at in pairs:
        now = {**spot.names, spot.model.time: at}
        series = {**spot.names, spot.model.time: acb_series([at, acb(1)], SERIES)}
        values = column_at(column, series, now)
        state = acb_mat([[derivative(value, 0)] for value in values])
        slope = spot.slope(state, spot.inputs_at(place, at))
        for k, value in enumerate(values):
            yield equal("particular response", derivative(value, 1), slope[k, 0])


def jump(spot: Spot, said: Said) -> Iterator[Finding]:
    """h_j: what is left of the true motion once x_p and the earlier free motions are off."""
    symbol, column = said.statement.sides
    place = said.row["place"]
    yield from whether(
        symbol == Writing(spot.model).jump("h", place), "jump", "it is another vector"
    )
    printed = column_at(column, spot.names, spot.names)
    at = spot.instants[place]
    state = spot.motion[place] - _sustained(spot, said, place, at)
    before = acb_mat(spot.a.nrows(), 1)
    if not place and spot.model.initial is None:  # the rest is in the free motion
        before = spot.initial - _sustained(spot, said, place, at)
    if place:
        carried = spot.state_at(place - 1, at) - _sustained(spot, said, place - 1, at)
        before = before + carried
    for k, value in enumerate(printed):
        yield equal(f"jump h_{place}", value, (state - before)[k, 0])


def _sustained(spot: Spot, said: Said, place: int, at: acb) -> acb_mat:
    """x_p of an interval at an instant, from its formulas, which are proved for themselves."""
    part = spot.solution.functions.sustained[place]
    n = spot.a.nrows()
    names = {**spot.names, spot.model.time: at}
    formulas = spot.solution.in_interval(part)[:n]
    del said
    return acb_mat([[ball_at(formula, names)] for formula in formulas])


def blow(spot: Spot, said: Said) -> Iterator[Finding]:
    """What impulses add to the state."""
    symbol, column = said.statement.sides
    place = said.row["place"]
    yield from whether(
        symbol == Writing(spot.model).jump("b", place), "impulse", "it is another vector"
    )
    printed = column_at(column, spot.names, spot.names)
    yield from agreeing("impulse", acb_mat([[e] for e in printed]), spot.blow(place))


def shape(spot: Spot, said: Said) -> Iterator[Finding]:
    """x(t) = x_p(t) + sum of steps times e^(A (t - a_j)) h_j, with x_p and h_j in print."""
    left, right = said.statement.sides
    writing = Writing(spot.model)
    yield from whether(
        left == writing.response(*base_indices(spot.solution)), "solution", "of something else"
    )
    parts = right.parts if isinstance(right, Symbol) and right.kind == "sum" else (right,)
    n = spot.a.nrows()
    jumps = {row["place"]: row["statement"].sides[1] for row in _rows(said)}
    for place in spot.places:
        t = spot.times(place)[0]
        now = {**spot.names, spot.model.time: t}
        total = acb_mat(n, 1)
        for part in parts:
            if part == writing.response("p"):
                total = total + _sustained(spot, said, place, t)
            elif part == writing.response("h"):
                total = total + spot.free_at(t)
            elif isinstance(part, tuple):
                total = total + _summand(spot, part, jumps, now)
            elif part != Symbol("zero"):
                yield Fault("solution", f"it has a part {part}")
        state = spot.state_at(place, t)
        for k in range(n):
            yield equal("solution", total[k, 0], state[k, 0])


def _rows(said: Said) -> list[Any]:
    rows: Any = said.step.facts["rows"]
    return list(rows)


def _summand(
    spot: Spot, part: tuple[Side, ...], jumps: dict[int, Side], now: dict[str, Any]
) -> acb_mat:
    """(epsilon(t - a)) e^(A (t - a)) h_j."""
    *others, h = part
    if not isinstance(h, Symbol) or not h.indices:
        raise TypeError(f"{part} is no free motion")
    column = column_at(jumps[int(h.indices[0])], spot.names, spot.names)
    state = acb_mat([[e] for e in column])
    for other in others:
        if isinstance(other, Symbol) and other.kind == "step" and other.argument is not None:
            state = state * acb(int(bool(ball_at(other.argument, now).real > 0)))
        elif isinstance(other, Symbol) and other.letter == "A" and other.argument is not None:
            state = (spot.a * ball_at(other.argument, now)).exp() * state
        else:
            state = state * ball_at(formula_of(other), now)
    return state


def row_of(spot: Spot, symbol: Side, *indices: str) -> int | None:
    """Return the place of the row that a function is, with these indices; None for none."""
    model = spot.model
    if not isinstance(symbol, Symbol) or symbol.kind != "scalar" or symbol.indices != indices:
        return None
    if symbol.argument != Name(model.time) or symbol.letter not in model.rows or symbol.order:
        return None
    return model.rows.index(symbol.letter)


def solution(spot: Spot, said: Said) -> Iterator[Finding]:
    """A row of the solution for all times, in pieces or with unit steps."""
    own = base_indices(spot.solution)
    yield from _function(spot, said, spot.places, forced=False, indices=own)


def in_interval(spot: Spot, said: Said) -> Iterator[Finding]:
    """A row of the solution in one interval."""
    places = range(said.row["place"], said.row["place"] + 1)
    own = base_indices(spot.solution)
    yield from _function(spot, said, places, forced=False, indices=own)


def forced(spot: Spot, said: Said) -> Iterator[Finding]:
    """The response from rest."""
    yield from _function(spot, said, spot.places, forced=True, indices=("forced",))


def _function(
    spot: Spot, said: Said, places: range, *, forced: bool, indices: tuple[str, ...] = ()
) -> Iterator[Finding]:
    symbol, side = said.statement.sides
    row = row_of(spot, symbol, *indices)
    if row is None:
        yield Fault(said.statement.says, "it is of no state and no output of the model")
        return
    for place in places:
        for t in spot.times(place):
            names = {**spot.names, spot.model.time: t}
            try:
                value = side_at(side, names, names)
            except NoPieceError as wrong:
                yield Fault(said.statement.says, str(wrong))
                return
            expected = spot.rows_at(place, t, forced=forced)[row]
            yield equal(f"{spot.model.rows[row]} in interval {place + 1}", value, expected)


def join(spot: Spot, said: Said) -> Iterator[Finding]:
    """What the pieces on both sides of an instant give there, against the true states."""
    place = said.row["place"]
    at = spot.instants[place]
    known = {"-": spot.carried(spot.motion[place - 1], place - 1, at), "+": spot.motion[place]}
    values = []
    for side in said.statement.sides:
        if isinstance(side, Symbol):
            same = side.kind == "one-sided" and side.letter in spot.model.names
            if not same or side.argument is None or side.order or len(side.indices) != 1:
                yield Fault("join", "it is of no state")
                return
            yield equal("instant", ball_at(side.argument, spot.names), at)
            row = spot.model.names.index(side.letter)
            values.append(known[side.indices[0]][row, 0])
        else:
            values.append(ball_at(formula_of(side), spot.names))
    for value in values[1:]:
        yield equal("join", value, values[0])


def free(spot: Spot, said: Said) -> Iterator[Finding]:
    """The response to the initial values alone."""
    symbol, formula = said.statement.sides
    row = row_of(spot, symbol, "free")
    if row is None:
        yield Fault("free response", "it is of no state and no output of the model")
        return
    nothing = acb_mat(max(len(spot.model.inputs), 1), 1)
    for place in spot.places:
        t = spot.times(place)[0]
        names = {**spot.names, spot.model.time: t}
        state = (spot.a * (t - spot.instants[0])).exp() * spot.initial
        expected = spot.rows_of(state, nothing)[row]
        yield equal("free response", formula_at(formula_of(formula), names, names), expected)
