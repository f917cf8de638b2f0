"""From a proved response to its derivation: which steps there are, and in which order."""

from __future__ import annotations

from collections.abc import Iterator

from closedform.derivation.abbreviations import abbreviations_step
from closedform.derivation.canonical_steps import canonical_steps
from closedform.derivation.formulas import letters_beside, names_of, root_of
from closedform.derivation.proof.statements import prove_statements
from closedform.derivation.resolvent_steps import resolvent_steps
from closedform.derivation.result_steps import (
    cautions_step,
    outputs_step,
    solution_step,
    transition_step,
    values_step,
    verification_step,
)
from closedform.derivation.spectrum_steps import (
    characteristic_polynomial_step,
    eigenvalues_step,
    model_step,
    named_roots_steps,
)
from closedform.derivation.step import Derivation, Step
from closedform.notation.expression import Expression, is_expression, names_in
from closedform.response.response import Response
from closedform.verification.record import VerificationRecord

__all__ = ["derive"]


def derive(response: Response, record: VerificationRecord, *, digits: int = 6) -> Derivation:
    """Return the derivation of a response that holds, with `digits` figures in its tables.

    Every statement and table in it is proved once more as it will be printed, and the
    derivation's last check says so.

    Raises:  ValueError if the record does not hold: nothing is derived from what is not proved;
             StatementRefutedError if a step states what does not hold;
             UnprovedError if it states what the proof does not settle.
    """
    if not record.holds:
        raise ValueError("only a response that was proved is derived")
    steps = tuple(_steps(response, digits))
    checks = (*record.checks, prove_statements(response, steps, digits))
    ends = (verification_step(checks, response.model.time), cautions_step())
    letters = letters_beside(names_of(response), root_of(response))
    return Derivation(response.model.title, (*steps, *ends), checks, letters)


def _steps(response: Response, digits: int) -> Iterator[Step]:
    forms = response.closed_forms
    yield model_step(response)
    yield characteristic_polynomial_step(response)
    yield eigenvalues_step(response, digits)
    yield from named_roots_steps(response, digits)
    shown: list[Step] = []
    if response.has_chains_in_print:
        shown += canonical_steps(response)
    else:
        shown += resolvent_steps(response)
    has_transition = bool(forms.transition) and not forms.names_amounts
    if has_transition:
        shown.append(
            transition_step(response, is_complex=any(step.kind == "real_form" for step in shown))
        )
    shown.append(solution_step(response, has_transition=has_transition))
    if response.model.outputs:
        shown.append(outputs_step(response))
    yield from shown
    names = frozenset(name for formula in _formulas(shown) for name in names_in(formula))
    abbreviations = abbreviations_step(response, names, digits)
    if abbreviations is not None:
        yield abbreviations
    yield values_step(response, digits)


def _formulas(steps: list[Step]) -> Iterator[Expression]:
    """The formulas that the steps print as results."""
    for step in steps:
        for statement in step.statements:
            for side in statement.sides:
                if is_expression(side):
                    yield side
