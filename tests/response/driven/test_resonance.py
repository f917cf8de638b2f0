"""Resonance: which tones are eigenvalues, and which power of the time that brings."""

from __future__ import annotations

from fractions import Fraction

import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from closedform.model.driven.model import DrivenModel
from closedform.model.driven.signal import Burst, Signal
from closedform.notation.plain import plain
from closedform.response.driven.response import respond_driven
from tests.response.driven.stated import Element, numeric, parametric, pulse, sine, steady, wave


def _chain(stages: int, rate: Fraction, power: int, driven: int) -> DrivenModel:
    """Equal stages in a row, x_k' = rate x_k + x_(k-1), with t^power e^(rate t) into one."""
    matrix = [
        [rate if i == k else Fraction(int(i == k + 1)) for k in range(stages)]
        for i in range(stages)
    ]
    b = [[int(i == driven)] for i in range(stages)]

    def signals(e: Element) -> list[Signal]:
        return [Signal((Burst((wave(e, 1, rate=rate, power=power),)),))]

    return numeric(matrix, b, signals, initial=[0] * stages)


@settings(max_examples=30, deadline=None)
@given(
    st.integers(1, 4),
    st.sampled_from([Fraction(0), Fraction(-1), Fraction(1, 2)]),
    st.integers(0, 2),
    st.integers(0, 3),
)
def test_each_stage_that_the_input_reaches_adds_a_power(
    stages: int, rate: Fraction, power: int, driven: int
) -> None:
    driven = min(driven, stages - 1)
    (solution,) = respond_driven(_chain(stages, rate, power, driven)).solutions
    (found,) = solution.resonances
    assert found.multiplicity == stages
    assert found.raised == stages - driven
    assert found.order == power + stages - driven
    assert found.damped == (rate < 0)
    assert found.condition == "true"


def test_an_undamped_pair_driven_at_its_frequency_grows_with_the_time() -> None:
    model = numeric([[0, 1], [-9, 0]], [[0], [1]], lambda e: [sine(e, 6, 3)], initial=[0, 0])
    (solution,) = respond_driven(model).solutions
    (found,) = solution.resonances
    assert (found.tone.frequency, found.multiplicity, found.order) == (3, 1, 1)
    assert found.damped is False
    assert plain(solution.solution[0]) == "sin(3*t)/3 - t*cos(3*t)"


def test_a_damped_pair_driven_by_its_own_wave_is_damped() -> None:
    model = numeric(
        [[0, 1], [-5, -2]],
        [[0], [1]],
        lambda e: [Signal((Burst((wave(e, 1, rate=-1, kernel="cos", frequency=2),)),))],
        initial=[0, 0],
    )
    (solution,) = respond_driven(model).solutions
    (found,) = solution.resonances
    assert (found.order, found.damped) == (1, True)
    assert solution.stability.verdict == "stable"
    assert solution.steady_state is not None
    assert solution.steady_state.kinds == ("zero", "zero")


def test_an_input_that_does_not_reach_the_eigenvalue_adds_nothing() -> None:
    model = numeric(
        [[0, 1, 0], [-9, 0, 0], [0, 0, -1]],
        [[0], [0], [1]],
        lambda e: [sine(e, 6, 3)],
        initial=[1, 0, 0],
    )
    (solution,) = respond_driven(model).solutions
    (found,) = solution.resonances
    assert (found.multiplicity, found.order, found.raised) == (1, 0, 0)


def test_each_input_is_asked_by_itself() -> None:
    model = numeric(
        [[0, 1], [-4, 0]],
        [[0, 0, 0], [1, 1, 1]],
        lambda e: [sine(e, 1, 2), sine(e, 1, 3), pulse(e, 1, None, 4)],
        initial=[0, 0],
        timeline=[4],
    )
    (solution,) = respond_driven(model).solutions
    assert [found.input for found in solution.resonances] == [0]


@pytest.mark.parametrize("kernel", ["cos", "sin"])
def test_with_parameters_the_case_has_the_resonance(kernel: str) -> None:
    model = parametric(
        [[0, 1], ["-k/m", 0]],
        [[0], ["1/m"]],
        lambda e: [sine(e, "F", "w", "cos" if kernel == "cos" else "sin")],
        initial=[0, 0],
        parameters=dict.fromkeys(("m", "k", "w", "F"), "positive"),
    )
    found = {s.condition: s.resonances for s in respond_driven(model).solutions}
    assert found.pop("m*w^2 != k") == ()
    ((condition, (resonance,)),) = found.items()
    assert condition == resonance.condition == "k == m*w^2"
    assert (resonance.order, resonance.damped) == (1, False)


def test_a_sine_of_frequency_zero_is_no_input() -> None:
    model = parametric(
        [[0]],
        [[1, 1]],
        lambda e: [sine(e, 1, "w"), steady(e, "q")],
        initial=[0],
        parameters={"w": "real", "q": "positive"},
    )
    for solution in respond_driven(model).solutions:
        assert [found.input for found in solution.resonances] == [1]
        assert solution.resonances[0].order == 1
