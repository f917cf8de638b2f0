"""The derivation of a driven model without parameters: which steps, in which order."""

from __future__ import annotations

from collections.abc import Iterator, Sequence
from dataclasses import replace
from typing import Any

from flint import acb

from closedform.derivation.abbreviations import abbreviations_step
from closedform.derivation.canonical_steps import canonical_steps
from closedform.derivation.driven.closing_steps import resonance_step
from closedform.derivation.driven.generator_steps import generator_step
from closedform.derivation.driven.model_steps import driven_model_step
from closedform.derivation.driven.proof.spot import Spot
from closedform.derivation.driven.proof.statements import prove_driven_statements
from closedform.derivation.driven.renaming import of_the_stacked
from closedform.derivation.driven.results import driven_steps
from closedform.derivation.driven.solution_steps import (
    case_facts,
    driven_transition_step,
)
from closedform.derivation.driven.state_steps import state_form_step
from closedform.derivation.driven.values_steps import driven_values_step
from closedform.derivation.driven.verification_step import driven_verification_step
from closedform.derivation.driven.writing import Writing, calls_in
from closedform.derivation.formulas import letters_beside
from closedform.derivation.parametric.proof.ground import said_in
from closedform.derivation.proof.evaluation import expressions_in
from closedform.derivation.proof.statements import prove_statements
from closedform.derivation.resolvent_steps import resolvent_steps
from closedform.derivation.result_steps import cautions_step
from closedform.derivation.spectrum_steps import (
    characteristic_polynomial_step,
    eigenvalues_step,
    named_roots_steps,
)
from closedform.derivation.step import Derivation, Step
from closedform.notation.expression import names_in
from closedform.response.driven.response import DrivenResponse
from closedform.response.names import constant_values
from closedform.response.response import Response
from closedform.verification.record import Check, VerificationRecord

__all__ = ["in_numbers", "names_printed"]

AT_SIGHT = 2
"""Up to this many rows the exponential can be checked as it stands, without P and J."""


def in_numbers(
    response: DrivenResponse, stacked: Response, record: VerificationRecord, digits: int
) -> Derivation:
    """Return the derivation of a driven response without parameters."""
    model = response.model
    writing = Writing(model)
    (solution,) = response.solutions
    facts = case_facts(solution, 1)
    opening = [driven_model_step(writing), state_form_step(writing), generator_step(writing)]
    resonance = resonance_step(writing, solution, facts)
    inner = list(_of_the_matrix(stacked, digits))
    results: list[Step] = []
    forms = stacked.closed_forms
    if forms.transition and not forms.names_amounts:
        route = "form" if stacked.has_chains_in_print else "resolvent"
        results.append(driven_transition_step(writing, forms.transition, facts, route))
    results += driven_steps(response, solution, facts)
    abbreviations = abbreviations_step(stacked, names_printed([*inner, *results]), digits)
    inner += [] if abbreviations is None else [abbreviations]
    values = driven_values_step(writing, solution, facts, digits)
    own = [step for step in (*opening, resonance, *results, values) if step is not None]

    def spots() -> tuple[Spot, ...]:
        balls = constant_values(forms.constants)
        known = {name: acb(ball) for name, ball in balls.items()}
        return (Spot(solution, known, lambda e: acb(stacked.field.enclose(e))),)

    checks = (
        *record.checks,
        _on_the_matrix(prove_statements(stacked, inner, digits)),
        prove_driven_statements(model, own, [(0, spots)]),
    )
    if model.generator is not None:
        inner = [of_the_stacked(step) for step in inner]
    first = [step for step in opening if step is not None]
    last = inner[-1:] if abbreviations is not None else []
    middle = inner[:-1] if abbreviations is not None else inner
    if resonance is not None:
        middle = [*middle[:2], resonance, *middle[2:]]
    ends = (
        driven_verification_step(checks, model.time, hats=model.generator is not None),
        cautions_step(),
    )
    steps = (*first, *middle, *results, *last, values, *ends)
    return Derivation(model.title, steps, checks, letters_beside(writing.names, writing.root))


def names_printed(steps: Sequence[Step]) -> frozenset[str]:
    """Return every name in a formula of the steps."""
    return frozenset(
        name
        for step in steps
        for said in said_in(step, 1)
        for side in said.statement.sides
        for formula in expressions_in(side)
        for name in names_in(formula)
    )


def _is_plain(eigenvalues: Step) -> bool:
    """Whether the eigenvalues are rational and simple, so that a table tells nothing more."""
    rows: Any = eigenvalues.facts["rows"]
    simple = all(row["multiplicity"] == 1 for row in rows)
    formulas = [
        formula
        for s in eigenvalues.statements
        for side in s.sides
        for formula in expressions_in(side)
    ]
    rational = not any(calls_in(formula) or names_in(formula) for formula in formulas)
    return simple and rational and len(eigenvalues.statements) == len(rows)


def _on_the_matrix(check: Check) -> Check:
    return replace(check, item="statements on the matrix and its exponential")


def _of_the_matrix(response: Response, digits: int) -> Iterator[Step]:
    """From the characteristic polynomial to e^(At), of any matrix."""
    polynomial = characteristic_polynomial_step(response)
    yield replace(polynomial, facts={**polynomial.facts, "brief": True, "joint": True})
    eigenvalues = eigenvalues_step(response, digits)
    told = {**eigenvalues.facts, "brief": True, "joint": True, "plain": _is_plain(eigenvalues)}
    yield replace(eigenvalues, facts=told)
    yield from named_roots_steps(response, digits)
    if response.has_chains_in_print:
        small = len(response.model.states) <= AT_SIGHT
        for step in canonical_steps(response):
            detail = small or step.kind in ("eigenvectors", "exponential_of_form")
            yield replace(step, depth="full") if detail else step
    else:
        yield from resolvent_steps(response)
