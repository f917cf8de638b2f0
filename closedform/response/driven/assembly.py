"""From the exponential of the stacked matrix to the functions of the driven solution."""

from __future__ import annotations

from collections.abc import Callable, Iterable, Sequence
from dataclasses import dataclass, field, replace
from functools import cached_property

from closedform.algebra.exponential import ExponentialMatrix
from closedform.algebra.field import BaseField, FieldMatrix, Scalar
from closedform.algebra.waves import ONE, Constant, ConstantColumns, Wave, gathered_columns
from closedform.model.driven.generator import Tone
from closedform.model.driven.model import DrivenModel
from closedform.response.driven.functions import DrivenFunctions, Interval, Summand, Switch
from closedform.response.driven.particular import (
    at_instant,
    combined,
    constants_of,
    drive_of,
    of_input,
    rebased,
    selected,
)

__all__ = ["Part", "ParticularMotion", "Started", "driven_functions", "rows_matrix"]

Put = Callable[[Scalar], Scalar]
"""What puts the equations of a branch into an element."""
Stays = Callable[[Tone], bool | None]
"""Whether waves of a tone do not decay; None where this is not known."""


@dataclass(frozen=True)
class Part:
    """constant · function(t - origin), function r x 1."""

    origin: Scalar
    constant: Constant
    function: ExponentialMatrix


@dataclass(frozen=True)
class Started:
    """A free motion e^(A (t - origin)) column, n x 1, times a number with a name, if it has one."""

    origin: Scalar
    name: str
    column: FieldMatrix


@dataclass(frozen=True)
class _On:
    """A wave of the input at `place`, on from one instant of the timeline to another.

    The instants are counted: 0 is the start, `last` None for ever.
    """

    place: int
    wave: Wave
    first: int
    last: int | None


def driven_functions(
    model: DrivenModel,
    exponential: ExponentialMatrix,
    *,
    put: Put = lambda element: element,
    relation: Scalar | None = None,
    stays: Stays | None = None,
    free: Sequence[Started] | None = None,
) -> DrivenFunctions:
    """Return the functions of the driven solution, as e^(Mt) of the stacked matrix gives them.

    `put` puts the equations of a branch of parameters into elements of the model, and
    `relation` is the one that is kept.  With `stays`, which is given for a stable model
    alone, the last interval is told apart into what stays and what decays.

    Where conditions at points stand in the place of initial values, `free` is the free motion
    that meets them: it goes for the free part, and nothing else starts but what impulses do.

    Raises:  ValueError for a model whose initial values are not given at its start, or with a
             repeating input: these are put together elsewhere.
    """
    known = model.initial is not None or free is not None
    if not known or any(i.signal.repeat for i in model.inputs):
        raise ValueError("only initial values and inputs that do not repeat are put together here")
    return _Assembly(model, exponential, put, relation, free).functions(stays)


class ParticularMotion:
    """What the inputs do from the start on, with no free motion but that of jumps since then."""

    def __init__(
        self,
        model: DrivenModel,
        exponential: ExponentialMatrix,
        *,
        put: Put = lambda element: element,
        relation: Scalar | None = None,
    ) -> None:
        self._assembly = _Assembly(model, exponential, put, relation, ())

    def parts(self, place: int | None) -> list[Part]:
        """Return what adds up in an interval; None for the start, before an impulse there."""
        if place is None:
            return self._assembly.sustained(0)
        return self._assembly.driven(place)


def rows_matrix(model: DrivenModel, put: Put = lambda element: element) -> FieldMatrix:
    """Return what the rows of the model are of the stacked states: r x (n + q)."""
    base, n = model.field, len(model.names)
    zero, one = base.domain.zero, base.domain.one
    reduction, generator = model.reduction, model.generator
    m = len(model.inputs)
    states = [[one if i == k else zero for k in range(n)] for i in range(n)]
    feeds = [[zero] * m for _ in range(n)]
    if reduction.eliminated_from_states is not None:
        states += reduction.eliminated_from_states.to_list()
        of_inputs = reduction.eliminated_from_inputs
        empty = [[zero] * m for _ in reduction.eliminated]
        feeds += of_inputs.to_list() if of_inputs is not None else empty
    for output in model.outputs:
        states.append(list(output.of_states))
        feeds.append(list(output.of_inputs))
    if generator is None:
        return base.matrix([[put(e) for e in row] for row in states])
    read = (base.matrix(feeds) * generator.readout).to_list()
    return base.matrix([[put(e) for e in (*a, *b)] for a, b in zip(states, read, strict=True)])


@dataclass
class _Columns:
    """The columns so far; equal functions share one, but for those with a name of their own."""

    found: list[ExponentialMatrix] = field(default_factory=list)
    names: list[str] = field(default_factory=list)

    def place_of(self, function: ExponentialMatrix, name: str) -> int:
        for place, (own, called) in enumerate(zip(self.found, self.names, strict=True)):
            if called == name and own == function:
                return place
        self.found.append(function)
        self.names.append(name)
        return len(self.found) - 1


class _Assembly:
    """The parts of one solution; what is the same for all of them is worked out once."""

    def __init__(
        self,
        model: DrivenModel,
        exponential: ExponentialMatrix,
        put: Put,
        relation: Scalar | None,
        free: Sequence[Started] | None,
    ) -> None:
        self.model, self.exponential, self.put = model, exponential, put
        self.free_motion = free
        self.base: BaseField = model.field
        self.n = len(model.names)
        self.size = exponential.shape[0]
        self.rows = rows_matrix(model, put)
        self.top = _states_of(self.base, self.n, self.size)
        self.drive = drive_of(model, put, relation)
        self.instants = (put(model.start), *(put(a) for a in model.timeline))
        self.on = tuple(self._waves_on())
        self.columns = _Columns()

    def functions(self, stays: Stays | None) -> DrivenFunctions:
        last = len(self.instants) - 1
        free, jumps = self._free_parts(), self.jumps
        driven = [self.driven(k) for k in range(last + 1)]
        whole = [self._merged([*parts, *free], self.instants[k]) for k, parts in enumerate(driven)]
        intervals = tuple(self._interval(k, parts) for k, parts in enumerate(whole))
        forced = tuple(
            self._interval(k, self._merged(parts, self.instants[k]))
            for k, parts in enumerate(driven)
        )
        switches = tuple(self._switch(k, jumps[k]) for k in range(1, last + 1))
        sustained = tuple(
            self._interval(k, self._merged(self.sustained(k), self.instants[k]))
            for k in range(last + 1)
        )
        free_part = self._summands(self._merged(free, self.instants[0]))
        steady, transient = (None, None) if stays is None else self._told_apart(whole[last], stays)
        return DrivenFunctions(
            self._all_columns(),
            intervals,
            switches,
            free_part,
            forced,
            sustained[last].summands,
            sustained,
            jumps,
            steady,
            transient,
        )

    # What each part is made of

    @cached_property
    def jumps(self) -> tuple[ConstantColumns, ...]:
        """h_j of all instants; without initial values the first is what impulses do."""
        return tuple(self._jump(k) for k in range(len(self.instants)))

    def driven(self, k: int) -> list[Part]:
        """What the waves that are on in an interval sustain, and what the jumps so far started."""
        started = [p for j in range(k + 1) for p in self._started(j, self.jumps[j])]
        return [*self.sustained(k), *started]

    def _free_parts(self) -> list[Part]:
        """The response to the initial values, or the free motion that stands for it."""
        if self.free_motion is None:
            initial = self.base.matrix([[self.put(x)] for x in self.model.initial or ()])
            return [self._free(self.instants[0], ONE(self.base), initial)]
        one = ONE(self.base)
        return [
            self._free(s.origin, replace(one, named=s.name), s.column) for s in self.free_motion
        ]

    def _waves_on(self) -> Iterable[_On]:
        """Every wave with the instants between which it is on."""
        places = {instant: k for k, instant in enumerate(self.model.timeline, start=1)}
        places.setdefault(self.model.start, 0)
        for place, given in enumerate(self.model.inputs):
            for burst in given.signal.bursts:
                first = 0 if burst.start is None else places[burst.start]
                last = None if burst.end is None else places[burst.end]
                for wave in burst.waves:
                    own = wave
                    if not (wave.power or wave.rate or wave.frequency):  # a constant has no origin
                        own = replace(wave, origin=self.model.start if first == 0 else burst.start)
                    yield _On(place, own, first, last)

    def _particular_function(self, on: _On) -> ExponentialMatrix:
        """The stacked particular response to a wave, in the time from its origin."""
        generator = self.model.generator
        if generator is None:
            raise ValueError("a model without waves has no particular response")
        start = generator.start(on.place, on.wave).to_list()
        zero = self.base.domain.zero
        column = [[zero] for _ in range(self.n)] + [[self.put(e)] for (e,) in start]
        return of_input(self.drive, self.exponential.times(self.base.matrix(column)))

    def _particular(self, on: _On) -> list[Part]:
        function = self._particular_function(on).after(self.rows)
        return [Part(self.put(on.wave.origin), ONE(self.base), function)]

    def sustained(self, k: int) -> list[Part]:
        """What the waves that are on in an interval sustain."""
        return [part for on in self.on if _is_on(on, k) for part in self._particular(on)]

    def _jump(self, k: int) -> ConstantColumns:
        """h_k: impulses at an instant, less what the particular responses change there."""
        at = self.instants[k]
        parts: list[tuple[Constant, FieldMatrix]] = []
        for on in self.on:
            sign = (on.first == k) - (on.last == k)
            if not sign or (k == 0 and self.free_motion is not None):
                continue
            function = self._particular_function(on).after(self.top)
            d = at - self.put(on.wave.origin)
            values = at_instant(self.drive, function, d) if d else self._at_zero(function)
            parts += [(c, column * self.base.domain.convert(-sign)) for c, column in values]
        blow = self._impulses(k)
        if blow is not None:
            parts.append((ONE(self.base), blow))
        return gathered_columns(parts)

    def _at_zero(self, function: ExponentialMatrix) -> ConstantColumns:
        return ((ONE(self.base), function.at_zero()),)

    def _impulses(self, k: int) -> FieldMatrix | None:
        matrix = self.model.reduction.input_matrix
        instant = (self.model.start, *self.model.timeline)[k]
        total = None
        for place, given in enumerate(self.model.inputs):
            for impulse in given.signal.impulses:
                if impulse.at == instant and matrix is not None:
                    weights = [row[place] for row in matrix.to_list()]
                    column = self.base.matrix([[self.put(b * impulse.amount)] for b in weights])
                    total = column if total is None else total + column
        return total

    def _free(self, at: Scalar, constant: Constant, column: FieldMatrix) -> Part:
        zero = self.base.domain.zero
        below = [[zero] for _ in range(self.size - self.n)]
        start = self.base.matrix([*column.to_list(), *below])
        return Part(at, constant, self.exponential.times(start).after(self.rows))

    def _started(self, j: int, jump: ConstantColumns) -> list[Part]:
        return [self._free(self.instants[j], constant, column) for constant, column in jump]

    # How parts are put together

    def _merged(self, parts: Sequence[Part], at: Scalar) -> list[Part]:
        """The parts with those of one origin and constant added up, constants at `at`."""
        one = ONE(self.base)
        polynomial = rebased(
            self.base, [(p.origin, p.function) for p in parts if p.constant.is_one], at
        )
        rest = [
            Part(p.origin, p.constant, constants_of(p.function, kept=False))
            if p.constant.is_one
            else p
            for p in parts
        ]
        found: dict[tuple[Scalar, Constant], list[ExponentialMatrix]] = {}
        for part in (*(Part(o, one, f) for o, f in polynomial), *rest):
            found.setdefault((part.origin, part.constant), []).append(part.function)
        merged = [
            Part(origin, constant, combined((1, f) for f in functions))
            for (origin, constant), functions in found.items()
        ]
        return [part for part in merged if not _is_zero(part.function)]

    def _told_apart(
        self, parts: Sequence[Part], stays: Stays
    ) -> tuple[tuple[Summand, ...] | None, tuple[Summand, ...] | None]:
        """What stays and what decays of the parts of a stable model; None if this is not known."""
        steady, transient = [], []
        for part in parts:
            fates = []
            for term in part.function.terms:
                tone = self.drive.tone_of(term.factor.p)
                fate = False if tone is None else stays(tone)
                if fate is None and any(not residue.is_zero for residue in term.residues):
                    return None, None
                fates.append(bool(fate))
            steady.append(replace(part, function=selected(part.function, fates)))
            rest = selected(part.function, [not fate for fate in fates])
            transient.append(replace(part, function=rest))
        found = [[p for p in ps if not _is_zero(p.function)] for ps in (steady, transient)]
        return self._summands(found[0]), self._summands(found[1])

    def _summands(self, parts: Sequence[Part]) -> tuple[Summand, ...]:
        return tuple(
            Summand(self.columns.place_of(p.function, p.constant.named), p.origin, p.constant)
            for p in parts
        )

    def _interval(self, k: int, parts: Sequence[Part]) -> Interval:
        end = self.instants[k + 1] if k + 1 < len(self.instants) else None
        return Interval(self.instants[k], end, self._summands(parts))

    def _switch(self, k: int, jump: ConstantColumns) -> Switch:
        parts = []
        for on in self.on:
            sign = (on.first == k) - (on.last == k)
            if sign:
                parts += [
                    Part(p.origin, p.constant, combined([(sign, p.function)]))
                    for p in self._particular(on)
                ]
        parts += self._started(k, jump)
        merged = self._merged(parts, self.instants[k])
        return Switch(self.instants[k], self._summands(merged), self._impulses(k) is not None)

    def _all_columns(self) -> ExponentialMatrix:
        found = self.columns.found
        if not found:  # a model at rest that nothing drives
            zero = self.base.zeros(self.size, 1)
            found = [self.exponential.times(zero).after(self.rows)]
        c = len(found)
        total = None
        for k, function in enumerate(found):
            unit = self.base.matrix([[self.base.domain.convert(int(i == k)) for i in range(c)]])
            placed = function.times(unit)
            total = placed if total is None else combined([(1, total), (1, placed)])
        if total is None:
            raise ValueError("a solution has at least one column")
        return total


def _states_of(base: BaseField, n: int, size: int) -> FieldMatrix:
    zero, one = base.domain.zero, base.domain.one
    return base.matrix([[one if i == k else zero for k in range(size)] for i in range(n)])


def _is_on(on: _On, k: int) -> bool:
    return on.first <= k and (on.last is None or k < on.last)


def _is_zero(function: ExponentialMatrix) -> bool:
    return all(residue.is_zero for term in function.terms for residue in term.residues)
