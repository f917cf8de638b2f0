"""A case of a driven response, as its checks see it: what is put in, and what counts as zero."""

from __future__ import annotations

from collections.abc import Callable, Iterator, Sequence
from dataclasses import dataclass, replace
from functools import cached_property
from itertools import pairwise

from flint import arb, ctx

from closedform.algebra.exponential import ExponentialMatrix
from closedform.algebra.field import BaseField, FieldMatrix, Polynomial, Scalar
from closedform.algebra.parameter_field import ParameterField
from closedform.algebra.waves import ONE, Constant, Wave
from closedform.model.driven.model import DrivenModel, Jet
from closedform.model.driven.signal import Impulse, Signal
from closedform.notation import enclose, plain, read_formula
from closedform.notation.expression import Expression
from closedform.response.driven.functions import Summand
from closedform.response.driven.response import DrivenResponse, DrivenSolution
from closedform.response.parametric.response import ParametricResponse
from closedform.verification.driven.grounds import POINTS, Ground, grounds_of
from closedform.verification.driven.sums import Enclose, TimedSum, wave_sum
from closedform.verification.eigenvalues import NamedValues
from closedform.verification.parametric.identities import vanishes_on
from closedform.verification.residuals import Vanishes, is_zero_element

__all__ = ["Setting", "setting_of"]

_BITS = 256


@dataclass(frozen=True)
class Setting:
    """A model in one case of its parameters, with the solution that was found for it.

    `put` puts the equations of the case into an element, `vanishes` says whether an element
    is zero where the relation of the case holds.  `exponential` is that of the stacked
    matrix, `factors` are the irreducible ones of its characteristic polynomial.  `names` are
    those with a meaning in the formulas, without the time.  `driven_by` are the waves of all
    inputs as stated, those that repeat too, which `model` is without.
    """

    model: DrivenModel
    solution: DrivenSolution
    exponential: ExponentialMatrix
    factors: tuple[Polynomial, ...]
    put: Callable[[Scalar], Scalar]
    vanishes: Vanishes
    grounds: tuple[Ground, ...]
    names: frozenset[str]
    driven_by: tuple[Wave, ...]

    @property
    def field(self) -> BaseField:
        """The field of the model."""
        return self.model.field

    @property
    def states(self) -> int:
        """The number n of states."""
        return len(self.model.names)

    @property
    def last(self) -> int:
        """The number of the last interval; the first is 0."""
        return len(self.model.timeline)

    @cached_property
    def instants(self) -> tuple[Scalar, ...]:
        """The start and the timeline."""
        return (self.put(self.model.start), *map(self.put, self.model.timeline))

    # Exact functions

    @cached_property
    def _by_column(self) -> list[ExponentialMatrix]:
        columns = self.solution.functions.columns
        count = columns.shape[1]
        zero, one = self.field.domain.zero, self.field.domain.one
        units = [
            self.field.matrix([[one if i == k else zero] for i in range(count)])
            for k in range(count)
        ]
        return [columns.times(unit) for unit in units]

    def total(self, summands: Sequence[Summand]) -> TimedSum:
        """Return what summands add up to, a row for each of the model's rows."""
        parts = [
            ((s.constant, s.origin, term.factor.p), term.residues)
            for s in summands
            for term in self._by_column[s.place].terms
        ]
        return TimedSum.of(self.field, len(self.model.rows), parts)

    @cached_property
    def transition(self) -> ExponentialMatrix:
        """The rows of the states in the exponential of the stacked matrix."""
        zero, one, n = self.field.domain.zero, self.field.domain.one, self.states
        size = range(int(self.exponential.shape[0]))
        top = self.field.matrix([[one if i == j else zero for j in size] for i in range(n)])
        return self.exponential.after(top)

    def freed(self, column: FieldMatrix, k: int, constant: Constant | None = None) -> TimedSum:
        """Return constant · e^(A (t - a)) column, n rows, for the k-th instant a."""
        size = int(self.exponential.shape[0])
        below = [[self.field.domain.zero]] * (size - self.states)
        function = self.transition.times(self.field.matrix([*column.to_list(), *below]))
        key = (constant or ONE(self.field), self.instants[k])
        parts = [((*key, term.factor.p), term.residues) for term in function.terms]
        return TimedSum.of(self.field, self.states, parts)

    def nothing(self, rows: int) -> TimedSum:
        """Return the functions that are zero."""
        return TimedSum(self.field, rows, {})

    @cached_property
    def wholes(self) -> tuple[TimedSum, ...]:
        """The solution in each interval."""
        return tuple(self.total(i.summands) for i in self.solution.functions.intervals)

    @cached_property
    def inputs(self) -> tuple[tuple[TimedSum, ...], ...]:
        """For each interval the inputs, from the waves that are on in it."""
        return tuple(
            tuple(
                sum(
                    (
                        wave_sum(self.field, self.factors, self.vanishes, wave)
                        for wave in self.waves_on(place, k)
                    ),
                    self.nothing(1),
                )
                for place in range(len(self.model.inputs))
            )
            for k in range(self.last + 1)
        )

    def fed(self, matrix: FieldMatrix | None, rows: int, k: int) -> TimedSum:
        """Return matrix · u in an interval."""
        total = self.nothing(rows)
        if matrix is not None:
            for place, given in enumerate(self.inputs[k]):
                column = [[self.put(row[place])] for row in matrix.to_list()]
                total = total + given.after(self.field.matrix(column))
        return total

    # The model with the equations of the case put in

    def matrix(self, rows: Sequence[Sequence[Scalar]]) -> FieldMatrix:
        """Return elements of the model as a matrix, the equations of the case put in."""
        return self.field.matrix([[self.put(e) for e in row] for row in rows])

    def selecting(self, places: Sequence[int]) -> FieldMatrix:
        """Return the matrix that takes these of the model's rows."""
        zero, one = self.field.domain.zero, self.field.domain.one
        count = range(len(self.model.rows))
        return self.field.matrix([[one if i == k else zero for i in count] for k in places])

    def row_of(self, jet: Jet) -> tuple[int, int] | None:
        """Return the row of the unknown and the number of derivatives that make the jet of it.

        Where the unknown itself is no row, it is the lowest derivative that is one.
        """
        reduction = self.model.reduction
        lowest = [(j.order, k) for k, j in enumerate(reduction.jets) if j.name == jet.name]
        if jet.name in reduction.eliminated:
            lowest.append((0, self.states + reduction.eliminated.index(jet.name)))
        order, row = min(lowest, default=(jet.order + 1, 0))
        return (row, jet.order - order) if order <= jet.order else None

    def waves_on(self, place: int, k: int) -> Iterator[Wave]:
        """Yield the waves of an input that are on in an interval, the case's equations put in."""
        before = {*(self.model.start, *self.model.timeline)[: k + 1]}
        for burst in self.model.inputs[place].signal.bursts:
            begun = burst.start is None or burst.start in before
            if begun and (burst.end is None or burst.end not in before):
                yield from (_in_case(wave, self.put) for wave in burst.waves)

    def blow(self, k: int) -> FieldMatrix:
        """Return B · the amounts of the impulses at an instant of the timeline, n x 1."""
        at = (self.model.start, *self.model.timeline)[k]
        total = self.field.zeros(self.states, 1)
        matrix = self.model.reduction.input_matrix
        for place, given in enumerate(self.model.inputs):
            for impulse in given.signal.impulses:
                if impulse.at == at and matrix is not None:
                    column = [[row[place] * impulse.amount] for row in matrix.to_list()]
                    total = total + self.matrix(column)
        return total

    def strikes(self, k: int) -> list[Impulse]:
        """Return the impulses at an instant of the timeline."""
        at = (self.model.start, *self.model.timeline)[k]
        return [i for given in self.model.inputs for i in given.signal.impulses if i.at == at]

    # Certified numbers

    def named(self, ground: Ground) -> dict[str, arb]:
        """Return balls for the constants with names, from their formulas as written."""
        points = self.solution.points
        if points is None:
            return {}
        known = ground.balls()
        return {c.name: enclose(self._read_back(c.formula), known) for c in points.constants}

    def _read_back(self, formula: Expression) -> Expression:
        return read_formula(plain(formula), names=self.names)

    def inside(self, k: int, enclose: Enclose) -> tuple[arb, ...]:
        """Return balls for two instants inside of an interval."""
        first = enclose(self.instants[k])
        if k < self.last:
            length = enclose(self.instants[k + 1]) - first
            return (first + length / 3, first + length * 6 / 7)
        unit = self._unit(enclose)
        return (first + unit / 3, first + unit)

    def _unit(self, enclose: Enclose) -> arb:
        """The power of 2 near 1/|M|, for the stacked matrix M."""
        entries = [
            abs(enclose(self.put(self.field.domain.convert(e)))).mid()
            for row in self._stacked_matrix
            for e in row
        ]
        mantissa, exponent = max(entries, key=float).man_exp()
        order = int(mantissa).bit_length() + int(exponent) if mantissa else 0
        return arb(2) ** -order

    @cached_property
    def _stacked_matrix(self) -> list[list[Scalar]]:
        rows = self.model.stacked.matrix
        if isinstance(self.field, ParameterField):
            return [list(row) for row in rows]
        return [[self.field.scalar(e) for e in row] for row in rows]

    def interval_of(self, at: Scalar, enclose: Enclose) -> int | None:
        """Return the interval that holds an instant or ends with it, None for the start.

        Where balls do not tell two instants apart, they count as the same.
        """
        own = self.put(at)
        if self.vanishes(own - self.instants[0]):
            return None
        after = [
            k
            for k, instant in enumerate(self.instants)
            if not self.vanishes(own - instant) and enclose(own - instant) > 0
        ]
        return max(after, default=0)

    def out_of_order(self) -> int | None:
        """Return the number of an instant that was not shown to come after the one before."""
        for number, (one, other) in enumerate(pairwise(self.instants), start=1):
            if self.signs_of(other - one) != {1}:
                return number
        return None

    def signs_of(self, element: Scalar) -> set[int]:
        """Return the signs that an element may have in the case."""
        if self.solution.case is None:
            return {self.field.sign(element)}
        return set(self.solution.case.domain.sign_of(element).values)


def setting_of(response: DrivenResponse, solution: DrivenSolution) -> Setting:
    """Return a case of a response, with points of it."""
    model, stacked, case = response.model, response.stacked, solution.case
    model = _without_repeats(model)
    points = solution.points
    if points is not None:
        model = replace(model, initial=points.found.initial_in_field)
    names = frozenset() if points is None else frozenset(c.name for c in points.constants)
    waves = [w for i in response.model.inputs for burst in i.signal.bursts for w in burst.waves]
    if not isinstance(stacked, ParametricResponse):
        values = NamedValues(stacked.closed_forms.constants)
        return Setting(
            model,
            solution,
            stacked.exponential,
            tuple(term.factor.p for term in stacked.exponential.terms),
            lambda element: element,
            is_zero_element,
            (Ground(model.field, "", values.balls),),
            names | frozenset(c.name for c in stacked.closed_forms.constants),
            tuple(waves),
        )
    if case is None:
        raise ValueError("a solution with parameters belongs to a case")
    field, branch = stacked.model.field, case.branch

    def put(element: Scalar) -> Scalar:
        return field.substituted(element, branch.values)

    return Setting(
        model,
        solution,
        branch.exponential,
        tuple(term.factor.p for term in branch.exponential.terms),
        put,
        lambda element: vanishes_on(branch, element),
        _where_provided(grounds_of(stacked, case, POINTS * (2 if points else 1)), solution),
        names | frozenset({*field.parameters, *(q.name for q in case.quantities)}),
        tuple(_in_case(wave, put) for wave in waves),
    )


def _in_case(wave: Wave, put: Callable[[Scalar], Scalar]) -> Wave:
    return Wave(
        put(wave.amount),
        wave.power,
        put(wave.rate),
        wave.kernel,
        put(wave.frequency),
        put(wave.origin),
    )


def _where_provided(grounds: Sequence[Ground], solution: DrivenSolution) -> tuple[Ground, ...]:
    """The points at which nothing is zero of what a solution of point conditions divides by."""
    points = solution.points
    if points is None:
        return tuple(grounds)
    found = []
    with ctx.workprec(_BITS):
        for ground in grounds:
            known = ground.balls()
            values = [enclose(f, known) for f in points.provided]
            if not any(value.contains(0) for value in values):
                found.append(ground)
        moderate = [ground for ground in found if points.is_moderate(ground.enclose())]
    return tuple(moderate or found)


def _without_repeats(model: DrivenModel) -> DrivenModel:
    """The model with nothing in the place of inputs that repeat: these have proofs of their own."""
    silent = tuple(
        given if given.signal.repeat is None else replace(given, signal=Signal())
        for given in model.inputs
    )
    return replace(model, inputs=silent)
