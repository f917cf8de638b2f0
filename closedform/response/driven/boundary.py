"""Conditions at several instants: the constants of the solution, or why there is none.

The solution is x(t) = x_p(t) + x_h(t): x_p the particular response to what is on, with the free
responses to the jumps since the start, and x_h a free motion of n constants, which n conditions
W x(t_i) = v determine.  Where they stand at two instants, x_h is put together from motions
that meet the conditions at one of them with zero on the right: then those of the one instant
are equations for the constants of the others alone, and formulas are short.  Else x_h counts
from one of the instants.

The equations have coefficients that are polynomials in numbers e^b, C and S, as
`closedform.algebra.adjoined` has them.  By Cramer's rule each constant is a quotient of two
determinants; the one below is the same for all of a block, and has to be other than zero.
"""

from __future__ import annotations

from collections.abc import Callable, Sequence
from dataclasses import dataclass, replace
from functools import cached_property

from closedform.algebra.adjoined import Adjoined, Recorder, adjoined
from closedform.algebra.domain import ParameterDomain
from closedform.algebra.exponential import ExponentialMatrix
from closedform.algebra.field import BaseField, FieldMatrix, Scalar
from closedform.algebra.parametric_spectrum import vanishes_under
from closedform.errors import Place
from closedform.model.driven.instants import order_in
from closedform.model.driven.model import DrivenModel, PointCondition
from closedform.response.driven.assembly import ParticularMotion, Started
from closedform.response.driven.point_equations import (
    determinant,
    eliminated,
    solved_by_cramer,
)
from closedform.response.driven.point_values import constant_value, value_at_instant

__all__ = ["Block", "InBranch", "PointSolution", "SingularConditionsError", "point_solution"]

Put = Callable[[Scalar], Scalar]


@dataclass(frozen=True)
class InBranch:
    """A branch of the parameters: `put` puts its equations in, `relation` is the one kept.

    `case` tells which values of the parameters these are, empty for all.
    """

    put: Put = lambda element: element
    relation: Scalar | None = None
    domain: ParameterDomain | None = None
    case: str = ""


@dataclass(frozen=True)
class Block:
    """Equations that determine some of the constants alone: matrix · constants = right.

    All entries are elements of the field with the adjoined numbers.  `determinant` is that of
    the matrix; `constants` are counted from 0.
    """

    conditions: tuple[int, ...]
    constants: tuple[int, ...]
    matrix: tuple[tuple[Scalar, ...], ...]
    right: tuple[Scalar, ...]
    determinant: Scalar


@dataclass(frozen=True)
class PointSolution:
    """The free motion that meets the conditions.

    `basis` are motions e^(A (t - origin)) column, of which constant by constant adds up to it;
    `values` are the constants, elements of `numbers.field`; `initial` are the states at the
    start, before an impulse there.  `other` is the same with a name for every number, where
    fewer names do for them: it may be shorter to write.
    """

    numbers: Adjoined
    basis: tuple[tuple[Scalar, FieldMatrix], ...]
    blocks: tuple[Block, ...]
    values: tuple[Scalar, ...]
    initial: tuple[Scalar, ...]
    other: PointSolution | None = None

    @cached_property
    def initial_in_field(self) -> tuple[Scalar, ...] | None:
        """The states at the start as elements of the model's field, None if they are not."""
        found = [self.numbers.lowered(x) for x in self.initial]
        return None if any(x is None for x in found) else tuple(found)

    @cached_property
    def in_field(self) -> tuple[Scalar | None, ...]:
        """The constants as elements of the model's field, None for those that are not."""
        return tuple(self.numbers.lowered(value) for value in self.values)

    def started(self, names: Sequence[str]) -> tuple[Started, ...]:
        """Return the free motions that add up to it, with names for what is not in the field."""
        known: dict[Scalar, FieldMatrix] = {}
        named: list[Started] = []
        for (origin, column), value, name in zip(self.basis, self.in_field, names, strict=True):
            if value is None:
                named.append(Started(origin, name, column))
            elif value:
                own = column * value
                known[origin] = known[origin] + own if origin in known else own
        kept = [Started(o, "", c) for o, c in known.items() if not c.is_zero_matrix]
        return (*kept, *named)


@dataclass
class SingularConditionsError(Exception):
    """The equations have no solution, or more than one.

    With `weights` the sum of weight · condition has nothing on the left, and `rest` on the
    right; without, `free` constants are left, and `motion` is a free motion of zero in all
    conditions, (origin, column), where it is known in the model's field.
    """

    numbers: Adjoined
    free: int
    weights: tuple[Scalar, ...] | None = None
    rest: Scalar | None = None
    motion: tuple[Scalar, FieldMatrix] | None = None


def point_solution(
    model: DrivenModel,
    exponential: ExponentialMatrix,
    particular: ParticularMotion,
    branch: InBranch,
) -> PointSolution:
    """Return the free motion that meets the conditions of a model at points.

    `exponential` is that of the stacked matrix, `particular` what the inputs do by themselves.

    Raises:  SingularConditionsError where the conditions do not determine it; HighFactorError;
             UnknownOrderError where a condition may stand before or after a switching.
    """
    return _Conditions(model, exponential, particular, branch).solved()


class _Conditions:
    """The equations for the constants, in one branch."""

    def __init__(
        self,
        model: DrivenModel,
        exponential: ExponentialMatrix,
        particular: ParticularMotion,
        branch: InBranch,
    ) -> None:
        self.model, self.exponential, self.particular = model, exponential, particular
        self.field: BaseField = model.field
        self.put, self.relation = branch.put, branch.relation
        put, domain = branch.put, branch.domain
        self.n = len(model.names)
        self.weights = [[put(w) for w in c.of_states] for c in model.conditions]
        self.at = [put(c.at) for c in model.conditions]
        self.value = [put(c.value) for c in model.conditions]
        self.start = put(model.start)
        order = order_in(self.field, domain, Place(key="at_points"))
        self.interval = [self._interval(order.compared, c) for c in model.conditions]

    def solved(self) -> PointSolution:
        by_instant: dict[Scalar, list[int]] = {}
        for k, at in enumerate(self.at):
            by_instant.setdefault(at, []).append(k)
        basis, blocks = self._apart(by_instant)
        recorder = Recorder(self.field)
        self._entries(recorder, basis)
        for origin, column in basis:  # for the states at the start
            self._states(recorder, origin, column, self.start)
        self._particular_states(recorder)
        asked = (self.field, recorder.exponents, recorder.angles)
        numbers = adjoined(*asked)
        found = self._found(numbers, basis, blocks)
        if any(self._vanishes(numbers, b.determinant) for b in found.blocks):
            self._refuse(by_instant)
        found = self._with_values(found)
        apart = adjoined(*asked, merged=False)
        if len(apart.numbers) > len(numbers.numbers):
            other = self._with_values(self._found(apart, basis, blocks))
            found = replace(found, other=other)
        return found

    def _found(
        self,
        numbers: Adjoined,
        basis: tuple[tuple[Scalar, FieldMatrix], ...],
        blocks: Sequence[tuple[list[int], list[int]]],
    ) -> PointSolution:
        """The equations, not solved yet."""
        matrix, right = self._entries(numbers, basis)
        found = [self._block(numbers, matrix, right, *places) for places in blocks]
        return PointSolution(numbers, basis, tuple(found), (), ())

    def _with_values(self, found: PointSolution) -> PointSolution:
        """The equations solved."""
        numbers = found.numbers
        values = [self.field.domain.zero] * self.n
        for block in found.blocks:
            for k, value in zip(
                block.constants,
                solved_by_cramer(numbers, block.matrix, block.right, block.determinant),
                strict=True,
            ):
                values[k] = value
        states = self._particular_states(numbers)
        for (origin, column), value in zip(found.basis, values, strict=True):
            own = self._states(numbers, origin, column, self.start)
            states = [x + value * y for x, y in zip(states, own, strict=True)]
        initial = tuple(map(numbers.normal, states))
        return replace(found, values=tuple(values), initial=initial)

    # The free motions of which x_h is put together

    def _apart(
        self, by_instant: dict[Scalar, list[int]]
    ) -> tuple[tuple[tuple[Scalar, FieldMatrix], ...], list[tuple[list[int], list[int]]]]:
        """The motions, and which conditions determine the constants of which of them."""
        groups = list(by_instant.items())
        kernels = []
        for _, places in groups:
            matrix = self.field.matrix([self.weights[k] for k in places])
            kernels.append(_kernel(self.field, matrix))
        regular = all(
            len(kernel) + len(places) == self.n
            for kernel, (_, places) in zip(kernels, groups, strict=True)
        )
        if len(groups) != 2 or not regular:
            return self._from_one(by_instant)
        (one, first), (other, second) = groups
        basis = [(one, column) for column in kernels[0]] + [(other, c) for c in kernels[1]]
        count = len(kernels[0])
        return tuple(basis), [
            (second, list(range(count))),
            (first, list(range(count, self.n))),
        ]

    def _from_one(
        self, by_instant: dict[Scalar, list[int]]
    ) -> tuple[tuple[tuple[Scalar, FieldMatrix], ...], list[tuple[list[int], list[int]]]]:
        """The motions from unit states at the instant with the most conditions."""
        origin = max(by_instant, key=lambda at: len(by_instant[at]))
        unit = self.field.identity(self.n).to_list()
        basis = tuple((origin, self.field.matrix([[e] for e in row])) for row in unit)
        every = list(range(self.n))
        return basis, [(every, every)]

    def _entries(
        self, numbers: Adjoined | Recorder, basis: Sequence[tuple[Scalar, FieldMatrix]]
    ) -> tuple[list[list[Scalar]], list[Scalar]]:
        """The coefficients and the right sides of all conditions."""
        matrix = [
            [
                value_at_instant(numbers, weights, self._free(column), at - origin)
                for origin, column in basis
            ]
            for weights, at in zip(self.weights, self.at, strict=True)
        ]
        right = []
        for k, value in enumerate(self.value):
            own = self._particular(numbers, self.weights[k], self.at[k], self.interval[k])
            right.append(numbers.lift(value) - own)
        return matrix, right

    def _free(self, column: FieldMatrix) -> ExponentialMatrix:
        zero = self.field.domain.zero
        below = [[zero] for _ in range(self.exponential.shape[0] - self.n)]
        return self.exponential.times(self.field.matrix([*column.to_list(), *below]))

    def _states(
        self, numbers: Adjoined | Recorder, origin: Scalar, column: FieldMatrix, at: Scalar
    ) -> list[Scalar]:
        function = self._free(column)
        return [
            value_at_instant(numbers, row, function, at - origin)
            for row in self.field.identity(self.n).to_list()
        ]

    def _particular_states(self, numbers: Adjoined | Recorder) -> list[Scalar]:
        """x_p at the start, before an impulse there."""
        return [
            self._particular(numbers, row, self.start, None)
            for row in self.field.identity(self.n).to_list()
        ]

    def _particular(
        self, numbers: Adjoined | Recorder, row: Sequence[Scalar], at: Scalar, place: int | None
    ) -> Scalar:
        """Row · x_p at an instant of an interval; None for the start, before an impulse."""
        total = numbers.lift(self.field.domain.zero)
        for part in self.particular.parts(place):
            held = value_at_instant(numbers, row, part.function, at - part.origin)
            total = total + constant_value(numbers, self.field, part.constant) * held
        return total

    def _interval(
        self, compared: Callable[[Scalar, Scalar], int], condition: PointCondition
    ) -> int | None:
        """The interval that ends with the instant of a condition, or has it inside.

        None for the start: as initial values do, a condition speaks of the state before an
        impulse of the same instant.
        """
        if condition.at == self.model.start:
            return None
        at = self.put(condition.at)
        if compared(at, self.start) <= 0:
            return None
        place = 0
        for k, instant in enumerate(self.model.timeline, start=1):
            if compared(at, self.put(instant)) > 0:
                place = k
        return place

    # Solving

    def _block(
        self,
        numbers: Adjoined,
        matrix: Sequence[Sequence[Scalar]],
        right: Sequence[Scalar],
        conditions: Sequence[int],
        constants: Sequence[int],
    ) -> Block:
        rows = tuple(tuple(numbers.normal(matrix[i][k]) for k in constants) for i in conditions)
        return Block(
            tuple(conditions),
            tuple(constants),
            rows,
            tuple(numbers.normal(right[i]) for i in conditions),
            determinant(numbers, rows),
        )

    def _vanishes(self, numbers: Adjoined, element: Scalar) -> bool:
        return numbers.vanishes(element, lambda e: vanishes_under(e, self.relation))

    def _refuse(self, by_instant: dict[Scalar, list[int]]) -> None:
        """Say what is wrong with equations that have no solution, or more than one."""
        basis, _ = self._from_one(by_instant)
        recorder = Recorder(self.field)
        self._entries(recorder, basis)
        numbers = adjoined(self.field, recorder.exponents, recorder.angles)
        matrix, right = self._entries(numbers, basis)
        left = eliminated(numbers, matrix, right, lambda e: self._vanishes(numbers, e))
        if left.contradiction is not None:
            raise SingularConditionsError(numbers, left.free, *left.contradiction)
        lowered = [numbers.lowered(x) for x in left.motion or ()]
        if not lowered or any(x is None for x in lowered):
            raise SingularConditionsError(numbers, left.free)
        column = self.field.matrix([[x] for x in lowered])
        raise SingularConditionsError(numbers, left.free, motion=(basis[0][0], column))


def _kernel(field: BaseField, matrix: FieldMatrix) -> list[FieldMatrix]:
    """Columns that span what a matrix takes to zero."""
    found = matrix.to_sparse().nullspace().to_dense().to_list() if matrix.shape[1] else []
    return [field.matrix([[e] for e in row]) for row in found]
