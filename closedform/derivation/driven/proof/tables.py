"""Tables of decimals and the solution in numbers, against the true motion."""

from __future__ import annotations

from collections.abc import Iterator, Mapping
from typing import Any

from flint import acb, arb

from closedform.algebra.enclosure import ball_of
from closedform.derivation.driven.indices import base_indices, repeated_indices
from closedform.derivation.driven.proof.motion import row_of
from closedform.derivation.driven.proof.period_spot import periods_of, total_at
from closedform.derivation.driven.proof.spot import Spot
from closedform.derivation.driven.proof.stated import condition
from closedform.derivation.driven.proof.values import NoPieceError, side_at
from closedform.derivation.parametric.proof.ground import Said
from closedform.derivation.parametric.proof.model import formula_of
from closedform.derivation.proof.evaluation import ball_at, exact_at, expressions_in
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

__all__ = ["number_set", "value_rows"]


def value_rows(spot: Spot, step: Step) -> Iterator[Finding]:
    """Every decimal of a table, and its head."""
    yield from _table(spot, step, step.facts)


def _table(spot: Spot, step: Step, held: Mapping[str, Any]) -> Iterator[Finding]:
    header: Any = step.facts["header"]
    digits: Any = step.facts["digits"]
    model = spot.model
    names = [side.letter for side in header[1:] if isinstance(side, Symbol)]
    yield from whether(
        header[0] == Name(model.time) and tuple(names) == model.rows,
        "table of values",
        "its head names something else",
    )
    for text, *values in held["rows"]:
        exact = exact_at(formula_of(read_formula(text, names=frozenset())), {})
        t = acb(ball_of(exact))
        yield from whether(not bool(t.real < spot.instants[0].real), text, "it is before the start")
        expected = total_at(spot, t)
        scale = spot.size_at(t)
        for name, value, true in zip(names, values, expected, strict=True):
            yield decimal_of(f"value of {name} at {text}", value, true, digits, scale)


def number_set(spot: Spot, step: Step, held: Mapping[str, Any]) -> Iterator[Finding]:
    """Values given, quantities, formulas and decimals of one set of values."""
    digits: Any = step.facts["digits"]
    for statement in held["conditions"]:
        yield from condition(spot, Said(step, held, statement, (held["case"],)))
    for statement in held["given"]:
        name, formula = statement.sides[0], formula_of(statement.sides[1])
        yield Comparison("value given", _number(formula), acb(spot.names[name.text]))
    for quantity in held["quantities"]:
        name = quantity["name"].text
        if name not in spot.names:
            yield Fault(f"{name} in numbers", "the case has no such name")
            return
        yield decimal_of(f"{name} in numbers", quantity["decimal"], acb(spot.names[name]), digits)
    for row in held["formulas"]:
        yield from _formula(spot, row["whole"], digits, spot.places)
        for line in row["lines"]:
            place = line["place"]
            yield from _formula(spot, line["statement"], digits, range(place, place + 1))
    for row in held["periods"]:
        for part in row["parts"]:
            for statement in part["statements"]:
                yield from _in_period(spot, row, part["when"], statement, digits)
    yield from _table(spot, step, held)


def _in_period(
    spot: Spot, held: Mapping[str, Any], when: Symbol, statement: Any, digits: int
) -> Iterator[Finding]:
    """A formula with numbers agrees with the motion in some periods."""
    symbol, side = statement.sides
    place, own = held["place"], periods_of(spot)[held["place"]]
    row = row_of(spot, symbol, *repeated_indices(spot.solution, place))
    if row is None or not isinstance(when.argument, Name):
        yield Fault("period in numbers", "it is of no state and no output of the model")
        return
    kept = {when.argument.text, held["number"].text}
    texts = {text for f in (side, *when.parts) for text in names_in(formula_of(f)) - kept}
    decimals = {text: acb(number_in(text)) for text in texts}
    low, high = (ball_at(formula_of(part), decimals) for part in when.parts)
    first = own.single.instants[0]
    for n in (1, 2, 5):
        if own.repeat.count is not None and n > own.repeat.count:
            continue
        for share in (3, 5):
            local = low + (high - low) * share / 8
            part = min(own.single.place_at(first + local), own.stretches[-1])
            expected = own.in_period(own.before(n), part, local)[row]
            names = {**decimals, when.argument.text: local, held["number"].text: acb(n)}
            value = acb(ball_at(side, names))
            size = 1 + sum(
                (abs(e).upper() for e in own.in_period(own.before(n), part, local)), arb(0)
            )
            margin = size * arb(10) ** (1 - digits) if statement.relation != "=" else None
            yield Comparison(
                f"{symbol.letter} in numbers", value - expected, acb(0), margin=margin, scale=size
            )


def _number(formula: Any) -> acb:
    return acb(ball_at(formula, {text: acb(number_in(text)) for text in names_in(formula)}))


def _formula(spot: Spot, statement: Any, digits: int, places: range) -> Iterator[Finding]:
    """A formula with numbers agrees; with rounded ones to a digit less than these have."""
    symbol, side = statement.sides
    model = spot.model
    if not isinstance(symbol, Symbol) or symbol.letter not in model.rows:
        yield Fault("in numbers", "it is of no state and no output of the model")
        return
    row = model.rows.index(symbol.letter)
    if symbol.indices != base_indices(spot.solution):
        yield Fault("in numbers", "it is of another part of the solution")
    decimals = {
        text: acb(number_in(text))
        for formula in expressions_in(side)
        for text in names_in(formula) - {model.time}
    }
    for place in places:
        for t in spot.times(place):
            names = {**decimals, model.time: t}
            try:
                value = acb(side_at(side, names, names))
            except NoPieceError as wrong:
                yield Fault("in numbers", str(wrong))
                return
            expected = spot.rows_at(place, t)[row]
            margin = None
            if statement.relation != "=":
                margin = (spot.size_at(t) + 1) * arb(10) ** (1 - digits)
            scale = spot.size_at(t)
            found = Comparison(
                f"{symbol.letter} in numbers", value - expected, acb(0), margin=margin, scale=scale
            )
            yield found
