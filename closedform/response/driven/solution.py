"""The driven solution in one case: its formulas and its parts."""

from __future__ import annotations

from dataclasses import dataclass
from functools import cached_property

from closedform.algebra.field import Scalar
from closedform.algebra.hurwitz import sign_oracle
from closedform.algebra.parameter_field import ParameterField
from closedform.algebra.sign_argument import SignArgument
from closedform.errors import InputError
from closedform.model.driven.model import DrivenModel
from closedform.notation.expression import ZERO, Expression
from closedform.notation.shown import FormulaColumn
from closedform.notation.terms import opened, sum_of
from closedform.response.driven.composition import (
    element_formula,
    interval_formula,
    step_formula,
)
from closedform.response.driven.determined import PointConstants
from closedform.response.driven.functions import DrivenFunctions, Interval, Summand
from closedform.response.driven.particular import Drive, drive_of
from closedform.response.driven.period_formulas import PeriodicSolution
from closedform.response.driven.periodic import (
    PeriodFunctions,
)
from closedform.response.driven.phasor import Phasor, phasors_of
from closedform.response.driven.resonance import Resonance
from closedform.response.driven.stability import Stability
from closedform.response.driven.steady import SteadyState, steady_state
from closedform.response.parametric.case import Case

__all__ = ["DrivenSolution", "UnendingSolutionError"]

Rows = tuple[tuple[Expression, ...], ...]


class UnendingSolutionError(InputError):
    """A solution that no single formula states: its inputs repeat too often, or for ever."""

    def __init__(self, model: str) -> None:
        super().__init__(model)
        self.model = model

    def __str__(self) -> str:
        return (
            f"{self.model}: inputs repeat for ever or very often, so no one formula holds for all "
            "times. The solution is `base`, and added to it what `periodic` has for the n-th "
            "period; `solution_at` gives values."
        )


@dataclass(frozen=True, repr=False)
class DrivenSolution:
    """The driven solution in one case (the only one, without parameters).

    `columns` are the formulas of the columns of `functions`, r x c; `case` is that of the
    stacked response, None without parameters.  What inputs that repeat add to it, from rest,
    is in `periodic`, made of `periods`.  `stability` is that of the model's own matrix;
    `resonances` are the tones of inputs that are eigenvalues of it.  `points` are the constants
    that conditions at points determine, worked into `columns`.
    """

    model: DrivenModel
    functions: DrivenFunctions
    columns: Rows
    case: Case | None
    stability: Stability
    periodic: tuple[PeriodicSolution, ...] = ()
    periods: tuple[PeriodFunctions, ...] = ()
    resonances: tuple[Resonance, ...] = ()
    points: PointConstants | None = None

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
    def solution(self) -> FormulaColumn:
        """A formula for each row of the model, for all times: in the form with unit steps.

        Raises UnendingSolutionError where inputs repeat for ever, or too often for one formula.
        """
        if not self.has_one_formula:
            raise UnendingSolutionError(self.model.name)
        if not self.periodic:
            return self.base
        added = [own.for_all_times or () for own in self.periodic]
        return FormulaColumn(
            opened(sum_of([term for term in terms if term != ZERO] or [ZERO]))
            for terms in zip(self.base, *added, strict=True)
        )

    @property
    def has_one_formula(self) -> bool:
        """Whether one formula holds for all times."""
        return all(own.for_all_times is not None for own in self.periodic)

    @cached_property
    def base(self) -> FormulaColumn:
        """What `solution` is but for inputs that repeat: what these add is in `periodic`."""
        functions, model = self.functions, self.model
        return FormulaColumn(
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
    def start_jump(self) -> FormulaColumn | None:
        """What impulses at the start add to each state: B times their amounts.

        Initial values are those just before it.  None where nothing strikes at the start.
        """
        model, field = self.model, self.model.field
        matrix = model.reduction.input_matrix
        struck = [
            (place, impulse.amount)
            for place, given in enumerate(model.inputs)
            for impulse in given.signal.impulses
            if impulse.at == model.start
        ]
        if matrix is None or not struck:
            return None
        zero = field.domain.zero
        return FormulaColumn(
            element_formula(field, self.put(sum((row[k] * a for k, a in struck), zero)))
            for row in matrix.to_list()
        )

    @cached_property
    def pieces(self) -> tuple[FormulaColumn, ...]:
        """For each interval, a formula for each row; of what is in `base`."""
        return tuple(self.in_interval(interval) for interval in self.functions.intervals)

    def in_interval(self, interval: Interval) -> FormulaColumn:
        """Return a formula for each row, of what an interval adds up."""
        return FormulaColumn(
            interval_formula(self.model.field, self.columns, row, interval, self.model.time)
            for row in range(len(self.model.rows))
        )

    def of(self, summands: tuple[Summand, ...]) -> FormulaColumn:
        """Return a formula for each row, of a part such as the free response."""
        return self.in_interval(Interval(self.functions.intervals[0].start, None, summands))
