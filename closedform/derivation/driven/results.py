"""The steps from the exponential on that a driven solution has, in numbers or in one case."""

from __future__ import annotations

from collections.abc import Iterator

from closedform.derivation.driven.boundary_steps import conditions_step
from closedform.derivation.driven.closing_steps import (
    stability_step,
    steady_step,
    transient_step,
)
from closedform.derivation.driven.indices import moves_apart
from closedform.derivation.driven.join_steps import joins_step
from closedform.derivation.driven.period_substitution import period_substitution_steps
from closedform.derivation.driven.periodic_steps import periodic_steps
from closedform.derivation.driven.solution_steps import (
    driven_solution_step,
    jumps_step,
    particular_step,
    split_step,
)
from closedform.derivation.driven.substitution_steps import substitution_steps
from closedform.derivation.driven.writing import Writing
from closedform.derivation.step import Step
from closedform.response.driven.response import DrivenResponse
from closedform.response.driven.solution import DrivenSolution

__all__ = ["driven_steps"]


def driven_steps(
    response: DrivenResponse, solution: DrivenSolution, facts: dict[str, object]
) -> list[Step]:
    """Return the steps of one solution; what repeats is told apart from what does not."""
    return [step for step in _steps(response, solution, facts) if step is not None]


def _steps(
    response: DrivenResponse, solution: DrivenSolution, facts: dict[str, object]
) -> Iterator[Step | None]:
    writing = Writing(response.model)
    if not solution.periodic or moves_apart(solution):
        yield particular_step(writing, solution, facts)
        yield conditions_step(writing, solution, facts)
        yield jumps_step(writing, solution, facts)
        yield driven_solution_step(writing, solution, facts)
        if solution.points is None and not solution.periodic:
            yield split_step(writing, solution, facts)
    yield from periodic_steps(writing, solution, facts)
    if solution.points is None:  # else nothing is let go in time: both ends are given
        yield stability_step(writing, solution, facts)
    if not solution.periodic:
        yield steady_step(writing, solution, facts)
        yield transient_step(writing, solution, facts)
        yield from substitution_steps(response, solution, facts)
        yield joins_step(writing, solution, facts)
    yield from period_substitution_steps(writing, solution, facts)
