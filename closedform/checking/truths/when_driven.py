"""The truth about a model by equations or with inputs."""

from __future__ import annotations

from dataclasses import replace

from closedform.algebra.spectrum import spectrum_of
from closedform.checking.truth import Truth
from closedform.checking.truths.eigenvalues import eigenvalues_in_numbers
from closedform.checking.truths.formulas import (
    element_written,
    elements_written,
    pieces_of,
    polynomial_written,
    rows_written,
    written_from,
)
from closedform.checking.truths.in_case import CaseTruth, InCase, cases_in_order
from closedform.checking.truths.in_numbers import named_quantities, values_of_open
from closedform.checking.truths.inputs import drives_of, inputs_of
from closedform.checking.truths.motion import Motion, labels_of
from closedform.notation.expression import Expression
from closedform.response.driven.response import DrivenResponse
from closedform.response.driven.solution import DrivenSolution
from closedform.response.names import constant_values
from closedform.response.parametric.response import ParametricResponse
from closedform.response.response import LARGEST_WRITTEN_OUT, Response, written_beside

__all__ = ["truths_when_driven"]

Rows = tuple[tuple[Expression, ...], ...]


def truths_when_driven(response: DrivenResponse) -> tuple[Truth, ...]:
    """Return the truth about each case of a driven response, which is proved; no input repeats.

    Eigenvalues, characteristic polynomial and e^(At) are those of the states alone, without
    what makes the inputs.
    """
    stacked = response.stacked
    if isinstance(stacked, ParametricResponse):
        pairs = zip(stacked.cases, response.solutions, strict=True)
        return cases_in_order(
            [_in_case(s, InCase(stacked, case, _constants(s))) for case, s in pairs]
        )
    (solution,) = response.solutions
    return (_in_numbers(solution, stacked),)


def _constants(solution: DrivenSolution) -> tuple[tuple[str, Expression], ...]:
    """What conditions at points determine, as far as formulas have a name for it."""
    points = solution.points
    if points is None:
        return ()
    return tuple((c.name, c.formula) for c in points.constants if not c.put_in)


def _in_case(solution: DrivenSolution, own: InCase) -> CaseTruth:
    truth = replace(
        _plain(solution, own.case.transition),
        parameters=own.names,
        eigenvalues=own.eigenvalues(solution.model.reduction.matrix),
    )
    return own.described(truth)


def _in_numbers(solution: DrivenSolution, stacked: Response) -> Truth:
    model, forms = solution.model, stacked.closed_forms
    constants, field = forms.constants, model.field
    factors = spectrum_of(field, model.reduction.matrix).factors
    modes = {
        factor.p: own for factor, own in zip(stacked.spectrum.factors, forms.modes, strict=True)
    }
    further = ((name, written_from(formula)) for name, formula in _constants(solution))
    return replace(
        _plain(solution, forms.transition or _beside(stacked, len(model.names))),
        eigenvalues=tuple(
            eigenvalues_in_numbers(
                factors,
                [modes[factor.p] for factor in factors],
                constants,
                lambda: constant_values(constants),
            )
        ),
        quantities=(*named_quantities(constants), *further),
        enclosures=lambda: values_of_open(constants),
    )


def _beside(stacked: Response, n: int) -> Rows:
    """The first n rows and columns of the exponential of a stacked matrix, if names suffice."""
    if n > LARGEST_WRITTEN_OUT:
        return ()
    field, size = stacked.field, range(stacked.matrix.shape[0])
    top = field.matrix([[field.scalar(int(i == k)) for k in size] for i in range(n)])
    block = stacked.exponential.after(top).times(top.transpose())
    return written_beside(stacked, block) or ()


def _plain(solution: DrivenSolution, transition: Rows) -> CaseTruth:
    """What is true of a solution, but for what has to do with parameters and eigenvalues."""
    model, motion = solution.model, Motion(solution)
    field, n = model.field, len(model.names)
    reduction = model.reduction
    spans = motion.spans
    written = n <= LARGEST_WRITTEN_OUT and transition
    drives = dict(zip(labels_of(model), drives_of(model), strict=False))
    return CaseTruth(
        states=labels_of(model)[:n],
        jets=tuple((jet.name, jet.order) for jet in reduction.jets),
        time=model.time,
        start=spans[0][0],
        parameters=(),
        matrix=elements_written(field, reduction.matrix.to_list()),
        initial=None
        if model.initial is None
        else tuple(element_written(field, value) for value in model.initial),
        characteristic=polynomial_written(field, reduction.matrix.charpoly()),
        eigenvalues=(),
        transition=rows_written(row[:n] for row in transition[:n]) if written else None,
        solution=motion.pieces(),
        outputs=tuple(output.name for output in model.outputs),
        drive=tuple(pieces_of(drives, spans).values()),
        particular=motion.particular(),
        steady=motion.steady(),
        inputs=pieces_of(inputs_of(model), spans),
    )
