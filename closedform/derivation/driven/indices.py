"""What the parts of a solution with inputs that repeat are called: by indices."""

from __future__ import annotations

from closedform.derivation.driven.writing import Writing
from closedform.derivation.step import Side, Statement, Symbol
from closedform.response.driven.solution import DrivenSolution

__all__ = ["base_indices", "moves_apart", "repeated_indices", "whole_statement"]


def moves_apart(solution: DrivenSolution) -> bool:
    """Return whether anything but the inputs that repeat moves the states."""
    return any(interval.summands for interval in solution.functions.intervals)


def base_indices(solution: DrivenSolution) -> tuple[str, ...]:
    """Return the indices of the response apart from the inputs that repeat; none if it is all."""
    if not solution.periodic:
        return ()
    single = [given.signal for given in solution.model.inputs if given.signal.repeat is None]
    return ("other",) if any(s.bursts or s.impulses for s in single) else ("free",)


def repeated_indices(solution: DrivenSolution, place: int) -> tuple[str, ...]:
    """Return the indices of what the inputs of one period add; none if it is all there is."""
    if len(solution.periodic) > 1:
        return ("rep", str(place + 1))
    return ("rep",) if moves_apart(solution) else ()


def whole_statement(writing: Writing, solution: DrivenSolution) -> Statement | None:
    """State that the solution is the sum of its parts; None where there is one part only."""
    parts: list[Side] = []
    if moves_apart(solution):
        parts.append(writing.response(*base_indices(solution)))
    parts += [
        writing.response(*repeated_indices(solution, place))
        for place in range(len(solution.periodic))
    ]
    if len(parts) < 2:
        return None
    return Statement("whole", (writing.response(), Symbol("sum", parts=tuple(parts))))
