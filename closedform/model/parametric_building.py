"""From a mapping of keys to values to a model with parameters."""

from __future__ import annotations

from collections.abc import Iterable, Mapping, Sequence
from dataclasses import replace
from itertools import chain

from closedform.model.conditions import conditions_of, domain_of, requirements_of
from closedform.model.formulas import Formulas, Stated
from closedform.model.naming import Names, named_in
from closedform.model.parameter_errors import UnusedParameterError
from closedform.model.parameters import check_words, parameters_of
from closedform.model.parametric import (
    Condition,
    Definition,
    Parameter,
    ParametricModel,
    ParametricOutput,
)
from closedform.model.source import Source
from closedform.model.statement import Heading, initial_of, matrix_of, outputs_of, table_of
from closedform.model.substitution import substituted
from closedform.model.values import ValueReading
from closedform.notation.expression import names_in

__all__ = ["parametric_model"]


def parametric_model(
    mapping: Mapping[str, object], heading: Heading, source: Source
) -> ParametricModel:
    """Return the model with parameters that a mapping states below its heading.

    Raises:  the errors of ``closedform.model`` and ``closedform.notation``.
    """
    declared, names = parameters_of(mapping["parameters"], heading.names, source)
    formulas, restated, names = substituted(mapping.get("substitute", {}), declared, names, source)
    abbreviations, names = _abbreviations(mapping.get("abbreviations", {}), formulas, names)
    formulas = replace(formulas, taken=names)
    states, field = heading.states, formulas.field
    matrix = matrix_of(mapping["matrix"], len(states), source, formulas.entry)
    initial = initial_of(mapping["initial"], states, source, formulas.entry)

    def weigh(value: object, key: str) -> tuple[Stated, ...]:
        return formulas.weights(value, key, states, heading.time)

    outputs = outputs_of(mapping.get("outputs", {}), names, source, weigh)
    conditions = conditions_of(mapping.get("conditions", ()), formulas)
    entries = tuple(chain(*matrix, initial, *(weights for _, weights in outputs)))
    _refuse_unused(
        declared,
        restated,
        chain(
            *(entry.names for entry in entries),
            *(_names(condition) for condition in conditions),
            *(names_in(definition.formula) for definition in (*restated, *abbreviations)),
        ),
        source,
    )
    requirements = requirements_of(declared, conditions, formulas)
    values = [entry.value for entry in entries]
    values += [definition.value for definition in (*restated, *abbreviations)]
    domain, added = domain_of(field, requirements, values, source)
    parameters = tuple(p for p in declared if p.name in field.parameters)
    elements = [entry.value for entry in entries]
    elements += [definition.value for definition in abbreviations]
    elements += [condition.comparison.element for condition in conditions]
    needed = frozenset(name for element in elements for name in field.names_in(element))
    stated = (*requirements, *added)
    reading = ValueReading(parameters, restated, stated, field, source, needed)
    return ParametricModel(
        name=heading.name,
        title=heading.title,
        states=states,
        field=field,
        parameters=parameters,
        domain=domain,
        matrix=tuple(tuple(entry.value for entry in row) for row in matrix),
        initial=tuple(entry.value for entry in initial),
        outputs=tuple(
            ParametricOutput(name, tuple(weight.value for weight in weights))
            for name, weights in outputs
        ),
        conditions=conditions,
        restated=restated,
        abbreviations=abbreviations,
        values=reading.own(),
        value_sets=reading.rows(mapping.get("values", ())),
        times=heading.times,
        time=heading.time,
        summary=heading.summary,
    )


def _abbreviations(
    value: object, formulas: Formulas, names: Names
) -> tuple[tuple[Definition, ...], Names]:
    """Return the user's names for formulas, each in the parameters and those before it."""
    source = formulas.source
    table = table_of(value, "a table with a formula for each name", "abbreviations", source)
    check_words(table, "abbreviations", source)
    names = named_in(table, "abbreviations", "an abbreviation", names, source)
    meanings = dict(formulas.meanings)
    found = []
    for name, formula in table.items():
        reading = replace(formulas, meanings=meanings)
        definition = reading.definition(name, formula, f"abbreviations.{name}")
        meanings = {**meanings, name: definition.value}
        found.append(definition)
    return tuple(found), names


def _names(condition: Condition) -> frozenset[str]:
    return names_in(condition.left) | names_in(condition.right)


def _refuse_unused(
    declared: Sequence[Parameter],
    restated: Sequence[Definition],
    used: Iterable[str],
    source: Source,
) -> None:
    """Raise UnusedParameterError for a name that stands in no formula."""
    found = frozenset(used)
    for parameter in declared:
        if parameter.name not in found:
            place = source.at_name(f"parameters.{parameter.name}")
            raise UnusedParameterError(place, parameter.name, declared=True)
    for definition in restated:
        if definition.name not in found:
            place = source.at_name(f"substitute.{definition.name}")
            raise UnusedParameterError(place, definition.name, declared=False)
