"""A model with parameters: what the user stated, over the field of rational functions."""

from __future__ import annotations

from dataclasses import dataclass
from typing import Literal

from closedform.algebra.domain import Comparison, ParameterDomain
from closedform.algebra.field import Scalar
from closedform.algebra.parameter_field import ParameterField
from closedform.algebra.surds import SurdSum
from closedform.notation.expression import Expression

__all__ = [
    "Assumption",
    "Condition",
    "Definition",
    "Parameter",
    "ParametricModel",
    "ParametricOutput",
    "ValueSet",
]

Assumption = Literal["positive", "nonnegative", "negative", "nonzero", "real"]


@dataclass(frozen=True, slots=True)
class Parameter:
    """A quantity that the model leaves open; `value` is one that it may be given at the end."""

    name: str
    assume: Assumption
    value: SurdSum | None = None
    unit: str = ""
    meaning: str = ""


@dataclass(frozen=True, slots=True)
class Condition:
    """A comparison as the user wrote it: `left` `relation` `right`, one of < <= > >= != =.

    `comparison` says the same of the field's parameters, against 0.
    """

    left: Expression
    relation: str
    right: Expression
    comparison: Comparison


@dataclass(frozen=True, slots=True)
class Definition:
    """A name for a formula in the parameters: `formula` as written, `value` in the field.

    It is either a parameter that is re-stated by others ([substitute]), with its unit and
    meaning, or an abbreviation of the user's for the results ([abbreviations]).  A formula
    may use re-stated parameters, that of an abbreviation also those before it.
    """

    name: str
    formula: Expression
    value: Scalar
    unit: str = ""
    meaning: str = ""


@dataclass(frozen=True, slots=True)
class ParametricOutput:
    """A named linear combination of the states; `weights` has one element per state."""

    name: str
    weights: tuple[Scalar, ...]


@dataclass(frozen=True, slots=True)
class ValueSet:
    """A row of the comparison table: a value for every parameter, by name."""

    label: str
    values: tuple[tuple[str, SurdSum], ...]


@dataclass(frozen=True, slots=True)
class ParametricModel:
    """The system x' = A x, x(0) = x0 over Q(parameters), with the values these may take.

    Shapes:  `matrix` is n rows of n entries, `initial` has n, n = len(states) >= 1.
    Units:   as the user states them; nothing is converted.
    Exact:   entries are elements of `field`, whose parameters are those in `parameters`.

    `parameters` are those in which the solution is stated, in the order of the file;
    `restated` are parameters of the file that [substitute] expresses by them, put in
    already.  `domain` holds the assumptions, then `conditions`, then that the denominators
    of entries and definitions are not zero, as far as that does not follow.  `values` is the
    value set of the file where every parameter has a value, `value_sets` the rows of
    [[values]].  `reserved` are names that are in use beside those of all these.
    """

    name: str
    title: str
    states: tuple[str, ...]
    field: ParameterField
    parameters: tuple[Parameter, ...]
    domain: ParameterDomain
    matrix: tuple[tuple[Scalar, ...], ...]
    initial: tuple[Scalar, ...]
    outputs: tuple[ParametricOutput, ...] = ()
    conditions: tuple[Condition, ...] = ()
    restated: tuple[Definition, ...] = ()
    abbreviations: tuple[Definition, ...] = ()
    values: ValueSet | None = None
    value_sets: tuple[ValueSet, ...] = ()
    times: tuple[SurdSum, ...] = ()
    time: str = "t"
    summary: str = ""
    reserved: tuple[str, ...] = ()

    @property
    def occurring(self) -> frozenset[str]:
        """The parameters on which anything hangs: [substitute] may have cancelled others."""
        elements = [e for row in self.matrix for e in row]
        elements += [*self.initial, *(w for output in self.outputs for w in output.weights)]
        elements += [definition.value for definition in self.abbreviations]
        elements += [condition.comparison.element for condition in self.conditions]
        return frozenset(name for e in elements for name in self.field.names_in(e))
