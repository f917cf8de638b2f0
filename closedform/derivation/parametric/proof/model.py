"""The model, its parameters and conditions, as printed."""

from __future__ import annotations

from collections.abc import Iterator
from itertools import pairwise

from flint import acb, arb

from closedform.derivation.formulas import A
from closedform.derivation.parametric.proof.ground import Ground, Said
from closedform.derivation.proof.evaluation import ball_at
from closedform.derivation.proof.finding import (
    Comparison,
    Fault,
    Finding,
    agreeing,
    undecided,
    whether,
)
from closedform.derivation.step import Matrix, Side, Symbol
from closedform.notation.expression import Expression, Name, is_expression, number

__all__ = [
    "comparison",
    "equation",
    "formula_of",
    "initial",
    "matrix",
    "matrix_side",
    "none_of_all",
    "output_definition",
    "stated",
    "system",
]


def formula_of(side: Side) -> Expression:
    """Return a side that is a formula.  Raises TypeError for any other."""
    if not is_expression(side):
        raise TypeError(f"{side} is no formula")
    return side


def matrix_side(side: Side) -> Matrix:
    """Return a side that is a matrix.  Raises TypeError for any other."""
    if not isinstance(side, Matrix):
        raise TypeError(f"{side} is no matrix")
    return side


def system(ground: Ground, said: Said) -> Iterator[Finding]:
    """x'(t) = A x(t): nothing but this is said."""
    t = Name(ground.response.model.time)
    expected = (
        Symbol("derivative", argument=t, letter="x"),
        (A, Symbol("vector", argument=t, letter="x")),
    )
    yield from whether(said.statement.sides == expected, "system", "it is another equation")


def matrix(ground: Ground, said: Said) -> Iterator[Finding]:
    """A, the model's or with the equations of a branch put in."""
    yield from whether(said.statement.sides[0] == A, said.statement.says, "it is not called A")
    printed = ground.matrix_of(matrix_side(said.statement.sides[-1]))
    yield from agreeing(said.statement.says, printed, ground.matrix)


def initial(ground: Ground, said: Said) -> Iterator[Finding]:
    """x(0) = x0."""
    names = (
        Symbol("vector", letter="x", argument=number(0)),
        Symbol("vector", letter="x", indices=("0",)),
    )
    yield from whether(said.statement.sides[:2] == names, "initial", "it is of something else")
    printed = ground.matrix_of(matrix_side(said.statement.sides[-1]))
    yield from agreeing("initial", printed, ground.initial)


def output_definition(ground: Ground, said: Said) -> Iterator[Finding]:
    """An output as a combination of the states: linear, with the model's weights."""
    model = ground.response.model
    name, formula = said.statement.sides
    output = next((o for o in model.outputs if Name(o.name) == name), None)
    if output is None:
        yield Fault("output", f"the model has no output {name}")
        return
    n = len(model.states)
    for k in range(n + 1):  # at every unit vector, and at one that mixes them
        state = [acb(int(i == k)) if k < n else acb(i + 2) for i in range(n)]
        names = ground.names | dict(zip(model.states, state, strict=True))
        expected = sum(
            (ground.element(w) * x for w, x in zip(output.weights, state, strict=True)), acb(0)
        )
        yield Comparison(f"output {output.name}", ball_at(formula_of(formula), names), expected)


def stated(ground: Ground, said: Said) -> Iterator[Finding]:
    """A re-stated parameter or an abbreviation has the value that the model gives it."""
    name, formula = said.statement.sides
    model = ground.response.model
    for definition in (*model.restated, *model.abbreviations):
        if Name(definition.name) == name:
            printed = ball_at(formula_of(formula), ground.names)
            yield Comparison(definition.name, printed, ground.element(definition.value))
            return
    yield Fault(said.statement.says, f"the model does not define {name}")


def equation(ground: Ground, said: Said) -> Iterator[Finding]:
    """Both sides are equal."""
    sides = [ball_at(formula_of(side), ground.names) for side in said.statement.sides]
    for left, right in pairwise(sides):
        yield ground.vanishing(said.statement.says, left - right)


def comparison(ground: Ground, said: Said) -> Iterator[Finding]:
    """Real sides of which each stands to the next as is said."""
    sides = [acb(ball_at(formula_of(side), ground.names)) for side in said.statement.sides]
    place = f"{said.statement.says} of case {ground.case.number + 1}"
    for side in sides:
        yield from whether(bool(side.imag.contains(0)), place, "a side is not real")
    for left, right in pairwise(sides):
        yield from _compared(ground, place, (left - right).real, said.statement.relation)


def _compared(ground: Ground, place: str, gap: arb, relation: str) -> Iterator[Finding]:
    difference = acb(gap)
    if relation == "=":
        yield ground.vanishing(place, difference)
        return
    real = difference.real
    if not real.contains(0):
        holds = {">": real > 0, ">=": real > 0, "<": real < 0, "<=": real < 0, "!=": True}
        if relation not in holds:
            raise ValueError(f"no relation is called {relation!r}")
        yield from whether(bool(holds[relation]), place, f"it is not {relation} there")
    elif relation in (">=", "<="):
        yield ground.vanishing(place, difference)
    else:
        yield undecided(place)


def none_of_all(ground: Ground, said: Said) -> Iterator[Finding]:
    """Of some formulas not all vanish."""
    values = [acb(ball_at(formula_of(side), ground.names)) for side in said.statement.sides]
    if all(value.contains(0) for value in values):
        yield undecided(f"{said.statement.says} of case {ground.case.number + 1}")
