"""Values for the parameters of a model: those of the file, and the rows of a table."""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import dataclass
from difflib import get_close_matches
from functools import cached_property

from closedform.algebra.domain import Comparison
from closedform.algebra.parameter_field import ParameterField
from closedform.algebra.surds import SurdSum
from closedform.errors import Place
from closedform.model.conditions import Requirement, relation_holds
from closedform.model.entries import number_from
from closedform.model.parameter_errors import (
    BrokenConditionError,
    MissingValueError,
    RestatedValueError,
    UnknownParameterError,
    ValueOutsideError,
)
from closedform.model.parameters import assumed
from closedform.model.parametric import Definition, Parameter, ValueSet
from closedform.model.source import Source
from closedform.model.statement import array_of, table_of, text_of
from closedform.notation.plain import plain
from closedform.notation.terms import surd_formula

__all__ = ["ValueReading"]


@dataclass(frozen=True)
class ValueReading:
    """What values of the parameters are read by, and held against.

    `requirements` are the conditions of the model's domain; `restated` take no values.  The
    parameters that are `needed` are those that are left in entries, conditions and
    abbreviations: others, which [substitute] cancels, may go without a value, and are given
    any one.
    """

    parameters: tuple[Parameter, ...]
    restated: tuple[Definition, ...]
    requirements: tuple[Requirement, ...]
    field: ParameterField
    source: Source
    needed: frozenset[str]

    @cached_property
    def _own(self) -> dict[str, SurdSum]:
        """The values that parameters have of their own."""
        return {p.name: p.value for p in self.parameters if p.value is not None}

    def own(self) -> ValueSet | None:
        """Return the values that the parameters have of their own; None unless none is missing.

        Raises:  ValueOutsideError, BrokenConditionError; those that are there are checked.
        """
        self._check(self._own, {name: f"parameters.{name}.value" for name in self._own}, "")
        if not self.needed <= self._own.keys():
            return None
        values = {
            name: self._own[name] if name in self._own else self._any(name)
            for name in self.field.free
        }
        return ValueSet("", tuple(values.items()))

    def _any(self, name: str) -> SurdSum:
        """A value for a parameter on which nothing hangs, within its assumption."""
        negative = any(p.name == name and p.assume == "negative" for p in self.parameters)
        return SurdSum.rational(-1 if negative else 1)

    def rows(self, value: object) -> tuple[ValueSet, ...]:
        """Return the rows of [[values]]; what a row leaves out takes the parameter's own value.

        A row without a label is called by its number.

        Raises:  UnknownParameterError, RestatedValueError, MissingValueError,
                 ValueOutsideError, BrokenConditionError, and what `number_from` raises.
        """
        expected = "an array of tables, each below [[values]],"
        given = array_of(value, expected, "values", self.source)
        return tuple(self._row(row, k) for k, row in enumerate(given, start=1))

    def _row(self, row: object, number: int) -> ValueSet:
        key = f"values[{number}]"
        table = table_of(row, "a table with a value for each parameter", key, self.source)
        for name in table:
            self._check_name(str(name), f"{key}.{name}")
        names = self.field.free
        keys = {name: f"{key}.{name}" for name in names if name in table}
        given = {name: number_from(table[name], keys[name], self.source) for name in keys}
        both = {**self._own, **given}
        missing = tuple(name for name in names if name in self.needed and name not in both)
        if missing:
            raise MissingValueError(self.source.at_name(key), missing)
        values = {name: both[name] if name in both else self._any(name) for name in names}
        self._check(values, keys, key)
        label = text_of(table.get("label", ""), f"{key}.label", self.source)
        return ValueSet(label or str(number), tuple(values.items()))

    def _check_name(self, name: str, key: str) -> None:
        known = self.field.free
        if name in (*known, "label"):
            return
        place = self.source.at_name(key)
        for definition in self.restated:
            if definition.name == name:
                used = self.field.names_in(definition.value)
                raise RestatedValueError(place, name, tuple(n for n in known if n in used))
        near = get_close_matches(name, [*known, "label"], n=1)
        raise UnknownParameterError(place, name, near[0] if near else None, known)

    def _check(self, values: Mapping[str, SurdSum], keys: Mapping[str, str], whole: str) -> None:
        """Raise an error for values against an assumption or a condition that they settle.

        `keys` says where values stand, `whole` where the row is that leaves out the others.
        """
        for parameter in self.parameters:
            said = assumed(parameter.name, parameter.assume, self.field.symbol(parameter.name))
            if said is None or parameter.name not in values:
                continue
            if not self._holds(said[1], values):
                place = self._place(keys.get(parameter.name, whole))
                value = _text(values[parameter.name])
                raise ValueOutsideError(place, parameter.name, value, parameter.assume)
        for requirement in self.requirements:
            concerned = self.field.names_in(requirement.comparison.element)
            if concerned <= values.keys() and not self._holds(requirement.comparison, values):
                names = [name for name in self.field.free if name in concerned]
                place = self._place(next((keys[n] for n in names if n in keys), whole))
                inside = tuple((name, _text(values[name])) for name in names)
                raise BrokenConditionError(place, requirement.text, inside)

    def _holds(self, comparison: Comparison, values: Mapping[str, SurdSum]) -> bool:
        """Say whether a comparison holds at a point; it does not where it has no value."""
        sign = self.field.sign_at(comparison.element, values)
        return sign is not None and relation_holds(comparison, sign)

    def _place(self, key: str) -> Place:
        """Return the place of a value, or of the row that leaves it to the parameter."""
        place = self.source.at(key)
        return self.source.at_name(key) if place.line is None else place


def _text(value: SurdSum) -> str:
    return plain(surd_formula(value))
