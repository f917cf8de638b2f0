"""From a mapping of keys to values to a model with parameters."""

from __future__ import annotations

from collections.abc import Iterable, Mapping, Sequence
from dataclasses import dataclass, replace
from itertools import chain

from closedform.algebra.domain import ParameterDomain
from closedform.algebra.field import Scalar
from closedform.algebra.parameter_field import ParameterField
from closedform.model.conditions import Requirement, conditions_of, domain_of, requirements_of
from closedform.model.formulas import Formulas, Stated
from closedform.model.keys import uses_pi
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

__all__ = ["Contents", "Opening", "opening_of", "parametric_model", "with_parameters"]


@dataclass(frozen=True)
class Opening:
    """What a mapping leaves open and says of it, whatever its equations are.

    `declared` are the parameters of the file, `restated` those that [substitute] expresses by
    others; `formulas` reads what else stands in the file.
    """

    declared: tuple[Parameter, ...]
    restated: tuple[Definition, ...]
    abbreviations: tuple[Definition, ...]
    conditions: tuple[Condition, ...]
    requirements: tuple[Requirement, ...]
    formulas: Formulas

    @property
    def field(self) -> ParameterField:
        """The field of the parameters that remain, with the number pi if the file uses it."""
        return self.formulas.field

    @property
    def domain(self) -> ParameterDomain:
        """The values that assumptions and conditions leave to the parameters."""
        return ParameterDomain(self.field, tuple(r.comparison for r in self.requirements))


@dataclass(frozen=True)
class Contents:
    """The equations of a model as elements of the field, and all else that uses parameters.

    `used` are the names in its formulas.  `elements` have to be defined for all values of the
    parameters, beside those of the equations; `key` is where they stand.  `reserved` are
    further names that are in use.
    """

    states: tuple[str, ...]
    matrix: tuple[tuple[Scalar, ...], ...]
    initial: tuple[Scalar, ...]
    outputs: tuple[ParametricOutput, ...]
    used: frozenset[str]
    elements: tuple[Scalar, ...] = ()
    key: str = "matrix"
    reserved: tuple[str, ...] = ()

    @property
    def entries(self) -> tuple[Scalar, ...]:
        """Every element."""
        weights = (weight for output in self.outputs for weight in output.weights)
        return (*chain(*self.matrix), *self.initial, *weights, *self.elements)


def opening_of(mapping: Mapping[str, object], names: Names, source: Source) -> Opening:
    """Return what a mapping says of its parameters; `names` are in use already.

    Raises:  the errors of parameters, substitutions, abbreviations and conditions.
    """
    declared: tuple[Parameter, ...] = ()
    if "parameters" in mapping:
        declared, names = parameters_of(mapping["parameters"], names, source)
    formulas, restated, names = substituted(
        mapping.get("substitute", {}), declared, names, source, with_pi=uses_pi(mapping)
    )
    abbreviations, names = _abbreviations(mapping.get("abbreviations", {}), formulas, names)
    formulas = replace(formulas, taken=names)
    conditions = conditions_of(mapping.get("conditions", ()), formulas)
    requirements = requirements_of(declared, conditions, formulas)
    return Opening(declared, restated, abbreviations, conditions, requirements, formulas)


def parametric_model(
    mapping: Mapping[str, object], heading: Heading, source: Source
) -> ParametricModel:
    """Return the model with parameters that a mapping states below its heading.

    Raises:  the errors of ``closedform.model`` and ``closedform.notation``.
    """
    opening = opening_of(mapping, heading.names, source)
    states, formulas = heading.states, opening.formulas
    matrix = matrix_of(mapping["matrix"], len(states), source, formulas.entry)
    initial = initial_of(mapping["initial"], states, source, formulas.entry)

    def weigh(value: object, key: str) -> tuple[Stated, ...]:
        return formulas.weights(value, key, states, heading.time)

    outputs = outputs_of(mapping.get("outputs", {}), formulas.taken, source, weigh)
    entries = tuple(chain(*matrix, initial, *(weights for _, weights in outputs)))
    contents = Contents(
        states=states,
        matrix=tuple(tuple(entry.value for entry in row) for row in matrix),
        initial=tuple(entry.value for entry in initial),
        outputs=tuple(
            ParametricOutput(name, tuple(weight.value for weight in weights))
            for name, weights in outputs
        ),
        used=frozenset(name for entry in entries for name in entry.names),
    )
    return with_parameters(opening, mapping, heading, contents)


def with_parameters(
    opening: Opening, mapping: Mapping[str, object], heading: Heading, contents: Contents
) -> ParametricModel:
    """Return the model of these contents: its domain, and the values of its parameters.

    Raises:  UnusedParameterError, ContradictionError, and the errors of values.
    """
    source, field = opening.formulas.source, opening.field
    definitions = (*opening.restated, *opening.abbreviations)
    used = contents.used.union(
        *(_names(condition) for condition in opening.conditions),
        *(names_in(definition.formula) for definition in definitions),
    )
    _refuse_unused(opening.declared, opening.restated, used, source)
    values = [*contents.entries, *(definition.value for definition in definitions)]
    domain, added = domain_of(field, opening.requirements, values, source, contents.key)
    parameters = tuple(p for p in opening.declared if p.name in field.parameters)
    elements = list(contents.entries)
    elements += [definition.value for definition in opening.abbreviations]
    elements += [condition.comparison.element for condition in opening.conditions]
    needed = frozenset(name for element in elements for name in field.names_in(element))
    stated = (*opening.requirements, *added)
    reading = ValueReading(parameters, opening.restated, stated, field, source, needed)
    return ParametricModel(
        name=heading.name,
        title=heading.title,
        states=contents.states,
        field=field,
        parameters=parameters,
        domain=domain,
        matrix=contents.matrix,
        initial=contents.initial,
        outputs=contents.outputs,
        conditions=opening.conditions,
        restated=opening.restated,
        abbreviations=opening.abbreviations,
        values=reading.own(),
        value_sets=reading.rows(mapping.get("values", ())),
        times=heading.times,
        time=heading.time,
        summary=heading.summary,
        reserved=contents.reserved,
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
