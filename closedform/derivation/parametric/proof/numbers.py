"""Values put in: every decimal, and every formula in numbers, against the model at the values."""

from __future__ import annotations

from collections.abc import Iterator, Mapping
from dataclasses import dataclass
from typing import Any

from flint import acb, acb_mat, arb

from closedform.algebra.enclosure import ball_of
from closedform.algebra.parameter_field import PI
from closedform.algebra.surds import SurdSum
from closedform.derivation.parametric.proof.ground import Ground, Said
from closedform.derivation.parametric.proof.model import comparison, formula_of
from closedform.derivation.proof.evaluation import ball_at, exact_at
from closedform.derivation.proof.finding import (
    Comparison,
    Fault,
    Finding,
    decimal_of,
    number_in,
    whether,
)
from closedform.derivation.step import Step, Symbol
from closedform.notation import read_formula
from closedform.notation.expression import Name, names_in

__all__ = ["Given", "number_findings"]


@dataclass(frozen=True)
class Given:
    """The values of the user's for all parameters."""

    values: tuple[tuple[str, SurdSum], ...]

    def balls(self) -> dict[str, arb]:
        """Return a ball for every parameter, and for pi, at FLINT's current precision."""
        return {PI: arb.pi(), **{name: ball_of(value) for name, value in self.values}}

    def __str__(self) -> str:
        return "the values given"


def number_findings(ground: Ground, step: Step, row: Mapping[str, Any]) -> Iterator[Finding]:
    """The case that is named holds; quantities, formulas and decimals are those at the values."""
    digits: Any = step.facts["digits"]
    for statement in row["conditions"]:
        yield from comparison(ground, Said(step, row, statement, (ground.case.number,)))
    for statement in row["given"]:
        name, formula = statement.sides[0], formula_of(statement.sides[1])
        printed = ball_at(formula, {text: acb(number_in(text)) for text in names_in(formula)})
        yield Comparison("value given", printed, acb(ground.point.balls()[name.text]))
    for quantity in row["quantities"]:
        name = quantity["name"].text
        place = f"{name} in numbers"
        if name not in ground.names:
            yield Fault(place, f"case {ground.case.number + 1} has no such name")
            return
        yield decimal_of(place, quantity["decimal"], acb(ground.names[name]), digits)
    defined = [q["name"].text for q in row["quantities"]]
    yield from whether(len(set(defined)) == len(defined), "numbers", "a name is given twice")
    yield from _formulas(ground, row, digits)
    yield from _table(ground, step, row, digits)


def _expected(ground: Ground, time: acb) -> tuple[dict[str, acb], arb]:
    """Every state and output at a time, and the size of what they are made from."""
    model = ground.response.model
    transition = (ground.matrix * time).exp()
    state = transition * ground.initial
    found = {name: acb(state[i, 0]) for i, name in enumerate(model.states)}
    weight = arb(1)
    for output in model.outputs:
        total = acb(0)
        for i, element in enumerate(output.weights):
            value = ground.element(element)
            weight = weight.max(abs(value).upper())
            total += value * state[i, 0]
        found[output.name] = total
    return found, weight * _size(transition) * _size(ground.initial) * len(model.states)


def _size(matrix: acb_mat) -> arb:
    largest = arb(0)
    for entry in matrix.entries():
        largest = largest.max(abs(entry).upper())
    return largest


def _formulas(ground: Ground, row: Mapping[str, Any], digits: int) -> Iterator[Finding]:
    """An exact formula agrees; one with rounded numbers does, to a digit less than these have."""
    time_name = ground.response.model.time
    for time, _ in ground.instants:
        expected, size = _expected(ground, time)
        for statement in row["formulas"]:
            symbol, formula = statement.sides[0], formula_of(statement.sides[1])
            if not isinstance(symbol, Symbol) or symbol.letter not in expected:
                raise TypeError(f"{symbol} is no function of the model")
            names: dict[str, Any] = {time_name: time}
            for text in names_in(formula) - {time_name}:
                names[text] = acb(number_in(text))
            printed = acb(ball_at(formula, names))
            place = f"{symbol.letter} in numbers"
            if statement.relation == "=":
                yield ground.vanishing(place, printed - expected[symbol.letter])
            else:
                margin = (size + 1) * arb(10) ** (1 - digits)
                yield Comparison(place, printed, expected[symbol.letter], margin=margin)


def _table(ground: Ground, step: Step, row: Mapping[str, Any], digits: int) -> Iterator[Finding]:
    header: Any = step.facts["header"]
    names = [side.letter for side in header[1:] if isinstance(side, Symbol)]
    model = ground.response.model
    known = {*model.states, *(o.name for o in model.outputs)}
    head = header[0] == Name(model.time) and set(names) <= known
    if not head or len(set(names)) != len(header) - 1:
        yield Fault("table of values", "its head names something else")
        return
    for text, *values in row["rows"]:
        exact = exact_at(formula_of(read_formula(text, names=frozenset())), {})
        expected, size = _expected(ground, acb(ball_of(exact)))
        for name, value in zip(names, values, strict=True):
            place = f"value of {name} at {text}"
            yield decimal_of(place, value, expected[name], digits, size)
