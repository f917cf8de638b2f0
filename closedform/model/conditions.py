"""The values that the parameters of a model may take: its assumptions and conditions."""

from __future__ import annotations

from collections.abc import Iterable, Sequence
from itertools import combinations
from typing import NamedTuple

from closedform.algebra.domain import Comparison, ParameterDomain
from closedform.algebra.field import Scalar
from closedform.algebra.parameter_field import ParameterField
from closedform.errors import Place
from closedform.model.entries import kind_of
from closedform.model.errors import WrongKindError
from closedform.model.formulas import Formulas
from closedform.model.parameter_errors import ContradictionError, SettledConditionError
from closedform.model.parameters import assumed
from closedform.model.parametric import Condition, Parameter
from closedform.model.source import Source
from closedform.model.statement import array_of
from closedform.notation.comparison import read_comparison
from closedform.notation.plain import plain
from closedform.notation.rational import difference
from closedform.notation.rational_formula import rational_formula

__all__ = ["Requirement", "conditions_of", "domain_of", "relation_holds", "requirements_of"]

MOST_MIXED = 5
"""Conditions on several parameters that are tried all at once; the work doubles with each."""


class Requirement(NamedTuple):
    """A comparison that must hold, in the user's words, with the key where it is stated."""

    text: str
    key: str
    comparison: Comparison


def conditions_of(value: object, formulas: Formulas) -> tuple[Condition, ...]:
    """Return the conditions of a model, from an array of comparisons.

    Raises:  WrongKindError, SettledConditionError for one that is decided without the
             parameters, and what `read_comparison` and `rational_value` raise.
    """
    expected = "an array of comparisons in quotation marks"
    given = array_of(value, expected, "conditions", formulas.source)
    return tuple(
        _condition(text, f"conditions[{k}]", formulas) for k, text in enumerate(given, start=1)
    )


def _condition(text: object, key: str, formulas: Formulas) -> Condition:
    if not isinstance(text, str):
        expected = "a comparison in quotation marks"
        raise WrongKindError(formulas.source.at(key), expected, kind_of(text))

    def work(place: Place) -> Condition:
        left, relation, right = read_comparison(text, names=formulas.names, place=place)
        bigger, smaller = (right, left) if relation.startswith("<") else (left, right)
        element = difference(bigger, smaller, formulas.field, place, meanings=formulas.meanings)
        comparison = _comparison(element, relation)
        sign = formulas.field.number_sign(element)
        if sign is not None:
            raise SettledConditionError(place, text, relation_holds(comparison, sign))
        return Condition(left, relation, right, comparison)

    return formulas.read(text, key, work)


def _comparison(element: Scalar, relation: str) -> Comparison:
    """Return the comparison with 0 of the difference, the side that is to be less taken off."""
    match relation:
        case "<" | ">":
            return Comparison(element, ">")
        case "<=" | ">=":
            return Comparison(element, ">=")
        case "!=":
            return Comparison(element, "!=")
        case _:
            return Comparison(element, "=")


def relation_holds(comparison: Comparison, sign: int) -> bool:
    """Say whether a comparison holds where its element has this sign, -1, 0 or 1."""
    match comparison.relation:
        case ">":
            return sign > 0
        case ">=":
            return sign >= 0
        case "!=":
            return sign != 0
        case "=":
            return sign == 0


def requirements_of(
    declared: Iterable[Parameter], conditions: Iterable[Condition], formulas: Formulas
) -> tuple[Requirement, ...]:
    """Return what the assumptions say of the parameters that remain, then the conditions.

    Raises:  SettledConditionError for an assumption of a parameter that is re-stated by a
             number for which it does not hold.
    """
    found = []
    for parameter in declared:
        restated = formulas.meanings.get(parameter.name)
        element = formulas.field.symbol(parameter.name) if restated is None else restated
        said = assumed(parameter.name, parameter.assume, element)
        if said is None:
            continue
        text, comparison = said
        sign = formulas.field.number_sign(comparison.element)
        if sign is None:
            found.append(Requirement(text, f"parameters.{parameter.name}.assume", comparison))
        elif not relation_holds(comparison, sign):
            place = formulas.source.at(f"substitute.{parameter.name}")
            raise SettledConditionError(place, text, holds=False)
    for k, condition in enumerate(conditions, start=1):
        text = f"{plain(condition.left)} {condition.relation} {plain(condition.right)}"
        found.append(Requirement(text, f"conditions[{k}]", condition.comparison))
    return tuple(found)


def domain_of(
    field: ParameterField,
    requirements: Sequence[Requirement],
    elements: Iterable[Scalar],
    source: Source,
    key: str = "matrix",
) -> tuple[ParameterDomain, tuple[Requirement, ...]]:
    """Return the domain that the requirements make, and those that `elements` add to them.

    The elements have to be defined everywhere in it: for each factor of a denominator of
    which that does not follow already, the domain says that it is not zero.  `key` is where
    the elements stand.

    Raises:  ContradictionError if no values can satisfy the requirements.
    """
    domain = ParameterDomain(field, tuple(r.comparison for r in requirements))
    added: list[Requirement] = []
    for factor in _factors_below(field, elements):
        comparison = Comparison(factor, "!=")
        if domain.implies(comparison):
            continue
        text = f"{plain(rational_formula(field, factor))} != 0"
        added.append(Requirement(text, key, comparison))
        domain = ParameterDomain(field, (*domain.conditions, comparison))
    _refuse_contradiction(field, (*requirements, *added), source)
    return domain, tuple(added)


def _factors_below(field: ParameterField, elements: Iterable[Scalar]) -> tuple[Scalar, ...]:
    """Return the irreducible factors of the denominators, each once."""
    found: dict[Scalar, None] = {}
    for element in elements:
        if field.constant(element) is None and element.denom != 1:
            below = field.of_polynomial(element.denom)
            factors = field.factored(below).factors
            found |= dict.fromkeys(field.of_polynomial(factor) for factor, _ in factors)
    return tuple(found)


def _refuse_contradiction(
    field: ParameterField, requirements: Sequence[Requirement], source: Source
) -> None:
    for group in _connected(field, requirements):
        if ParameterDomain(field, tuple(r.comparison for r in group)).sample(1, seed=0):
            continue  # a point where all hold is found sooner than no reason
        mixed = [r for r in group if len(field.names_in(r.comparison.element)) > 1]
        parts = [group] if len(mixed) <= MOST_MIXED else combinations(group, 2)
        for part in parts:
            contrary = ParameterDomain(field, tuple(r.comparison for r in part)).contradiction()
            if contrary is None:
                continue
            involved = [r for r in part if any(r.comparison is c for c in contrary)]
            place = source.at(involved[-1].key)
            if place.line is None:
                place = source.at_name(involved[-1].key)
            raise ContradictionError(place, tuple(dict.fromkeys(r.text for r in involved)))


def _connected(
    field: ParameterField, requirements: Sequence[Requirement]
) -> list[list[Requirement]]:
    """Return the requirements in groups that have no parameter in common.

    Requirements that contradict each other stand in one group, and the work grows with its
    size only.
    """
    groups: list[tuple[frozenset[str], list[int]]] = []
    for k, requirement in enumerate(requirements):
        names, members = field.names_in(requirement.comparison.element), [k]
        for group in [group for group in groups if group[0] & names]:
            groups.remove(group)
            names, members = names | group[0], [*group[1], *members]
        groups.append((names, sorted(members)))
    return [[requirements[k] for k in members] for members in sorted(m for _, m in groups)]
