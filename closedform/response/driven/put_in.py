"""A driven solution with values in the place of its parameters."""

from __future__ import annotations

from collections.abc import Iterable, Mapping
from dataclasses import replace

from closedform.algebra.field import Scalar
from closedform.algebra.surds import SurdSum
from closedform.response.driven.in_field import InField, in_field
from closedform.response.driven.solution import DrivenSolution
from closedform.response.parametric.known import Known

__all__ = ["put_in", "with_constants"]


def put_in(
    solution: DrivenSolution,
    values: Mapping[str, SurdSum] | None = None,
    times: Iterable[SurdSum] = (),
) -> InField:
    """Return a solution over the field of its numbers; see `in_field`."""
    return in_field(
        solution.model.field,
        solution.functions,
        solution.periods,
        values=values,
        times=times,
        fixed=_fixed(solution),
    )


def with_constants(solution: DrivenSolution, known: Known) -> Known:
    """Return what is known with the constants that conditions at points determine."""
    if solution.points is None:
        return known
    own = {c.name: c.formula for c in solution.points.constants if not c.put_in}
    return replace(known, definitions={**known.definitions, **own})


def _fixed(solution: DrivenSolution) -> list[tuple[Scalar, int, Scalar]]:
    """What the conditions at points say of one row where nothing jumps."""
    model, found = solution.model, []
    struck = {impulse.at for given in model.inputs for impulse in given.signal.impulses}
    for condition in model.conditions:
        rows = [row for row, weight in enumerate(condition.of_states) if weight]
        if len(rows) == 1 and condition.at not in struck:
            value = condition.value / condition.of_states[rows[0]]
            found.append((solution.put(condition.at), rows[0], solution.put(value)))
    return found
