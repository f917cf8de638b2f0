"""What each term of an equation is along a driven solution, written with the solution's names."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass

from closedform.algebra.exponential import ExponentialMatrix, ModalTerm
from closedform.algebra.field import Scalar
from closedform.model.driven.model import DrivenModel, Jet
from closedform.notation.expression import Expression
from closedform.response.driven.composition import interval_formula
from closedform.response.driven.functions import Interval
from closedform.response.driven.response import DrivenResponse, DrivenSolution
from closedform.response.parametric.response import ParametricResponse
from closedform.response.parametric.writing import written_beside_case
from closedform.response.response import written_beside

__all__ = ["BalanceTerm", "balance_terms", "derived"]

Weighted = Sequence[tuple[Jet, Scalar]]


@dataclass(frozen=True)
class BalanceTerm:
    """weight · jet, and what it is in an interval as a formula in the time."""

    jet: Jet
    weight: Scalar
    formula: Expression


def balance_terms(
    response: DrivenResponse, solution: DrivenSolution, weighted: Weighted, interval: Interval
) -> tuple[BalanceTerm, ...] | None:
    """Return each term of a sum of weighted jets in an interval of a solution.

    None where a jet is no state, no eliminated unknown and no first derivative of a state, or
    where the terms would need names that the solution does not have.
    """
    model = response.model
    plain = [_selected(model, solution, jet, weight, order=0) for jet, weight in weighted]
    moving = [_selected(model, solution, jet, weight, order=1) for jet, weight in weighted]
    rows = zip(plain, moving, strict=True)
    if not weighted or any(a is None and b is None for a, b in rows):
        return None
    zero = [model.field.domain.zero] * len(model.rows)
    columns = solution.functions.columns
    function = _total(
        columns.after(model.field.matrix([row or zero for row in plain])),
        derived(columns).after(model.field.matrix([row or zero for row in moving])),
    )
    written = _written(response, solution, function)
    if written is None:
        return None
    if solution.points is not None:
        written = solution.points.worked_in(written, solution.functions)
    return tuple(
        BalanceTerm(jet, weight, interval_formula(model.field, written, k, interval, model.time))
        for k, (jet, weight) in enumerate(weighted)
    )


def _selected(
    model: DrivenModel, solution: DrivenSolution, jet: Jet, weight: Scalar, *, order: int
) -> list[Scalar] | None:
    """The row that takes weight · jet from the model's rows, or from their derivatives."""
    jets = {j: k for k, j in enumerate(model.reduction.jets)}
    if order == 0:
        place = jets.get(jet)
        if place is None and jet.order == 0 and jet.name in model.reduction.eliminated:
            place = len(model.names) + model.reduction.eliminated.index(jet.name)
    else:
        below = Jet(jet.name, jet.order - 1)
        place = None if jet in jets or jet.order == 0 else jets.get(below)
    if place is None:
        return None
    row = [model.field.domain.zero] * len(model.rows)
    row[place] = solution.put(weight)
    return row


def derived(function: ExponentialMatrix) -> ExponentialMatrix:
    """Return the derivative with respect to the time: lambda R_j + R_(j+1) beside t^j/j!."""
    terms = []
    for term in function.terms:
        residues = [residue.times_root() for residue in term.residues]
        for j, following in enumerate(term.residues[1:]):
            residues[j] = residues[j] + following
        terms.append(ModalTerm(term.factor, tuple(residues)))
    return ExponentialMatrix(function.field, tuple(terms))


def _total(first: ExponentialMatrix, second: ExponentialMatrix) -> ExponentialMatrix:
    terms = tuple(
        ModalTerm(a.factor, tuple(r + s for r, s in zip(a.residues, b.residues, strict=True)))
        for a, b in zip(first.terms, second.terms, strict=True)
    )
    return ExponentialMatrix(first.field, terms)


def _written(
    response: DrivenResponse, solution: DrivenSolution, function: ExponentialMatrix
) -> tuple[tuple[Expression, ...], ...] | None:
    """The function's formulas with the names of the solution; None if these do not do."""
    stacked = response.stacked
    if isinstance(stacked, ParametricResponse):
        if solution.case is None:
            return None
        return written_beside_case(stacked.model, solution.case, function)
    return written_beside(stacked, function)
