"""What inputs that repeat add, as printed, against the motion from period to period."""

from __future__ import annotations

from collections.abc import Iterator
from typing import Any

from flint import acb, acb_mat

from closedform.derivation.driven.indices import repeated_indices, whole_statement
from closedform.derivation.driven.period_substitution import indexed
from closedform.derivation.driven.periodic_steps import recursion
from closedform.derivation.driven.proof.motion import row_of
from closedform.derivation.driven.proof.period_spot import PeriodSpot, periods_of
from closedform.derivation.driven.proof.spot import Spot
from closedform.derivation.driven.proof.stated import named_at
from closedform.derivation.driven.proof.values import column_at, equal
from closedform.derivation.driven.writing import Writing
from closedform.derivation.parametric.proof.ground import Said
from closedform.derivation.parametric.proof.model import formula_of
from closedform.derivation.proof.evaluation import ball_at
from closedform.derivation.proof.finding import Comparison, Fault, Finding, whether
from closedform.derivation.step import Symbol
from closedform.notation.expression import Name

__all__ = [
    "after",
    "carried",
    "divisor",
    "in_period",
    "local_time",
    "one_period",
    "period",
    "period_balance",
    "period_recursion",
    "period_term",
    "steady_equation",
    "steady_period",
    "steady_start",
    "whole",
]

_TRIED = (1, 2, 3, 7)
"""Periods in which formulas in n are tried."""


def _own(spot: Spot, said: Said) -> PeriodSpot:
    place = said.step.facts["place"]
    if not isinstance(place, int):
        raise TypeError("an input repeats in one of the ways that the model has")
    return periods_of(spot)[place]


def _indices(spot: Spot, said: Said) -> tuple[str, ...]:
    place = said.step.facts["place"]
    return repeated_indices(spot.solution, place if isinstance(place, int) else 0)


def _periods(own: PeriodSpot) -> list[int]:
    count = own.repeat.count
    return [n for n in _TRIED if count is None or n <= count]


def _letter(said: Said) -> str:
    letter = said.step.facts["number"]
    if not isinstance(letter, Name):
        raise TypeError("the number of a period has a name")
    return letter.text


def _local_name(said: Said) -> str:
    item: Any = said.step.facts["local"]
    return str(item.text if isinstance(item, Name) else item.sides[0].text)


def period(spot: Spot, said: Said) -> Iterator[Finding]:
    """The period itself."""
    value = ball_at(formula_of(said.statement.sides[0]), spot.names)
    yield Comparison("period", value, _own(spot, said).length)


def local_time(spot: Spot, said: Said) -> Iterator[Finding]:
    """The local time is 0 where the n-th period begins."""
    own = _own(spot, said)
    for n in _periods(own):
        t = own.single.instants[0] + own.length * (n - 1) + acb(1) / 7
        names = {**spot.names, spot.model.time: t, _letter(said): acb(n)}
        yield equal("local time", ball_at(formula_of(said.statement.sides[1]), names), acb(1) / 7)


def one_period(spot: Spot, said: Said) -> Iterator[Finding]:
    """The states at the end of the first period."""
    yield from _states(spot, said, _own(spot, said).left(1), {})


def carried(spot: Spot, said: Said) -> Iterator[Finding]:
    """The states at the end of the n-th period."""
    own = _own(spot, said)
    for n in _periods(own):
        yield from _states(spot, said, own.left(n), {_letter(said): acb(n)})


def period_recursion(spot: Spot, said: Said) -> Iterator[Finding]:
    """The states at the end of a period follow from those at the end of the one before."""
    own = _own(spot, said)
    expected = recursion(Writing(spot.model), own.repeat, _letter(said))
    yield from whether(said.statement == expected, said.statement.says, "it says something else")
    carried = (spot.a * own.length).exp()
    for n in _periods(own)[1:]:
        follows = carried * own.left(n - 1) + own.left(1)
        for k, value in enumerate(follows.entries()):
            yield equal(said.statement.says, value, own.left(n)[k, 0])


def steady_equation(spot: Spot, said: Said) -> Iterator[Finding]:
    """The states that a period finds again."""
    own = _own(spot, said)
    expected = recursion(Writing(spot.model), own.repeat, None)
    yield from whether(said.statement == expected, said.statement.says, "it says something else")
    follows = (spot.a * own.length).exp() * own.begins() + own.left(1)
    for k, value in enumerate(follows.entries()):
        yield equal(said.statement.says, value, own.begins()[k, 0])


def steady_start(spot: Spot, said: Said) -> Iterator[Finding]:
    """The states that a period leaves as it found them."""
    yield from _states(spot, said, _own(spot, said).begins(), {})


def _states(spot: Spot, said: Said, expected: acb_mat, names: dict[str, Any]) -> Iterator[Finding]:
    symbol, column = said.statement.sides
    own_letter = Writing(spot.model).letter("g")
    letter = isinstance(symbol, Symbol) and symbol.letter == own_letter
    yield from whether(letter, said.statement.says, "it is another vector")
    values = column_at(column, {**spot.names, **names}, {**spot.names, **names})
    for k, value in enumerate(values):
        yield equal(said.statement.says, value, expected[k, 0])


def in_period(spot: Spot, said: Said) -> Iterator[Finding]:
    """A row in a part of the n-th period."""
    own = _own(spot, said)
    row = row_of(spot, said.statement.sides[0], *_indices(spot, said))
    if row is None:
        yield Fault("in a period", "it is of no state and no output of the model")
        return
    for n in _periods(own):
        for place, local in _locals(spot, said, own):
            names = {**spot.names, _letter(said): acb(n), _local_name(said): local}
            names[spot.model.time] = own.single.instants[0] + own.length * (n - 1) + local
            value = ball_at(formula_of(said.statement.sides[1]), names)
            expected = own.in_period(own.before(n), place, local)[row]
            yield equal(f"{spot.model.rows[row]} in period {n}", value, expected)


def _locals(spot: Spot, said: Said, own: PeriodSpot) -> Iterator[tuple[int, acb]]:
    """Two local times in the part of the period that a row is about."""
    when = said.row["when"]
    low, high = (ball_at(formula_of(part), spot.names) for part in when.parts)
    first = own.single.instants[0]
    for share in (3, 5):
        local = low + (high - low) * share / 8
        place = min(own.single.place_at(first + local), own.stretches[-1])
        yield place, local


def steady_period(spot: Spot, said: Said) -> Iterator[Finding]:
    """A row in a part of the period that is left as it was found."""
    own = _own(spot, said)
    row = row_of(spot, said.statement.sides[0], *_indices(spot, said), "steady")
    if row is None:
        yield Fault("steady period", "it is of no state and no output of the model")
        return
    before = own.begins() + own.single.blow(len(own.single.instants) - 1)
    for place, local in _locals(spot, said, own):
        names = {**spot.names, _local_name(said): local}
        value = ball_at(formula_of(said.statement.sides[1]), names)
        yield equal("steady period", value, own.in_period(before, place, local)[row])


def after(spot: Spot, said: Said) -> Iterator[Finding]:
    """A row once all periods are over."""
    own = _own(spot, said)
    row = row_of(spot, said.statement.sides[0], *_indices(spot, said))
    count = own.repeat.count
    if row is None or count is None:
        yield Fault("after the periods", "there is no such row, or no end")
        return
    for share in (1, 3):
        t = own.single.instants[0] + own.length * (count + acb(share) / 5)
        names = {**spot.names, spot.model.time: t}
        value = ball_at(formula_of(said.statement.sides[1]), names)
        yield equal("after the periods", value, own.rows_at(t)[row])


def whole(spot: Spot, said: Said) -> Iterator[Finding]:
    """The solution is the sum of its parts: nothing but this is said."""
    expected = whole_statement(Writing(spot.model), spot.solution)
    yield from whether(said.statement == expected, "whole", "it is another sum")


def period_term(spot: Spot, said: Said) -> Iterator[Finding]:
    """A term of an equation along the motion in the n-th period."""
    left, formula = map(formula_of, said.statement.sides)
    for names in _along(spot, said):
        yield equal("term of an equation", ball_at(formula, names), ball_at(left, names))


def period_balance(spot: Spot, said: Said) -> Iterator[Finding]:
    """The terms in print add up to the input within a period: the residual is zero."""
    terms = [s for s in said.step.statements if s.says == "period term"]
    for names in _along(spot, said):
        total = sum((ball_at(formula_of(s.sides[1]), names) for s in terms), acb(0))
        for side in said.statement.sides:
            yield equal("equation", total, ball_at(formula_of(side), names))


def _along(spot: Spot, said: Said) -> Iterator[dict[str, Any]]:
    """The names of a model along what one way to repeat adds, at times within periods."""
    own, indices = _own(spot, said), _indices(spot, said)
    when: Any = said.step.facts["when"]
    low, high = (ball_at(formula_of(part), spot.names) for part in when.parts)
    first, n_states = own.single.instants[0], spot.a.nrows()
    for n in _periods(own):
        for share in (3, 5):
            local = low + (high - low) * share / 8
            place = min(own.single.place_at(first + local), own.stretches[-1])
            rows = own.in_period(own.before(n), place, local)
            state = acb_mat([[row] for row in rows[:n_states]])
            inputs = own.single.inputs_at(place, first + local)
            names = named_at(own.single, first + local, state, inputs)
            names |= {indexed(name, indices): value for name, value in names.items()}
            names |= {_letter(said): acb(n), _local_name(said): local}
            yield names


def divisor(spot: Spot, said: Said) -> Iterator[Finding]:
    """A divisor is not zero at the points of the case."""
    (formula,) = map(formula_of, said.statement.sides)
    known = any(formula in own.provided for own in spot.solution.periodic)
    yield from whether(known, "divisor", "nothing is divided by it")
    yield from whether(not acb(ball_at(formula, spot.names)).is_zero(), "divisor", "it is zero")
