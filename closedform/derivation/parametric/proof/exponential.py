"""The resolvent, e^(At), the solution and the outputs, against the exponential of balls."""

from __future__ import annotations

from collections.abc import Iterator, Mapping
from dataclasses import replace
from typing import Any

from flint import acb, acb_mat

from closedform.derivation.parametric.proof.ground import Ground, Said, variable_of, zeros_of
from closedform.derivation.parametric.proof.model import formula_of, matrix_side
from closedform.derivation.proof.evaluation import ball_at, unit
from closedform.derivation.proof.finding import (
    Comparison,
    Fault,
    Finding,
    agreeing,
    undecided,
    whether,
)
from closedform.derivation.step import Matrix, Side, Step, Symbol
from closedform.notation.expression import Name, is_expression

__all__ = [
    "adjugate",
    "expansion",
    "function",
    "functions",
    "numerator",
    "residues",
    "resolvent",
    "shared_matrix",
    "shown",
    "slope",
    "transition",
]

_POINTS = (acb(19, 1) / 32, acb(-11, 7) / 16)
Value = Any
"""A number or a matrix, as balls."""


def resolvent(_ground: Ground, said: Said) -> Iterator[Finding]:
    """(s I - A)^(-1) = N(s)/p(s): nothing but this is said."""
    s = variable_of(said)
    expected = (
        Symbol("resolvent", argument=s, letter="A"),
        Symbol(
            "quotient",
            parts=(
                Symbol("matrix", letter="N", argument=s),
                Symbol("characteristic polynomial", letter="p", argument=s),
            ),
        ),
    )
    yield from whether(said.statement.sides == expected, "resolvent", "it is another equation")


def numerator(_ground: Ground, said: Said) -> Iterator[Finding]:
    """N(s) = adj(s I - A): nothing but this is said."""
    s = variable_of(said)
    expected = (
        Symbol("matrix", letter="N", argument=s),
        Symbol("adjugate", letter="A", argument=s),
    )
    yield from whether(said.statement.sides == expected, "numerator", "it is another equation")


def adjugate(ground: Ground, said: Said) -> Iterator[Finding]:
    """N(s) = adj(s I - A), by solving with s I - A."""
    n = ground.matrix.nrows()
    for s in _POINTS:
        shifted = s * unit(n) - ground.matrix
        expected = shifted.solve(unit(n)) * shifted.det()
        names = ground.names | {variable_of(said).text: s}
        printed = ground.matrix_of(matrix_side(said.statement.sides[-1]), names)
        yield from agreeing("adjugate", printed, expected)


def residues(ground: Ground, said: Said) -> Iterator[Finding]:
    """e^(At) as the sum of N(lambda) e^(lambda t)/p'(lambda): all zeros of p are simple."""
    t = Name(ground.response.model.time)
    left, right = said.statement.sides
    same = left == Symbol("transition", argument=t) and (
        isinstance(right, Symbol)
        and (right.kind, right.argument, right.letter) == ("residue sum", t, "N")
        and not any(isinstance(p, Name) and p.text in ground.names for p in right.parts)
    )
    yield from whether(same, "residues", "it is another equation")
    zeros = zeros_of(ground.characteristic)
    if zeros is None:
        yield undecided("residues")
        return
    printed = next((s for s in said.step.statements if s.says == "adjugate"), None)
    if printed is None:
        return
    matrix, slope = matrix_side(printed.sides[-1]), ground.characteristic.derivative()
    s = variable_of(replace(said, statement=printed)).text
    for time, expected_value in ground.instants:
        total = acb_mat(ground.matrix.nrows(), ground.matrix.ncols())
        for z in zeros:
            weight = (z * time).exp() / slope(z)
            total = total + weight * ground.matrix_of(matrix, ground.names | {s: z})
        yield from agreeing("residues", total, expected_value)


def slope(ground: Ground, said: Said) -> Iterator[Finding]:
    """p'(lambda) at an eigenvalue."""
    symbol, formula = said.statement.sides
    if not isinstance(symbol, Symbol) or symbol.argument is None or symbol.order != 1:
        raise TypeError(f"{symbol} is no slope")
    value = ball_at(symbol.argument, ground.names)
    yield ground.vanishing("slope", ground.characteristic(value))
    expected = ground.characteristic.derivative()(value)
    yield Comparison("slope", ball_at(formula_of(formula), ground.names), expected)


def shared_matrix(ground: Ground, said: Said) -> Iterator[Finding]:
    """V = A - a I, as it is written and as a matrix."""
    n = ground.matrix.nrows()
    for side in said.statement.sides[1:]:
        if isinstance(side, Matrix):
            yield from agreeing("V", ground.matrix_of(side), _expected_shift(ground))
        elif isinstance(side, Symbol) and side.kind == "shifted" and side.argument is not None:
            shift = ball_at(side.argument, ground.names)
            mean = sum((ground.matrix[i, i] for i in range(n)), acb(0)) / n
            yield ground.vanishing("V", shift - mean)
        else:
            yield from whether(side == Symbol("matrix", letter="A"), "V", "it is another matrix")


def _expected_shift(ground: Ground) -> acb_mat:
    n = ground.matrix.nrows()
    mean = sum((ground.matrix[i, i] for i in range(n)), acb(0)) / n
    return ground.matrix - mean * unit(n)


def expansion(ground: Ground, said: Said) -> Iterator[Finding]:
    """e^(At) as a combination of matrices in print, with functions in print for this case."""
    left, right = said.statement.sides
    t = Name(ground.response.model.time)
    expected_left = Symbol("transition", argument=t)
    yield from whether(left == expected_left, said.statement.says, "it is of something else")
    matrices = _matrices(said.step)
    kernels = _kernels(said.step, ground.case.number)
    for time, expected in ground.instants:
        names = ground.at_time(time)
        known: dict[str, Value] = {k: ball_at(formula_of(f), names) for k, f in kernels.items()}
        value = _value(ground, right, names, known, matrices)
        if not isinstance(value, acb_mat):
            yield Fault(said.statement.says, "it is no matrix")
            return
        yield from agreeing(said.statement.says, value, expected)


def _matrices(step: Step) -> dict[Symbol, Side]:
    found: dict[Symbol, Side] = {}
    for statement in step.statements:
        first, last = statement.sides[0], statement.sides[-1]
        if isinstance(first, Symbol) and statement.says in ("residue matrix", "shared matrix"):
            if first in found:
                raise ValueError(f"{first} is given twice")
            found[first] = last
    return found


def _kernels(step: Step, case: int) -> dict[str, Side]:
    """The functions C, S, … that are in print for a case, by their letters."""
    groups: Any = step.facts["kernels"] if step.kind == "transform" else [step.facts]
    found: dict[str, Side] = {}
    for row in (row for group in groups for row in group["rows"]):
        if case in row["cases"]:
            for statement in (row["even"], row["odd"]):
                found[statement.sides[0].letter] = statement.sides[1]
    return found


def _value(
    ground: Ground,
    side: Side,
    names: Mapping[str, Any],
    known: Mapping[str, Value],
    matrices: Mapping[Symbol, Side],
) -> Value:
    if isinstance(side, tuple):
        total: Value = acb(1)
        for part in side:
            total = total * _value(ground, part, names, known, matrices)
        return total
    if isinstance(side, Symbol):
        if side.kind == "sum":
            parts = [_value(ground, part, names, known, matrices) for part in side.parts]
            total = parts[0]
            for part in parts[1:]:
                total = total + part
            return total
        if side.kind == "identity":
            return unit(ground.matrix.nrows())
        if side.kind == "scalar" and side.letter in known:
            return known[side.letter]
        printed = matrices.get(side)
        if isinstance(printed, Matrix):
            return ground.matrix_of(printed)
        if printed == Symbol("matrix", letter="A"):
            return ground.matrix
        raise ValueError(f"{side} is not in print")
    return ball_at(formula_of(side), names)


def transition(ground: Ground, said: Said) -> Iterator[Finding]:
    """e^(At), entry by entry."""
    t = Name(ground.response.model.time)
    left, right = said.statement.sides
    yield from whether(left == Symbol("transition", argument=t), "exp A", "it is another matrix")
    for time, expected in ground.instants:
        printed = ground.matrix_of(matrix_side(right), ground.at_time(time))
        yield from agreeing("exp A", printed, expected)


def function(ground: Ground, said: Said) -> Iterator[Finding]:
    """x_i(t) or y(t), against e^(At) x0."""
    symbol, formula = said.statement.sides
    model = ground.response.model
    t = Name(model.time)
    names = [*model.states, *(o.name for o in model.outputs)]
    if not isinstance(symbol, Symbol) or symbol.argument != t or symbol.letter not in names:
        yield Fault(said.statement.says, "it is of no state and no output of the model")
        return
    place = f"{symbol.letter} in case {ground.case.number + 1}"
    for time, matrix in ground.instants:
        state = matrix * ground.initial
        if symbol.letter in model.states:
            expected = state[model.states.index(symbol.letter), 0]
        else:
            output = next(o for o in model.outputs if o.name == symbol.letter)
            expected = acb(0)
            for i, weight in enumerate(output.weights):
                expected += ground.element(weight) * state[i, 0]
        yield Comparison(place, ball_at(formula_of(formula), ground.at_time(time)), expected)


def shown(ground: Ground, step: Step) -> Iterator[Finding]:
    """Each state and each output is given once, in the model's order."""
    model = ground.response.model
    number: Any = step.facts["shown"]
    expected = [*model.states[:number], *(o.name for o in model.outputs)]
    found = [s.sides[0].letter for s in step.statements if isinstance(s.sides[0], Symbol)]
    yield from whether(found == expected, step.kind, "it gives others than the model has")


def functions(ground: Ground, row: Mapping[str, Any]) -> Iterator[Finding]:
    """The entries of e^(At) are combinations of the functions that are listed for a case.

    The combinations are found at as many times as there are functions, and tried at another.
    """
    listed = [formula_of(side) for side in row["functions"].sides if is_expression(side)]
    count, n = len(listed), ground.matrix.nrows()
    (unit_time, _), *_ = ground.instants
    times = [unit_time * (k + 1) for k in range(count)]
    table = acb_mat([[ball_at(f, ground.at_time(t)) for f in listed] for t in times])
    entries = [list((ground.matrix * t).exp().entries()) for t in times]
    last = unit_time * acb(2 * count + 1) / 2
    try:
        weights = table.solve(acb_mat(entries))
    except ZeroDivisionError:  # no inverse at this precision
        yield undecided("functions of a case")
        return
    ahead = acb_mat([[ball_at(f, ground.at_time(last)) for f in listed]]) * weights
    expected = acb_mat([list((ground.matrix * last).exp().entries())])
    for k in range(n * n):
        yield ground.vanishing("functions of a case", ahead[0, k] - expected[0, k])
