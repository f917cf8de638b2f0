"""Values at the start: those that are stated, and whether they agree with the equations."""

from __future__ import annotations

from collections.abc import Mapping, Sequence
from dataclasses import dataclass
from difflib import get_close_matches
from typing import NoReturn, TypeVar

from closedform.algebra.field import BaseField, Scalar
from closedform.model.driven.initial_errors import ContradictoryInitialError, DerivativeGivenError
from closedform.model.driven.instants import Order
from closedform.model.driven.jet_rows import JetRows
from closedform.model.driven.model import Jet
from closedform.model.driven.numerals import Numerals
from closedform.model.driven.signal import Signal
from closedform.model.driven.statement import Statement
from closedform.model.driven.values_at import ConstantSum, element_text, value_at
from closedform.model.entries import kind_of
from closedform.model.errors import (
    InitialLengthError,
    MissingInitialError,
    UnknownStateError,
    WrongKindError,
)
from closedform.model.keys import refuse_misplaced
from closedform.model.source import Source
from closedform.model.statement import array_of, initial_of
from closedform.notation.jets import jet_of, spelled
from closedform.notation.plain import plain

__all__ = ["Start", "stated_initial"]

T = TypeVar("T")


def stated_initial(
    value: object, statement: Statement[T], numerals: Numerals[T], *, declared: bool
) -> dict[Jet, T]:
    """Return the values at the start by the jets for which they are stated.

    `declared` says that the unknowns were declared, so that values may follow their order if
    every equation is of the first order.

    Raises:  UnknownStateError, DerivativeGivenError, WrongKindError, InitialLengthError,
             MissingInitialError in state form, and what entries raise.
    """
    source = numerals.source
    if statement.form == "state form":
        given = initial_of(value, statement.unknowns, source, numerals.entry)
        return {Jet(name): one for name, one in zip(statement.unknowns, given, strict=True)}
    orders = statement.orders
    needed = tuple(Jet(name, j).text for name, order in orders.items() for j in range(order))
    if not isinstance(value, Mapping):
        if declared and all(order == 1 for order in orders.values()):
            array = array_of(value, "an array of numbers", "initial", source)
            if len(array) != len(needed):
                raise InitialLengthError(source.at("initial"), len(array), len(needed))
            return {
                Jet(name): numerals.entry(item, f"initial[{k}]")
                for k, (name, item) in enumerate(zip(orders, array, strict=True), start=1)
            }
        listed = ", ".join(needed[:8]) + (", …" if len(needed) > 8 else "")
        expected = f"a table with a value for each of {listed}"
        raise WrongKindError(source.at("initial"), expected, kind_of(value))
    found: dict[Jet, T] = {}
    for key, item in value.items():
        jet = Jet(*jet_of(spelled(str(key))))
        if jet.name not in orders:
            refuse_misplaced(str(key), "initial", source)
            near = get_close_matches(str(key), needed, n=1)
            place = source.at_name(f"initial.{key}")
            raise UnknownStateError(place, str(key), near[0] if near else None, needed)
        if jet.order >= max(orders[jet.name], 1):
            own = tuple(Jet(jet.name, j).text for j in range(orders[jet.name]))
            raise DerivativeGivenError(source.at_name(f"initial.{key}"), jet.text, own)
        found[jet] = numerals.entry(item, f"initial.{key}")
    return found


@dataclass(frozen=True)
class Start:
    """What the values at the start are held against; `algebraic` unknowns have no primes."""

    field: BaseField
    rows: JetRows
    signals: Sequence[Signal]
    at: Scalar
    order: Order
    source: Source
    algebraic: frozenset[str]

    def initial(self, stated: Mapping[Jet, Scalar]) -> tuple[tuple[Scalar, ...], bool]:
        """Return the initial value of each state, and whether they hold after a jump.

        The others that are stated have to agree with the inputs as they are right before the
        start, or right after it.  If what is tied to the states agrees with the latter only,
        the values are those after what jumps at the start.

        Raises:  MissingInitialError, ContradictoryInitialError, UnknownOrderError.
        """
        states = self.rows.reduction.jets
        missing = tuple(jet.text for jet in states if jet not in stated)
        if missing:
            raise MissingInitialError(self.source.at("initial"), missing)
        initial = tuple(stated[jet] for jet in states)
        sides = {
            jet: self._agreeing(jet, value, initial)
            for jet, value in stated.items()
            if jet not in states
        }
        after = any(sides[jet] == {False} for jet in sides if jet.name not in self.algebraic)
        for jet, agreeing in sides.items():
            if not agreeing or (after and False not in agreeing):
                self._refuse(jet, stated[jet], initial, before=not after and bool(agreeing))
        return initial, after

    def _agreeing(self, jet: Jet, value: Scalar, initial: Sequence[Scalar]) -> set[bool]:
        """Before the start, after it, or both: with which inputs a value agrees."""
        found = set()
        for before in (True, False):
            follows = self._follows(jet, initial, before=before)
            if follows is not None:
                follows.add_number(-value)
            if follows is None or follows.is_zero:
                found.add(before)
        return found

    def _follows(self, jet: Jet, initial: Sequence[Scalar], *, before: bool) -> ConstantSum | None:
        """What a jet is at the start by the states and the inputs."""
        row = self.rows.row(jet)
        if row is None:
            return None
        total = ConstantSum(self.field)
        for place, weight in row.of_states.items():
            total.add_number(weight * initial[place])
        for place, weight in row.of_inputs.items():
            signal = self.signals[place]
            total.add(value_at(self.field, signal, self.at, self.order, before=before), weight)
        return total

    def _refuse(
        self, jet: Jet, value: Scalar, initial: Sequence[Scalar], *, before: bool
    ) -> NoReturn:
        follows = self._follows(jet, initial, before=before) or ConstantSum(self.field)
        stated = plain(element_text(self.field, value))
        where = self.source.at(f"initial.{jet.text}")
        raise ContradictoryInitialError(where, jet.text, stated, plain(follows.formula))
