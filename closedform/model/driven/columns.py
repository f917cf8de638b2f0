"""The inputs as they stand in a model: one column for each form in which one acts."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass
from fractions import Fraction
from typing import Generic, TypeVar

from closedform.errors import Place
from closedform.model.driven.balances import Shifted
from closedform.model.driven.numerals import Numerals
from closedform.model.driven.pieces import Declared
from closedform.model.driven.signal import Signal
from closedform.model.driven.signal_algebra import delayed, derived
from closedform.model.driven.signal_formula import signal_formula, since
from closedform.notation.expression import Call, Expression, Name

__all__ = ["Column", "InputColumns"]

T = TypeVar("T")
NOWHERE = Place()


@dataclass(frozen=True, slots=True)
class Column(Generic[T]):
    """An input as it acts: `shifted` says of which declared one it is made, and how.

    It is None for a function of the time that stands in an equation.  The numbers of the
    signal are those of the arithmetic with which the model is read.
    """

    formula: Expression
    signal: Signal
    shifted: Shifted[T] | None = None
    declared: Declared | None = None


class InputColumns(Generic[T]):
    """The columns so far, each found again when it is asked for once more."""

    def __init__(self, declared: Sequence[Declared], numerals: Numerals[T]) -> None:
        self.declared = {one.name: one for one in declared}
        self.numerals = numerals
        self.time = numerals.names.time
        self.columns: list[Column[T]] = []
        self.places: dict[Shifted[T] | Expression, int] = {}
        self.successors: dict[int, int | None] = {}

    @property
    def names(self) -> frozenset[str]:
        """The names of the declared inputs."""
        return frozenset(self.declared)

    def of(self, name: str, order: int = 0, delay: T | None = None, place: Place = NOWHERE) -> int:
        """Return the place of a declared input, differentiated and delayed.

        Raises what `derived` raises, at `place`.
        """
        shifted = Shifted(name, order, self._zero if delay is None else delay)
        if shifted not in self.places:
            self._added(shifted, self._column(shifted, place))
        return self.places[shifted]

    def literal(self, formula: Expression, signal: Signal) -> int:
        """Return the place of a function of the time that stands in an equation."""
        if formula not in self.places:
            self._added(formula, Column(formula, signal))
        return self.places[formula]

    def derivative(self, place: int, at: Place = NOWHERE) -> int | None:
        """Return the place of the derivative of an input, None if that is zero.

        Raises what `derived` raises, at `at`.
        """
        if place not in self.successors:
            self.successors[place] = self._derivative(self.columns[place], at)
        return self.successors[place]

    def _derivative(self, column: Column[T], at: Place) -> int | None:
        shifted = column.shifted
        if shifted is not None:
            above = shifted._replace(order=shifted.order + 1)
            key: Shifted[T] | Expression = above
            found = self._column(above, at)
        else:
            signal = self._derived(column.signal, 1, column.formula, at)
            found = Column(signal_formula(signal, self.numerals, self.time), signal)
            key = found.formula
        if key in self.places:
            return self.places[key]
        if not found.signal.bursts and not found.signal.impulses:
            return None
        return self._added(key, found)

    def known_successors(self) -> dict[int, int | None]:
        """The place of the derivative of each input of which there is one, None for zero."""
        found = dict(self.successors)
        for place, column in enumerate(self.columns):
            if column.shifted is not None:
                above = column.shifted._replace(order=column.shifted.order + 1)
                if above in self.places:
                    found[place] = self.places[above]
        return found

    @property
    def _zero(self) -> T:
        return self.numerals.arithmetic.number(Fraction(0))

    def _column(self, shifted: Shifted[T], place: Place) -> Column[T]:
        one, formula = self.declared[shifted.name], self._formula(shifted)
        signal = self._derived(one.signal, shifted.order, formula, place)
        if shifted.delay != self._zero:
            signal = delayed(signal, shifted.delay)
        return Column(formula, signal, shifted, one)

    def _derived(self, signal: Signal, order: int, formula: Expression, place: Place) -> Signal:
        return derived(
            signal, order, self.numerals.arithmetic, formula=formula, time=self.time, place=place
        )

    def _added(self, key: Shifted[T] | Expression, column: Column[T]) -> int:
        self.columns.append(column)
        self.places[key] = len(self.columns) - 1
        return self.places[key]

    def _formula(self, shifted: Shifted[T]) -> Expression:
        name = shifted.name + "'" * shifted.order
        if shifted.delay == self._zero:
            return Name(name)
        return Call(name, since(shifted.delay, self.numerals, self.time))
