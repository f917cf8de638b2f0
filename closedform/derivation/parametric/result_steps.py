"""The steps that state the solution in each case, the further branches, and what was proved."""

from __future__ import annotations

from collections.abc import Sequence

from closedform.algebra.branches import Branch
from closedform.algebra.parameter_field import ParameterField
from closedform.derivation.formulas import A
from closedform.derivation.parametric.case_steps import case_conditions_of
from closedform.derivation.parametric.formulas import as_given
from closedform.derivation.parametric.model_steps import factored_polynomial
from closedform.derivation.parametric.spectrum import eigenvalues_of
from closedform.derivation.parametric.variables import variables_of
from closedform.derivation.step import Statement, Step, Symbol
from closedform.notation.expression import Name
from closedform.response.parametric.case import Case
from closedform.response.parametric.response import ParametricResponse
from closedform.response.response import LARGEST_WRITTEN_OUT
from closedform.verification.parametric.record import CaseRecords
from closedform.verification.record import Check

__all__ = ["branch_step", "case_solution_step"]

MATRIX_UP_TO = 5
LIMIT = "limit of the neighbouring case"


def case_solution_step(response: ParametricResponse, case: Case) -> Step:
    """State x(t) and the outputs in one case."""
    model = response.model
    t = Name(model.time)
    shown = len(model.states)
    if shown > LARGEST_WRITTEN_OUT:
        shown = 0 if model.outputs else LARGEST_WRITTEN_OUT
    statements = [
        Statement("solution of state", (Symbol("scalar", letter=state, argument=t), formula))
        for state, formula in zip(model.states[:shown], case.solution, strict=False)
    ]
    statements += [
        Statement("output", (Symbol("scalar", letter=output.name, argument=t), formula))
        for output, formula in zip(model.outputs, case.outputs, strict=True)
    ]
    facts = {
        "number": case.number + 1,
        "cases": (case.number,),
        "only": len(response.cases) == 1,
        "conditions": case_conditions_of(case),
        "generic": case.branch.number == 0,
        "alone": sum(c.branch.number == case.branch.number for c in response.cases) == 1,
        "shown": shown,
        "n": len(model.states),
    }
    rests_on = ("transition",) if case.branch.number == 0 else ()
    return Step("case_solution", tuple(statements), facts, rests_on, depth="summary")


def branch_step(response: ParametricResponse, branch: Branch, records: CaseRecords) -> Step:
    """Say what a branch's equations change: in A, in the polynomial, in the eigenvalues."""
    field = response.model.field
    cases = [c for c in response.cases if c.branch.number == branch.number]
    statements = []
    if branch.relation is None and len(response.model.states) <= MATRIX_UP_TO:
        rows = as_given(field, branch.matrix.to_list())
        if rows != as_given(field, response.matrix.to_list()):
            statements.append(Statement("branch matrix", (A, rows)))
    if branch.relation is None:
        statements.append(
            Statement(
                "branch polynomial",
                (
                    Symbol("characteristic polynomial", argument=variables_of(response).root),
                    factored_polynomial(response, branch),
                ),
            )
        )
    joined = [
        c.number + 1
        for c in cases
        if any(check.item == LIMIT and check.outcome == "enclosed" for check in _of(records, c))
    ]
    facts = {
        "cases": tuple(c.number for c in cases),
        "number": branch.number,
        "numbers": [c.number + 1 for c in cases],
        "equations": _equations(cases),
        "repeated": _repeated(field, cases),
        "limit": len(joined) == len(cases) > 0,
    }
    return Step("branch", tuple(statements), facts)


def _of(records: CaseRecords, case: Case) -> tuple[Check, ...]:
    return records.cases[case.number].checks


def _equations(cases: Sequence[Case]) -> tuple[Statement, ...]:
    """The conditions that all cases of the branch share."""
    if not cases:
        return ()
    shared = [
        s for s in case_conditions_of(cases[0]) if all(s in case_conditions_of(c) for c in cases)
    ]
    return tuple(shared)


def _repeated(field: ParameterField, cases: Sequence[Case]) -> list[dict[str, object]]:
    """The eigenvalues that are repeated, alike in all cases of a branch."""
    if len(cases) != 1:
        return []
    return [
        {
            "value": Statement("zero", (e.value,)),
            "multiplicity": e.multiplicity,
            "index": e.index,
        }
        for e in eigenvalues_of(field, cases[0])
        if e.multiplicity > 1
    ]
