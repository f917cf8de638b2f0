"""A response at given values against the model solved anew in these numbers."""

from __future__ import annotations

from closedform.model.evaluation import at_values
from closedform.notation.plain import plain
from closedform.notation.terms import surd_formula
from closedform.response.parametric.numbers import NumbersAt
from closedform.response.parametric.response import ParametricResponse
from closedform.response.response import Response, respond
from closedform.response.sampling import sampled
from closedform.verification.record import Check
from closedform.verification.verify import verify

__all__ = ["numbers_check"]


def numbers_check(response: ParametricResponse, numbers: NumbersAt, *, digits: int) -> Check:
    """Hold the decimals of all states and outputs against a solution that has no parameters.

    The numeric engine solves and proves the model at these values.  `digits` are those of
    `numbers`; decimals that are correctly rounded are the same.

    Raises:  UnsettledError where the digits cannot be settled.
    """
    item = "the solution at the values of the model"
    solved = respond(at_values(response.model, dict(numbers.values)))
    record = verify(solved)
    for check in (*record.refuted, *record.left_open):
        return Check(item, check.outcome, f"solved in numbers: {check.item}: {check.how}")
    names = (*response.model.states, *(output.name for output in response.model.outputs))
    columns = _rows(solved, numbers, digits)
    for time, ours, theirs in zip(numbers.times, numbers.rows, columns, strict=True):
        for name, own, other in zip(names, ours, theirs, strict=True):
            if own != other:
                at = f"{response.model.time} = {plain(surd_formula(time))}"
                return Check(item, "refuted", f"{name} at {at} is {other}, not {own}")
    count = len(numbers.times) * len(names)
    how = f"{count} decimals agree with those of the model solved and proved in these numbers"
    return Check(item, "enclosed", how)


def _rows(solved: Response, numbers: NumbersAt, digits: int) -> list[list[str]]:
    rows = sampled(solved.state, numbers.times, digits)
    if solved.output is not None:
        outputs = sampled(solved.output, numbers.times, digits)
        rows = [states + more for states, more in zip(rows, outputs, strict=True)]
    return rows
