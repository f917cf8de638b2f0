"""The linear system whose output an input is: its matrix, and the starts that make waves."""

from __future__ import annotations

from collections.abc import Callable, Sequence
from fractions import Fraction
from math import factorial

import pytest
from flint import arb, arb_mat, arb_series
from hypothesis import given
from hypothesis import strategies as st

from closedform.algebra.field import BaseField, FieldMatrix, Scalar, base_field
from closedform.algebra.parameter_field import ParameterField
from closedform.algebra.surds import SurdSum
from closedform.algebra.waves import Kernel, Wave
from closedform.model.driven.generator import Generator, Tone, generator_of, wave_series
from tests.model.driven.signal_values import SMALL, ball, wave_value

ROOT = SurdSum.rational(2).sqrt()
ROOTS = base_field([ROOT])
Q = BaseField()
PARAMETRIC = ParameterField(parameters=("a", "w"))
VALUES = {"a": ball(Fraction(-2, 3)), "w": ball(Fraction(7, 5))}
A, W = PARAMETRIC.domain.gens
FIELDS: dict[str, tuple[BaseField, tuple[Scalar, ...]]] = {
    "rational": (Q, tuple(map(Q.scalar, (Fraction(-1, 2), 1, 2)))),
    "roots": (ROOTS, (ROOTS.scalar(ROOT), ROOTS.scalar(1), ROOTS.scalar(-1) - ROOTS.scalar(ROOT))),
    "parameters": (PARAMETRIC, (A, W, A + W, W / 2)),
}
POINTS = (Fraction(-4, 5), Fraction(1, 3), Fraction(3, 2))


def enclosing(field: BaseField) -> Callable[[Scalar], arb]:
    if isinstance(field, ParameterField):
        return lambda element: field.enclose_at(element, VALUES)
    return field.enclose


@st.composite
def waves(draw: st.DrawFn, kind: str) -> Wave:
    field, numbers = FIELDS[kind]
    zero = field.domain.zero
    kernels: tuple[Kernel, ...] = ("one", "cos", "sin")
    kernel = draw(st.sampled_from(kernels))
    frequency = zero
    if kernel != "one":
        frequency = draw(st.sampled_from([*numbers, *(-n for n in numbers)]))
    return Wave(
        field.scalar(draw(SMALL)) * draw(st.sampled_from(numbers)),
        draw(st.integers(0, 2)),
        draw(st.sampled_from([zero, *numbers])),
        kernel,
        frequency,
        draw(st.sampled_from([zero, *numbers])),
    )


def inputs(kind: str) -> st.SearchStrategy[list[list[Wave]]]:
    return st.lists(st.lists(waves(kind), max_size=2), min_size=1, max_size=2)


def enclosed(field: BaseField, matrix: FieldMatrix, scale: arb) -> arb_mat:
    enclose = enclosing(field)
    rows, columns = matrix.shape
    entries = [enclose(e) * scale for row in matrix.to_list() for e in row]
    return arb_mat(rows, columns, entries)


@pytest.mark.parametrize("kind", sorted(FIELDS))
@given(st.data(), st.sampled_from(POINTS))
def test_the_output_from_the_start_of_a_wave_is_the_wave(
    kind: str, data: st.DataObject, s: Fraction
) -> None:
    field = FIELDS[kind][0]
    given = data.draw(inputs(kind))
    generator = generator_of(field, given)
    if generator is None:
        assert not any(given)
        return
    flow = enclosed(field, generator.matrix, ball(s)).exp()
    readout = enclosed(field, generator.readout, arb(1))
    for place, of_input in enumerate(given):
        for wave in of_input:
            start = enclosed(field, generator.start(place, wave), arb(1))
            outputs = readout * (flow * start)
            enclose = enclosing(field)
            expected = wave_value(wave, ball(s) + enclose(wave.origin), enclose)
            assert outputs[place, 0].overlaps(expected)
            assert outputs[place, 0].rad() < arb(10) ** -6 * (1 + abs(expected.mid()))
            assert all(outputs[k, 0] == 0 for k in range(len(given)) if k != place)


@pytest.mark.parametrize("kind", sorted(FIELDS))
@given(st.data())
def test_each_block_is_the_companion_of_its_tones(kind: str, data: st.DataObject) -> None:
    field = FIELDS[kind][0]
    given = data.draw(inputs(kind))
    generator = generator_of(field, given)
    if generator is None:
        return
    one, zero = field.domain.one, field.domain.zero
    whole = field.polynomial([one])
    for tone in (tone for tones in generator.tones for tone in tones):
        square = field.polynomial([one, -2 * tone.rate, tone.rate**2 + tone.frequency**2])
        line = field.polynomial([one, -tone.rate])
        whole = whole * (square if tone.frequency else line) ** tone.size
    assert generator.matrix.charpoly() == whole.to_list()
    rows = generator.matrix.to_list()
    lasts = {
        first + order - 1
        for first, order in zip(generator.first, generator.orders, strict=True)
        if order
    }
    for k, row in enumerate(rows):
        if k not in lasts:
            assert row == [one if j == k + 1 else zero for j in range(generator.order)]
    assert sum(generator.orders) == generator.order == len(rows)
    firsts = [
        first for first, order in zip(generator.first, generator.orders, strict=True) if order
    ]
    assert [row.index(one) for row in generator.readout.to_list() if any(row)] == firsts


@pytest.mark.parametrize("kind", sorted(FIELDS))
@given(st.data())
def test_the_series_of_a_wave_is_that_of_its_factors(kind: str, data: st.DataObject) -> None:
    field = FIELDS[kind][0]
    wave = data.draw(waves(kind))
    enclose = enclosing(field)
    length = 6
    s = arb_series([0, 1], prec=length)
    value = (s * enclose(wave.rate)).exp() * enclose(wave.amount)
    for _ in range(wave.power):
        value = value * s
    if wave.kernel != "one":
        angle = s * enclose(wave.frequency)
        value = value * (angle.cos() if wave.kernel == "cos" else angle.sin())
    found = wave_series(field, wave, length)
    assert len(found) == length
    assert all(enclose(c).overlaps(value[k]) for k, c in enumerate(found))


def test_waves_of_one_tone_share_a_block() -> None:
    zero, one, two = map(Q.scalar, (0, 1, 2))
    rising = Wave(one, 1, zero, "sin", two, one)
    turned = Wave(two, 0, zero, "cos", -two, zero)
    generator = made(Q, [[rising, turned]])
    assert generator.tones == ((Tone(zero, two, 2),),)
    assert generator.order == 4


def test_an_input_of_impulses_alone_has_no_block() -> None:
    zero, one = Q.scalar(0), Q.scalar(1)
    constant = Wave(one, 0, zero, "one", zero, zero)
    assert generator_of(Q, [[], []]) is None
    generator = made(Q, [[], [constant], []])
    assert (generator.orders, generator.first) == ((0, 1, 0), (0, 0, 1))
    assert generator.readout.to_list() == [[zero], [one], [zero]]


def test_the_start_holds_the_derivatives_at_the_origin() -> None:
    zero, rate = Q.scalar(0), Q.scalar(3)
    wave = Wave(Q.scalar(2), 1, rate, "one", zero, Q.scalar(5))
    generator = made(Q, [[wave, Wave(Q.scalar(1), 3, rate, "one", zero, zero)]])
    start = [entry for (entry,) in generator.start(0, wave).to_list()]
    assert start == [factorial(k) * c for k, c in enumerate(wave_series(Q, wave, 4))]
    assert start == [0, 2, 12, 54]  # u = 2 s e^(3 s), u^(k) = 2 k 3^(k - 1) at 0


def made(field: BaseField, waves: Sequence[Sequence[Wave]]) -> Generator:
    generator = generator_of(field, waves)
    assert generator is not None
    return generator
