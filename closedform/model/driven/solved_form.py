"""The state form of the contents of a file, with a column for each input that acts."""

from __future__ import annotations

from collections.abc import Sequence
from functools import cached_property
from typing import Generic, TypeVar

from closedform.algebra.field import FieldMatrix, Scalar
from closedform.model.driven.balance_system import BalanceSystem
from closedform.model.driven.columns import Column
from closedform.model.driven.contents import Contents
from closedform.model.driven.jet_rows import JetRows
from closedform.model.driven.model import Balance, Reduction
from closedform.model.driven.reduction import Reduced, reduced
from closedform.model.driven.signal_algebra import mapped
from closedform.model.errors import TooManyStatesError
from closedform.model.naming import MOST_STATES
from closedform.notation.plain import plain

__all__ = ["SolvedForm"]

T = TypeVar("T")


class SolvedForm(Generic[T]):
    """Balances with numbers of one field, and the state form that follows from them.

    `key` is where the equations stand, `place` its place in the file.  The first `typed`
    inputs are those that stand in the file, the others derivatives that are needed.

    Raises, when it is asked for its state form, what `reduced` raises, TooManyStatesError, and
    what the derivative of a signal raises.
    """

    def __init__(self, contents: Contents[T], key: str) -> None:
        self.contents, self.key = contents, key
        self.numerals, self.source = contents.numerals, contents.numerals.source
        self.columns, self.statement = contents.columns, contents.statement
        self.place = self.source.at_name(key)
        self.field, self.convert = self.numerals.field_of(contents.numbers())
        self.typed = len(self.columns.columns)

    @cached_property
    def balances(self) -> tuple[Balance, ...]:
        """The equations, with numbers of the field."""
        return tuple(
            Balance(
                row.text,
                row.left,
                row.right,
                tuple((jet, self.convert(weight)) for jet, weight in row.of_unknowns),
                tuple((place, self.convert(weight)) for place, weight in row.of_inputs),
            )
            for row in self.statement.rows
        )

    @cached_property
    def _reduced(self) -> Reduced:
        stated = self.contents.initial or {}
        system = BalanceSystem(
            field=self.field,
            unknowns=self.statement.unknowns,
            balances=self.balances,
            inputs=tuple(plain(column.formula) for column in self.columns.columns),
            successors={
                place: above
                for place, above in self.columns.known_successors().items()
                if above is not None
            },
            keys=tuple(row.key for row in self.statement.rows),
            source=self.source,
            preferred=frozenset(stated),
            by_order=self.statement.form == "second order",
            never_zero=self.numerals.never_zero,
            guessed=self.statement.guessed,
            signals=tuple(
                mapped(column.signal, self.convert) for column in self.columns.columns[: self.typed]
            ),
        )
        if len(system.lower) > MOST_STATES:
            raise TooManyStatesError(self.place, len(system.lower), MOST_STATES)
        return reduced(system)

    @property
    def reduction(self) -> Reduction:
        """The state form, with a column for each input of the model."""
        return self._form[0]

    @property
    def acting(self) -> tuple[Column[T], ...]:
        """The inputs of the model, derivatives that the state form needs among them."""
        return self._form[1]

    @cached_property
    def _form(self) -> tuple[Reduction, tuple[Column[T], ...]]:
        form, count = self._reduced.reduction, self.typed
        targets = [
            *range(count),
            *(self.columns.derivative(place, self.place) for place in self._reduced.derived),
        ]
        acting = tuple(self.columns.columns)
        width = len(acting)
        reduction = Reduction(
            form.jets,
            form.matrix,
            self._placed(form.input_matrix, targets, width),
            form.eliminated,
            form.eliminated_from_states,
            self._placed(form.eliminated_from_inputs, targets, width),
        )
        return reduction, acting

    def _placed(
        self, matrix: FieldMatrix | None, targets: Sequence[int | None], width: int
    ) -> FieldMatrix | None:
        """A matrix with its columns put to their places, those without one left out."""
        if matrix is None or not width:
            return None
        rows = []
        for row in matrix.to_list():
            placed = [self.field.domain.zero] * width
            for target, entry in zip(targets, row, strict=True):
                if target is not None:
                    placed[target] += entry
            rows.append(placed)
        return self.field.matrix(rows)

    @cached_property
    def rows(self) -> JetRows:
        """What gives every jet in states and inputs."""
        return JetRows(self.field, self.reduction, self.columns.known_successors())

    @property
    def divisors(self) -> tuple[Scalar, ...]:
        """The elements that must not be zero for the state form to follow."""
        return self._reduced.divisors
