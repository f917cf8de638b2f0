"""The numbers of a model while it is read: surds, or elements with parameters."""

from __future__ import annotations

from abc import ABC, abstractmethod
from collections.abc import Callable, Iterable
from functools import cached_property
from typing import Generic, TypeVar

from closedform.algebra.field import BaseField, Scalar, base_field
from closedform.algebra.surds import SurdSum
from closedform.errors import Place
from closedform.model.driven.instants import Signs, signs_in, signs_of_numbers
from closedform.model.entries import number_from
from closedform.model.formulas import Formulas
from closedform.model.naming import Names
from closedform.model.parameter_errors import NameHereError
from closedform.model.parametric_building import Opening
from closedform.model.source import Source
from closedform.notation.arithmetic import Arithmetic
from closedform.notation.errors import UndeclaredNameError
from closedform.notation.exact import NUMBERS
from closedform.notation.expression import Expression, names_in
from closedform.notation.rational import arithmetic_in
from closedform.notation.rational_formula import rational_formula
from closedform.notation.terms import surd_formula

__all__ = ["Numerals", "OpenNumerals", "PlainNumerals"]

T = TypeVar("T")
R = TypeVar("R")


class Numerals(ABC, Generic[T]):
    """What reads the numbers of one model, all of one kind.

    `names` are those of the model that are known so far; `used` those that formulas use.
    """

    arithmetic: Arithmetic[T]
    signs: Signs

    def __init__(self, names: Names, source: Source) -> None:
        self.names, self.source = names, source
        self.used: set[str] = set()

    @abstractmethod
    def entry(self, value: object, key: str) -> T:
        """Return an entry of a matrix, an initial value or an instant."""

    @abstractmethod
    def formula(self, value: T) -> Expression:
        """Return a number as it is written."""

    @abstractmethod
    def field_of(self, numbers: Iterable[T]) -> tuple[BaseField, Callable[[T], Scalar]]:
        """Return the field that holds these numbers, and what takes them into it."""

    def never_zero(self, element: Scalar) -> bool:
        """Whether an element of the field vanishes for no values of the parameters."""
        return bool(element)

    @property
    def constants(self) -> frozenset[str]:
        """The names that stand for numbers."""
        return self.arithmetic.names

    def read(self, text: str, key: str, work: Callable[[Place], R]) -> R:
        """Return what `work` makes of the text under a key, as `Source.read` does.

        Raises NameHereError in the place of UndeclaredNameError for a name of the model.
        """

        def working(place: Place) -> R:
            try:
                return work(place)
            except UndeclaredNameError as error:
                kind = "the time" if error.name == self.names.time else None
                kind = kind or self.names.taken.get(error.name)
                if kind is None:
                    raise
                raise NameHereError(error.place, error.name, kind) from None

        return self.source.read(text, key, working)

    def note(self, *formulas: Expression) -> None:
        """Keep in mind the names that formulas use."""
        self.used.update(*map(names_in, formulas))


class PlainNumerals(Numerals[SurdSum]):
    """Sums of square roots; the field is that of all the numbers together."""

    arithmetic = NUMBERS
    signs = staticmethod(signs_of_numbers(NUMBERS))

    def entry(self, value: object, key: str) -> SurdSum:
        """Return a number as it stands in the file."""
        return number_from(value, key, self.source)

    def formula(self, value: SurdSum) -> Expression:
        """Return a number as it is written."""
        return surd_formula(value)

    def field_of(self, numbers: Iterable[SurdSum]) -> tuple[BaseField, Callable[[SurdSum], Scalar]]:
        """Return the smallest field, and what takes numbers into it."""
        field = base_field(numbers)
        return field, field.scalar


class OpenNumerals(Numerals[Scalar]):
    """Rational functions of the parameters of an opening."""

    def __init__(self, opening: Opening, source: Source) -> None:
        super().__init__(opening.formulas.taken, source)
        self.opening, self.domain = opening, opening.domain
        self.arithmetic = arithmetic_in(opening.field, opening.formulas.meanings)
        self.signs = signs_in(opening.field, self.domain)

    @cached_property
    def _formulas(self) -> Formulas:
        given = self.opening.formulas
        return Formulas(given.field, given.meanings, self.names, self.source)

    def entry(self, value: object, key: str) -> Scalar:
        """Return a formula in the parameters, or a rational number."""
        stated = self._formulas.entry(value, key)
        self.used |= stated.names
        return stated.value

    def formula(self, value: Scalar) -> Expression:
        """Return an element as it is written."""
        return rational_formula(self.opening.field, value)

    def field_of(
        self,
        numbers: Iterable[Scalar],  # noqa: ARG002  all are in the field already
    ) -> tuple[BaseField, Callable[[Scalar], Scalar]]:
        """Return the field of the parameters."""
        return self.opening.field, lambda value: value

    def never_zero(self, element: Scalar) -> bool:
        """Whether it follows from assumptions and conditions that an element is not zero."""
        return self.domain.sign_of(element).never_zero
