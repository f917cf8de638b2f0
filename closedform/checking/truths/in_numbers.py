"""The truth about a model in numbers: x' = A x, x(0) = x0."""

from __future__ import annotations

from collections.abc import Mapping

from flint import arb

from closedform.checking.truth import Truth
from closedform.checking.truths.eigenvalues import eigenvalues_in_numbers, formula_of
from closedform.checking.truths.formulas import (
    WHOLE,
    element_written,
    elements_written,
    number_written,
    pieces_of,
    polynomial_written,
    rows_written,
    with_derivatives,
    written_from,
)
from closedform.checking.truths.limits import limit_of
from closedform.notation.written.tree import Written
from closedform.response.names import NamedConstant, constant_values
from closedform.response.response import Response

__all__ = ["named_quantities", "truth_in_numbers", "values_of_open"]


def truth_in_numbers(response: Response) -> Truth:
    """Return the truth about a model in numbers, from its response, which is proved."""
    model, field, forms = response.model, response.field, response.closed_forms
    names = (*model.states, *(output.name for output in model.outputs))
    formulas = zip(names, (*forms.solution, *forms.outputs), strict=True)
    functions = with_derivatives(
        {name: (formula,) for name, formula in formulas}, dict.fromkeys(model.states, 1), model.time
    )
    constants = forms.constants
    return Truth(
        states=model.states,
        jets=tuple((state, 0) for state in model.states),
        time=model.time,
        start=WHOLE[0],
        parameters=(),
        matrix=elements_written(field, response.matrix.to_list()),
        initial=tuple(map(number_written, model.initial)),
        characteristic=polynomial_written(field, response.spectrum.characteristic),
        eigenvalues=tuple(
            eigenvalues_in_numbers(
                response.spectrum.factors,
                forms.modes,
                constants,
                lambda: constant_values(constants),
            )
        ),
        transition=rows_written(forms.transition) or None,
        solution=pieces_of(functions, [WHOLE]),
        outputs=tuple(output.name for output in model.outputs),
        steady=_steady(response),
        quantities=named_quantities(constants),
        enclosures=lambda: values_of_open(constants),
    )


def named_quantities(
    constants: tuple[NamedConstant, ...],
) -> tuple[tuple[str, Written | None], ...]:
    """Return named constants with their formulas, None for a root that has none."""
    formulas = ((c.name, formula_of(c)) for c in constants)
    return tuple((name, None if f is None else written_from(f)) for name, f in formulas)


def values_of_open(constants: tuple[NamedConstant, ...]) -> Mapping[str, arb]:
    """Return balls for the named constants that have no formula."""
    return constant_values(tuple(c for c in constants if formula_of(c) is None))


def _steady(response: Response) -> dict[str, Written]:
    model, field, matrix = response.model, response.field, response.matrix
    found: dict[str, Written] = {}
    for names, function in (
        (model.states, response.state),
        (tuple(output.name for output in model.outputs), response.output),
    ):
        limits = None if function is None else limit_of(field, matrix, function)
        found |= {
            name: element_written(field, limit)
            for name, limit in zip(names, limits or (), strict=limits is not None)
        }
    return found
