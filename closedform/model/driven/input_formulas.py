"""The formulas of an input: functions of the time, instants, spans of time."""

from __future__ import annotations

from dataclasses import dataclass
from typing import Generic, TypeVar

from closedform.algebra.field import Scalar
from closedform.errors import Place
from closedform.model.driven.instants import Signs
from closedform.model.driven.signal import Signal
from closedform.model.driven.signal_errors import NameInInputError
from closedform.model.driven.signal_reading import signal_of
from closedform.model.entries import number_from
from closedform.model.naming import Names
from closedform.model.parameter_errors import NameHereError
from closedform.model.source import Source
from closedform.notation.arithmetic import Arithmetic
from closedform.notation.equation import read_signal_formula
from closedform.notation.errors import UndeclaredNameError
from closedform.notation.expression import Expression
from closedform.notation.reader import read_formula
from closedform.notation.terms import surd_formula

__all__ = ["InputFormulas"]

T = TypeVar("T")


@dataclass(frozen=True)
class InputFormulas(Generic[T]):
    """What is needed to read them; `names` are all names of the model.

    Its methods take what stands under a key: text, or a number as such.  They raise what
    the readers of formulas, `signal_of` and the arithmetic do, NameInInputError and
    NameHereError for a name of the model that may not stand there.
    """

    names: Names
    source: Source
    arithmetic: Arithmetic[T]
    signs: Signs

    def formula(self, given: object, key: str) -> tuple[Expression, Signal]:
        """Return a function of the time: its formula, and the signal that it is."""
        time, arithmetic, signs = self.names.time, self.arithmetic, self.signs
        if not isinstance(given, str):
            constant = surd_formula(number_from(given, key, self.source))
            place = self.source.named(key)
            return constant, signal_of(constant, time, arithmetic, place, signs)

        def work(place: Place) -> tuple[Expression, Signal]:
            try:
                tree = read_signal_formula(
                    given, time=time, constants=arithmetic.names, place=place
                )
            except UndeclaredNameError as error:
                kind = self.names.taken.get(error.name)
                if kind is None:
                    raise
                raise NameInInputError(error.place, error.name, time, kind) from None
            return tree, signal_of(tree, time, arithmetic, place, signs)

        return self.source.read(given, key, work)

    def number(self, given: object, key: str) -> tuple[Expression, Scalar]:
        """Return an instant or a time span: its formula and its value."""
        if not isinstance(given, str):
            constant = surd_formula(number_from(given, key, self.source))
            return constant, self.arithmetic.value(constant, self.source.named(key))

        def work(place: Place) -> tuple[Expression, Scalar]:
            try:
                tree = read_formula(given, names=self.arithmetic.names, place=place)
            except UndeclaredNameError as error:
                kind = "the time" if error.name == self.names.time else None
                kind = kind or self.names.taken.get(error.name)
                if kind is None:
                    raise
                raise NameHereError(error.place, error.name, kind) from None
            return tree, self.arithmetic.value(tree, place)

        return self.source.read(given, key, work)
