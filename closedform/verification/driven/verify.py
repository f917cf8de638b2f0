"""From a driven response to the record of what was proved about it."""

from __future__ import annotations

from collections.abc import Iterator
from dataclasses import replace

from closedform.response.driven.response import DrivenResponse, DrivenSolution
from closedform.response.parametric.response import ParametricResponse
from closedform.verification.driven.boundary import conditions_check
from closedform.verification.driven.declared import declared_check
from closedform.verification.driven.defined import defined_checks
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
from closedform.verification.driven.periodic import periodic_checks
from closedform.verification.driven.periods import (
    blow_check,
    period_formula_check,
    period_settings,
)
from closedform.verification.driven.points import point_check
from closedform.verification.driven.reduction import reduction_checks
from closedform.verification.driven.resonances import resonance_check
from closedform.verification.driven.setting import Setting, setting_of
from closedform.verification.driven.steady import (
    phasor_checks,
    stability_check,
    steady_checks,
)
from closedform.verification.driven.typed import typed_check
from closedform.verification.driven.whole import whole_check
from closedform.verification.driven.written import formula_check
from closedform.verification.parametric.record import CaseRecords
from closedform.verification.parametric.verify import verify_cases
from closedform.verification.record import Check, VerificationRecord
from closedform.verification.verify import verify

__all__ = ["driven_checks", "exact_checks", "verify_driven"]


def verify_driven(response: DrivenResponse) -> VerificationRecord | CaseRecords:
    """Return what can be said of a driven response, with parameters case by case.

    It has all that is said of the stacked response, then what is said of the driven solution:
    the equations as typed, the state form, initial values and joins, the parts, the inputs, and
    the formulas as they are written.
    """
    stacked, own = response.stacked, stacked_check(response.model)
    if isinstance(stacked, ParametricResponse):
        records = verify_cases(stacked)
        cases = tuple(
            VerificationRecord((*record.checks, *driven_checks(response, solution)))
            for record, solution in zip(records.cases, response.solutions, strict=True)
        )
        return CaseRecords(VerificationRecord((*records.whole.checks, own)), cases)
    (solution,) = response.solutions
    checks = (*verify(stacked).checks, own, *driven_checks(response, solution))
    return VerificationRecord(checks)


def driven_checks(response: DrivenResponse, solution: DrivenSolution) -> Iterator[Check]:
    """Yield the checks of the driven solution in one case, every one of them."""
    setting = setting_of(response, solution)
    repeats = [given.signal.repeat for given in response.model.inputs]
    yield from declared_check(
        setting, [k for k, r in enumerate(repeats) if r is None], setting.last + 1
    )
    yield from typed_check(setting)
    yield from reduction_checks(setting)
    yield from exact_checks(setting)
    yield stability_check(setting)
    yield resonance_check(replace(setting, model=response.model))  # inputs that repeat too
    yield from steady_checks(setting)
    yield from phasor_checks(setting)
    yield formula_check(setting)
    if isinstance(response.stacked, ParametricResponse):
        yield from defined_checks(response.stacked, setting)
    repeated = []
    for single, functions, written in period_settings(response, solution):
        places = [k for k, r in enumerate(repeats) if r == functions.repeat]
        own = (*declared_check(single, places, single.last), *exact_checks(single))
        for check in own:
            yield replace(check, item=f"one period: {check.item}")
        yield blow_check(single, functions)
        yield period_formula_check(single, written)
        yield from periodic_checks(single, written)
        repeated.append((single, written))
    if repeated and solution.has_one_formula:
        yield whole_check(setting, repeated)


def exact_checks(setting: Setting) -> Iterator[Check]:
    """Yield the checks of the exact functions, and of the state form that they solve."""
    yield intervals_check(setting)
    if setting.model.balances:
        yield balance_check(setting)
    yield state_form_check(setting)
    yield from rows_check(setting)
    yield from initial_check(setting)
    if setting.model.conditions:
        yield conditions_check(setting)
    yield from point_check(setting)
    yield from join_check(setting)
    yield free_forced_check(setting)
    yield from switch_check(setting)
    if setting.solution.functions.sustained:
        yield sustained_check(setting)
        yield jump_check(setting)
    yield from generator_check(setting)
