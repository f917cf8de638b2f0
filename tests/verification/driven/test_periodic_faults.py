"""What is said of the ends of periods, and of divisors: proved as it is, refuted with a fault."""

from __future__ import annotations

from collections.abc import Iterator
from dataclasses import replace
from fractions import Fraction
from typing import Any

import pytest

from closedform.algebra.domain import ParameterDomain
from closedform.algebra.parameter_field import ParameterField
from closedform.notation.expression import Call, Expression, Name, Number, Sum
from closedform.response.driven.period_formulas import PeriodicSolution
from closedform.response.driven.response import respond_driven
from closedform.verification.driven.periodic import periodic_checks
from closedform.verification.driven.periods import period_settings
from closedform.verification.driven.setting import Setting
from closedform.verification.driven.verify import verify_driven
from tests.verification.driven.made import stated

KINDS: dict[str, dict[str, Any]] = {
    "pumping": {
        "equations": ["5*h' + h = q"],
        "inputs": {"q": {"pieces": [{"from": "0", "to": "3", "is": "2"}], "period": "8"}},
        "initial": {"h": 1},
    },
    "saw teeth": {
        "equations": ["x'' + 2*x' + 5*x = F"],
        "inputs": {"F": {"pieces": [{"from": "0", "is": "t"}], "period": "2"}},
        "initial": {"x": 0, "x'": 0},
    },
    "blows at parameters": {
        "equations": ["x'' + w^2*x = F"],
        "parameters": {"w": "positive", "T": "positive"},
        "inputs": {"F": {"is": "delta(t)", "period": "T"}},
        "initial": {"x": 0, "x'": 0},
    },
    "perhaps undamped": {
        "equations": ["x'' + c*x' + k*x = F"],
        "parameters": {"c": "nonnegative", "k": "positive", "T": "positive"},
        "conditions": ["c^2 < 4*k"],
        "inputs": {"F": {"is": "delta(t)", "period": "T"}},
        "initial": {"x": 0, "x'": 0},
    },
    "in step": {
        "equations": ["x'' + w^2*x = F"],
        "parameters": {"w": "positive"},
        "inputs": {"F": {"is": "delta(t)", "period": "2*pi/w"}},
        "initial": {"x": 0, "x'": 0},
    },
    "half waves in step": {
        "equations": ["x'' + 9*x = F", "y' = x - y + F"],
        "inputs": {
            "F": {
                "pieces": [{"from": "0", "to": "pi/3", "is": "5*sin(3*t)"}],
                "period": "2*pi/3",
            }
        },
        "initial": {"x": 0, "x'": 0, "y": 0},
    },
    "infusions, added up": {
        "equations": ["c' = -k*c + q/V", "w' = c"],
        "parameters": dict.fromkeys(("k", "V", "R", "h", "T"), "positive"),
        "conditions": ["h < T"],
        "inputs": {
            "q": {
                "pieces": [{"from": "2", "to": "2 + h", "is": "R/h"}],
                "period": "T",
                "start": "2",
            }
        },
        "initial": {"c": 0, "w": 1},
    },
    "a rate of any sign": {
        "equations": ["x' = a*x + u"],
        "parameters": {"a": "real", "T": "positive"},
        "conditions": ["a != 0"],
        "inputs": {"u": {"is": "delta(t)", "period": "T", "count": 4}},
        "initial": {"x": 0},
    },
}
each_kind = pytest.mark.parametrize("kind", KINDS)


def settings_of(kind: str) -> Iterator[tuple[Setting, PeriodicSolution]]:
    response = respond_driven(stated(KINDS[kind]))
    for solution in response.solutions:
        for setting, _, written in period_settings(response, solution):
            yield setting, written


def outcomes(setting: Setting, written: PeriodicSolution) -> list[str]:
    return [check.outcome for check in periodic_checks(setting, written)]


def more(formula: Expression) -> Expression:
    return Sum((formula, Number(Fraction(1, 7))))


@each_kind
def test_what_is_right_is_proved(kind: str) -> None:
    for setting, written in settings_of(kind):
        ends, divisors = outcomes(setting, written)
        assert ends == "enclosed"
        assert divisors == ("enclosed" if written.provided else "proved")


@each_kind
def test_the_whole_record_holds(kind: str) -> None:
    records = verify_driven(respond_driven(stated(KINDS[kind])))
    assert records.holds


@each_kind
@pytest.mark.parametrize("part", ["left", "carried", "begins"])
def test_another_state_at_an_end_is_refuted(kind: str, part: str) -> None:
    for setting, written in settings_of(kind):
        formulas = getattr(written, part)
        for row in range(len(formulas or ())):
            wrong = tuple(more(f) if k == row else f for k, f in enumerate(formulas))
            assert "refuted" in outcomes(setting, replace(written, **{part: wrong}))


@each_kind
@pytest.mark.parametrize("part", ["stretches", "steady"])
@pytest.mark.parametrize("place", [0, -1])
def test_a_period_that_does_not_join_is_refuted(kind: str, part: str, place: int) -> None:
    for setting, written in settings_of(kind):
        stretches = list(getattr(written, part) or ())
        if not stretches:
            continue
        own = stretches[place]
        stretches[place] = replace(own, rows=(more(own.rows[0]), *own.rows[1:]))
        wrong = replace(written, **{part: tuple(stretches)})
        assert outcomes(setting, wrong)[0] == "refuted"


@pytest.mark.parametrize("kind", ["blows at parameters", "perhaps undamped"])
def test_a_divisor_that_is_not_named_is_refuted(kind: str) -> None:
    for setting, written in settings_of(kind):
        assert written.provided
        assert outcomes(setting, replace(written, provided=()))[1] == "refuted"
        other = (Call("sin", Name("T")),)
        assert outcomes(setting, replace(written, provided=other))[1] == "refuted"


def test_a_pair_in_step_that_is_not_told_is_refuted() -> None:
    for setting, written in settings_of("in step"):
        assert outcomes(setting, replace(written, meets=()))[1] == "refuted"


def test_a_rate_that_may_be_zero_is_refuted() -> None:
    for setting, written in settings_of("a rate of any sign"):
        case = setting.solution.case
        assert case is not None
        assert isinstance(setting.field, ParameterField)
        anywhere = replace(case, domain=ParameterDomain(setting.field, ()))
        wrong = replace(setting, solution=replace(setting.solution, case=anywhere))
        assert outcomes(wrong, written)[1] == "refuted"


def test_a_name_without_a_meaning_is_refuted() -> None:
    for setting, written in settings_of("pumping"):
        wrong = replace(written, left=(Name("nobody"),))
        assert outcomes(setting, wrong)[0] == "refuted"
