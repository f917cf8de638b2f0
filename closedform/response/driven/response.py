"""What follows from a driven model: the stacked response, and the driven solution in each case."""

from __future__ import annotations

from collections.abc import Callable, Mapping
from dataclasses import dataclass, replace
from fractions import Fraction

from flint import arb, arb_mat

from closedform.algebra.branches import Branch
from closedform.algebra.domain import ParameterDomain
from closedform.algebra.enclosure import enclosed_to
from closedform.algebra.exponential import ExponentialMatrix
from closedform.algebra.field import Scalar
from closedform.algebra.hurwitz import sign_oracle
from closedform.algebra.parameter_field import ParameterField
from closedform.algebra.surds import SurdSum
from closedform.model.driven.model import DrivenModel
from closedform.model.parametric import ParametricModel, ValueSet
from closedform.notation.expression import ZERO, Expression
from closedform.notation.plain import plain
from closedform.notation.shown import FormulaColumn, cases_latex
from closedform.response.by_mode import ByMode
from closedform.response.driven.assembly import driven_functions
from closedform.response.driven.boundary import InBranch, PointSolution
from closedform.response.driven.composition import (
    element_formula,
)
from closedform.response.driven.determined import determined, names_of_constants, written
from closedform.response.driven.functions import DrivenFunctions
from closedform.response.driven.particular import beside
from closedform.response.driven.period_formulas import PeriodicSolution, periodic_solution
from closedform.response.driven.periodic import (
    PeriodFunctions,
    period_functions,
    repeating,
    without_repeats,
)
from closedform.response.driven.put_in import put_in, with_constants
from closedform.response.driven.resonance import Resonance, resonances_of
from closedform.response.driven.sampling import enclosed_at
from closedform.response.driven.solution import DrivenSolution
from closedform.response.driven.stability import Stability, stability_of
from closedform.response.driven.steady import stays
from closedform.response.driven.written_values import written_balls
from closedform.response.parametric.case import Case
from closedform.response.parametric.known import known_at
from closedform.response.parametric.numbers import case_at
from closedform.response.parametric.response import ParametricResponse, respond_in_cases
from closedform.response.response import Response, respond

__all__ = ["DrivenResponse", "DrivenSolution", "respond_driven"]

Rows = tuple[tuple[Expression, ...], ...]


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
        lines: list[str] = []
        for solution in self.solutions:
            if solution.condition == "true":
                lines += self._lines(solution)
            else:
                lines.append(f"if {solution.condition}:")
                lines += [f"  {line}" for line in self._lines(solution)]
        return "\n".join(lines)

    def _lines(self, solution: DrivenSolution) -> list[str]:
        time, rows = self.model.time, self.model.rows
        one = solution.has_one_formula
        shown = solution.solution if one else solution.base
        more = "" if one else " + what repeats"
        lines = [
            f"{name}({time}) = {plain(formula)}{more}"
            for name, formula in zip(rows, shown, strict=True)
        ]
        if solution.points is not None:
            lines += [
                f"{c.name} = {plain(c.formula)}" for c in solution.points.constants if not c.put_in
            ]
            lines += [f"provided that {plain(f)} != 0" for f in solution.points.provided]
        for own in () if one else solution.periodic:
            lines += self._added(own)
        return lines

    def _added(self, own: PeriodicSolution) -> list[str]:
        """What inputs that repeat add."""
        rows = self.model.rows
        start = "" if own.start == ZERO else f"{plain(own.start)} + "
        begun = f"{start}({own.number} - 1)*{plain(own.period)}"
        last = "…" if own.count is None else f"… {own.count}"
        lines = [f"what repeats, {own.local} after {begun}, for {own.number} = 1, 2, {last}:"]
        for stretch in own.stretches:
            lines.append(f"  {plain(stretch.start)} <= {own.local} < {plain(stretch.end)}:")
            lines += [
                f"    {name}: {plain(formula)}"
                for name, formula in zip(rows, stretch.rows, strict=True)
            ]
        if own.after is not None:
            lines.append("  after these:")
            lines += [
                f"    {name}: {plain(formula)}"
                for name, formula in zip(rows, own.after, strict=True)
            ]
        return lines

    @property
    def solution(self) -> FormulaColumn:
        """The formulas of the only case, for all times.

        Raises:  ValueError where there are several cases; UnendingSolutionError where inputs
                 repeat for ever, or too often for one formula.
        """
        if len(self.solutions) > 1:
            raise ValueError("there are several cases; ask each of `solutions` for its solution")
        return self.solutions[0].solution

    def _repr_latex_(self) -> str | None:
        """Return the solution as LaTeX for a notebook, a row for each case.

        None where inputs repeat for ever: a notebook shows the text of the response then.
        """
        if not all(solution.has_one_formula for solution in self.solutions):
            return None
        cases = ((s.solution, () if s.case is None else s.case.conditions) for s in self.solutions)
        return cases_latex(
            [(column, [c.latex for c in conditions]) for column, conditions in cases]
        )

    def solution_at(
        self,
        t: Fraction | int,
        digits: int = 30,
        *,
        values: Mapping[str, Fraction | int] | None = None,
    ) -> list[arb]:
        """Return balls for all rows at an instant, settled to `digits` digits.

        At a switching they are the values just after it.  With parameters, `values` gives each
        of them a number.
        Raises:  ValuesNotCoveredError for values at which no case holds; ValueError where a
                 parameter has none.
        """
        at, stacked = SurdSum.rational(t), self.stacked
        if not isinstance(stacked, ParametricResponse):
            (own,) = self.solutions
            return enclosed_at(own, at, digits)
        given = {name: SurdSum.rational(value) for name, value in (values or {}).items()}
        missing = [name for name in stacked.model.field.free if name not in given]
        if missing:
            raise ValueError(f"no value is given for {', '.join(missing)}")
        case = case_at(stacked, ValueSet("", tuple(given.items())))
        own = self.solutions[case.number]
        known = with_constants(own, known_at(stacked.model.field, case, given))
        exact = put_in(own, given, (at,))
        place, rows = (self.model.time, at), range(len(self.model.rows))

        def balls() -> arb_mat:
            return arb_mat([written_balls(exact, own.pieces, own.periodic, known, place, rows)])

        return list(enclosed_to(balls, digits).entries())

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

    response = respond(model.stacked, further=further, parted=parted, field=model.field)
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
            model,
            branch.exponential,
            put=put,
            relation=branch.relation,
            domain=branch.domain,
            case=" and ".join(
                f"{plain(element_formula(field, e.polynomial))} = 0" for e in branch.equations
            ),
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
    points: PointSolution | None = None
    names: tuple[str, ...] = ()

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
    case: str = "",
) -> _Sought:
    sign_of = sign_oracle(model.field, domain)
    stability = stability_of(model, domain, put)
    tells = stability.verdict == "stable" and not repeating(model)
    points, started = None, None
    names: tuple[str, ...] = ()
    given = without_repeats(model)
    if model.initial is None:
        branch = InBranch(put, relation, domain, case)
        points = determined(model, exponential, _motion, branch)
        names = names_of_constants(model, points)
        given = replace(given, initial=points.initial_in_field)
        started = points.started(names) if given.initial is None else None
    base = driven_functions(
        given,
        exponential,
        put=put,
        relation=relation,
        stays=stays(sign_of) if tells else None,
        free=started,
    )
    periods = tuple(
        period_functions(model, repeat, exponential, put=put, relation=relation)
        for repeat in repeating(model)
    )
    resonances = resonances_of(model, exponential, sign_of, put=put, relation=relation)
    return _Sought(base, periods, stability, resonances, points, names)


def _motion(model: DrivenModel) -> list[tuple[str, Expression]]:
    """The formulas of a model from initial values, in its first case."""
    solution = respond_driven(model).solutions[0]
    return list(zip(model.rows, solution.solution, strict=True))


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
                stability=sought.stability,
                case=case,
            )
        )
        first, first_parted = last, last_parted
    own = tuple(row[:width] for row in columns)
    points = None if sought.points is None else written(sought.points, sought.names, case)
    if points is not None:
        own = points.worked_in(own, sought.base)
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
        points=points,
    )
