"""One case of a driven model at one point of its parameters, and its true motion there.

The motion is followed from instant to instant by the matrix exponential of ball arithmetic;
inputs are evaluated from their waves.  Nothing here shares code with the solution in print.
"""

from __future__ import annotations

from collections.abc import Callable, Mapping
from dataclasses import dataclass
from functools import cached_property
from typing import Any

from flint import acb, acb_mat, acb_series, arb

from closedform.algebra.field import FieldMatrix, Scalar
from closedform.algebra.waves import Wave
from closedform.derivation.driven.boundary_steps import constant_names
from closedform.derivation.driven.writing import Writing
from closedform.derivation.proof.evaluation import ball_at
from closedform.model.driven.model import DrivenModel
from closedform.response.driven.periodic import without_repeats
from closedform.response.driven.solution import DrivenSolution

__all__ = ["Spot"]

SERIES = 12
"""Terms of the power series by which inputs and printed formulas are derived."""
_DOUBLINGS = 40
"""So many doublings of a time are tried before the free motion is said not to decay."""


@dataclass(frozen=True)
class Spot:
    """A solution at one point, at FLINT's current precision.

    `names` are the parameters and all that is defined in print there; `element` gives a ball
    for an element of the field.  Nothing here may outlive the precision it was made at.
    """

    solution: DrivenSolution
    names: Mapping[str, Any]
    element: Callable[[Scalar], acb]
    period: DrivenModel | None = None

    def __post_init__(self) -> None:
        """Add the constants that conditions at points determine to the names, by their formulas."""
        points = self.solution.points
        if points is None or self.period is not None:
            return
        names = constant_names(Writing(self.model), points)
        own = {
            name.text: ball_at(points.formula(value), self.names)
            for name, value in zip(names, points.found.values, strict=True)
        }
        object.__setattr__(self, "names", {**self.names, **own})

    @property
    def model(self) -> DrivenModel:
        """The model that is solved."""
        return self.solution.model

    @cached_property
    def driving(self) -> DrivenModel:
        """The model that is followed: one period, or all but the inputs that repeat."""
        return without_repeats(self.model) if self.period is None else self.period

    def matrix(self, matrix: FieldMatrix) -> acb_mat:
        """Return a matrix over the field as balls."""
        return acb_mat([[self.element(e) for e in row] for row in matrix.to_list()])

    @cached_property
    def a(self) -> acb_mat:
        """The matrix of the state form."""
        return self.matrix(self.model.reduction.matrix)

    @cached_property
    def b(self) -> acb_mat | None:
        """The input matrix; None without inputs."""
        found = self.model.reduction.input_matrix
        return None if found is None else self.matrix(found)

    @cached_property
    def instants(self) -> tuple[acb, ...]:
        """The start and the timeline."""
        return tuple(self.element(at) for at in (self.driving.start, *self.driving.timeline))

    @cached_property
    def generator(self) -> acb_mat | None:
        """S, as the model has it."""
        generator = self.model.generator
        return None if generator is None else self.matrix(generator.matrix)

    @cached_property
    def stacked(self) -> acb_mat:
        """The matrix of states and inputs, put together from A, B, S and the readout."""
        n, w = self.a.nrows(), self.generator
        if w is None or self.model.generator is None or self.b is None:
            return self.a
        fed = self.b * self.matrix(self.model.generator.readout)
        q = w.nrows()
        upper = [[self.a[i, k] for k in range(n)] + [fed[i, k] for k in range(q)] for i in range(n)]
        lower = [[acb(0)] * n + [w[i, k] for k in range(q)] for i in range(q)]
        return acb_mat(upper + lower)

    def times(self, place: int) -> tuple[acb, ...]:
        """Return two instants inside the interval that begins at a place, the same each time."""
        return self._times[place]

    @cached_property
    def _times(self) -> tuple[tuple[acb, ...], ...]:
        return tuple(map(self._inside, self.places))

    def _inside(self, place: int) -> tuple[acb, ...]:
        low = self.instants[place]
        if place + 1 < len(self.instants):
            width = self.instants[place + 1] - low
        else:
            size = max((abs(e).upper() for e in self.stacked.entries()), default=arb(1))
            width = acb(1 / (1 + arb(size.mid())))
        return (low + width / 3, low + width * 5 / 8)

    @property
    def places(self) -> range:
        """The intervals by their places."""
        return range(len(self.instants))

    def place_at(self, t: acb) -> int:
        """Return the place of the interval in which an instant lies."""
        return max(k for k, at in enumerate(self.instants) if not bool(t.real < at.real))

    def waves(self, column: int, place: int) -> list[Wave]:
        """Return the waves of an input that are on in an interval."""
        model = self.driving
        order = {at: k for k, at in enumerate((model.start, *model.timeline))}
        found: list[Wave] = []
        for burst in model.inputs[column].signal.bursts:
            first = 0 if burst.start is None else order[burst.start]
            last = len(order) if burst.end is None else order[burst.end]
            if first <= place < last:
                found += burst.waves
        return found

    def input_series(self, column: int, place: int, t: acb) -> acb_series:
        """Return the power series at t of what an input is in an interval."""
        later = acb_series([t, acb(1)], SERIES)
        total = acb_series([acb(0)], SERIES)
        for wave in self.waves(column, place):
            total = total + self.wave_at(wave, later)
        return total

    def wave_at(self, wave: Wave, t: Any) -> Any:
        """Return a wave at an instant, which may be a power series."""
        s = t - self.element(wave.origin)
        value = self.element(wave.amount) * (s * self.element(wave.rate)).exp()
        for _ in range(wave.power):
            value = value * s
        if wave.kernel != "one":
            angle = s * self.element(wave.frequency)
            value = value * (angle.cos() if wave.kernel == "cos" else angle.sin())
        return value

    def inputs_at(self, place: int, t: acb) -> acb_mat:
        """Return u(t), one row for each input."""
        count = len(self.model.inputs)
        return acb_mat([[self.input_series(k, place, t)[0]] for k in range(count)])

    def generated(self, place: int, t: acb) -> list[acb]:
        """Return w(t): the derivatives of each input's waves, as many as its block has rows."""
        generator = self.model.generator
        found: list[acb] = []
        for column, size in enumerate(generator.orders if generator is not None else ()):
            if size:
                series = self.input_series(column, place, t)
                factorial = acb(1)
                for k in range(size):
                    factorial = factorial * max(k, 1)
                    found.append(series[k] * factorial)
        return found

    def blow(self, place: int) -> acb_mat:
        """Return what the impulses at an instant add to the state."""
        model, n = self.driving, self.a.nrows()
        at = (model.start, *model.timeline)[place]
        total = acb_mat(n, 1)
        for column, given in enumerate(model.inputs):
            for impulse in given.signal.impulses:
                if impulse.at == at and self.b is not None:
                    amount = self.element(impulse.amount)
                    weights = [[self.b[i, column]] for i in range(n)]
                    total = total + acb_mat(weights) * amount
        return total

    @cached_property
    def initial(self) -> acb_mat:
        """The given state at the start."""
        if self.driving.initial is not None:
            return acb_mat([[self.element(value)] for value in self.driving.initial])
        rows, right = [], []
        for k, condition in enumerate(self.driving.conditions):
            since = self.element(condition.at) - self.instants[0]
            weights = acb_mat([[self.element(w) for w in condition.of_states]])
            rows.append((weights * (self.a * since).exp()).entries())
            rest = weights * self._condition_state(k, acb_mat(self.a.nrows(), 1))
            right.append([self.element(condition.value) - rest[0, 0]])
        return acb_mat(rows).solve(acb_mat(right))

    def state_of_condition(self, k: int) -> acb_mat:
        """Return the true state at the instant of a condition, before an impulse there."""
        return self._condition_state(k, self.initial)

    def _condition_state(self, k: int, initial: acb_mat) -> acb_mat:
        t = self.element(self.driving.conditions[k].at)
        before = [j for j, at in enumerate(self.instants) if bool((t - at).real > 0)]
        if not before:
            return initial
        return self.carried(self.motion_from(initial)[before[-1]], before[-1], t)

    def basis_at(self, k: int, t: acb) -> acb_mat:
        """Return the free motion that belongs to a constant of conditions at points."""
        if self.solution.points is None:
            raise ValueError("without conditions at points there are no constants")
        origin, column = self.solution.points.found.basis[k]
        return (self.a * (t - self.element(origin))).exp() * self.matrix(column)

    def free_at(self, t: acb) -> acb_mat:
        """Return the free motion that is left once the first sustained part is off."""
        start = self.instants[0]
        held = self.solution.functions.sustained[0]
        names = {**self.names, self.model.time: start}
        formulas = self.solution.in_interval(held)[: self.a.nrows()]
        rest = self.initial - acb_mat([[ball_at(f, names)] for f in formulas])
        return (self.a * (t - start)).exp() * rest

    @cached_property
    def point_equations(self) -> tuple[acb_mat, acb_mat]:
        """The equations for the constants: what each motion has in each condition."""
        n = self.a.nrows()
        rows, right = [], []
        for k, condition in enumerate(self.model.conditions):
            t = self.element(condition.at)
            weights = acb_mat([[self.element(w) for w in condition.of_states]])
            rows.append([(weights * self.basis_at(j, t))[0, 0] for j in range(n)])
            rest = weights * (self.state_of_condition(k) - self.free_at(t))
            right.append([self.element(condition.value) - rest[0, 0]])
        return acb_mat(rows), acb_mat(right)

    @cached_property
    def half_time(self) -> acb | None:
        """A time after which e^(At) at least halves every vector; None if none is found."""
        size = max((abs(e).upper() for e in self.a.entries()), default=arb(0))
        time = acb(1 / (1 + arb(size.mid())))
        n = self.a.nrows()
        for _ in range(_DOUBLINGS):
            moved = (self.a * time).exp()
            largest = max((abs(e).upper() for e in moved.entries()), default=arb(0))
            if bool(largest * n < arb(1) / 2):
                return time
            time = 2 * time
        return None

    @cached_property
    def point_constants(self) -> acb_mat:
        """The constants, from the equations."""
        matrix, right = self.point_equations
        return matrix.solve(right)

    @cached_property
    def motion(self) -> tuple[acb_mat, ...]:
        """The state right after each instant."""
        return self.motion_from(self.initial)

    @cached_property
    def forced_motion(self) -> tuple[acb_mat, ...]:
        """The same from rest."""
        return self.motion_from(acb_mat(self.a.nrows(), 1))

    def motion_from(self, initial: acb_mat) -> tuple[acb_mat, ...]:
        """Return the state right after each instant, from a state right before the first."""
        found = [initial + self.blow(0)]
        for place in range(1, len(self.instants)):
            before = self.carried(found[-1], place - 1, self.instants[place])
            found.append(before + self.blow(place))
        return tuple(found)

    def carried(self, state: acb_mat, place: int, t: acb) -> acb_mat:
        """Carry a state from an instant on to another within the interval."""
        n, low = self.a.nrows(), self.instants[place]
        whole = acb_mat(
            [[state[i, 0]] for i in range(n)] + [[w] for w in self.generated(place, low)]
        )
        moved = (self.stacked * (t - low)).exp() * whole
        return acb_mat([[moved[i, 0]] for i in range(n)])

    def state_at(self, place: int, t: acb, *, forced: bool = False) -> acb_mat:
        """Return x(t) in an interval."""
        known = self._states.setdefault((place, forced), [])
        for instant, state in known:
            if instant is t:  # most statements are looked at in the same two instants
                return state
        motion = self.forced_motion if forced else self.motion
        state = self.carried(motion[place], place, t)
        known.append((t, state))
        return state

    @cached_property
    def _states(self) -> dict[tuple[int, bool], list[tuple[acb, acb_mat]]]:
        return {}

    def rows_of(self, state: acb_mat, inputs: acb_mat) -> list[acb]:
        """Return states, eliminated unknowns and outputs."""
        model, reduction = self.model, self.model.reduction
        found = list(state.entries())
        if reduction.eliminated_from_states is not None:
            values = self.matrix(reduction.eliminated_from_states) * state
            if reduction.eliminated_from_inputs is not None:
                values = values + self.matrix(reduction.eliminated_from_inputs) * inputs
            found += values.entries()
        for output in model.outputs:
            total = acb(0)
            for weight, value in zip(output.of_states, state.entries(), strict=True):
                total += self.element(weight) * value
            for weight, value in zip(output.of_inputs, inputs.entries(), strict=True):
                total += self.element(weight) * value
            found.append(total)
        return found

    def rows_at(self, place: int, t: acb, *, forced: bool = False) -> list[acb]:
        """Return what is true of every row of the model at an instant."""
        state = self.state_at(place, t, forced=forced)
        return self.rows_of(state, self.inputs_at(place, t))

    def slope(self, state: acb_mat, inputs: acb_mat) -> acb_mat:
        """Return A x + B u."""
        return self.a * state if self.b is None else self.a * state + self.b * inputs

    def size_at(self, t: acb) -> arb:
        """Return the size of what the solution at an instant is made from."""
        place = self.place_at(t)
        state = self.motion[place]
        moved = (self.stacked * (t - self.instants[place])).exp()
        size = max((abs(e).upper() for e in moved.entries()), default=arb(1))
        whole = [*state.entries(), *self.generated(place, self.instants[place])]
        return size * (1 + sum((abs(e).upper() for e in whole), arb(0)))
