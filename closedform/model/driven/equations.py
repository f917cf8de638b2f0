"""Models stated by typed equations."""

from __future__ import annotations

import re
from collections.abc import Iterable, Sequence
from fractions import Fraction
from typing import Generic, TypeVar

from closedform.errors import Place
from closedform.model.driven.balance_errors import DelayedUnknownError, NonlinearBalanceError
from closedform.model.driven.balances import Shifted, linear_balance, unknowns_of
from closedform.model.driven.columns import InputColumns
from closedform.model.driven.numerals import Numerals
from closedform.model.driven.reduction_errors import (
    ForgottenInputError,
    ForgottenParameterError,
)
from closedform.model.driven.roles import Roles
from closedform.model.driven.signal_reading import signal_of
from closedform.model.driven.statement import Row, Statement
from closedform.model.entries import kind_of
from closedform.model.errors import TooManyStatesError, WrongKindError
from closedform.model.naming import MOST_STATES, named_at, refuse_impulse
from closedform.model.statement import array_of
from closedform.notation.equation import read_equation
from closedform.notation.expression import Expression, Negation, Sum
from closedform.notation.jets import found_jets
from closedform.notation.terms import negated

__all__ = ["stated_by_equations"]

T = TypeVar("T")
Sides = tuple[Expression, Expression]


def stated_by_equations(
    value: object, given: tuple[str, ...], numerals: Numerals[T], columns: InputColumns[T]
) -> Statement[T]:
    """Return what an array of equations states; `given` are the unknowns, if they are declared.

    Names of unknowns that are found become names of the model; functions of the time and
    inputs become columns.

    Raises:  the errors of ``balance_errors`` and ``signal_errors``, those of names,
             ForgottenParameterError and ForgottenInputError for names that make a term a product
             of unknowns, or one at another time, as they are declared nowhere, and what the
             reader of equations and the arithmetic raise.
    """
    source = numerals.source
    for k, name in enumerate(given, start=1):
        refuse_impulse(name, f"states[{k}]", source)
    texts = _texts(value, numerals)
    functions = frozenset(given) | columns.names if given else None
    reading = _Equations(numerals, columns, functions)
    sides = [reading.sides(text, f"equations[{k}]") for k, text in enumerate(texts, start=1)]
    known = numerals.constants | columns.names
    unknowns = unknowns_of(sides, known, columns.time, given or None, source)
    if not given:
        if len(unknowns) > MOST_STATES:
            raise TooManyStatesError(source.at("equations"), len(unknowns), MOST_STATES)
        places = {name: _equation_of(name, sides) for name in unknowns}
        numerals.names = named_at(places, "an unknown", numerals.names, source)
    roles = Roles(unknowns, columns.names, columns.time)
    guessed = frozenset() if given else frozenset(unknowns)
    primed = {name for pair in sides for side in pair for name, n in found_jets(side) if n}
    try:
        rows = tuple(
            reading.row(text, pair, roles, f"equations[{k}]")
            for k, (text, pair) in enumerate(zip(texts, sides, strict=True), start=1)
        )
    except (DelayedUnknownError, NonlinearBalanceError) as error:
        within = dict.fromkeys(re.findall(r"\w+", error.term))
        names = tuple(name for name in within if name in guessed and name not in primed)
        if not names:
            raise
        if isinstance(error, DelayedUnknownError):
            if _is_determined(names[0], error.equation, zip(texts, sides, strict=True)):
                raise
            facts = error.place, error.equation, error.term, names[0]
            raise ForgottenInputError(*facts) from None
        raise ForgottenParameterError(error.place, error.equation, error.term, names) from None
    return Statement("equations", unknowns, rows, guessed)


def _is_determined(name: str, equation: str, stated: Iterable[tuple[str, Sides]]) -> bool:
    """Whether another equation than this one has a name, so that it is an unknown indeed."""
    return any(
        " ".join(text.split()) != " ".join(equation.split())
        and any(name == found for side in pair for found, _ in found_jets(side))
        for text, pair in stated
    )


def _equation_of(name: str, sides: Sequence[Sides]) -> str:
    """The key of the equation in which a name first stands."""
    for k, pair in enumerate(sides, start=1):
        if any(name == found for side in pair for found, _ in found_jets(side)):
            return f"equations[{k}]"
    return "equations"


def _texts(value: object, numerals: Numerals[T]) -> list[str]:
    source = numerals.source
    expected = "an array of equations in quotation marks"
    array = array_of(value, expected, "equations", source)
    if not array:
        raise WrongKindError(source.at("equations"), expected, "an empty array")
    if len(array) > MOST_STATES:
        raise TooManyStatesError(source.at("equations"), len(array), MOST_STATES)
    texts = []
    for k, text in enumerate(array, start=1):
        if not isinstance(text, str):
            place = source.at(f"equations[{k}]")
            raise WrongKindError(place, "an equation in quotation marks", kind_of(text))
        texts.append(text)
    return texts


def _turned(literal: Expression) -> tuple[Expression, Fraction]:
    """A function of the time without a minus sign in front, and the sign."""
    if isinstance(literal, Negation):
        return literal.operand, Fraction(-1)
    if isinstance(literal, Sum) and isinstance(literal.terms[0], Negation):
        return Sum(tuple(map(negated, literal.terms))), Fraction(-1)
    return literal, Fraction(1)


class _Equations(Generic[T]):
    """What stays the same while equations are read."""

    def __init__(
        self, numerals: Numerals[T], columns: InputColumns[T], functions: frozenset[str] | None
    ) -> None:
        self.numerals, self.columns, self.functions = numerals, columns, functions

    def sides(self, text: str, key: str) -> Sides:
        def work(place: Place) -> Sides:
            return read_equation(
                text,
                time=self.columns.time,
                constants=self.numerals.constants,
                functions=self.functions,
                place=place,
            )

        found = self.numerals.read(text, key, work)
        self.numerals.note(*found)
        return found

    def row(self, text: str, sides: Sides, roles: Roles, key: str) -> Row[T]:
        numerals, columns = self.numerals, self.columns

        def work(place: Place) -> Row[T]:
            balance = linear_balance(*sides, roles, numerals.arithmetic, place, text)
            inputs = [
                (self._place(shifted, place), weight) for shifted, weight in balance.of_inputs
            ]
            if balance.literal is not None:
                formula, sign = _turned(balance.literal)
                signal = signal_of(
                    formula, columns.time, numerals.arithmetic, place, numerals.signs
                )
                if signal.bursts or signal.impulses:
                    weight = numerals.arithmetic.number(sign)
                    inputs.append((columns.literal(formula, signal), weight))
            return Row(" ".join(text.split()), *sides, balance.of_unknowns, tuple(inputs), key)

        return numerals.read(text, key, work)

    def _place(self, shifted: Shifted[T], place: Place) -> int:
        return self.columns.of(shifted.name, shifted.order, shifted.delay, place)
