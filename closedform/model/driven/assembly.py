"""What follows from the contents of a file: the parts of a driven model."""

from __future__ import annotations

from dataclasses import replace
from functools import cached_property
from typing import Generic, TypeVar

from closedform.algebra.domain import ParameterDomain
from closedform.algebra.field import Scalar
from closedform.errors import Place
from closedform.model.driven.contents import Contents, Weighed
from closedform.model.driven.generator import Generator, generator_of
from closedform.model.driven.initial import Start
from closedform.model.driven.initial_errors import ImpulseValueError, PointJetError
from closedform.model.driven.instants import Order, order_in
from closedform.model.driven.model import (
    DrivenModel,
    DrivenOutput,
    Input,
    Jet,
    PointCondition,
)
from closedform.model.driven.piece_errors import EarlyRepeatError
from closedform.model.driven.points import Point, conditions_at
from closedform.model.driven.signal import Signal
from closedform.model.driven.signal_algebra import mapped, numbers_of
from closedform.model.driven.solved_form import SolvedForm
from closedform.model.driven.stacking import generator_names, stacked_matrix, state_names
from closedform.model.driven.strikes import strikes_in
from closedform.model.driven.timeline import Timeline, timeline_of
from closedform.model.driven.values_at import element_text
from closedform.model.errors import TooManyStatesError
from closedform.model.model import Model
from closedform.model.naming import MOST_STATES
from closedform.model.parametric import ParametricModel
from closedform.notation.plain import plain

__all__ = ["Assembly"]

T = TypeVar("T")


class Assembly(Generic[T]):
    """The parts of a driven model, each worked out once.

    `key` is where the equations stand, `domain` the values that assumptions and conditions
    leave to the parameters, None without parameters.
    """

    def __init__(self, contents: Contents[T], key: str, domain: ParameterDomain | None) -> None:
        self.contents, self.domain = contents, domain
        self.form = SolvedForm(contents, key)
        self.numerals, self.source = contents.numerals, contents.numerals.source
        self.statement = contents.statement
        self.field, self.convert = self.form.field, self.form.convert

    @cached_property
    def _signals(self) -> tuple[Signal, ...]:
        """The signal of each input, at all times."""
        return tuple(mapped(column.signal, self.convert) for column in self.form.acting)

    @cached_property
    def _timeline(self) -> Timeline:
        """The instants, and the inputs from the start on.

        Where the values at the start hold after a jump, the derivatives that the state form
        needs have no impulse there.
        """
        signals = list(self._signals)
        self._refuse_repeats()
        if self._initial is not None and self._initial[1]:
            for place in range(self.form.typed, len(signals)):
                later = (
                    impulse
                    for impulse in signals[place].impulses
                    if self._order.compared(impulse.at, self.start)
                )
                signals[place] = replace(signals[place], impulses=tuple(later))
        return timeline_of(signals, self.start, self.field, self.domain, self.form.place)

    @cached_property
    def inputs(self) -> tuple[Input, ...]:
        """The inputs as they are from the start on."""
        found = []
        for column, signal in zip(self.form.acting, self._timeline.signals, strict=True):
            one = column.declared
            if one is None:
                found.append(Input("", column.formula, signal))
            else:
                found.append(
                    Input(one.name, column.formula, signal, one.definition, one.unit, one.meaning)
                )
        return tuple(found)

    @cached_property
    def generator(self) -> Generator | None:
        """The generator of the waves of all inputs."""
        waves = [
            [wave for burst in one.signal.bursts for wave in burst.waves] for one in self.inputs
        ]
        return generator_of(self.field, waves)

    # --- values ----------------------------------------------------------------------------

    @cached_property
    def start(self) -> Scalar:
        """The instant at which time begins."""
        return self.convert(self.contents.start)

    @cached_property
    def stated_initial(self) -> dict[Jet, Scalar]:
        """The values at the start, as stated."""
        stated = self.contents.initial or {}
        return {jet: self.convert(value) for jet, value in stated.items()}

    @property
    def initial(self) -> tuple[Scalar, ...] | None:
        """The states at the start, None if conditions at points take their place."""
        return self._initial and self._initial[0]

    @cached_property
    def _initial(self) -> tuple[tuple[Scalar, ...], bool] | None:
        """The states at the start, and whether they hold after a jump."""
        if self.contents.initial is None:
            return None
        start = Start(
            field=self.field,
            rows=self.form.rows,
            signals=self._signals,
            at=self.start,
            order=self._order,
            source=self.source,
            algebraic=frozenset(name for name, order in self.statement.orders.items() if not order),
        )
        return start.initial(self.stated_initial)

    @cached_property
    def conditions(self) -> tuple[PointCondition, ...]:
        """The conditions at points."""
        if self.contents.initial is not None:
            return ()
        points = [
            Point(
                point.text,
                self.convert(point.at),
                tuple((jet, self.convert(weight)) for jet, weight in point.of_jets),
                self.convert(point.value),
                point.key,
            )
            for point in self.contents.points
        ]
        texts = [plain(column.formula) for column in self.form.acting]
        start = (self.start, plain(element_text(self.field, self.start)))
        return conditions_at(points, self.form.rows, texts, start, self._order, self.source)

    @property
    def _order(self) -> Order:
        return order_in(self.field, self.domain, self.form.place)

    @cached_property
    def outputs(self) -> tuple[DrivenOutput, ...]:
        """The outputs in states and inputs."""
        return tuple(self._output(name, weighed) for name, weighed in self.contents.outputs)

    def _output(self, name: str, weighed: Weighed[T]) -> DrivenOutput:
        row = self.form.rows.combined(
            {jet: self.convert(weight) for jet, weight in weighed.of_jets}
        )
        if row is None:
            raise PointJetError(self.source.at(f"outputs.{name}"), name)
        zero = self.field.domain.zero
        states = [row.of_states.get(k, zero) for k in range(len(self.form.reduction.jets))]
        inputs = [row.of_inputs.get(k, zero) for k in range(len(self.form.acting))]
        for place, weight in weighed.of_inputs:
            inputs[place] += self.convert(weight)
        return DrivenOutput(name, tuple(states), tuple(inputs))

    # --- all together ----------------------------------------------------------------------

    @cached_property
    def names(self) -> tuple[str, ...]:
        """The names of the states."""
        found, self.numerals.names = state_names(
            self.form.reduction.jets, self.numerals.names, self.form.key, self.source
        )
        return found

    @cached_property
    def stacked_states(self) -> tuple[str, ...]:
        """The names of the states, then those of the generator."""
        if self.generator is None:
            return self.names
        size = len(self.names) + self.generator.order
        if size > MOST_STATES:
            raise TooManyStatesError(self.form.place, size, MOST_STATES)
        inputs = [
            one.name if column.shifted is None or not column.shifted.order else ""
            for one, column in zip(self.inputs, self.form.acting, strict=True)
        ]
        names = self.names  # those of derivatives are in use from here on
        return names + generator_names(self.generator.orders, inputs, self.numerals.names)

    @cached_property
    def stacked_matrix(self) -> tuple[tuple[Scalar, ...], ...]:
        """The matrix [[A, B R], [0, S]]."""
        return stacked_matrix(self.field, self.form.reduction, self.generator)

    @cached_property
    def stacked_initial(self) -> tuple[Scalar, ...]:
        """The initial values of the states, zeros where they are not known, and for the rest."""
        zero = self.field.domain.zero
        known = self.initial or (zero,) * len(self.names)
        return known + (zero,) * (len(self.stacked_states) - len(known))

    @cached_property
    def elements(self) -> tuple[Scalar, ...]:
        """What has to be defined for all values of the parameters, beside the stacked model."""
        form = self.form.reduction
        matrices = (form.input_matrix, form.eliminated_from_states, form.eliminated_from_inputs)
        found = [e for m in matrices if m is not None for row in m.to_list() for e in row]
        for balance in self.form.balances:
            found += [weight for _, weight in (*balance.of_unknowns, *balance.of_inputs)]
        for one in self.inputs:
            found += numbers_of(one.signal)
        for output in self.outputs:
            found += [*output.of_states, *output.of_inputs]
        for point in self.conditions:
            found += [point.at, point.value, *point.of_states]
        found += [self.start, *self.stated_initial.values()]
        found += [1 / divisor for divisor in self.form.divisors]
        return tuple(found)

    @property
    def reserved(self) -> tuple[str, ...]:
        """Names of the model that are none of its states: of other unknowns, inputs, outputs."""
        inputs = (given.name for given in self.inputs if given.name)
        found = (*self.statement.unknowns, *inputs, *(output.name for output in self.outputs))
        return tuple(dict.fromkeys(name for name in found if name not in self.names))

    def model(self, stacked: Model | ParametricModel) -> DrivenModel:
        """Return the driven model, given its stacked one.

        Raises ImpulseValueError if an unknown or an output would be an impulse at an instant.
        """
        self._refuse_impulses()
        return DrivenModel(
            form=self.statement.form,
            field=self.field,
            domain=stacked.domain if isinstance(stacked, ParametricModel) else None,
            unknowns=self.statement.unknowns,
            names=self.names,
            balances=self.form.balances,
            reduction=self.form.reduction,
            inputs=self.inputs,
            generator=self.generator,
            outputs=self.outputs,
            start=self.start,
            initial=self.initial,
            conditions=self.conditions,
            timeline=self._timeline.instants,
            stacked=stacked,
            stated_initial=tuple(self.stated_initial.items()),
            times=stacked.times,
        )

    def _refuse_repeats(self) -> None:
        """Raise an error for an input that has begun to repeat before the start."""
        for column, signal in zip(self.form.acting, self._signals, strict=True):
            repeat = signal.repeat
            if repeat is None or self._order.compared(repeat.start, self.start) >= 0:
                continue
            name = "" if column.declared is None else column.declared.name
            begins, start = (
                plain(element_text(self.field, at)) for at in (repeat.start, self.start)
            )
            text = plain(column.formula)
            raise EarlyRepeatError(self.source.at_name(f"inputs.{name}"), text, begins, start)

    def _refuse_impulses(self) -> None:
        """Raise an error for what follows from the inputs at each instant and holds impulses."""
        form = self.form.reduction
        weights = form.eliminated_from_inputs
        rows = [] if weights is None else weights.to_list()
        named = [
            *((name, row, False) for name, row in zip(form.eliminated, rows, strict=False)),
            *((one.name, one.of_inputs, True) for one in self.outputs),
        ]
        signals = self._timeline.signals
        for name, of_inputs, output in named:
            strike = strikes_in(self.field, of_inputs, signals)
            if strike is not None:
                given = plain(self.form.acting[strike.place].formula)
                at = self.source.at(f"outputs.{name}") if output else self._equation_of(name)
                raise ImpulseValueError(at, name, given, strike.at, output)

    def _equation_of(self, name: str) -> Place:
        """Where an unknown first stands in an equation."""
        rows = self.statement.rows
        found = (row.key for row in rows if any(jet.name == name for jet, _ in row.of_unknowns))
        return self.source.at(next(found, self.form.key))
