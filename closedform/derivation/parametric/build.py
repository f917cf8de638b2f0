"""From a proved response with parameters to its derivation: which steps, in which order."""

from __future__ import annotations

from collections.abc import Iterator, Sequence

from closedform.derivation.formulas import letters_beside
from closedform.derivation.parametric.case_steps import cases_step
from closedform.derivation.parametric.definitions import definitions_of
from closedform.derivation.parametric.eigenvalue_steps import definitions_step, eigenvalues_step
from closedform.derivation.parametric.exponential_steps import exponential_steps, transition_step
from closedform.derivation.parametric.model_steps import (
    characteristic_polynomial_step,
    model_step,
    not_covered_step,
    parameters_step,
)
from closedform.derivation.parametric.numbers_step import numbers_step
from closedform.derivation.parametric.proof.statements import prove_case_statements
from closedform.derivation.parametric.result_steps import (
    branch_step,
    case_solution_step,
)
from closedform.derivation.parametric.variables import names_of, variables_of
from closedform.derivation.parametric.verification_step import verification_step
from closedform.derivation.result_steps import cautions_step
from closedform.derivation.step import Derivation, Step
from closedform.response.parametric.numbers import NumbersAt
from closedform.response.parametric.quantities import Letters
from closedform.response.parametric.response import ParametricResponse
from closedform.verification.parametric.record import CaseRecords

__all__ = ["derive_cases"]


def derive_cases(
    response: ParametricResponse,
    records: CaseRecords,
    *,
    digits: int = 6,
    numbers: Sequence[NumbersAt] | None = None,
) -> Derivation:
    """Return the derivation of a response with parameters whose records hold.

    `numbers` are the results at the values that the model gives, if it gives any, with
    `digits` significant digits.  Every statement in it is proved once more as it will be
    printed, at points of the cases it is made for, and the last check about the whole says so.

    Raises:  ValueError if the records do not hold: nothing is derived from what is not proved;
             StatementRefutedError if a step states what does not hold;
             UnprovedError if it states what the proof does not settle.
    """
    if not records.holds:
        raise ValueError("only a response that was proved is derived")
    steps = tuple(_steps(response, records, numbers or (), digits))
    checks = (*records.whole.checks, prove_case_statements(response, steps))
    ends = (verification_step(checks, records, response), cautions_step())
    letters = letters_beside(names_of(response), variables_of(response).root)
    return Derivation(response.model.title, (*steps, *ends), checks, letters)


def _steps(
    response: ParametricResponse,
    records: CaseRecords,
    numbers: Sequence[NumbersAt],
    digits: int,
) -> Iterator[Step]:
    uncovered = not_covered_step(response)
    if uncovered is not None:
        yield uncovered
    yield model_step(response)
    parameters = parameters_step(response)
    if parameters is not None:
        yield parameters
    yield characteristic_polynomial_step(response)
    letters = Letters(names_of(response))
    told: set[object] = set()
    for branch in response.branches:
        cases = [c for c in response.cases if c.branch.number == branch.number]
        if not cases:
            continue
        if branch.number == 0:
            yield eigenvalues_step(response, letters)
        else:
            yield branch_step(response, branch, records)
        definitions = definitions_step(
            response,
            definitions_of(response, cases, told, digits=digits),
            branch=branch.number,
        )
        if definitions is not None:
            yield definitions
        shared = False
        if branch.number == 0:
            if response.model.field.free:
                yield cases_step(response)
            made = list(exponential_steps(response, cases, letters))
            shared = any(step.kind == "shared_form" for step in made)
            yield from made
        for case in cases:
            yield transition_step(response, case, shared=shared)
        for case in cases:
            yield case_solution_step(response, case)
    in_numbers = numbers_step(response, numbers, digits)
    if in_numbers is not None:
        yield in_numbers
