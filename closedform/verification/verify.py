"""From a response to the record of what was proved about it."""

from __future__ import annotations

from closedform.response.response import Response
from closedform.verification.chains import chain_check, inverse_check, routes_check
from closedform.verification.eigenvalues import NamedValues, eigenvalue_check, name_check
from closedform.verification.enclosures import (
    References,
    ball_check,
    determinant_ball_check,
    trial_times,
)
from closedform.verification.identities import (
    characteristic_polynomial_check,
    determinant_check,
    differential_equation_check,
    initial_value_check,
    model_check,
    output_check,
    state_check,
)
from closedform.verification.record import Check, VerificationRecord
from closedform.verification.second_opinion import mpmath_check
from closedform.verification.written import formula_check, impulse_check

__all__ = ["prove", "verify"]


def prove(response: Response) -> tuple[Check, ...]:
    """Return the exact part of the record: every identity, by arithmetic in fields."""
    a, n = response.matrix, response.matrix.shape[0]
    return (
        model_check(response),
        characteristic_polynomial_check(response),
        differential_equation_check("d/dt e^(At) - A e^(At) = 0", response.exponential, a),
        initial_value_check("e^(A0) = I", response.exponential, response.field.identity(n)),
        differential_equation_check("x' - A x = 0", response.state, a),
        initial_value_check("x(0) = x0", response.state, response.initial),
        state_check(response),
        *([output_check(response)] if response.model.outputs or response.output else []),
        chain_check(response),
        *([inverse_check(response)] if response.has_chains_in_print else []),
        routes_check(response),
        determinant_check(response),
    )


def verify(response: Response) -> VerificationRecord:
    """Return what can be said of a response: exact identities, then certified comparisons.

    Every check is made, whatever came of the others.  `holds` of the record says that none
    was refuted and none that is essential left open; each check names its identity, the
    outcome, and how it was found.
    """
    times = trial_times(response)
    references = References(response, times)
    values = NamedValues(response.closed_forms.constants)
    return VerificationRecord(
        (
            *prove(response),
            ball_check(response, references),
            eigenvalue_check(response, values),
            *([name_check(response)] if values.of_roots else []),
            *(
                [impulse_check(response, times, values)]
                if any(response.closed_forms.impulses)
                else []
            ),
            formula_check(response, references, values),
            determinant_ball_check(response, times),
            mpmath_check(response, times),
        )
    )
