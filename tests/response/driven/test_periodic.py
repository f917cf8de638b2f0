"""Inputs that repeat: against copies stated one by one, against textbooks, by their properties."""

from __future__ import annotations

import re
from collections.abc import Mapping
from fractions import Fraction
from typing import Any

import pytest
from flint import arb, ctx, fmpq
from hypothesis import given, settings
from hypothesis import strategies as st

from closedform.algebra.surds import SurdSum
from closedform.errors import Place
from closedform.model.driven.building import driven_model
from closedform.model.driven.model import DrivenModel
from closedform.model.source import Source
from closedform.model.statement import heading_of
from closedform.notation import enclose
from closedform.notation.expression import Expression
from closedform.notation.plain import plain
from closedform.response.driven.period_formulas import PeriodicSolution, RepeatedModeError
from closedform.response.driven.period_guards import VanishingRateError
from closedform.response.driven.response import DrivenResponse, DrivenSolution, respond_driven
from closedform.response.driven.sampling import enclosed_at
from closedform.response.names import constant_values
from closedform.response.response import Response

Values = Mapping[str, Fraction | int]


def stated(mapping: dict[str, Any]) -> DrivenModel:
    whole, source = {"title": "A model", **mapping}, Source(Place())
    return driven_model(whole, heading_of(whole, "model", source), source)


def response_to(mapping: dict[str, Any]) -> DrivenResponse:
    return respond_driven(stated(mapping))


def only(response: DrivenResponse, place: int = 0) -> PeriodicSolution:
    (periodic,) = response.solutions[place].periodic
    return periodic


def ball(value: Fraction | int) -> arb:
    own = Fraction(value)
    with ctx.workprec(256):
        return arb(fmpq(own.numerator, own.denominator))


def named(solution: DrivenSolution, values: Values) -> dict[str, arb]:
    """The values, and those of the names that the case defines."""
    known = {name: ball(value) for name, value in values.items()} | {"pi": arb.pi()}
    for quantity in () if solution.case is None else solution.case.quantities:
        if quantity.formula is not None:
            known[quantity.name] = enclose(quantity.formula, known)
    return known


def value(formula: Expression, known: Mapping[str, arb]) -> arb:
    with ctx.workprec(256):
        return enclose(formula, known)


def agree(one: arb, other: arb) -> bool:
    return bool(one.overlaps(other)) and float(one.rad()) < 1e-20 and float(other.rad()) < 1e-20


# --- against copies stated one by one ----------------------------------------------------------

ONE_PERIOD: dict[str, dict[str, Any]] = {
    "filling a tank": {
        "equations": ["5*h' + h = q"],
        "initial": {"h": 0},
        "pieces": [{"from": 0, "to": 3, "is": "2"}],
        "period": 8,
    },
    "ramps on an integrator": {
        "equations": ["x'' = F"],
        "initial": {"x": 0, "x'": 0},
        "pieces": [
            {"from": 1, "to": 2, "is": "3*(t - 1)"},
            {"from": 2, "to": 3, "is": "delta(t - 2)"},
        ],
        "period": 5,
    },
    "square wave on an RLC circuit": {
        "equations": ["q'' + 2*q' + 10*q = u"],
        "initial": {"q": 0, "q'": 0},
        "pieces": [{"from": 0, "to": 1, "is": "1"}, {"from": 1, "to": 2, "is": "-1"}],
        "period": 2,
    },
    "blows on an oscillator": {
        "equations": ["x'' + 4*x = F"],
        "initial": {"x": 0, "x'": 0},
        "pieces": [{"from": 0, "to": 2, "is": "2*delta(t - 1)"}],
        "period": 3,
    },
    "blows on a balance": {
        "equations": ["x'' - 3*x = F"],
        "initial": {"x": 0, "x'": 0},
        "pieces": [{"from": 0, "to": 1, "is": "delta(t)"}],
        "period": 1,
    },
    "a mode that comes twice": {
        "equations": ["x'' + 2*x' + x = F"],
        "initial": {"x": 0, "x'": 0},
        "pieces": [{"from": 0, "to": 1, "is": "exp(-t)"}],
        "period": 2,
    },
    "a mode that comes three times": {
        "states": ["a", "b", "c"],
        "matrix": [[-1, 1, 0], [0, -1, 1], [0, 0, -1]],
        "input_matrix": [[0], [0], [1]],
        "initial": [0, 0, 0],
        "pieces": [{"from": 0, "to": 1, "is": "t"}],
        "period": 3,
    },
    "a root that is zero, late in the period": {
        "equations": ["x'' + x' = F"],
        "initial": {"x": 0, "x'": 0},
        "pieces": [{"from": 3, "to": 4, "is": "t^2*exp(-2*t)"}],
        "period": 4,
    },
    "named roots": {
        "equations": ["x''' + 2*x'' + 3*x' + 5*x = F"],
        "initial": {"x": 0, "x'": 0, "x''": 0},
        "pieces": [{"from": 0, "to": 1, "is": "sin(2*t)"}],
        "period": 2,
    },
}
each_kind = pytest.mark.parametrize("kind", ONE_PERIOD)


def repeated(kind: str, count: int | None) -> dict[str, Any]:
    own = dict(ONE_PERIOD[kind])
    signal = {"pieces": own.pop("pieces"), "period": own.pop("period")}
    own["inputs"] = {_input(kind): signal if count is None else {**signal, "count": count}}
    return own


def copied(kind: str, count: int) -> dict[str, Any]:
    """The same with every period stated as pieces of its own."""
    own = dict(ONE_PERIOD[kind])
    pieces, period = own.pop("pieces"), own.pop("period")
    own["inputs"] = {
        _input(kind): [
            {
                "from": piece["from"] + k * period,
                "to": piece["to"] + k * period,
                "is": re.sub(r"\bt\b", f"(t - {k * period})", piece["is"]),
            }
            for k in range(count)
            for piece in pieces
        ]
    }
    return own


def _input(kind: str) -> str:
    text = ONE_PERIOD[kind].get("equations", ["= u"])[0]
    return str(text.rsplit("= ", 1)[1])


@each_kind
def test_the_nth_period_is_that_of_copies_stated_one_by_one(kind: str) -> None:
    response, count = response_to(repeated(kind, None)), 4
    periodic, model = only(response), response.model
    copies = response_to(copied(kind, count))
    stacked = response.stacked
    assert isinstance(stacked, Response)
    period = Fraction(ONE_PERIOD[kind]["period"])
    with ctx.workprec(256):
        known = {n: b.real for n, b in constant_values(stacked.closed_forms.constants).items()}
    for n in range(1, count + 1):
        for stretch in periodic.stretches:
            start, end = (Fraction(plain(at)) for at in (stretch.start, stretch.end))
            for share in (Fraction(0), Fraction(2, 7), Fraction(9, 10)):
                local = start + share * (end - start)
                t = period * (n - 1) + local
                expected = enclosed_at(copies.solutions[0], SurdSum.rational(t), 25)
                own = {**known, periodic.number: ball(n), periodic.local: ball(local)}
                found = [value(row, own) for row in stretch.rows]
                for row in range(len(model.names)):
                    assert agree(found[row], expected[row]), (n, local, row)


@each_kind
def test_after_the_last_period_too(kind: str) -> None:
    response = response_to(repeated(kind, 3))
    periodic, copies = only(response), response_to(copied(kind, 3))
    stacked = response.stacked
    assert isinstance(stacked, Response)
    assert periodic.after is not None
    assert periodic.steady is periodic.begins is None
    t = Fraction(ONE_PERIOD[kind]["period"] * 3) + Fraction(5, 3)
    expected = enclosed_at(copies.solutions[0], t, 25)
    with ctx.workprec(256):
        known = {n: b.real for n, b in constant_values(stacked.closed_forms.constants).items()}
    for formula, own in zip(periodic.after, expected, strict=True):
        assert agree(value(formula, {**known, "t": ball(t)}), own)


# --- against textbooks ---------------------------------------------------------------------------

BOLUS: dict[str, Any] = {
    "equations": ["c' = -k*c + d/V"],
    "parameters": dict.fromkeys(("k", "V", "D", "T"), "positive"),
    "inputs": {"d": {"is": "D*delta(t)", "period": "T"}},
    "initial": {"c": 0},
}
DEPOT: dict[str, Any] = {
    "equations": ["a' = -ka*a + d", "c' = ka*a/V - ke*c"],
    "parameters": dict.fromkeys(("ka", "ke", "V", "D", "T"), "positive"),
    "inputs": {"d": {"is": "D*delta(t)", "period": "T"}},
    "initial": {"a": 0, "c": 0},
}
"""Repeated doses, into the blood and by mouth; the formulas are common ones of pharmacokinetics,
written here from memory (as in M. Gibaldi and D. Perrier, Pharmacokinetics, 1982, chapter 3)."""


def test_repeated_bolus_doses_accumulate_by_the_known_factor() -> None:
    periodic = only(response_to(BOLUS))
    (stretch,), (steady,) = periodic.stretches, periodic.steady or ()
    assert plain(stretch.rows[0]) == "D*exp(-k*tau)*(1 - exp(-n*k*T))/(V*(1 - exp(-k*T)))"
    assert plain(steady.rows[0]) == "D*exp(-k*tau)/(V*(1 - exp(-k*T)))"
    assert [plain(f) for f in periodic.left] == ["D*exp(-k*T)/V"]
    assert [plain(f) for f in periodic.begins or ()] == ["D*exp(-k*T)/(V*(1 - exp(-k*T)))"]


def test_repeated_doses_by_mouth_are_the_known_ones() -> None:
    response = response_to(DEPOT)
    place = next(k for k, s in enumerate(response.solutions) if "!=" in s.condition)
    periodic, solution = only(response, place), response.solutions[place]
    values = {"ka": Fraction(7, 5), "ke": Fraction(1, 5), "V": 12, "D": 100, "T": 8}
    for n in (1, 2, 3, 7):
        with ctx.workprec(256):
            known = named(solution, values) | {"n": ball(n), "tau": ball(Fraction(5, 2))}
            ka, ke, v, d, t, tau = (known[name] for name in ("ka", "ke", "V", "D", "T", "tau"))

            def summed(k: arb, n: int = n, t: arb = t, tau: arb = tau) -> arb:
                return (1 - (-n * k * t).exp()) / (1 - (-k * t).exp()) * (-k * tau).exp()

            textbook = d * ka / (v * (ka - ke)) * (summed(ke) - summed(ka))
        assert agree(value(periodic.stretches[0].rows[1], known), textbook)


def test_a_depot_and_two_compartments_are_written_mode_by_mode() -> None:
    response = response_to(
        {
            "states": ["a", "c", "p"],
            "matrix": [["-ka", 0, 0], ["ka", "-ke - k12", "k21"], [0, "k12", "-k21"]],
            "input_matrix": [[1], [0], [0]],
            "parameters": dict.fromkeys(("ka", "ke", "k12", "k21", "D", "T"), "positive"),
            "inputs": {"d": {"is": "D*delta(t)", "period": "T"}},
            "initial": [0, 0, 0],
        }
    )
    periodic = only(response)
    assert periodic.steady is not None
    for formula in periodic.stretches[0].rows[1:]:
        text = plain(formula)
        for rate in ("ka", "alpha", "beta"):
            assert text.count(f"exp(-{rate}*tau)*(1 - exp(-n*{rate}*T))") == 1
            assert text.count(f"(1 - exp(-{rate}*T))") == 1


def test_a_half_wave_rectified_sine_through_a_lag() -> None:
    """Known: e^(-t/(RC)) starts from U0 w a (1 + e^(-aT/2))/((a^2 + w^2) (1 - e^(-aT)))."""
    response = response_to(
        {
            "equations": ["R*C*u' + u = U"],
            "parameters": dict.fromkeys(("R", "C", "U0", "w"), "positive"),
            "inputs": {
                "U": {
                    "pieces": [{"from": 0, "to": "pi/w", "is": "U0*sin(w*t)"}],
                    "period": "2*pi/w",
                }
            },
            "initial": {"u": 0},
        }
    )
    periodic, solution = only(response), response.solutions[0]
    assert periodic.steady is not None
    assert not periodic.provided
    values = {"R": 3, "C": Fraction(1, 7), "U0": 5, "w": 4}
    with ctx.workprec(256):
        known = named(solution, values) | {periodic.local: ball(Fraction(1, 3))}
        rate, w, since = 1 / (known["R"] * known["C"]), known["w"], known[periodic.local]
        size = known["U0"] * rate / (rate**2 + w**2)
        half = (-rate * arb.pi() / w).exp()
        sine, cosine = (w * since).sin(), (w * since).cos()
        decay = w * (-rate * since).exp() * (1 + half) / (1 - half**2)
        textbook = size * (rate * sine - w * cosine + decay)
    assert agree(value(periodic.steady[0].rows[0], known), textbook)


# --- what is settled exactly ---------------------------------------------------------------------


def undamped(period: str, **more: Any) -> dict[str, Any]:
    return {
        "equations": ["x'' + w^2*x = F"],
        "parameters": {"w": "positive"},
        "inputs": {"F": {"is": "delta(t)", "period": period}},
        "initial": {"x": 0, "x'": 0},
        **more,
    }


def test_blows_in_step_with_an_oscillator_add_up() -> None:
    periodic = only(response_to(undamped("2*pi/w")))
    assert plain(periodic.stretches[0].rows[0]) == "n*sin(w*tau)/w"
    assert [plain(f) for f in periodic.meets] == ["w"]
    assert periodic.provided == ()


def test_blows_every_half_turn_do_not_meet_the_oscillator() -> None:
    periodic = only(response_to(undamped("pi/w")))
    assert periodic.meets == periodic.provided == ()


def test_right_angles_are_worked_out() -> None:
    response = response_to(
        {
            "equations": ["x'' + 9*x = F"],
            "inputs": {
                "F": {
                    "pieces": [{"from": "0", "to": "pi/3", "is": "5*sin(3*t)"}],
                    "period": "2*pi/3",
                }
            },
            "initial": {"x": 0, "x'": 0},
        }
    )
    periodic = only(response)
    assert plain(periodic.stretches[1].rows[0]) == "-5*pi*n*cos(3*tau)/18"
    assert [plain(f) for f in periodic.carried] == ["-5*pi*n/18", "0"]


def test_a_pair_that_may_meet_the_period_is_named() -> None:
    own = undamped("T", parameters={"w": "positive", "T": "positive"})
    periodic = only(response_to(own))
    assert [plain(f) for f in periodic.provided] == ["sin(w*T/2)"]


def test_a_pair_that_may_be_undamped_is_named() -> None:
    response = response_to(
        {
            "equations": ["x'' + c*x' + k*x = F"],
            "parameters": {"c": "nonnegative", "k": "positive", "T": "positive"},
            "conditions": ["c^2 < 4*k"],
            "inputs": {"F": {"is": "delta(t)", "period": "T"}},
            "initial": {"x": 0, "x'": 0},
        }
    )
    texts = [plain(f) for s in response.solutions for p in s.periodic for f in p.provided]
    assert texts == ["1 - 2*exp(-c*T/2)*cos(omega_d*T) + exp(-c*T)"]


def test_a_frequency_in_numbers_never_meets_a_period_in_numbers() -> None:
    assert only(response_to(repeated("blows on an oscillator", None))).provided == ()


def test_a_rate_that_may_be_zero_is_refused() -> None:
    own = {
        "equations": ["x' = a*x + u"],
        "parameters": {"a": "real", "T": "positive"},
        "inputs": {"u": {"is": "delta(t)", "period": "T"}},
        "initial": {"x": 0},
    }
    with pytest.raises(VanishingRateError, match="a != 0"):
        response_to(own)
    assert only(response_to({**own, "conditions": ["a != 0"]})).steady is None


def test_a_pair_that_comes_twice_is_refused() -> None:
    own = {
        "equations": ["x'' + x = y", "y'' + y = u"],
        "inputs": {"u": {"is": "delta(t)", "period": "2"}},
        "initial": {"x": 0, "x'": 0, "y": 0, "y'": 0},
    }
    with pytest.raises(RepeatedModeError, match=r"the pair ± 1\*i"):
        response_to(own)


# --- properties ----------------------------------------------------------------------------------

rates = st.fractions(Fraction(1, 4), 3, max_denominator=4)
lengths = st.fractions(Fraction(1, 3), 4, max_denominator=3)


@settings(max_examples=15)
@given(a=rates, b=rates, length=lengths, share=st.fractions(0, 1, max_denominator=5))
def test_a_steady_period_ends_as_it_begins(
    a: Fraction, b: Fraction, length: Fraction, share: Fraction
) -> None:
    """x_ss = e^(AT) x_ss + b, with the state after one period for b, and the limit of all n."""
    response = response_to(
        {
            "equations": [f"x'' + ({a})*x' + ({b})*x = F"],
            "inputs": {
                "F": {
                    "pieces": [{"from": "0", "to": str(length * share), "is": "2"}]
                    if 0 < share < 1
                    else [{"from": "0", "is": "t"}],
                    "period": str(length),
                }
            },
            "initial": {"x": 0, "x'": 0},
        }
    )
    periodic, stacked = only(response), response.stacked
    assert isinstance(stacked, Response)
    assert periodic.steady is not None
    assert periodic.begins is not None
    with ctx.workprec(256):
        known = {n: v.real for n, v in constant_values(stacked.closed_forms.constants).items()}
    for row in range(2):
        first = value(periodic.steady[0].rows[row], {**known, periodic.local: arb(0)})
        last = value(periodic.steady[-1].rows[row], {**known, periodic.local: ball(length)})
        begins = value(periodic.begins[row], known)
        assert agree(first, begins)
        assert agree(last, begins)
        late = value(periodic.carried[row], {**known, periodic.number: arb(10**4)})
        assert abs(float((late - begins).mid())) < 1e-20
