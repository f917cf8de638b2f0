"""Steady states against the equations they solve, and transients against what decays."""

from __future__ import annotations

from fractions import Fraction

import pytest
from hypothesis import assume, given, settings
from hypothesis import strategies as st

from closedform.algebra.exponential import ExponentialMatrix
from closedform.algebra.field import Scalar
from closedform.algebra.parametric_spectrum import vanishes_under
from closedform.algebra.waves import Constant, Wave
from closedform.model.driven.model import DrivenModel
from closedform.model.driven.signal import Burst, Signal
from closedform.notation.plain import plain
from closedform.response.driven.functions import Summand
from closedform.response.driven.particular import combined
from closedform.response.driven.response import DrivenSolution, respond_driven
from closedform.response.driven.steady import waves_for_ever, waves_of_row
from tests.response.driven.stated import (
    Element,
    blow,
    numeric,
    parametric,
    pulse,
    sine,
    steady,
    wave,
)

Key = tuple[int, Scalar, Scalar, str, Scalar]
"""Power, rate, frequency, kernel and origin of a wave; a constant has no origin."""


def _added(waves: list[Wave], scale: Scalar, into: dict[Key, Scalar]) -> None:
    for w in waves:
        still = not (w.power or w.rate or w.frequency)
        key = (w.power, w.rate, w.frequency, w.kernel, None if still else w.origin)
        into[key] = into.get(key, 0) + scale * w.amount


def _derived(waves: list[Wave]) -> list[Wave]:
    """The derivative, by the rules of products."""
    found = []
    for w in waves:
        if w.power:
            found.append(
                Wave(w.amount * w.power, w.power - 1, w.rate, w.kernel, w.frequency, w.origin)
            )
        found.append(Wave(w.amount * w.rate, w.power, w.rate, w.kernel, w.frequency, w.origin))
        if w.kernel != "one":
            sign, other = (-1, "sin") if w.kernel == "cos" else (1, "cos")
            amount = sign * w.amount * w.frequency
            found.append(Wave(amount, w.power, w.rate, other, w.frequency, w.origin))
    return found


def solves_the_equations(solution: DrivenSolution) -> bool:
    """Whether y' = A y + B u for the steady state y, as an identity of waves over the field.

    The inputs that decay are left out of u.
    """
    model, put = solution.model, solution.put
    n = len(model.names)
    summands = solution.functions.steady
    assert summands is not None
    rows = [list(waves_of_row(solution.drive, solution.functions, summands, i)) for i in range(n)]
    a, b = model.reduction.matrix.to_list(), model.reduction.input_matrix.to_list()
    for i in range(n):
        left: dict[Key, Scalar] = {}
        _added(_derived(rows[i]), model.field.domain.one, left)
        for k in range(n):
            _added(rows[k], -put(a[i][k]), left)
        for place, given_wave in waves_for_ever(model):
            moved = Wave(
                put(given_wave.amount),
                given_wave.power,
                put(given_wave.rate),
                given_wave.kernel,
                put(given_wave.frequency),
                put(given_wave.origin),
            )
            if solution.sign_of(moved.rate).values <= {0, 1}:
                _added([moved], -put(b[i][place]), left)
        if not all(vanishes_under(e, solution.drive.relation) for e in left.values()):
            return False
    return True


def _total(
    functions: ExponentialMatrix, summands: tuple[Summand, ...]
) -> dict[tuple[Scalar, Constant], ExponentialMatrix]:
    found: dict[tuple[Scalar, Constant], ExponentialMatrix] = {}
    field = functions.field
    for s in summands:
        unit = [[field.domain.convert(int(k == s.place))] for k in range(functions.shape[1])]
        column = functions.times(field.matrix(unit))
        key = (s.origin, s.constant)
        found[key] = combined([(1, found[key]), (1, column)]) if key in found else column
    return found


def adds_up(solution: DrivenSolution) -> bool:
    """Whether steady + transient part are the last interval, by exact coefficients."""
    functions = solution.functions
    assert functions.steady is not None
    assert functions.transient is not None
    parts = _total(functions.columns, functions.steady + functions.transient)
    return parts == _total(functions.columns, functions.intervals[-1].summands)


def decays(solution: DrivenSolution) -> bool:
    """Whether every term of the transient part has certified roots with negative real parts."""
    functions = solution.functions
    assert functions.transient is not None
    for column in _total(functions.columns, functions.transient).values():
        for term in column.terms:
            if any(not residue.is_zero for residue in term.residues):
                roots = term.factor.roots.enclosures()
                if not all(root.real < 0 for root in roots):
                    return False
    return True


ENTRY = st.integers(-4, 4)
RATIONAL = st.sampled_from(
    [Fraction(1), Fraction(-2), Fraction(1, 2), Fraction(3), Fraction(-2, 3)]
)


@st.composite
def _waves(draw: st.DrawFn) -> tuple[str, Fraction, Fraction, Fraction, int, Fraction]:
    kernel = draw(st.sampled_from(["one", "cos", "sin", "sin"]))
    frequency = Fraction(0) if kernel == "one" else abs(draw(RATIONAL))
    rate = draw(st.sampled_from([Fraction(0), Fraction(0), Fraction(-1), Fraction(1, 2)]))
    power = draw(st.sampled_from([0, 0, 0, 1]))
    return (
        kernel,
        draw(RATIONAL),
        frequency,
        rate,
        power,
        draw(st.sampled_from([Fraction(0), Fraction(1, 3)])),
    )


@st.composite
def _models(draw: st.DrawFn) -> DrivenModel:
    n = draw(st.integers(1, 3))
    matrix = [[draw(ENTRY) for _ in range(n)] for _ in range(n)]
    for i in range(n):  # most of these are stable
        matrix[i][i] -= 6
    inputs = draw(st.integers(1, 2))
    b = [[draw(ENTRY) for _ in range(inputs)] for _ in range(n)]
    given_waves = [draw(st.lists(_waves(), min_size=1, max_size=2)) for _ in range(inputs)]

    def signals(e: Element) -> list[Signal]:
        return [
            Signal(
                (
                    Burst(
                        tuple(
                            wave(e, a, power=p, rate=r, kernel=k, frequency=f, origin=o)
                            for k, a, f, r, p, o in of_input
                        )
                    ),
                )
            )
            for of_input in given_waves
        ]

    return numeric(matrix, b, signals, initial=[draw(ENTRY) for _ in range(n)])


@settings(max_examples=40, deadline=None)
@given(_models())
def test_a_steady_state_solves_the_equations_and_the_rest_decays(model: DrivenModel) -> None:
    (solution,) = respond_driven(model).solutions
    assume(solution.stability.verdict == "stable")
    assert solution.steady_state is not None
    assert solves_the_equations(solution)
    assert adds_up(solution)
    assert decays(solution)


SWITCHED = {
    "ended pulse": numeric(
        [["-1/5"]], [[1]], lambda e: [pulse(e, 2, None, 10)], initial=[3], timeline=[10]
    ),
    "sine that begins later": numeric(
        [[0, 1], [-5, -2]],
        [[0], [1]],
        lambda e: [Signal((Burst((wave(e, 1, kernel="sin", frequency=3, origin=1),), e(2)),))],
        initial=[1, 0],
        timeline=[2],
    ),
    "blow and constant": numeric(
        [[0, 1], [-5, -2]],
        [[0, 0], [1, 1]],
        lambda e: [steady(e, 2), blow(e, 3, 4)],
        initial=[1, 0],
        timeline=[4],
    ),
}


@pytest.mark.parametrize("name", SWITCHED)
def test_with_switchings_the_last_interval_is_told_apart(name: str) -> None:
    (solution,) = respond_driven(SWITCHED[name]).solutions
    assert solution.steady_state is not None
    assert solves_the_equations(solution)
    assert adds_up(solution)
    assert decays(solution)


def test_what_ends_leaves_nothing_steady() -> None:
    (solution,) = respond_driven(SWITCHED["ended pulse"]).solutions
    found = solution.steady_state
    assert found is not None
    assert found.kinds == ("zero",)
    assert found.steady == ()
    assert found.tones == ()


def test_kinds_tell_constants_oscillations_and_growth_apart() -> None:
    model = numeric(
        [[-1, 0, 0], [0, -2, 0], [0, 0, -3]],
        [[1, 0, 0], [0, 1, 0], [0, 0, 1]],
        lambda e: [steady(e, 2), sine(e, 1, 3), Signal((Burst((wave(e, 1, power=1),)),))],
        initial=[0, 0, 0],
    )
    (solution,) = respond_driven(model).solutions
    found = solution.steady_state
    assert found is not None
    assert found.kinds == ("constant", "oscillating", "growing")
    assert [plain(f) for f in found.steady_formulas] == [
        "2",
        "(2*sin(3*t) - 3*cos(3*t))/13",
        "t/3 - 1/9",
    ]


@pytest.mark.parametrize(
    ("matrix", "marginal"),
    [([[0, 1], [-9, 0]], True), ([[0]], True), ([[0, 1], [-9, 2]], False)],
)
def test_without_stability_nothing_is_called_steady(
    matrix: list[list[int]], *, marginal: bool
) -> None:
    b = [[0]] * (len(matrix) - 1) + [[1]]
    model = numeric(matrix, b, lambda e: [sine(e, 6, 3, "cos")], initial=[0] * len(matrix))
    (solution,) = respond_driven(model).solutions
    assert solution.stability.verdict == "not stable"
    assert solution.stability.marginal == marginal
    assert solution.steady_state is None
    assert solution.phasors == (None,) * len(matrix)


PARAMETRIC = {
    "damped oscillator": parametric(
        [[0, 1], ["-k/m", "-c/m"]],
        [[0], ["1/m"]],
        lambda e: [sine(e, "F", "w")],
        initial=["x0", 0],
        parameters={
            "m": "positive",
            "c": "positive",
            "k": "positive",
            "w": "positive",
            "F": "positive",
            "x0": "real",
        },
    ),
    "two tanks": parametric(
        [["-a", 0], ["a", "-b"]],
        [[1], [0]],
        lambda e: [steady(e, "q")],
        initial=["v", 0],
        parameters={"a": "positive", "b": "positive", "q": "real", "v": "real"},
    ),
    "equation that is kept": parametric(
        [["-a^2-b^2", 0], [1, "-c^2"]],
        [[1], [0]],
        lambda e: [steady(e, "F")],
        initial=[1, 0],
        parameters=dict.fromkeys(("a", "b", "c", "F"), "positive"),
    ),
    "decaying input": parametric(
        [["-1/tau"]],
        [[1]],
        lambda e: [Signal((Burst((wave(e, "u", rate="-a"), wave(e, 1))),))],
        initial=["x0"],
        parameters={"tau": "positive", "a": "positive", "u": "real", "x0": "real"},
    ),
}


@pytest.mark.parametrize("name", PARAMETRIC)
def test_with_parameters_it_solves_the_equations_in_each_case(name: str) -> None:
    response = respond_driven(PARAMETRIC[name])
    assert len(response.solutions) > 1
    for solution in response.solutions:
        assert solution.stability.verdict == "stable"
        assert solution.steady_state is not None
        assert solves_the_equations(solution)
        assert adds_up(solution)


def test_a_damping_that_may_be_zero_leaves_stability_undecided() -> None:
    model = parametric(
        [[0, 1], ["-k", "-c"]],
        [[0], [1]],
        lambda e: [steady(e, "F")],
        initial=[0, 0],
        parameters={"c": "nonnegative", "k": "positive", "F": "real"},
    )
    verdicts = set()
    for solution in respond_driven(model).solutions:
        verdicts.add(solution.stability.verdict)
        if solution.stability.verdict == "undecided":
            assert solution.steady_state is None
            (test,) = solution.stability.reasons
            assert [a.sign for a in test.open] == ["nonnegative"]
    assert "undecided" in verdicts


def test_a_rate_of_unknown_sign_leaves_nothing_steady() -> None:
    model = parametric(
        [["-b"]],
        [[1]],
        lambda e: [Signal((Burst((wave(e, 1, rate="a"),)),))],
        initial=[0],
        parameters={"b": "positive", "a": "real"},
    )
    for solution in respond_driven(model).solutions:
        assert solution.stability.verdict == "stable"
        if solution.sign_of(solution.drive.tones[0].rate).sign == "unknown":
            assert solution.steady_state is None
        else:  # a == -b
            assert solution.steady_state is not None
            assert solution.steady_state.kinds == ("zero",)
