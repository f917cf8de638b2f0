"""The formulas of a model with parameters, as elements of their field."""

from __future__ import annotations

from collections.abc import Callable, Mapping
from dataclasses import dataclass
from functools import cached_property
from typing import TypeVar

from closedform.algebra.field import Scalar
from closedform.algebra.parameter_field import ParameterField
from closedform.errors import Place
from closedform.model.entries import DecimalText, kind_of, number_from
from closedform.model.errors import WrongKindError
from closedform.model.naming import Names
from closedform.model.parameter_errors import NameHereError
from closedform.model.parametric import Definition
from closedform.model.source import Source
from closedform.notation.errors import UndeclaredNameError
from closedform.notation.expression import names_in
from closedform.notation.parametric_errors import IrrationalNumberError
from closedform.notation.plain import plain
from closedform.notation.rational import rational_combination, rational_value
from closedform.notation.reader import read_formula
from closedform.notation.terms import surd_formula

__all__ = ["Formulas", "Stated", "formula_text"]

T = TypeVar("T")


@dataclass(frozen=True, slots=True)
class Stated:
    """An element, and the names that its formula uses."""

    value: Scalar
    names: frozenset[str] = frozenset()


@dataclass(frozen=True)
class Formulas:
    """What is needed to read a formula in the parameters of a field.

    `meanings` are the elements that other names stand for: those of re-stated parameters.
    `taken` are all names of the model, to say what one is that may not be used.
    """

    field: ParameterField
    meanings: Mapping[str, Scalar]
    taken: Names
    source: Source

    @cached_property
    def names(self) -> frozenset[str]:
        """The names that may be used."""
        return frozenset(self.field.parameters) | frozenset(self.meanings)

    def read(self, text: str, key: str, work: Callable[[Place], T]) -> T:
        """Return what `work` makes of the text under a key, as `Source.read` does.

        Raises NameHereError in the place of UndeclaredNameError for a name of the model.
        """

        def working(place: Place) -> T:
            try:
                return work(place)
            except UndeclaredNameError as error:
                kind = "the time" if error.name == self.taken.time else None
                kind = kind or self.taken.taken.get(error.name)
                if kind is None:
                    raise
                raise NameHereError(error.place, error.name, kind) from None

        return self.source.read(text, key, working)

    def entry(self, value: object, key: str) -> Stated:
        """Return an entry of the matrix or an initial value: a formula, or a rational number.

        Raises:  what `number_from`, `read_formula` and `rational_value` raise.
        """
        if isinstance(value, str):

            def work(place: Place) -> Stated:
                formula = read_formula(value, names=self.names, place=place)
                element = rational_value(formula, self.field, place, meanings=self.meanings)
                return Stated(element, names_in(formula))

            return self.read(value, key, work)
        number = number_from(value, key, self.source)
        if not number.is_rational:
            raise IrrationalNumberError(self.source.at(key), plain(surd_formula(number)))
        return Stated(self.field.scalar(number))

    def weights(
        self, value: object, key: str, states: tuple[str, ...], time: str
    ) -> tuple[Stated, ...]:
        """Return the weight of each state in an output, with the names of its formula."""
        text = formula_text(value, key, self.source)
        known = self.names | frozenset(states) | {time}

        def work(place: Place) -> tuple[Stated, ...]:
            formula = read_formula(text, names=known, place=place)
            weights = rational_combination(
                formula, states, self.field, place, meanings=self.meanings
            )
            return tuple(Stated(weight, names_in(formula)) for weight in weights)

        return self.read(text, key, work)

    def definition(self, name: str, value: object, key: str) -> Definition:
        """Return a name for a formula in the parameters."""
        text = formula_text(value, key, self.source)

        def work(place: Place) -> Definition:
            formula = read_formula(text, names=self.names, place=place)
            element = rational_value(formula, self.field, place, meanings=self.meanings)
            return Definition(name, formula, element)

        return self.read(text, key, work)


def formula_text(value: object, key: str, source: Source) -> str:
    """Return the text of a formula; a number may stand for its formula."""
    match value:
        case str():
            return value
        case DecimalText(text):
            return text.replace("_", "")
        case int() if not isinstance(value, bool):
            return str(value)
        case _:
            raise WrongKindError(source.at(key), "a formula in quotation marks", kind_of(value))
