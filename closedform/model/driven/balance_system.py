"""The balances of a model as rows over its jets and its inputs."""

from __future__ import annotations

from collections.abc import Callable, Iterable, Mapping
from dataclasses import dataclass
from functools import cached_property

from closedform.algebra.field import BaseField, Scalar
from closedform.errors import Place
from closedform.model.driven.model import Balance, Jet
from closedform.model.driven.signal import Signal
from closedform.model.driven.signal_algebra import added, scaled
from closedform.model.source import Source

__all__ = ["BalanceSystem"]


@dataclass(frozen=True)
class BalanceSystem:
    """What is to be brought to state form.

    `inputs` are the inputs as errors write them; `successors` gives the place of the input
    that is the derivative of another, where there is one.  `keys` say where each balance
    stands in `source`.  `preferred` are jets that are to be states if there is a choice, as
    values at the start are given for them.  States are in the order of the unknowns, each
    with its derivatives, or, `by_order`, derivatives after all that has fewer primes.
    `signals` are the inputs as functions of the time, empty where these do not matter.
    `never_zero` says of an element that it vanishes for no values of the parameters;
    `guessed` are unknowns that nobody declared as such.
    """

    field: BaseField
    unknowns: tuple[str, ...]
    balances: tuple[Balance, ...]
    inputs: tuple[str, ...]
    successors: Mapping[int, int]
    keys: tuple[str, ...]
    source: Source
    preferred: frozenset[Jet] = frozenset()
    by_order: bool = False
    never_zero: Callable[[Scalar], bool] = bool
    guessed: frozenset[str] = frozenset()
    signals: tuple[Signal, ...] = ()

    @cached_property
    def orders(self) -> dict[str, int]:
        """The highest derivative of each unknown that stands in an equation."""
        found: dict[str, int] = {}
        for balance in self.balances:
            for jet, _ in balance.of_unknowns:
                found[jet.name] = max(found.get(jet.name, 0), jet.order)
        return {name: found[name] for name in self.unknowns if name in found}

    @cached_property
    def tops(self) -> tuple[Jet, ...]:
        """The highest derivative of each unknown; of an algebraic one itself."""
        return tuple(Jet(name, order) for name, order in self.orders.items())

    @cached_property
    def lower(self) -> tuple[Jet, ...]:
        """The jets below the highest ones, which are states or tied to states."""
        jets = [Jet(name, j) for name, order in self.orders.items() for j in range(order)]
        return tuple(sorted(jets, key=lambda jet: jet.order)) if self.by_order else tuple(jets)

    @cached_property
    def column(self) -> dict[Jet, int]:
        """The column of each jet."""
        return {jet: k for k, jet in enumerate((*self.tops, *self.lower))}

    def of_input(self, place: int) -> int:
        """Return the column of an input."""
        return len(self.column) + place

    def of_derivative(self, place: int) -> int:
        """Return the column of the derivative of an input."""
        return self.of_input(self.successors.get(place, len(self.inputs) + place))

    @cached_property
    def rows(self) -> tuple[dict[int, Scalar], ...]:
        """Each balance by its columns: what adds up to zero."""
        return tuple(
            self.row((self.column[jet], weight) for jet, weight in balance.of_unknowns)
            | self.row((self.of_input(place), weight) for place, weight in balance.of_inputs)
            for balance in self.balances
        )

    def cancels(self, weights: Mapping[int, Scalar]) -> bool:
        """Whether a sum of weight · input is zero at all times, as 2·1 - 2 is."""
        if not weights or not self.signals:
            return not weights
        parts = [scaled(self.signals[place], weight) for place, weight in weights.items()]
        if len({part.repeat for part in parts}) > 1:
            return False
        total = added(parts)
        return not total.bursts and not total.impulses

    def row(self, parts: Iterable[tuple[int, Scalar]]) -> dict[int, Scalar]:
        """Return a row with weights of one column added up, and none that is zero."""
        found: dict[int, Scalar] = {}
        for column, weight in parts:
            found[column] = found.get(column, self.field.domain.zero) + weight
        return {column: weight for column, weight in found.items() if weight}

    def numbered(self, places: Iterable[int]) -> tuple[tuple[int, str], ...]:
        """Return balances by their numbers, counted from 1, with their texts."""
        return tuple((k + 1, self.balances[k].text) for k in sorted(places))

    @property
    def whole(self) -> Place:
        """Return where the balances stand."""
        return self.source.at_name(self.keys[0].partition("[")[0])

    def place(self, k: int) -> Place:
        """Return where a balance stands."""
        return self.source.at(self.keys[k])
