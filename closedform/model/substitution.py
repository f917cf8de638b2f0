"""Parameters that are re-stated by others, put in wherever they stand."""

from __future__ import annotations

from collections.abc import Mapping, Sequence
from dataclasses import replace
from graphlib import CycleError, TopologicalSorter

from closedform.algebra.field import Scalar
from closedform.algebra.parameter_field import PI, ParameterField
from closedform.errors import Place
from closedform.model.formulas import Formulas, formula_text
from closedform.model.naming import Names, named_in
from closedform.model.parameter_errors import (
    NoParametersError,
    RestatedValueError,
    SubstitutionCycleError,
)
from closedform.model.parameters import check_words
from closedform.model.parametric import Definition, Parameter
from closedform.model.source import Source
from closedform.model.statement import table_of
from closedform.notation.expression import Expression, names_in
from closedform.notation.reader import read_formula

__all__ = ["substituted"]


def substituted(
    value: object,
    declared: Sequence[Parameter],
    names: Names,
    source: Source,
    *,
    with_pi: bool = False,
) -> tuple[Formulas, tuple[Definition, ...], Names]:
    """Return what reads formulas in the parameters that remain, and the re-stated ones.

    `value` is the table [substitute].  Its formulas may use each other, but not in a circle:
    the values returned hold none of the re-stated names.  `with_pi` says that the number pi
    stands in formulas of the model.

    Raises:  SubstitutionCycleError, RestatedValueError, NoParametersError if none remains,
             the errors of names, and what `read_formula` and `rational_value` raise.
    """
    table = table_of(value, "a table with a formula for each parameter", "substitute", source)
    undeclared = [name for name in table if all(name != p.name for p in declared)]
    check_words(dict.fromkeys(undeclared), "substitute", source)
    names = named_in(undeclared, "substitute", "a re-stated parameter", names, source)
    numbers = (PI,) if with_pi else ()
    known = frozenset((*table, *(parameter.name for parameter in declared), *numbers))
    formulas = {name: _formula(name, formula, known, source) for name, formula in table.items()}
    order = _order(formulas, source)
    remaining = tuple(parameter.name for parameter in declared if parameter.name not in table)
    if not remaining and not with_pi:
        raise NoParametersError(source.at_name("substitute"), restated=True)
    field = ParameterField(parameters=(*remaining, *numbers))
    meanings: dict[str, Scalar] = {}
    for name in order:
        reading = Formulas(field, meanings, names, source)
        meanings[name] = reading.definition(name, table[name], f"substitute.{name}").value
    for parameter in declared:
        if parameter.name in table and parameter.value is not None:
            used = field.names_in(meanings[parameter.name])
            others = tuple(name for name in remaining if name in used)
            place = source.at(f"parameters.{parameter.name}.value")
            raise RestatedValueError(place, parameter.name, others)
    restated = tuple(
        _described(Definition(name, formulas[name], meanings[name]), declared) for name in table
    )
    return Formulas(field, meanings, names, source), restated, names


def _formula(name: str, value: object, known: frozenset[str], source: Source) -> Expression:
    key = f"substitute.{name}"
    text = formula_text(value, key, source)

    def work(place: Place) -> Expression:
        return read_formula(text, names=known, place=place)

    return source.read(text, key, work)


def _order(formulas: Mapping[str, Expression], source: Source) -> tuple[str, ...]:
    """Return the re-stated names, each after those that its formula uses."""
    uses = {
        name: sorted(names_in(formula) & frozenset(formulas)) for name, formula in formulas.items()
    }
    try:
        return tuple(TopologicalSorter(uses).static_order())
    except CycleError as error:
        circle = tuple(reversed(error.args[1]))
        raise SubstitutionCycleError(source.at(f"substitute.{circle[0]}"), circle) from None


def _described(definition: Definition, declared: Sequence[Parameter]) -> Definition:
    """Return the definition with the unit and the meaning of the parameter, if declared."""
    for parameter in declared:
        if parameter.name == definition.name:
            return replace(definition, unit=parameter.unit, meaning=parameter.meaning)
    return definition
