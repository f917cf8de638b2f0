"""Values of responses to inputs that repeat: against every period stated by itself."""

from __future__ import annotations

from collections.abc import Callable
from fractions import Fraction

import pytest
from flint import arb, ctx

from closedform.algebra.surds import SurdSum
from closedform.model.driven.model import DrivenModel
from closedform.model.driven.signal import Burst, Impulse, Repeat, Signal
from closedform.model.parametric import ValueSet
from closedform.response.driven.numbers import driven_numbers_at
from closedform.response.driven.put_in import put_in
from closedform.response.driven.response import respond_driven
from closedform.response.driven.sampling import default_instants, sampled_rows
from tests.response.driven.stated import Element, numeric, parametric, wave

PERIOD, ON, BLOW = Fraction(3), Fraction(1), Fraction(2)
MATRIX = [[0, 1], [-5, -2]]
FEED = [[0], [1]]
Shape = Callable[[Element, Fraction], tuple[tuple[Burst, ...], tuple[Impulse, ...]]]


def one(e: Element, begun: Fraction) -> tuple[tuple[Burst, ...], tuple[Impulse, ...]]:
    """A period: a sine that is on for a while, and then a blow."""
    waves = (wave(e, 2, kernel="sin", frequency=1, origin=begun),)
    burst = Burst(waves, e(begun), e(begun + ON))
    return (burst,), (Impulse(e("1/2"), e(begun + BLOW)),)


def repeated(count: int | None) -> DrivenModel:
    def signals(e: Element) -> list[Signal]:
        return [Signal(*one(e, Fraction(0)), Repeat(e(PERIOD), e(0), count))]

    return numeric(MATRIX, FEED, signals, initial=[1, 0])


def unrolled(count: int) -> DrivenModel:
    """The same for so many periods, each stated by itself."""
    begun = [PERIOD * k for k in range(count)]

    def signals(e: Element) -> list[Signal]:
        parts = [one(e, at) for at in begun]
        bursts = tuple(b for own, _ in parts for b in own)
        return [Signal(bursts, tuple(i for _, own in parts for i in own))]

    timeline = [at + later for at in begun for later in (0, ON, BLOW) if at + later]
    return numeric(MATRIX, FEED, signals, initial=[1, 0], timeline=timeline)


def rows_of(model: DrivenModel, times: list[Fraction]) -> list[list[str]]:
    solution = respond_driven(model).solutions[0]
    instants = [SurdSum.rational(t) for t in times]
    return sampled_rows(solution, instants, 9)


@pytest.mark.parametrize("count", [1, 2, 4])
def test_a_number_of_periods_has_the_values_of_these_periods(count: int) -> None:
    times = [Fraction(k, 4) for k in range(0, 60, 5)] + [PERIOD, PERIOD * count, PERIOD * count + 2]
    assert rows_of(repeated(count), times) == rows_of(unrolled(count), times)


def test_periods_without_end_have_the_values_of_enough_of_them() -> None:
    times = [Fraction(k, 4) for k in range(0, 70, 7)]
    assert rows_of(repeated(None), times) == rows_of(unrolled(6), times)


@pytest.mark.parametrize("count", [None, 3])
def test_written_formulas_have_the_same_values(count: int | None) -> None:
    response = respond_driven(repeated(count))
    with ctx.workprec(200):
        for t in (Fraction(1, 2), Fraction(3), Fraction(16, 3), Fraction(8), Fraction(25, 2)):
            found = response.solution_at(t, 20)
            expected = respond_driven(unrolled(count or 5)).solution_at(t, 20)
            assert all(abs(a - b) < arb("1e-18") for a, b in zip(found, expected, strict=True))


@pytest.mark.parametrize("count", [None, 1, 3, 20])
def test_instants_show_parts_of_the_first_periods_and_what_comes_after(count: int | None) -> None:
    model = repeated(count)
    solution = respond_driven(model).solutions[0]
    times = [t.as_fraction() for t in default_instants(solution)]
    assert times[0] == 0
    assert times == sorted(set(times))
    shown = {t for t in times if t < PERIOD * min(count or 2, 2)}
    assert {Fraction(0), ON, BLOW} <= shown
    if count is not None:
        assert sum(t > PERIOD * count for t in times) >= 3


def test_the_period_that_holds_an_instant_is_counted_exactly() -> None:
    model = repeated(3)
    solution = respond_driven(model).solutions[0]
    exact = put_in(solution)
    counts = [exact.periods_at(1, SurdSum.rational(Fraction(t))) for t in ("0", "8/3", "3", "100")]
    assert counts == [1, 1, 2, 3]
    early = put_in(solution, times=[SurdSum.rational(-1)])
    assert early.periods_at(1, SurdSum.rational(-1)) == 0


def test_values_put_in_for_parameters_are_those_in_numbers() -> None:
    def signals(e: Element) -> list[Signal]:
        burst = Burst((wave(e, "q"),), e(0), e("a"))
        return [Signal((burst,), (), Repeat(e("P"), e(0), None))]

    model = parametric(
        [["-k"]],
        [[1]],
        signals,
        initial=["x0"],
        parameters={
            "k": "positive",
            "q": "real",
            "a": "positive",
            "P": "positive",
            "x0": "real",
        },
        conditions=["a < P"],
    )
    given = {"k": "1/2", "q": 3, "a": 1, "P": 2, "x0": 1}
    values = ValueSet("", tuple((k, SurdSum.rational(Fraction(v))) for k, v in given.items()))
    found = driven_numbers_at(respond_driven(model), values, digits=9)

    def in_numbers(e: Element) -> list[Signal]:
        return [Signal((Burst((wave(e, 3),), e(0), e(1)),), (), Repeat(e(2), e(0), None))]

    plain = numeric([["-1/2"]], [[1]], in_numbers, initial=[1])
    times = [t.as_fraction() for t in found.times]
    assert [list(row) for row in found.rows] == rows_of(plain, times)


def test_the_end_of_very_many_periods_is_not_shown() -> None:
    def last(count: int) -> Fraction:
        solution = respond_driven(repeated(count)).solutions[0]
        return default_instants(solution)[-1].as_fraction()

    assert last(20) > 20 * PERIOD
    assert last(1000000) < 20 * PERIOD
