"""What follows from a driven model: the stacked response, and the driven solution in each case."""

from __future__ import annotations

from collections.abc import Callable
from dataclasses import dataclass, replace
from functools import cached_property

from closedform.algebra.branches import Branch
from closedform.algebra.domain import ParameterDomain
from closedform.algebra.exponential import ExponentialMatrix
from closedform.algebra.field import Scalar
from closedform.algebra.hurwitz import sign_oracle
from closedform.algebra.parameter_field import ParameterField
from closedform.algebra.sign_argument import SignArgument
from closedform.model.driven.model import DrivenModel
from closedform.model.parametric import ParametricModel
from closedform.notation.expression import Expression
from closedform.notation.plain import plain
from closedform.response.by_mode import ByMode
from closedform.response.driven.assembly import driven_functions
from closedform.response.driven.composition import (
    element_formula,
    interval_formula,
    step_formula,
)
from closedform.response.driven.functions import DrivenFunctions, Interval, Summand
from closedform.response.driven.particular import Drive, beside, drive_of
from closedform.response.driven.period_formulas import PeriodicSolution, periodic_solution
from closedform.response.driven.periodic import (
    PeriodFunctions,
    period_functions,
    repeating,
    without_repeats,
)
from closedform.response.driven.phasor import Phasor, phasors_of
from closedform.response.driven.resonance import Resonance, resonances_of
from closedform.response.driven.stability import Stability, stability_of
from closedform.response.driven.steady import SteadyState, stays, steady_state
from closedform.response.parametric.case import Case
from closedform.response.parametric.response import ParametricResponse, respond_in_cases
from closedform.response.response import Response, respond

__all__ = ["DrivenResponse", "DrivenSolution", "respond_driven"]

Rows = tuple[tuple[Expression, ...], ...]


@dataclass(frozen=True, repr=False)
class DrivenSolution:
    """The driven solution in one case (the only one, without parameters).

    `columns` are the formulas of the columns of `functions`, r x c; `case` is that of the
    stacked response, None without parameters.  What inputs that repeat add to it, from rest,
    is in `periodic`, made of `periods`.  `stability` is that of the model's own matrix;
    `resonances` are the tones of inputs that are eigenvalues of it.
    """

    model: DrivenModel
    functions: DrivenFunctions
    columns: Rows
    case: Case | None
    stability: Stability
    periodic: tuple[PeriodicSolution, ...] = ()
    periods: tuple[PeriodFunctions, ...] = ()
    resonances: tuple[Resonance, ...] = ()

    @property
    def condition(self) -> str:
        """The conditions of the case in plain notation; "true" where there is none."""
        return "true" if self.case is None else self.case.condition

    @cached_property
    def drive(self) -> Drive:
        """The tones of the inputs, with the equations of the case put in."""
        branch = None if self.case is None else self.case.branch
        return drive_of(self.model, self.put, None if branch is None else branch.relation)

    def put(self, element: Scalar) -> Scalar:
        """Return an element with the equations of the case put in."""
        if self.case is None or not isinstance(self.model.field, ParameterField):
            return element
        return self.model.field.substituted(element, self.case.branch.values)

    def sign_of(self, element: Scalar) -> SignArgument:
        """Return the sign that an element has in the case, and why."""
        domain = None if self.case is None else self.case.domain
        return sign_oracle(self.model.field, domain)(element)

    @cached_property
    def steady_state(self) -> SteadyState | None:
        """The last interval in its steady and its transient part, for a stable model."""
        return steady_state(self.model, self.functions, self.columns, self.drive, self.sign_of)

    @cached_property
    def phasors(self) -> tuple[Phasor | None, ...]:
        """Amplitude and phase of each row whose steady state oscillates; None for the others."""
        return phasors_of(self.model, self.functions, self.drive, self.sign_of, self.put)

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
    found: list[_Sought] = []

    def further(exponential: ExponentialMatrix) -> ExponentialMatrix:
        found.append(_sought(model, exponential))
        return found[0].columns

    def parted(_: ExponentialMatrix) -> ExponentialMatrix | None:
        return found[0].parted

    response = respond(model.stacked, further=further, parted=parted)
    forms = response.closed_forms
    solution = _solution(model, found[0], forms.further, forms.by_mode, None)
    return DrivenResponse(model, response, (solution,))


def _in_cases(model: DrivenModel, stacked: ParametricModel) -> DrivenResponse:
    found: dict[int, _Sought] = {}

    def further(branch: Branch) -> ExponentialMatrix:
        field: ParameterField = stacked.field

        def put(element: Scalar) -> Scalar:
            return field.substituted(element, branch.values)

        found[branch.number] = _sought(
            model, branch.exponential, put=put, relation=branch.relation, domain=branch.domain
        )
        return found[branch.number].columns

    def parted(branch: Branch) -> ExponentialMatrix | None:
        return found[branch.number].parted

    response = respond_in_cases(stacked, further=further, parted=parted)
    solutions = tuple(
        _solution(model, found[case.branch.number], case.further_formulas, case.by_mode, case)
        for case in response.cases
    )
    return DrivenResponse(model, response, tuple(solutions))


@dataclass(frozen=True)
class _Sought:
    """The functions of a solution: those without repeats, then those of each way to repeat."""

    base: DrivenFunctions
    periods: tuple[PeriodFunctions, ...]
    stability: Stability
    resonances: tuple[Resonance, ...]

    @property
    def columns(self) -> ExponentialMatrix:
        return beside([self.base.columns, *(p.single.columns for p in self.periods)])

    @property
    def parted(self) -> ExponentialMatrix | None:
        return beside([p.parted for p in self.periods]) if self.periods else None


def _sought(
    model: DrivenModel,
    exponential: ExponentialMatrix,
    *,
    put: Callable[[Scalar], Scalar] = lambda element: element,
    relation: Scalar | None = None,
    domain: ParameterDomain | None = None,
) -> _Sought:
    sign_of = sign_oracle(model.field, domain)
    stability = stability_of(model, domain, put)
    tells = stability.verdict == "stable" and not repeating(model)
    base = driven_functions(
        without_repeats(model),
        exponential,
        put=put,
        relation=relation,
        stays=stays(sign_of) if tells else None,
    )
    periods = tuple(
        period_functions(model, repeat, exponential, put=put, relation=relation)
        for repeat in repeating(model)
    )
    resonances = resonances_of(model, exponential, sign_of, put=put, relation=relation)
    return _Sought(base, periods, stability, resonances)


def _solution(
    model: DrivenModel, sought: _Sought, columns: Rows, by_mode: ByMode, case: Case | None
) -> DrivenSolution:
    """The solution with its formulas, of which each part has its own columns."""
    width = sought.base.columns.shape[1]
    first, first_parted, periodic = width, 0, []
    for functions in sought.periods:
        last = first + functions.single.columns.shape[1]
        last_parted = first_parted + functions.parted.shape[1]
        periodic.append(
            periodic_solution(
                model,
                functions,
                tuple(row[first:last] for row in columns),
                tuple(row[first_parted:last_parted] for row in by_mode),
                decays=False,
            )
        )
        first, first_parted = last, last_parted
    own = tuple(row[:width] for row in columns)
    condition = "true" if case is None else case.condition
    return DrivenSolution(
        model,
        sought.base,
        own,
        case,
        sought.stability,
        tuple(periodic),
        sought.periods,
        tuple(replace(resonance, condition=condition) for resonance in sought.resonances),
    )
