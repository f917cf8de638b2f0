"""The steps that give e^(At): by the form that regimes share, or from the resolvent."""

from __future__ import annotations

from collections.abc import Iterator, Sequence

from closedform.algebra.field import FieldMatrix
from closedform.algebra.parameter_field import ParameterField
from closedform.derivation.formulas import A
from closedform.derivation.parametric.case_steps import case_conditions_of
from closedform.derivation.parametric.formulas import (
    element_matrix,
    exponential,
    named_or_written,
)
from closedform.derivation.parametric.kernels import PAIR, function_of, kernel_letters, kernel_row
from closedform.derivation.parametric.resolvent_steps import transform_step
from closedform.derivation.step import Depth, Matrix, Side, Statement, Step, Symbol
from closedform.notation.expression import (
    ONE,
    Expression,
    Name,
    operations,
)
from closedform.response.parametric.case import Case
from closedform.response.parametric.quantities import Letters
from closedform.response.parametric.response import ParametricResponse

__all__ = ["exponential_steps", "transition_step"]

SMALL = 70
"""Operations in the entries of e^(At) up to which they are printed in a working document."""


def exponential_steps(
    response: ParametricResponse, cases: Sequence[Case], letters: Letters
) -> Iterator[Step]:
    """Yield the steps from the eigenvalues to e^(At) on the generic branch."""
    branch = cases[0].branch
    factors = branch.spectrum.factors
    pairs = all(m.regime.kind in PAIR for c in cases for m in c.modes)
    if len(factors) == 1 and factors[0].degree == 2 and factors[0].index == 1 and pairs:
        yield _shared_step(response, cases, letters)
    else:
        yield transform_step(response, cases, letters)


def _shared_step(response: ParametricResponse, cases: Sequence[Case], letters: Letters) -> Step:
    """e^(At) = e^(at)[C(t) I + S(t) V] with V = A - a I, and C and S in each regime."""
    model, field, case = response.model, response.model.field, cases[0]
    t = Name(model.time)
    centre = case.modes[0].factor.roots.centre
    even, odd = kernel_letters(letters)
    kernels = (function_of(even, t), function_of(odd, t))
    v = Symbol("matrix", letter="V")
    inside: Side = Symbol("sum", parts=((kernels[0], Symbol("identity")), (kernels[1], v)))
    front = exponential(field, case, centre, model.time)
    shared: Side = inside if front == ONE else (front, inside)
    shift = field.identity(len(model.states)) * centre
    matrix = element_matrix(field, branch_matrix(case) - shift)
    named = Matrix(_renamed(field, case, branch_matrix(case) - shift), None)
    matrix = min(matrix, named, key=_operations)
    definition: tuple[Side, ...] = (v, _shifted(field, case, centre), matrix)
    statements = (
        Statement("shared form", (Symbol("transition", argument=t), shared)),
        Statement("shared matrix", definition if centre else (v, A)),
    )
    facts: dict[str, object] = {
        "kernels": kernels,
        "rows": [kernel_row(response, c, 0, kernels) for c in cases],
        "cases": tuple(c.number for c in cases),
        "only": len(response.cases) == 1,
    }
    return Step("shared_form", statements, facts, ("factors",))


def branch_matrix(case: Case) -> FieldMatrix:
    """Return A with the equations of the case's branch put in."""
    return case.branch.matrix


def _renamed(
    field: ParameterField, case: Case, matrix: FieldMatrix
) -> tuple[tuple[Expression, ...], ...]:
    return tuple(tuple(named_or_written(field, case, e) for e in row) for row in matrix.to_list())


def _operations(matrix: Matrix) -> int:
    inside = sum(operations(entry) for row in matrix.rows for entry in row)
    return inside + (0 if matrix.front is None else operations(matrix.front) + 2)


def _shifted(field: ParameterField, case: Case, centre: object) -> Side:
    return Symbol("shifted", argument=named_or_written(field, case, centre), letter="A")


def transition_step(response: ParametricResponse, case: Case, *, shared: bool) -> Step:
    """State e^(At) entry by entry in one case."""
    front, rows = case.fronted
    size = sum(operations(entry) for row in rows for entry in row)
    statement = Statement(
        "exp A", (Symbol("transition", argument=Name(response.model.time)), Matrix(rows, front))
    )
    facts = {
        "number": case.number + 1,
        "cases": (case.number,),
        "only": len(response.cases) == 1,
        "conditions": case_conditions_of(case),
        "generic": case.branch.number == 0,
    }
    depth: Depth = "full" if shared or size > SMALL else "working"
    return Step("case_transition", (statement,), facts, depth=depth)
