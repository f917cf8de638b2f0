"""Amplitudes and phases: against the sums of sines and cosines they stand for, and textbooks."""

from __future__ import annotations

from collections.abc import Callable
from fractions import Fraction

import pytest
from flint import arb, ctx, fmpq
from hypothesis import assume, given, settings
from hypothesis import strategies as st

from closedform.algebra.domain import Comparison, ParameterDomain
from closedform.algebra.enclosure import ball_of
from closedform.algebra.field import BaseField, Scalar
from closedform.algebra.hurwitz import sign_oracle
from closedform.algebra.parameter_field import ParameterField
from closedform.algebra.surds import SurdSum
from closedform.model.building import model_from
from closedform.model.driven.model import DrivenModel
from closedform.model.driven.signal import Burst, Signal
from closedform.notation.evaluation import enclose
from closedform.notation.expression import Expression
from closedform.notation.plain import plain
from closedform.response.driven.phasor import Phasor, Sinusoid
from closedform.response.driven.polar import Polar, polar
from closedform.response.driven.response import DrivenSolution, respond_driven
from tests.response.driven.stated import Element, numeric, parametric, sine, steady, wave

NUMBERS = BaseField((2, 3))
FIFTY = arb("1e-50")
ORACLE = sign_oracle(NUMBERS, None)


def _surd(rational: Fraction, two: Fraction, three: Fraction) -> Scalar:
    return NUMBERS.scalar(SurdSum.of({1: rational, 2: two, 3: three}))


def _agrees(
    point: Polar,
    y: arb,
    x: arb,
    of_element: Callable[[Scalar], arb],
    of_formula: Callable[[Expression], arb],
) -> bool:
    """Whether r cos phi = x and r sin phi = y to 50 digits, by atan2 and by arctan."""
    modulus = of_formula(point.modulus)
    angles = [point.angle.ball(of_element)]
    shown = arb.atan2(of_formula(point.angle.above), of_formula(point.angle.beside))
    arc = point.angle.ball_of_arc(of_formula)
    angles += [shown] if arc is None else [shown, arc]
    return all(
        (modulus * phi.cos() - x).overlaps(arb(0))
        and abs(modulus * phi.cos() - x).abs_upper() < FIFTY
        and (modulus * phi.sin() - y).overlaps(arb(0))
        and abs(modulus * phi.sin() - y).abs_upper() < FIFTY
        for phi in angles
    )


COORDINATE = st.fractions(min_value=-5, max_value=5, max_denominator=6)
SIMPLE = st.sampled_from([Fraction(0), Fraction(0), Fraction(1), Fraction(-1), Fraction(2, 3)])


@given(st.tuples(COORDINATE, SIMPLE, SIMPLE), st.tuples(COORDINATE, SIMPLE, SIMPLE))
def test_a_point_of_numbers_has_the_quadrant_of_its_signs(
    above: tuple[Fraction, Fraction, Fraction], beside: tuple[Fraction, Fraction, Fraction]
) -> None:
    y, x = _surd(*above), _surd(*beside)
    assume(y or x)
    point = polar(NUMBERS, ORACLE, y, x)
    up, right = NUMBERS.sign(y), NUMBERS.sign(x)
    quadrants = {(1, 1): "I", (1, -1): "II", (-1, -1): "III", (-1, 1): "IV"}
    axes = {(0, 1): "+x", (1, 0): "+y", (0, -1): "-x", (-1, 0): "-y"}
    assert point.angle.place == (quadrants | axes)[up, right]
    assert point.angle.arc is not None
    assert point.square == x**2 + y**2
    with ctx.workprec(300):
        balls = NUMBERS.enclose(y), NUMBERS.enclose(x)
        assert _agrees(point, *balls, NUMBERS.enclose, lambda f: enclose(f, {}))


@pytest.mark.parametrize(
    ("above", "beside", "turn"),
    [
        ((1, 0, 0), (1, 0, 0), "1/4"),
        ((0, 0, 1), (1, 0, 0), "1/3"),
        ((2, 0, 0), (0, 0, -2), "5/6"),
        ((-3, 0, 0), (-3, 0, 0), "-3/4"),
        ((0, -1, 0), (0, 1, 0), "-1/4"),
        ((0, 0, 0), (-7, 0, 0), "1"),
        ((0, -5, 0), (0, 0, 0), "-1/2"),
    ],
)
def test_angles_of_the_regular_triangle_and_square_are_parts_of_pi(
    above: tuple[int, int, int], beside: tuple[int, int, int], turn: str
) -> None:
    y, x = (_surd(*map(Fraction, c)) for c in (above, beside))
    arc = polar(NUMBERS, ORACLE, y, x).angle.arc
    assert arc is not None
    assert arc[:2] == (Fraction(turn), 0)


FIELD = ParameterField((), ("a", "b", "c"))
A, B, C = map(FIELD.symbol, FIELD.parameters)
DOMAIN = ParameterDomain(FIELD, (Comparison(A, ">"), Comparison(-B, ">")))
ELEMENTS = {
    "first": (A, A + 1),
    "second": (A, B),
    "third": (B, B - A),
    "fourth": (B, A**2),
    "right": (C, A),
    "left": (C, B),
    "upper": (A, C),
    "lower": (B / (A + 1), C),
    "anywhere": (C, C - 1),
    "shared factors": (A * B * (C**2 + 1) / (A - B), A**2 * (C - 2) / (A - B)),
    "shared factor of unknown sign": (A * (C - 5), B * (C - 5)),
    "pole of unknown sign": (A / (C - 5), (C + 1) / (C - 5)),
    "a square": (2 * A, 1 - A**2),
    "on the axis": (A * 0, C),
    "on the other axis": (-C * A, A * 0),
}


@pytest.mark.parametrize("name", ELEMENTS)
def test_a_point_with_parameters_is_right_at_every_sample(name: str) -> None:
    y, x = ELEMENTS[name]
    point = polar(FIELD, DOMAIN.sign_of, y, x)
    samples = DOMAIN.sample(25, seed=4)
    assert len(samples) == 25
    for values in samples:
        with ctx.workprec(300):
            known = {n: ball_of(v) for n, v in values.items()}

            def of_element(e: Scalar, known: dict[str, arb] = known) -> arb:
                return FIELD.enclose_at(e, known)

            def of_formula(f: Expression, known: dict[str, arb] = known) -> arb:
                return enclose(f, known)

            balls = of_element(y), of_element(x)
            if not all(b.is_finite() for b in balls) or (balls[0] == 0 and balls[1] == 0):
                continue
            assert _agrees(point, *balls, of_element, of_formula), values


def test_places_with_parameters_are_said_where_signs_tell() -> None:
    places = {
        name: polar(FIELD, DOMAIN.sign_of, *point).angle.place for name, point in ELEMENTS.items()
    }
    assert places["first"] == "I"
    assert places["second"] == "II"
    assert places["third"] == "III"
    assert places["fourth"] == "IV"
    assert places["right"] is places["upper"] is places["anywhere"] is None
    arcs = {name: polar(FIELD, DOMAIN.sign_of, *p).angle.arc for name, p in ELEMENTS.items()}
    assert arcs["anywhere"] is None
    assert arcs["left"] is None
    assert all(arcs[name] is not None for name in ("right", "upper", "lower", "first", "third"))


def test_a_root_that_is_no_root_is_written_without() -> None:
    point = polar(FIELD, DOMAIN.sign_of, 2 * A, 1 - A**2)
    assert plain(point.modulus) == "1 + a^2"


def test_the_number_pi_is_a_number() -> None:
    field = ParameterField((), ("pi",))
    pi = field.symbol("pi")
    sign_of = ParameterDomain(field, ()).sign_of
    point = polar(field, sign_of, pi - 4, 3 - pi)
    assert point.angle.place == "III"
    with ctx.workprec(300):
        known = {"pi": arb.pi()}
        balls = field.enclose_at(pi - 4, {}), field.enclose_at(3 - pi, {})
        assert _agrees(
            point, *balls, lambda e: field.enclose_at(e, {}), lambda f: enclose(f, known)
        )


# Whole models


def _ball(solution: DrivenSolution, phasor: Phasor, t: arb) -> tuple[arb, arb]:
    """The steady row at t by its formula, and by amplitudes and phases."""
    field, found = solution.model.field, solution.steady_state
    assert found is not None
    written = enclose(found.steady_formulas[phasor.row], {solution.model.time: t})
    total = enclose(phasor.mean_formula, {})
    for s in phasor.sinusoids:
        angle = field.enclose(s.frequency) * (t - field.enclose(s.origin))
        own = enclose(s.amplitude, {}) * (angle - s.phase.ball(field.enclose)).cos()
        if s.sine_phase is not None:
            by_sine = (angle - s.sine_phase.ball(field.enclose)).sin()
            assert abs(enclose(s.amplitude, {}) * by_sine - own).abs_upper() < FIFTY
        total += own
    return written, total


@st.composite
def _stable(draw: st.DrawFn) -> DrivenModel:
    entry, n = st.integers(-3, 3), draw(st.integers(1, 3))
    matrix = [[draw(entry) - 5 * (i == k) for k in range(n)] for i in range(n)]
    b = [[draw(entry), draw(entry)] for _ in range(n)]
    amounts = [draw(st.sampled_from([1, -2, 3, "1/2"])) for _ in range(3)]
    w = draw(st.sampled_from([1, 2, "1/3", 5]))
    origin = draw(st.sampled_from([0, "1/2", -1]))

    def signals(e: Element) -> list[Signal]:
        turning = [
            wave(e, amount, kernel=kernel, frequency=w, origin=origin)
            for amount, kernel in zip(amounts, ("cos", "sin"), strict=False)
        ]
        return [Signal((Burst(tuple(turning)),)), steady(e, amounts[2])]

    return numeric(matrix, b, signals, initial=[1] * n)


@settings(max_examples=40, deadline=None)
@given(_stable(), st.fractions(min_value=0, max_value=9, max_denominator=7))
def test_phasors_are_the_steady_state(model: DrivenModel, t: Fraction) -> None:
    (solution,) = respond_driven(model).solutions
    assume(solution.stability.verdict == "stable")
    found = [phasor for phasor in solution.phasors if phasor is not None]
    with ctx.workprec(300):
        at = arb(fmpq(t.numerator, t.denominator))
        for phasor in found:
            written, total = _ball(solution, phasor, at)
            assert written.overlaps(total)
            assert abs(written - total).abs_upper() < FIFTY


def _lagging(solution: DrivenSolution, s: Sinusoid, wave_: tuple[Scalar, Scalar], t: arb) -> arb:
    """The output found from the input: gain times what it was, turned back by the lag."""
    assert s.lag is not None
    field = solution.model.field
    u, v = map(field.enclose, wave_)
    angle = field.enclose(s.frequency) * (t - field.enclose(s.origin))
    angle -= s.lag.angle.ball(field.enclose)
    return enclose(s.lag.gain, {}) * (u * angle.cos() + v * angle.sin())


@settings(max_examples=40, deadline=None)
@given(_stable(), st.fractions(min_value=0, max_value=9, max_denominator=7))
def test_lags_turn_the_input_into_the_output(model: DrivenModel, t: Fraction) -> None:
    (solution,) = respond_driven(model).solutions
    assume(solution.stability.verdict == "stable")
    first, second = model.inputs[0].signal.bursts[0].waves
    field = model.field
    with ctx.workprec(300):
        at = arb(fmpq(t.numerator, t.denominator))
        for phasor in solution.phasors:
            for s in phasor.sinusoids if phasor is not None else ():
                assert s.lag is not None
                assert s.lag.input == 0
                by_lag = _lagging(solution, s, (first.amount, second.amount), at)
                angle = field.enclose(s.frequency) * (at - field.enclose(s.origin))
                direct = field.enclose(s.cosine) * angle.cos()
                direct += field.enclose(s.sine) * angle.sin()
                assert abs(by_lag - direct).abs_upper() < FIFTY


OSCILLATOR = parametric(
    [[0, 1], ["-omega^2", "-2*zeta*omega"]],
    [[0], ["omega^2"]],
    lambda e: [sine(e, "F", "w")],
    initial=[0, 0],
    parameters={"zeta": "positive", "omega": "positive", "w": "positive", "F": "positive"},
)


def test_a_driven_oscillator_reads_as_in_textbooks() -> None:
    model = parametric(
        [[0, 1], ["-k/m", "-c/m"]],
        [[0], ["1/m"]],
        lambda e: [sine(e, "F", "w", "cos")],
        initial=[0, 0],
        parameters=dict.fromkeys(("m", "c", "k", "w", "F"), "positive"),
    )
    for solution in respond_driven(model).solutions:
        phasor = solution.phasors[0]
        assert phasor is not None
        (s,) = phasor.sinusoids
        assert plain(s.amplitude) == "F/sqrt((k - m*w^2)^2 + c^2*w^2)"
        assert (plain(s.phase.above), plain(s.phase.beside)) == ("c*w", "k - m*w^2")
        assert s.phase.arc is not None
        turn, direction, ratio = s.phase.arc
        assert (turn, direction, plain(ratio)) == (Fraction(1, 2), -1, "(k - m*w^2)/(c*w)")
        assert s.lag is not None
        assert s.lag.angle == s.phase
        assert plain(s.lag.gain) == "1/sqrt((k - m*w^2)^2 + c^2*w^2)"


@pytest.mark.parametrize("zeta", [Fraction(1, 10), Fraction(1, 3), Fraction(3, 5)])
def test_the_peak_of_the_gain_is_where_and_what_it_is_known_to_be(zeta: Fraction) -> None:
    """1/(2 zeta sqrt(1 - zeta^2)) at w = omega_n sqrt(1 - 2 zeta^2); common practice."""
    field = OSCILLATOR.field
    assert isinstance(field, ParameterField)
    squared = SurdSum.rational(1 - 2 * zeta**2)
    values = {
        "zeta": SurdSum.rational(zeta),
        "omega": SurdSum.rational(3),
        "w": SurdSum.rational(3) * squared.sqrt(),
        "F": SurdSum.rational(1),
    }
    expected = 1 / (4 * zeta**2 * (1 - zeta**2))
    for solution in respond_driven(OSCILLATOR).solutions:
        phasor = solution.phasors[0]
        assert phasor is not None
        (s,) = phasor.sinusoids
        assert s.lag is not None
        if "zeta" not in field.names_in(s.lag.gain_square):
            continue  # the case zeta = 1
        gain = s.lag.gain_square
        assert field.exact_at(gain, values) == SurdSum.rational(expected)
        assert field.exact_at(field.derivative(gain, "w"), values).is_zero


def test_at_the_natural_frequency_the_lag_is_a_quarter_turn() -> None:
    solution = respond_driven(OSCILLATOR).solutions[0]
    phasor = solution.phasors[0]
    assert phasor is not None
    lag = phasor.sinusoids[0].lag
    assert lag is not None
    field = OSCILLATOR.field
    assert isinstance(field, ParameterField)
    assert field.substituted(lag.angle.x, {"w": field.symbol("omega")}) == 0
    assert solution.sign_of(lag.angle.y).sign == "positive"


def test_a_low_pass_has_its_published_gain_and_lag() -> None:
    model = parametric(
        [["-1/tau"]],
        [["1/tau"]],
        lambda e: [sine(e, "U", "w")],
        initial=[0],
        parameters={"tau": "positive", "w": "positive", "U": "positive"},
    )
    (solution,) = respond_driven(model).solutions
    phasor = solution.phasors[0]
    assert phasor is not None
    lag = phasor.sinusoids[0].lag
    assert lag is not None
    assert plain(lag.gain) == "1/sqrt(1 + tau^2*w^2)"
    assert lag.angle.place == "I"
    assert lag.angle.arc is not None
    assert (*lag.angle.arc[:2], plain(lag.angle.arc[2])) == (0, 1, "tau*w")


def test_two_inputs_of_one_frequency_leave_no_lag() -> None:
    model = numeric([[-1]], [[1, 2]], lambda e: [sine(e, 1, 3), sine(e, 2, 3, "cos")], initial=[0])
    (solution,) = respond_driven(model).solutions
    phasor = solution.phasors[0]
    assert phasor is not None
    (s,) = phasor.sinusoids
    assert s.lag is None


def test_what_the_squares_of_an_amplitude_share_is_not_written_twice() -> None:
    model = parametric(
        [["-2/T", "1/T"], ["1/T", "-1/T"]],
        [["1/T"], [0]],
        lambda e: [sine(e, "U", "w")],
        initial=[0, 0],
        parameters=dict.fromkeys(("T", "U", "w"), "positive"),
    )
    (solution,) = respond_driven(model).solutions
    first, second = solution.phasors
    assert first is not None
    assert second is not None
    below = "sqrt(1 + 7*T^2*w^2 + T^4*w^4)"
    assert plain(first.sinusoids[0].amplitude) == f"U*sqrt(1 + T^2*w^2)/{below}"
    assert plain(second.sinusoids[0].amplitude) == f"U/{below}"


def test_what_sines_alone_drive_is_told_by_the_sine() -> None:
    def found(load: str) -> Sinusoid:
        sought = {
            "title": "An oscillator",
            "equations": ["m*x'' + c*x' + k*x = F"],
            "parameters": dict.fromkeys([*"mckwp"], "positive"),
            "inputs": {"F": load},
            "initial": {"x": 0, "x'": 0},
        }
        model = model_from(sought, name="oscillator")
        assert isinstance(model, DrivenModel)
        phasor = respond_driven(model).solutions[0].phasors[0]
        assert phasor is not None
        return phasor.sinusoids[0]

    angle = found("p*sin(w*t)").sine_phase
    assert angle is not None
    assert (plain(angle.above), plain(angle.beside)) == ("c*w", "k - m*w^2")
    assert found("p*cos(w*t)").sine_phase is None
    assert found("p*cos(w*t) + k*sin(w*t)").sine_phase is None
