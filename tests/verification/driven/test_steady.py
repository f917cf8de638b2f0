"""Steady states, amplitudes, phases and verdicts: refuted with one fault in them."""

from __future__ import annotations

from dataclasses import replace
from fractions import Fraction

import pytest

from closedform.notation.expression import Number, Product
from closedform.response.driven.response import DrivenResponse, respond_driven
from closedform.verification.driven.setting import Setting
from closedform.verification.driven.steady import phasor_checks, stability_check, steady_checks
from tests.verification.driven.made import setting_to, stated, with_functions, with_solution

TWO = Number(Fraction(2))


@pytest.fixture(scope="module")
def response() -> DrivenResponse:
    return respond_driven(
        stated(
            {
                "equations": ["m*x'' + c*x' + k*x = F"],
                "parameters": {**dict.fromkeys("mckw", "positive"), "p": "positive"},
                "inputs": {"F": "p*sin(w*t) + k"},
                "initial": {"x": 0, "x'": 0},
            }
        )
    )


@pytest.fixture
def setting(response: DrivenResponse) -> Setting:
    return setting_to(response)


def _outcomes(setting: Setting) -> list[str]:
    return [check.outcome for check in (*steady_checks(setting), *phasor_checks(setting))]


def test_what_is_right_is_proved(setting: Setting) -> None:
    assert _outcomes(setting) == ["proved", "proved", "enclosed"]
    assert stability_check(setting).outcome == "enclosed"


def test_parts_that_do_not_make_the_whole_are_refuted(response: DrivenResponse) -> None:
    functions = response.solutions[0].functions
    assert functions.steady
    assert functions.transient
    for fields in (
        {"steady": functions.steady[1:]},
        {"transient": functions.transient[1:]},
        {"steady": functions.transient, "transient": functions.steady},
    ):
        spoiled = setting_to(with_functions(response, **fields))
        (check,) = steady_checks(spoiled)
        assert check.outcome == "refuted"


def test_another_verdict_on_stability_is_refuted(response: DrivenResponse) -> None:
    stability = response.solutions[0].stability
    for other in (
        replace(stability, verdict="not stable"),
        replace(stability, characteristic=stability.characteristic[::-1]),
    ):
        spoiled = with_solution(response, stability=other)
        assert stability_check(setting_to(spoiled)).outcome == "refuted"


@pytest.mark.parametrize(
    "load", ["3*sin(2*t + 1) - cos(t/3)", "sin(2*t) + sin(2*(t - 1)) + cos(t)"]
)
def test_sinusoids_of_several_frequencies_or_origins_are_each_proved(load: str) -> None:
    sought = {
        "equations": ["x'' + 2*x' + 5*x = F"],
        "inputs": {"F": load},
        "initial": {"x": 1, "x'": 0},
    }
    assert _outcomes(setting_to(respond_driven(stated(sought)))) == ["proved", "proved", "enclosed"]


@pytest.mark.parametrize("part", ["amplitude", "cosine", "phase", "by the sine", "lag", "gain"])
def test_another_amplitude_or_phase_is_refuted(setting: Setting, part: str) -> None:
    solution = replace(setting.solution)
    phasor, *others = solution.phasors
    assert phasor is not None
    (sinusoid,) = phasor.sinusoids
    assert sinusoid.lag is not None
    turned = replace(sinusoid.phase, above=Product((TWO, sinusoid.phase.above)))
    lag = replace(sinusoid.lag, angle=turned)
    gain = replace(sinusoid.lag, gain=Product((TWO, sinusoid.lag.gain)))
    wrong = {
        "amplitude": replace(sinusoid, amplitude=Product((TWO, sinusoid.amplitude))),
        "cosine": replace(sinusoid, cosine=sinusoid.cosine + 1),
        "phase": replace(sinusoid, phase=turned),
        "by the sine": replace(sinusoid, sine_phase=turned),
        "lag": replace(sinusoid, lag=lag),
        "gain": replace(sinusoid, lag=gain),
    }[part]
    solution.__dict__["phasors"] = (replace(phasor, sinusoids=(wrong,)), *others)
    assert "refuted" in _outcomes(replace(setting, solution=solution))
