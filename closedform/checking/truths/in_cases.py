"""The truth about a model with parameters, case by case."""

from __future__ import annotations

from closedform.checking.truth import Truth
from closedform.checking.truths.formulas import (
    WHOLE,
    element_written,
    elements_written,
    pieces_of,
    polynomial_written,
    rows_written,
    with_derivatives,
)
from closedform.checking.truths.in_case import CaseTruth, InCase, cases_in_order
from closedform.checking.truths.limits import limit_of
from closedform.notation.written.tree import Written
from closedform.response.parametric.response import ParametricResponse
from closedform.response.response import LARGEST_WRITTEN_OUT

__all__ = ["truths_in_cases"]


def truths_in_cases(response: ParametricResponse) -> tuple[Truth, ...]:
    """Return the truth about each case of a response, which is proved."""
    return cases_in_order([_truth(InCase(response, case)) for case in response.cases])


def _truth(own: InCase) -> CaseTruth:
    response, case, field = own.response, own.case, own.field
    model = response.model
    outputs = tuple(output.name for output in model.outputs)
    formulas = zip((*model.states, *outputs), (*case.solution, *case.outputs), strict=True)
    functions = with_derivatives(
        {name: (formula,) for name, formula in formulas}, dict.fromkeys(model.states, 1), model.time
    )
    is_small = len(model.states) <= LARGEST_WRITTEN_OUT
    truth = CaseTruth(
        states=model.states,
        jets=tuple((state, 0) for state in model.states),
        time=model.time,
        start=WHOLE[0],
        parameters=own.names,
        matrix=elements_written(field, model.matrix),
        initial=tuple(element_written(field, value) for value in model.initial),
        characteristic=polynomial_written(field, response.matrix.charpoly()),
        eigenvalues=own.eigenvalues(response.matrix),
        transition=rows_written(case.transition) if is_small else None,
        solution=pieces_of(functions, [WHOLE]),
        outputs=outputs,
        steady=_steady(own, outputs),
    )
    return own.described(truth)


def _steady(own: InCase, outputs: tuple[str, ...]) -> dict[str, Written]:
    case, field = own.case, own.field
    found: dict[str, Written] = {}
    for names, function in ((own.response.model.states, case.state), (outputs, case.output)):
        if function is not None:
            limits = limit_of(field, case.branch.matrix, function, case.domain)
            pairs = zip(names, limits, strict=True) if limits is not None else ()
            found |= {name: element_written(field, limit) for name, limit in pairs}
    return found
