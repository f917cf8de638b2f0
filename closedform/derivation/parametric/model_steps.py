"""The steps that state the model, its parameters, and what is not covered."""

from __future__ import annotations

from closedform.algebra.branches import Branch, uncovered
from closedform.algebra.parameter_field import ParameterField
from closedform.derivation.formulas import A, column
from closedform.derivation.parametric.formulas import (
    as_given,
    compared,
    polynomial_formula,
)
from closedform.derivation.parametric.numbers_step import value_shown
from closedform.derivation.parametric.variables import variables_of
from closedform.derivation.step import Side, Statement, Step, Symbol
from closedform.model.parameters import assumed
from closedform.model.parametric import Definition, Parameter, ParametricOutput
from closedform.notation.expression import (
    ZERO,
    Expression,
    Name,
    number,
    operations,
    power_of,
    product,
)
from closedform.notation.rational_formula import rational_formula, weighted_rational
from closedform.notation.terms import opened, sum_of
from closedform.response.parametric.response import ParametricResponse

__all__ = [
    "characteristic_polynomial_step",
    "factored_polynomial",
    "model_step",
    "not_covered_step",
    "parameters_step",
]

REASONS = {
    "budget": "there are more branches than are solved",
    "several equations": "the condition is a product that falls apart into several cases",
    "two relations": "it would need two equations that no parameter can be taken from",
}
"""Why something is not covered, in words."""


def not_covered_step(response: ParametricResponse) -> Step | None:
    """Say which values of the parameters no case covers; None if there are none."""
    field = response.model.field
    rows = []
    for branch, exceptional in uncovered(response.branches):
        here = _cases_of(response, branch)
        equations = [
            Statement("definition of a branch", (rational_formula(field, e.polynomial), ZERO))
            for e in branch.equations
        ]
        left_out = tuple(rational_formula(field, p) for p in exceptional.polynomials)
        rows.append(
            {
                "equations": equations,
                "apart": Statement("apart", left_out),
                "vanishing": [Statement("left out", (p, ZERO)) for p in left_out],
                "reason": REASONS[exceptional.reason],
                "cases": here,
            }
        )
    return Step("not_covered", (), {"rows": rows}, depth="summary") if rows else None


def _cases_of(response: ParametricResponse, branch: Branch) -> tuple[int, ...]:
    return tuple(c.number for c in response.cases if c.branch.number == branch.number)


def model_step(response: ParametricResponse) -> Step:
    """State the model as the user gave it, re-stated parameters put in."""
    model, field = response.model, response.model.field
    t = Name(model.time)
    x = Symbol("vector", argument=t, letter="x")
    statements = [
        Statement("system", (Symbol("derivative", argument=t, letter="x"), (A, x))),
        Statement("matrix", (A, as_given(field, model.matrix))),
        Statement(
            "initial",
            (
                Symbol("vector", letter="x", argument=number(0)),
                Symbol("vector", letter="x", indices=("0",)),
                column([rational_formula(field, e) for e in model.initial]),
            ),
        ),
    ]
    statements += [
        Statement("output", (Name(o.name), _combination(field, o, model.states)))
        for o in model.outputs
    ]
    facts = {
        "title": model.title,
        "summary": model.summary,
        "states": model.states,
        "time": model.time,
        "n": len(model.states),
        "outputs": [output.name for output in model.outputs],
        "compact": True,
    }
    return Step("model", tuple(statements), facts, depth="summary")


def _combination(
    field: ParameterField, output: ParametricOutput, states: tuple[str, ...]
) -> Expression:
    terms = [
        weighted_rational(field, w, [Name(state)], [])
        for w, state in zip(output.weights, states, strict=True)
        if w
    ]
    return opened(sum_of(terms))


def parameters_step(response: ParametricResponse) -> Step | None:
    """Tabulate the parameters; give conditions, re-stated parameters and abbreviations.

    None for a model that has no parameters, but the number pi.
    """
    model, field = response.model, response.model.field
    restated = [Statement("restated", (Name(d.name), d.formula)) for d in model.restated]
    abbreviations = [
        Statement("abbreviation", (Name(d.name), d.formula)) for d in model.abbreviations
    ]
    conditions = [Statement("condition", (c.left, c.right), c.relation) for c in model.conditions]
    given = {c.comparison for c in model.conditions}
    of_parameters = {
        found[1]
        for p in model.parameters
        if (found := assumed(p.name, p.assume, field.symbol(p.name)))
    }
    others = [
        compared(field, c, "condition")
        for c in response.domain.conditions
        if c not in given and c not in of_parameters
    ]
    rows = [_row(field, p) for p in model.parameters]
    if not (rows or restated or conditions or abbreviations):
        return None
    facts = {
        "rows": rows,
        "units": any(row["unit"] for row in rows),
        "meanings": any(row["meaning"] for row in rows),
        "values": any(row["value"] is not None for row in rows),
        "further": others,
        "open": any(uncovered(response.branches)),
        "restated": [_told(d) for d in model.restated],
    }
    return Step("parameters", (*restated, *conditions, *abbreviations), facts, depth="summary")


def _row(field: ParameterField, parameter: Parameter) -> dict[str, object]:
    found = assumed(parameter.name, parameter.assume, field.symbol(parameter.name))
    return {
        "name": Name(parameter.name),
        "meaning": parameter.meaning,
        "unit": parameter.unit,
        "assumption": "real" if found is None else compared(field, found[1], "condition"),
        "value": None if parameter.value is None else value_shown(parameter.value),
    }


def _told(definition: Definition) -> dict[str, object]:
    return {
        "name": Name(definition.name),
        "meaning": definition.meaning,
        "unit": definition.unit,
    }


def characteristic_polynomial_step(response: ParametricResponse) -> Step:
    """det(lambda I - A) over the field of the parameters: in factors, and expanded if short."""
    field, spectrum = response.model.field, response.branches[0].spectrum
    root = variables_of(response).root
    expanded = polynomial_formula(field, spectrum.characteristic, root)
    factored = factored_polynomial(response, response.branches[0])
    sides: list[Side] = [
        Symbol("characteristic polynomial", argument=root),
        Symbol("determinant", argument=root, letter="A"),
    ]
    if factored == expanded or operations(expanded) <= SHORT:
        sides.append(expanded)
    if factored != expanded:
        sides.append(factored)
    statement = Statement("characteristic polynomial", tuple(sides))
    facts = {"degree": len(response.model.states), "brief": True}
    return Step("characteristic_polynomial", (statement,), facts, ("model",))


SHORT = 16
"""A polynomial with more operations than this is printed in factors only, if it has some."""


def factored_polynomial(response: ParametricResponse, branch: Branch) -> Expression:
    """Return the characteristic polynomial of a branch in its factors."""
    field, root = response.model.field, variables_of(response).root
    return product(
        power_of(polynomial_formula(field, f.polynomial, root), f.multiplicity)
        for f in branch.spectrum.factors
    )
