"""Every derivative of every unknown in states and inputs, by the state form."""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import dataclass
from functools import cached_property

from closedform.algebra.field import BaseField, FieldMatrix, Scalar
from closedform.model.driven.model import Jet, Reduction

__all__ = ["JetRow", "JetRows"]


@dataclass(frozen=True, slots=True)
class JetRow:
    """A weight for each state and for each input (by its place), where it is not zero."""

    of_states: Mapping[int, Scalar]
    of_inputs: Mapping[int, Scalar]


@dataclass(frozen=True)
class JetRows:
    """What reads jets off a state form.

    `successors` gives the place of the derivative of an input, None where that is zero.
    """

    field: BaseField
    reduction: Reduction
    successors: Mapping[int, int | None]

    @cached_property
    def _rates(self) -> list[JetRow]:
        """The rows of x' = A x + B u."""
        return self._rows(self.reduction.matrix, self.reduction.input_matrix)

    @cached_property
    def _eliminated(self) -> list[JetRow]:
        return self._rows(
            self.reduction.eliminated_from_states, self.reduction.eliminated_from_inputs
        )

    def _rows(self, left: FieldMatrix | None, right: FieldMatrix | None) -> list[JetRow]:
        if left is None:
            return []
        rows = left.to_list()
        inputs = right.to_list() if right is not None else [[] for _ in rows]
        return [
            JetRow(_sparse(row), _sparse(entries))
            for row, entries in zip(rows, inputs, strict=True)
        ]

    def row(self, jet: Jet) -> JetRow | None:
        """Return a jet in states and inputs.

        None says that the derivative of an input is needed that is not among the inputs, or
        that the name is no unknown.
        """
        if jet in self.reduction.jets:
            return JetRow({self.reduction.jets.index(jet): self.field.domain.one}, {})
        if not jet.order:
            if jet.name not in self.reduction.eliminated:
                return None
            return self._eliminated[self.reduction.eliminated.index(jet.name)]
        below = self.row(Jet(jet.name, jet.order - 1))
        return None if below is None else self.derivative(below)

    def derivative(self, row: JetRow) -> JetRow | None:
        """Return the derivative of a row, or None if that of an input is not known."""
        if not all(place in self.successors for place in row.of_inputs):
            return None
        states: dict[int, Scalar] = {}
        inputs: dict[int, Scalar] = {}
        for place, weight in row.of_inputs.items():
            above = self.successors[place]
            if above is not None:
                self._add(inputs, {above: weight}, self.field.domain.one)
        for place, weight in row.of_states.items():
            for total, part in (
                (states, self._rates[place].of_states),
                (inputs, self._rates[place].of_inputs),
            ):
                self._add(total, part, weight)
        return JetRow(_kept(states), _kept(inputs))

    def combined(self, parts: Mapping[Jet, Scalar]) -> JetRow | None:
        """Return a linear combination of jets; None where `row` gives it for one of them."""
        states: dict[int, Scalar] = {}
        inputs: dict[int, Scalar] = {}
        for jet, weight in parts.items():
            row = self.row(jet)
            if row is None:
                return None
            self._add(states, row.of_states, weight)
            self._add(inputs, row.of_inputs, weight)
        return JetRow(_kept(states), _kept(inputs))

    def _add(self, total: dict[int, Scalar], part: Mapping[int, Scalar], weight: Scalar) -> None:
        for place, entry in part.items():
            total[place] = total.get(place, self.field.domain.zero) + weight * entry


def _sparse(row: list[Scalar]) -> dict[int, Scalar]:
    return {place: entry for place, entry in enumerate(row) if entry}


def _kept(row: Mapping[int, Scalar]) -> dict[int, Scalar]:
    return {place: entry for place, entry in row.items() if entry}
