"""A response at given values against the model solved anew in these numbers.

Numbers with pi in them are outside of the fields of the numeric engine; there the exponential
of the matrix is enclosed at every instant.
"""

from __future__ import annotations

from fractions import Fraction

from flint import acb_mat, arb, arb_mat, ctx

from closedform.algebra.enclosure import MOST_BITS, ball_of, decimal_order
from closedform.algebra.surds import SurdSum
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

_ZEROS = Fraction(1, 10**60)


def numbers_check(response: ParametricResponse, numbers: NumbersAt, *, digits: int) -> Check:
    """Hold the decimals of all states and outputs against a solution that has no parameters.

    The numeric engine solves and proves the model at these values, if these leave no pi in it.
    `digits` are those of `numbers`; decimals that are correctly rounded are the same.

    Raises:  UnsettledError where the digits cannot be settled.
    """
    item = "the solution at the values of the model"
    model, values = response.model, dict(numbers.values)
    stated = [e for row in model.matrix for e in row]
    stated += [*model.initial, *(w for output in model.outputs for w in output.weights)]
    if any(model.field.number_at(e, values) is None for e in stated):
        return _by_enclosure(item, response, numbers, digits)
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


def _by_enclosure(
    item: str, response: ParametricResponse, numbers: NumbersAt, digits: int
) -> Check:
    """Hold the decimals against balls for e^(At) x0, by the Taylor series of acb_mat."""
    model = response.model
    names = (*model.states, *(output.name for output in model.outputs))
    for time, row in zip(numbers.times, numbers.rows, strict=True):
        for place, (name, text) in enumerate(zip(names, row, strict=True)):
            fits = _fits(response, numbers, time, place, text, digits)
            if fits is not True:
                at = f"{model.time} = {plain(surd_formula(time))}"
                how = f"{name} at {at} is not {text}" + (
                    "" if fits is False else ", so far as seen"
                )
                return Check(item, "not attempted" if fits is None else "refuted", how)
    count = len(numbers.times) * len(names)
    how = f"{count} decimals agree with the exponential of A by ball arithmetic"
    return Check(item, "enclosed", how)


def _fits(
    response: ParametricResponse,
    numbers: NumbersAt,
    time: SurdSum,
    place: int,
    text: str,
    digits: int,
) -> bool | None:
    """Whether a decimal is a value rounded to its digits; None where balls do not tell.

    That a value is 0 is seen to `_ZEROS` places.
    """
    printed = Fraction(text)
    unit = Fraction(10) ** (decimal_order(abs(printed)) - digits + 1) if printed else _ZEROS
    bits = 64 + 4 * digits
    while bits <= MOST_BITS:
        with ctx.workprec(bits):
            apart = abs(_values_at(response, numbers, time)[place] - ball_of(printed))
            most = ball_of(unit * (Fraction(1, 2) + Fraction(1, 2**60)))
            if bool(apart < most):
                return True
            if bool(apart > most):
                return False
        bits *= 2
    return None


def _values_at(response: ParametricResponse, numbers: NumbersAt, time: SurdSum) -> list[arb]:
    """The states and the outputs at an instant, from the model's own elements."""
    model, field = response.model, response.model.field
    known = {name: ball_of(value) for name, value in numbers.values}
    rows = [[field.enclose_at(e, known) for e in row] for row in model.matrix]
    transition = acb_mat(arb_mat(rows) * ball_of(time)).exp()
    initial = [field.enclose_at(e, known) for e in model.initial]
    states = [
        sum((transition[i, k].real * x for k, x in enumerate(initial)), arb(0))
        for i in range(len(initial))
    ]
    outputs = [
        sum(
            (field.enclose_at(w, known) * x for w, x in zip(o.weights, states, strict=True)), arb(0)
        )
        for o in model.outputs
    ]
    return [*states, *outputs]


def _rows(solved: Response, numbers: NumbersAt, digits: int) -> list[list[str]]:
    rows = sampled(solved.state, numbers.times, digits)
    if solved.output is not None:
        outputs = sampled(solved.output, numbers.times, digits)
        rows = [states + more for states, more in zip(rows, outputs, strict=True)]
    return rows
