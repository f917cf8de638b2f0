"""What follows from a driven model: the stacked response, and the driven solution in each case."""

from __future__ import annotations

from dataclasses import dataclass
from functools import cached_property

from closedform.algebra.branches import Branch
from closedform.algebra.exponential import ExponentialMatrix
from closedform.algebra.field import Scalar
from closedform.algebra.parameter_field import ParameterField
from closedform.model.driven.model import DrivenModel
from closedform.model.parametric import ParametricModel
from closedform.notation.expression import Expression
from closedform.notation.plain import plain
from closedform.response.driven.assembly import driven_functions
from closedform.response.driven.composition import (
    element_formula,
    interval_formula,
    step_formula,
)
from closedform.response.driven.functions import DrivenFunctions, Interval, Summand
from closedform.response.parametric.case import Case
from closedform.response.parametric.response import ParametricResponse, respond_in_cases
from closedform.response.response import Response, respond

__all__ = ["DrivenResponse", "DrivenSolution", "respond_driven"]

Rows = tuple[tuple[Expression, ...], ...]


@dataclass(frozen=True, repr=False)
class DrivenSolution:
    """The driven solution in one case (the only one, without parameters).

    `columns` are the formulas of the columns of `functions`, r x c; `case` is that of the
    stacked response, None without parameters.
    """

    model: DrivenModel
    functions: DrivenFunctions
    columns: Rows
    case: Case | None

    @property
    def condition(self) -> str:
        """The conditions of the case in plain notation; "true" where there is none."""
        return "true" if self.case is None else self.case.condition

    @cached_property
    def solution(self) -> tuple[Expression, ...]:
        """A formula for each row of the model, for all times: in the form with unit steps."""
        functions, model = self.functions, self.model
        return tuple(
            step_formula(
                model.field,
                self.columns,
                row,
                functions.intervals[0],
                functions.switches,
                model.time,
            )
            for row in range(len(model.rows))
        )

    @cached_property
    def pieces(self) -> tuple[tuple[Expression, ...], ...]:
        """For each interval, a formula for each row."""
        return tuple(self.in_interval(interval) for interval in self.functions.intervals)

    def in_interval(self, interval: Interval) -> tuple[Expression, ...]:
        """Return a formula for each row, of what an interval adds up."""
        return tuple(
            interval_formula(self.model.field, self.columns, row, interval, self.model.time)
            for row in range(len(self.model.rows))
        )

    def of(self, summands: tuple[Summand, ...]) -> tuple[Expression, ...]:
        """Return a formula for each row, of a part such as the free response."""
        return self.in_interval(Interval(self.functions.intervals[0].start, None, summands))


@dataclass(frozen=True, repr=False)
class DrivenResponse:
    """The exact response of a driven model.

    `stacked` is that of the stacked model, whose further functions are the columns;
    `solutions` has one for each of its cases.
    """

    model: DrivenModel
    stacked: Response | ParametricResponse
    solutions: tuple[DrivenSolution, ...]

    def __repr__(self) -> str:
        states, cases = len(self.model.names), len(self.solutions)
        told = f", {cases} cases" if isinstance(self.stacked, ParametricResponse) else ""
        return f"<Response of {self.model.title!r}, {states} states{told}>"

    def __str__(self) -> str:
        """Return the solution, case by case, a line for each row."""
        lines = []
        for solution in self.solutions:
            several = solution.condition != "true"
            if several:
                lines.append(f"if {solution.condition}:")
            lines += [
                f"{'  ' if several else ''}{name}({self.model.time}) = {plain(formula)}"
                for name, formula in zip(self.model.rows, solution.solution, strict=True)
            ]
        return "\n".join(lines)

    def instants(self) -> tuple[Expression, ...]:
        """Return the start and the timeline as formulas."""
        field = self.model.field
        return tuple(element_formula(field, at) for at in (self.model.start, *self.model.timeline))


def respond_driven(model: DrivenModel) -> DrivenResponse:
    """Return the exact response of a driven model, in every case of its parameters.

    Exact:   no floating-point number takes part.  Nothing is proved yet: see `verify`.
    Raises:  RootsUnknownError where parameters leave open how the roots of a factor lie.
    """
    if isinstance(model.stacked, ParametricModel):
        return _in_cases(model, model.stacked)
    found: list[DrivenFunctions] = []

    def further(exponential: ExponentialMatrix) -> ExponentialMatrix:
        found.append(driven_functions(model, exponential))
        return found[0].columns

    response = respond(model.stacked, further=further)
    columns = response.closed_forms.further
    return DrivenResponse(model, response, (DrivenSolution(model, found[0], columns, None),))


def _in_cases(model: DrivenModel, stacked: ParametricModel) -> DrivenResponse:
    found: dict[int, DrivenFunctions] = {}

    def further(branch: Branch) -> ExponentialMatrix:
        field: ParameterField = stacked.field

        def put(element: Scalar) -> Scalar:
            return field.substituted(element, branch.values)

        found[branch.number] = driven_functions(
            model, branch.exponential, put=put, relation=branch.relation
        )
        return found[branch.number].columns

    response = respond_in_cases(stacked, further=further)
    solutions = tuple(
        DrivenSolution(model, found[case.branch.number], case.further_formulas, case)
        for case in response.cases
    )
    return DrivenResponse(model, response, solutions)
