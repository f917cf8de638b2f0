"""From a driven response to the record of what was proved about it."""

from __future__ import annotations

from collections.abc import Iterator
from dataclasses import replace

from closedform.response.driven.response import DrivenResponse, DrivenSolution
from closedform.response.parametric.response import ParametricResponse
from closedform.verification.driven.declared import declared_check
from closedform.verification.driven.equations import balance_check, rows_check, state_form_check
from closedform.verification.driven.generated import generator_check, stacked_check
from closedform.verification.driven.joins import initial_check, join_check
from closedform.verification.driven.parts import (
    free_forced_check,
    intervals_check,
    jump_check,
    sustained_check,
    switch_check,
)
from closedform.verification.driven.periods import (
    blow_check,
    period_formula_check,
    period_settings,
)
from closedform.verification.driven.reduction import reduction_checks
from closedform.verification.driven.setting import Setting, setting_of
from closedform.verification.driven.typed import typed_check
from closedform.verification.driven.written import formula_check
from closedform.verification.parametric.record import CaseRecords
from closedform.verification.parametric.verify import verify_cases
from closedform.verification.record import Check, VerificationRecord
from closedform.verification.verify import verify

__all__ = ["verify_driven"]


def verify_driven(response: DrivenResponse) -> VerificationRecord | CaseRecords:
    """Return what can be said of a driven response, with parameters case by case.

    It has all that is said of the stacked response, then what is said of the driven solution:
    the equations as typed, the state form, initial values and joins, the parts, the inputs, and
    the formulas as they are written.
    """
    model, stacked = response.model, response.stacked
    if isinstance(stacked, ParametricResponse):
        records = verify_cases(stacked)
        cases = tuple(
            VerificationRecord(
                (
                    *record.checks,
                    *_checks(
                        response,
                        solution,
                        frozenset(
                            {
                                *stacked.model.field.parameters,
                                *(q.name for q in solution.case.quantities),
                            }
                            if solution.case is not None
                            else ()
                        ),
                    ),
                )
            )
            for record, solution in zip(records.cases, response.solutions, strict=True)
        )
        whole = VerificationRecord((*records.whole.checks, stacked_check(model)))
        return CaseRecords(whole, cases)
    (solution,) = response.solutions
    names = frozenset(c.name for c in stacked.closed_forms.constants)
    own = _checks(response, solution, names)
    return VerificationRecord((*verify(stacked).checks, stacked_check(model), *own))


def _checks(
    response: DrivenResponse, solution: DrivenSolution, names: frozenset[str]
) -> Iterator[Check]:
    setting = setting_of(response, solution)
    yield from _exact_checks(setting)
    yield formula_check(setting, names)
    for single, functions, written in period_settings(response, solution):
        for check in _exact_checks(single):
            yield replace(check, item=f"one period: {check.item}")
        yield blow_check(single, functions)
        yield period_formula_check(single, written, names)


def _exact_checks(setting: Setting) -> Iterator[Check]:
    yield intervals_check(setting)
    yield from declared_check(setting)
    yield from typed_check(setting)
    yield from reduction_checks(setting)
    if setting.model.balances:
        yield balance_check(setting)
    yield state_form_check(setting)
    yield from rows_check(setting)
    yield initial_check(setting)
    yield from join_check(setting)
    yield free_forced_check(setting)
    yield from switch_check(setting)
    if setting.solution.functions.sustained:
        yield sustained_check(setting)
        yield jump_check(setting)
    yield from generator_check(setting)
