"""The derivation of a driven model with parameters: which steps, in which order."""

from __future__ import annotations

from collections.abc import Iterator, Sequence
from dataclasses import replace
from typing import Any

from flint import acb, ctx

from closedform.derivation.driven.alike import alike, printed, some
from closedform.derivation.driven.closing_steps import resonance_step
from closedform.derivation.driven.generator_steps import generator_step
from closedform.derivation.driven.model_steps import driven_model_step
from closedform.derivation.driven.proof.spot import Spot
from closedform.derivation.driven.proof.statements import Made, prove_driven_statements
from closedform.derivation.driven.renaming import of_the_stacked
from closedform.derivation.driven.results import driven_steps
from closedform.derivation.driven.solution_steps import (
    case_facts,
    driven_transition_step,
)
from closedform.derivation.driven.state_steps import state_form_step
from closedform.derivation.driven.values_steps import driven_numbers_step
from closedform.derivation.driven.verification_step import driven_cases_step
from closedform.derivation.driven.writing import Writing
from closedform.derivation.formulas import letters_beside
from closedform.derivation.parametric.case_steps import cases_step
from closedform.derivation.parametric.definitions import definitions_of
from closedform.derivation.parametric.eigenvalue_steps import definitions_step, eigenvalues_step
from closedform.derivation.parametric.exponential_steps import exponential_steps
from closedform.derivation.parametric.model_steps import (
    characteristic_polynomial_step,
    not_covered_step,
    parameters_step,
)
from closedform.derivation.parametric.proof.ground import Ground, defined_in
from closedform.derivation.parametric.proof.numbers import Given
from closedform.derivation.parametric.proof.statements import prove_case_statements
from closedform.derivation.parametric.result_steps import branch_step
from closedform.derivation.parametric.variables import names_of, variables_of
from closedform.derivation.proof.evaluation import ball_at
from closedform.derivation.result_steps import cautions_step
from closedform.derivation.step import Derivation, Matrix, Step
from closedform.notation.expression import operations
from closedform.response.driven.numbers import DrivenNumbersAt
from closedform.response.driven.response import DrivenResponse, DrivenSolution
from closedform.response.parametric.points import case_points
from closedform.response.parametric.quantities import Letters
from closedform.response.parametric.response import ParametricResponse
from closedform.verification.parametric.record import CaseRecords
from closedform.verification.record import Check, UnprovedError

__all__ = ["in_cases"]

POINTS = 2
_BITS = 256
LONGEST = 150
"""Operations in the matrices of a transform up to which they are printed at working."""
LARGE = 5
"""The number of rows from which on a transform is printed without its matrices."""


def in_cases(
    response: DrivenResponse,
    stacked: ParametricResponse,
    records: CaseRecords,
    digits: int,
    numbers: Sequence[DrivenNumbersAt],
) -> Derivation:
    """Return the derivation of a driven response with parameters."""
    model = response.model
    steps = tuple(_steps(response, stacked, records))
    in_numbers = driven_numbers_step(response, numbers, digits)
    steps = steps if in_numbers is None else (*steps, in_numbers)
    inner = [step for step in steps if step.kind in _OF_THE_MATRIX]
    own = [step for step in steps if step.kind not in _OF_THE_MATRIX]
    checks = (
        *records.whole.checks,
        _on_the_matrix(prove_case_statements(stacked, inner)),
        prove_driven_statements(
            model,
            own,
            _spots(response, stacked, inner),
            _sets(response, stacked, inner, in_numbers),
        ),
    )
    if model.generator is not None:
        kept = ("parameters", "not_covered")
        steps = tuple(
            of_the_stacked(s) if s.kind in _OF_THE_MATRIX and s.kind not in kept else s
            for s in steps
        )
    ends = (
        driven_cases_step(checks, records, stacked, hats=model.generator is not None),
        cautions_step(),
    )
    letters = letters_beside(Writing(model).names, variables_of(stacked).root)
    return Derivation(model.title, (*steps, *ends), checks, letters)


_OF_THE_MATRIX = frozenset(
    {
        "not_covered",
        "parameters",
        "characteristic_polynomial",
        "factors",
        "branch",
        "definitions",
        "cases",
        "shared_form",
        "transform",
    }
)
"""Steps that are those of any matrix with parameters, proved as such."""


def _on_the_matrix(check: Check) -> Check:
    return replace(check, item="statements on the matrix and its exponential")


def _steps(
    response: DrivenResponse, stacked: ParametricResponse, records: CaseRecords
) -> Iterator[Step]:
    writing = Writing(response.model)
    uncovered = not_covered_step(stacked)
    if uncovered is not None:
        yield uncovered
    yield driven_model_step(writing)
    parameters = parameters_step(stacked)
    for step in (parameters, state_form_step(writing), generator_step(writing)):
        if step is not None:
            yield step
    polynomial = characteristic_polynomial_step(stacked)
    yield replace(polynomial, facts={**polynomial.facts, "joint": True})
    letters = Letters(names_of(stacked))
    told: set[object] = set()
    for branch in stacked.branches:
        cases = [c for c in stacked.cases if c.branch.number == branch.number]
        if not cases:
            continue
        if branch.number == 0:
            eigenvalues = eigenvalues_step(stacked, letters)
            yield replace(eigenvalues, facts={**eigenvalues.facts, "brief": True, "joint": True})
        else:
            yield branch_step(stacked, branch, records)
        definitions = definitions_step(
            stacked, definitions_of(stacked, cases, told), branch=branch.number
        )
        if definitions is not None:
            yield definitions
        if branch.number == 0:
            cases_told = cases_step(stacked)
            yield replace(cases_told, facts={**cases_told.facts, "brief": True})
        solutions = [response.solutions[case.number] for case in cases]
        results = list(_results(response, solutions, len(stacked.cases)))
        if branch.number == 0:
            written = all(s.depth == "working" for s in results if s.kind == "driven_transition")
            for step in exponential_steps(stacked, cases, letters):
                shorter = _kernels_once(step)
                yield replace(shorter, depth="full") if written else shorter
        yield from results


def _results(
    response: DrivenResponse, solutions: Sequence[DrivenSolution], count: int
) -> Iterator[Step]:
    """The steps of the cases of one branch, those that read alike told once."""
    writing, alone = Writing(response.model), len(solutions) == 1
    told = [(s, case_facts(s, count, alone=alone)) for s in solutions]
    rows = [s.case.transition if s.case is not None else () for s in solutions]
    made = [
        [
            driven_transition_step(writing, own, facts, "resolvent")
            for own, (_, facts) in zip(rows, told, strict=True)
        ],
    ]
    found = [driven_steps(response, *pair) for pair in told]
    kinds = list(dict.fromkeys(step.kind for steps in found for step in steps))
    made += [printed([s for steps in found for s in steps if s.kind == kind]) for kind in kinds]
    if solutions[0].resonances and solutions[0].case is not None:
        yield from alike(some(resonance_step(writing, *pair) for pair in told), len(solutions))
    for steps in made:
        yield from alike(steps, len(solutions))


def _kernels_once(step: Step) -> Step:
    """The step with functions that are the same in all cases told once."""
    kernels: Any = step.facts.get("kernels")
    if step.kind != "transform":
        return step
    told = []
    for pair in kernels or ():
        first, *others = pair["rows"]
        same = all((r["even"], r["odd"]) == (first["even"], first["odd"]) for r in others)
        cases = tuple(number for row in pair["rows"] for number in row["cases"])
        rows = [{**first, "cases": cases, "conditions": ()}] if same else pair["rows"]
        told.append({**pair, "rows": rows})
    facts = {**step.facts, "kernels": told}
    if _size(step) > LONGEST:  # the matrices are printed as those of a larger model are
        facts["n"] = LARGE
    return replace(step, facts=facts)


def _size(step: Step) -> int:
    """The operations in the matrices of a step."""
    matrices = [side for s in step.statements for side in s.sides if isinstance(side, Matrix)]
    return sum(operations(entry) for m in matrices for row in m.rows for entry in row)


def _spots(
    response: DrivenResponse, stacked: ParametricResponse, inner: Sequence[Step]
) -> list[tuple[int, Made]]:
    definitions = tuple(defined_in(inner, len(stacked.cases)))
    found = []
    for case, solution in zip(stacked.cases, response.solutions, strict=True):
        count = POINTS if solution.points is None else 3 * POINTS
        points = case_points(stacked.model.field, case, count, seed=2)
        if not points:
            how = f"no point of case {case.number + 1} was found to put in"
            check = Check("statements of the derivation", "not attempted", how)
            raise UnprovedError(response.model.name, (check,))
        grounds = [Ground(stacked, case, point, definitions) for point in points]
        grounds = [g for g in grounds if _is_provided(solution, g)]
        grounds = ([g for g in grounds if _is_moderate(solution, g)] or grounds)[:POINTS]
        found.append((case.number, _maker(solution, grounds)))
    return found


def _is_provided(solution: DrivenSolution, ground: Ground) -> bool:
    """Whether nothing is zero at a point of what the solution divides by, as it is told."""
    points = solution.points
    if points is None or not points.provided:
        return True
    with ctx.workprec(_BITS):
        names = ground.afresh().names
        return not any(acb(ball_at(f, names)).contains(0) for f in points.provided)


def _is_moderate(solution: DrivenSolution, ground: Ground) -> bool:
    """Whether no number in the constants of a solution is extreme at a point."""
    points = solution.points
    if points is None:
        return True
    with ctx.workprec(_BITS):
        own = ground.afresh()
        return points.is_moderate(lambda e: own.element(e).real)


def _sets(
    response: DrivenResponse,
    stacked: ParametricResponse,
    inner: Sequence[Step],
    step: Step | None,
) -> list[Made]:
    """The sets of values that are put in, each as the point that it is."""
    definitions = tuple(defined_in(inner, len(stacked.cases)))
    rows: Any = [] if step is None else step.facts["sets"]
    found = []
    for row in rows:
        ground = Ground(stacked, stacked.cases[row["case"]], Given(row["values"]), definitions)
        found.append(_maker(response.solutions[row["case"]], [ground]))
    return found


def _maker(solution: DrivenSolution, grounds: Sequence[Ground]) -> Made:
    def make() -> tuple[Spot, ...]:
        fresh = [ground.afresh() for ground in grounds]
        return tuple(Spot(solution, ground.names, ground.element) for ground in fresh)

    return make
