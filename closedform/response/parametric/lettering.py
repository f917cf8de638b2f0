"""The names of a case, and the field that its formulas are written in."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass

from closedform.algebra.branches import Branch
from closedform.algebra.domain import Comparison, ParameterDomain
from closedform.algebra.equations import linear_solution
from closedform.algebra.exponential import ExponentialMatrix
from closedform.algebra.field import Scalar
from closedform.algebra.parameter_field import ParameterField
from closedform.algebra.regimes import Regime
from closedform.model.parametric import ParametricModel
from closedform.notation.expression import operations
from closedform.response.parametric.case import WrittenQuantity
from closedform.response.parametric.definitions import definition_formula
from closedform.response.parametric.modes import Mode, modes_of, quantities_of
from closedform.response.parametric.quantities import (
    Definition,
    Letters,
    Quantity,
    ResidueDefinition,
    RootDefinition,
    SquareRoot,
    SumOfRoots,
    Value,
)
from closedform.response.parametric.residues import with_residues
from closedform.response.parametric.rewriting import (
    Rewriting,
    rewriting_for,
)
from closedform.response.parametric.shortenings import (
    Shortening,
    rewritings_by_root,
    sound_rewritings,
    trade_shortenings,
    user_shortenings,
)

__all__ = ["Lettering", "lettering"]


@dataclass(frozen=True)
class Lettering:
    """The names of a case, and the field that its formulas are written in.

    `lifted` is the domain over that field.
    """

    modes: tuple[Mode, ...]
    shortenings: tuple[Shortening, ...]
    writing: ParameterField
    quantities: tuple[Quantity, ...]
    lifted: ParameterDomain

    def rewritings(self, field: ParameterField, below: frozenset[str]) -> tuple[Rewriting, ...]:
        """Return the sound ways to use abbreviations; `below` stand in denominators."""
        found = (
            r
            for s in self.shortenings
            for r in rewriting_for(self.writing, s.name, field.into(self.writing, s.value), s.power)
        )
        return sound_rewritings(self.lifted, found, below)

    def rewritings_by_root(
        self, field: ParameterField, below: frozenset[str]
    ) -> tuple[Rewriting, ...]:
        """Return the sound ways to use the names of roots in the place of parameters."""
        found = (r for q in self.quantities for r in rewritings_by_root(field, self.writing, q))
        return sound_rewritings(self.lifted, found, below)

    def left_out(
        self, field: ParameterField, domain: ParameterDomain, name: str | None
    ) -> dict[str, Scalar]:
        """Return what the equation of a double root puts in the place of a parameter."""
        if name is None:
            return {}
        return next(put for put in self.equations(field, domain) if name in put)

    def equations(self, field: ParameterField, domain: ParameterDomain) -> list[dict[str, Scalar]]:
        """Return the ways in which the equation D = 0 of a double root gives a parameter."""
        if not any(mode.regime.kind == "double" for mode in self.modes):
            return []
        return [
            {name: field.into(self.writing, solved)}
            for condition in domain.conditions
            if condition.relation == "="
            for name in field.parameters
            if (solved := linear_solution(field, condition.element, name)) is not None
            and domain.sign_of(_slope(field, condition.element, name)).never_zero
        ]

    def written(
        self, field: ParameterField, put: Sequence[Rewriting]
    ) -> tuple[WrittenQuantity, ...]:
        """Return the abbreviations that are put in, and the names of roots, with what they mean."""
        names = {r.name for r in put}
        return (
            *(
                WrittenQuantity(s.name, s.formula(field), None, s.origin)
                for s in self.shortenings
                if s.name in names
            ),
            *(_written_quantity(self.lifted, q, put) for q in self.quantities),
        )


def lettering(
    model: ParametricModel,
    branch: Branch,
    regimes: tuple[Regime, ...],
    domain: ParameterDomain,
    sought: Sequence[ExponentialMatrix | None],
) -> Lettering:
    """Return the names that a branch in one regime needs for the functions sought."""
    field, letters = model.field, Letters(_taken(model))
    modes = modes_of(field, branch.spectrum.factors, regimes, letters)
    modes = with_residues(field, modes, sought, letters)
    shortenings = (*user_shortenings(model, branch), *trade_shortenings(domain, modes, letters))
    writing = _writing_field(model, modes, shortenings)
    quantities = tuple(q for mode in modes for q in quantities_of(field, writing, mode))
    lifted = _lifted(field, writing, domain, quantities, shortenings)
    return Lettering(modes, shortenings, writing, quantities, lifted)


def _writing_field(
    model: ParametricModel, modes: Sequence[Mode], shortenings: Sequence[Shortening]
) -> ParameterField:
    """The parameters of A, then the names, then other parameters: the order of printing."""
    field = model.field
    entries = {n for row in model.matrix for e in row for n in field.names_in(e)}
    return ParameterField(
        parameters=(
            *(n for n in field.parameters if n in entries),
            *(name for mode in modes for name in mode.written_names),
            *(s.name for s in shortenings),
            *(n for n in field.parameters if n not in entries),
        )
    )


def _slope(field: ParameterField, element: Scalar, name: str) -> Scalar:
    """What a parameter is multiplied by where the element is zero."""
    return field.derivative(field.of_polynomial(element.numer), name)


def _taken(model: ParametricModel) -> set[str]:
    """Every name of the model: nothing else is given one that prints like it."""
    return {
        *model.states,
        *model.reserved,
        model.time,
        *(output.name for output in model.outputs),
        *(parameter.name for parameter in model.parameters),
        *(definition.name for definition in (*model.abbreviations, *model.restated)),
    }


def _lifted(
    field: ParameterField,
    writing: ParameterField,
    domain: ParameterDomain,
    quantities: Sequence[Quantity],
    shortenings: Sequence[Shortening],
) -> ParameterDomain:
    """The domain over the writing field, with the names that are known to be positive."""
    conditions = [Comparison(field.into(writing, c.element), c.relation) for c in domain.conditions]
    conditions += [Comparison(writing.symbol(q.name), ">") for q in quantities if q.positive]
    for shortening in shortenings:
        symbol, sign = writing.symbol(shortening.name), domain.sign_of(shortening.value).sign
        if sign == "positive":
            conditions.append(Comparison(symbol, ">"))
        elif sign in ("negative", "nonzero"):
            conditions.append(Comparison(symbol, "!="))
    return ParameterDomain(writing, tuple(conditions))


def _written_quantity(
    domain: ParameterDomain, quantity: Quantity, chosen: Sequence[Rewriting]
) -> WrittenQuantity:
    """Return a quantity with its definition in the shortest form that the abbreviations allow."""
    if isinstance(quantity.definition, RootDefinition | ResidueDefinition):
        return WrittenQuantity(quantity.name, None, quantity.definition, "roots")
    forms = [definition_formula(domain, quantity.definition)]
    forms += [
        definition_formula(domain, _rewritten(domain.field, quantity.definition, put))
        for put in (*([r] for r in chosen), chosen)
        if put
    ]
    formula = min((f for f in forms if f is not None), key=operations)
    return WrittenQuantity(quantity.name, formula, None, "roots")


def _rewritten(
    field: ParameterField, definition: Definition, rewritings: Sequence[Rewriting]
) -> Definition:
    def put(element: Scalar) -> Scalar:
        for r in rewritings:
            element = field.substituted(element, {r.parameter: r.replacement})
        return element

    match definition:
        case Value(value):
            return Value(put(value))
        case SquareRoot(square):
            return SquareRoot(put(square))
        case SumOfRoots(total, last, sign, rooted):
            return SumOfRoots(put(total), put(last), sign, rooted)
        case _:
            return definition
