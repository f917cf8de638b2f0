"""Values for the parameters of a model: those of the file, and the rows of a table."""

from __future__ import annotations

from collections.abc import Mapping, Sequence
from difflib import get_close_matches

from flint import ctx

from closedform.algebra.enclosure import ball_of
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
from closedform.notation.expression import names_in
from closedform.notation.plain import plain
from closedform.notation.terms import surd_formula

__all__ = ["row_of_values", "rows_of_values"]


def row_of_values(
    parameters: Sequence[Parameter],
    requirements: Sequence[Requirement],
    field: ParameterField,
    source: Source,
) -> ValueSet | None:
    """Return the values that the parameters have of their own; None unless all have one.

    Raises:  ValueOutsideError, BrokenConditionError; those that are there are checked.
    """
    values = {p.name: p.value for p in parameters if p.value is not None}
    keys = {p.name: f"parameters.{p.name}.value" for p in parameters}
    _check(values, keys, parameters, requirements, field, source)
    if len(values) < len(parameters):
        return None
    return ValueSet("", tuple(values.items()))


def rows_of_values(
    value: object,
    parameters: Sequence[Parameter],
    restated: Sequence[Definition],
    requirements: Sequence[Requirement],
    field: ParameterField,
    source: Source,
) -> tuple[ValueSet, ...]:
    """Return the rows of [[values]]; what a row leaves out takes the parameter's own value.

    A row without a label is called by its number.

    Raises:  UnknownParameterError, RestatedValueError, MissingValueError, ValueOutsideError,
             BrokenConditionError, and what `number_from` raises.
    """
    rows = []
    for k, row in enumerate(
        array_of(value, "an array of tables, each below [[values]],", "values", source), start=1
    ):
        key = f"values[{k}]"
        table = table_of(row, "a table with a value for each parameter", key, source)
        given = _given(table, key, parameters, restated, source)
        own = {p.name: p.value for p in parameters if p.value is not None}
        values = {p.name: {**own, **given}.get(p.name) for p in parameters}
        missing = tuple(name for name, number in values.items() if number is None)
        if missing:
            raise MissingValueError(source.at_name(key), missing)
        complete = {name: number for name, number in values.items() if number is not None}
        keys = {name: f"{key}.{name}" if name in given else key for name in complete}
        _check(complete, keys, parameters, requirements, field, source)
        label = text_of(table.get("label", str(k)), f"{key}.label", source)
        rows.append(ValueSet(label or str(k), tuple(complete.items())))
    return tuple(rows)


def _given(
    table: Mapping[str, object],
    key: str,
    parameters: Sequence[Parameter],
    restated: Sequence[Definition],
    source: Source,
) -> dict[str, SurdSum]:
    """Return the values that stand in a row."""
    known = tuple(parameter.name for parameter in parameters)
    for name in table:
        if name in known or name == "label":
            continue
        place = source.at_name(f"{key}.{name}")
        for definition in restated:
            if definition.name == name:
                others = names_in(definition.formula)
                raise RestatedValueError(place, name, tuple(n for n in known if n in others))
        near = get_close_matches(str(name), [*known, "label"], n=1)
        raise UnknownParameterError(place, str(name), near[0] if near else None, known)
    return {
        name: number_from(table[name], f"{key}.{name}", source) for name in known if name in table
    }


def _check(
    values: Mapping[str, SurdSum],
    keys: Mapping[str, str],
    parameters: Sequence[Parameter],
    requirements: Sequence[Requirement],
    field: ParameterField,
    source: Source,
) -> None:
    """Raise an error for values against an assumption or a condition that they settle."""
    for parameter in parameters:
        said = assumed(parameter.name, parameter.assume, field.symbol(parameter.name))
        if said is None or parameter.name not in values:
            continue
        if not _holds(Requirement(said[0], "", said[1]), values, field):
            place = _place(keys[parameter.name], source)
            value = _text(values[parameter.name])
            raise ValueOutsideError(place, parameter.name, value, parameter.assume)
    for requirement in requirements:
        concerned = field.names_in(requirement.comparison.element)
        if concerned <= values.keys() and not _holds(requirement, values, field):
            inside = [(name, _text(values[name])) for name in field.parameters if name in concerned]
            place = _place(keys[inside[-1][0]], source)
            raise BrokenConditionError(place, requirement.text, tuple(inside))


def _holds(requirement: Requirement, values: Mapping[str, SurdSum], field: ParameterField) -> bool:
    """Say whether a requirement holds at a point; it does not where it has no value."""
    try:
        value = field.exact_at(requirement.comparison.element, values)
    except ZeroDivisionError:
        return False
    return relation_holds(requirement.comparison, _sign(value))


def _sign(value: SurdSum) -> int:
    """Return the sign of a number, -1, 0 or 1: zero exactly, else by refined enclosures."""
    if value.is_zero:
        return 0
    bits = 64
    while True:
        with ctx.workprec(bits):
            ball = ball_of(value)
        if not ball.contains(0):
            return 1 if ball > 0 else -1
        bits *= 2


def _place(key: str, source: Source) -> Place:
    """Return the place of a value, or of the row that leaves it to the parameter."""
    place = source.at(key)
    return source.at_name(key) if place.line is None else place


def _text(value: SurdSum) -> str:
    return plain(surd_formula(value))
