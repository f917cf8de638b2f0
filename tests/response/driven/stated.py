"""Driven models put together by hand: state form, numbers or parameters, any signals."""

from __future__ import annotations

from collections.abc import Callable, Mapping, Sequence
from dataclasses import replace
from fractions import Fraction

from closedform.algebra.field import BaseField, FieldMatrix, Scalar
from closedform.algebra.parameter_field import ParameterField
from closedform.algebra.waves import Kernel, Wave
from closedform.model.building import system
from closedform.model.driven.generator import Generator, generator_of
from closedform.model.driven.model import DrivenModel, Input, Jet, Reduction
from closedform.model.driven.signal import Burst, Impulse, Signal
from closedform.model.model import Model
from closedform.model.parametric import ParametricModel
from closedform.notation.expression import Name
from closedform.notation.rational import rational_value
from closedform.notation.reader import NOWHERE, read_formula

Text = str | int | Fraction
Element = Callable[[Text], Scalar]


def wave(
    element: Element,
    amount: Text,
    *,
    power: int = 0,
    rate: Text = 0,
    kernel: Kernel = "one",
    frequency: Text = 0,
    origin: Text = 0,
) -> Wave:
    """Return a wave over the field of `element`."""
    return Wave(element(amount), power, element(rate), kernel, element(frequency), element(origin))


Signals = Callable[[Element], Sequence[Signal]]


def numeric(
    matrix: Sequence[Sequence[Text]],
    input_matrix: Sequence[Sequence[Text]],
    signals: Signals,
    *,
    initial: Sequence[Text],
    timeline: Sequence[Text] = (),
    start: Text = 0,
) -> DrivenModel:
    """Return x' = A x + B u over the rational numbers."""
    field = BaseField()

    def element(value: Text) -> Scalar:
        return field.scalar(Fraction(value))

    n = len(matrix)
    a = [[element(e) for e in row] for row in matrix]
    b = [[element(e) for e in row] for row in input_matrix]
    given = tuple(signals(element))
    generator = _generator(field, given)
    rows = _stacked(field, a, b, generator)
    names = tuple(f"x{k}" for k in range(1, n + 1))
    below = len(rows) - n
    stacked = system(
        [[field.surds(e) for e in row] for row in rows],
        initial=[*map(Fraction, initial), *[0] * below],
        states=[*names, *(f"u_{k}" for k in range(1, below + 1))],
    )
    assert isinstance(stacked, Model)
    first = [element(x) for x in initial]
    return _model(
        field,
        names,
        a,
        b,
        given,
        generator,
        stacked,
        first,
        [element(t) for t in timeline],
        element(start),
    )


def parametric(
    matrix: Sequence[Sequence[Text]],
    input_matrix: Sequence[Sequence[Text]],
    signals: Signals,
    *,
    initial: Sequence[Text],
    parameters: Mapping[str, str],
    conditions: Sequence[str] = (),
    timeline: Sequence[Text] = (),
) -> DrivenModel:
    """Return x' = A x + B u over the rational functions of parameters, all of them used."""
    n = len(matrix)
    names = tuple(f"x{k}" for k in range(1, n + 1))
    wide = [[*row, "0"] for row in matrix] + [[*["0"] * n, "+".join(parameters)]]
    plain = system(
        wide,
        initial=[*initial, "0"],
        states=[*names, "unused"],
        parameters=parameters,
        conditions=conditions,
    )
    assert isinstance(plain, ParametricModel)
    field: ParameterField = plain.field

    def element(value: Text) -> Scalar:
        formula = read_formula(str(value), names=frozenset(field.parameters))
        return rational_value(formula, field, NOWHERE, meanings={})

    a = [[element(e) for e in row] for row in matrix]
    b = [[element(e) for e in row] for row in input_matrix]
    given = tuple(signals(element))
    generator = _generator(field, given)
    rows = _stacked(field, a, b, generator)
    below = len(rows) - n
    first = [element(x) for x in initial]
    stacked = replace(
        plain,
        matrix=tuple(tuple(row) for row in rows),
        initial=(*first, *[field.domain.zero] * below),
        states=(*names, *(f"u_{k}" for k in range(1, below + 1))),
    )
    return _model(
        field,
        names,
        a,
        b,
        given,
        generator,
        stacked,
        first,
        [element(t) for t in timeline],
        field.domain.zero,
    )


def steady(element: Element, amount: Text) -> Signal:
    """Return a constant input."""
    return Signal((Burst((wave(element, amount),)),))


def pulse(element: Element, amount: Text, start: Text | None, end: Text | None) -> Signal:
    """Return a constant input that is on between two instants."""
    first = None if start is None else element(start)
    last = None if end is None else element(end)
    return Signal((Burst((wave(element, amount),), first, last),))


def sine(element: Element, amount: Text, frequency: Text, kernel: Kernel = "sin") -> Signal:
    """Return amount · sin(frequency t), or cos."""
    return Signal((Burst((wave(element, amount, kernel=kernel, frequency=frequency),)),))


def blow(element: Element, amount: Text, at: Text) -> Signal:
    """Return amount · delta(t - at)."""
    return Signal((), (Impulse(element(amount), element(at)),))


def _generator(field: BaseField, signals: Sequence[Signal]) -> Generator | None:
    return generator_of(field, [[w for b in signal.bursts for w in b.waves] for signal in signals])


def _stacked(
    field: BaseField,
    a: list[list[Scalar]],
    b: list[list[Scalar]],
    generator: Generator | None,
) -> list[list[Scalar]]:
    if generator is None:
        return a
    read: FieldMatrix = field.matrix(b) * generator.readout
    zero = field.domain.zero
    below = [[*[zero] * len(a), *row] for row in generator.matrix.to_list()]
    return [[*own, *fed] for own, fed in zip(a, read.to_list(), strict=True)] + below


def _model(  # noqa: PLR0917  the parts of the model
    field: BaseField,
    names: tuple[str, ...],
    a: list[list[Scalar]],
    b: list[list[Scalar]],
    signals: Sequence[Signal],
    generator: Generator | None,
    stacked: Model | ParametricModel,
    initial: list[Scalar],
    timeline: list[Scalar],
    start: Scalar,
) -> DrivenModel:
    jets = tuple(Jet(name) for name in names)
    inputs = tuple(
        Input(f"u{k}", Name(f"u{k}"), signal) for k, signal in enumerate(signals, start=1)
    )
    return DrivenModel(
        form="state form",
        field=field,
        domain=stacked.domain if isinstance(stacked, ParametricModel) else None,
        unknowns=names,
        names=names,
        balances=(),
        reduction=Reduction(jets, field.matrix(a), field.matrix(b)),
        inputs=inputs,
        generator=generator,
        outputs=(),
        start=start,
        initial=tuple(initial),
        conditions=(),
        timeline=tuple(timeline),
        stacked=stacked,
    )
