"""Transfer functions of models with one input, whatever the input is as a function of time."""

from __future__ import annotations

from typing import Any

import pytest

from tests.checking.hold import Line, held

STEPPED: dict[str, Any] = {
    "equations": ["x'' + 3*x' + 2*x = 4*u"],
    "initial": {"x": "1", "x'": "5"},
    "inputs": {"u": "7*step(t)"},
}
WAVES = STEPPED | {"inputs": {"u": "t*exp(-t) + sin(3*t)"}}
PULSE = STEPPED | {"inputs": {"u": [{"from": "0", "to": "2", "is": "1 + t"}]}}
STRUCK = STEPPED | {"inputs": {"u": "3*delta(t)"}}
LETTERS: dict[str, Any] = {
    "equations": ["m*x'' + c*x' + k*x = F"],
    "initial": {"x": 0, "x'": 0},
    "inputs": {"F": "F_0*cos(w*t)"},
    "parameters": dict.fromkeys(("m", "c", "k", "F_0", "w"), "positive"),
}
TANKS: dict[str, Any] = {
    "equations": ["y' = -2*y + u", "z' = 2*y - z"],
    "initial": {"y": 0, "z": 0},
    "inputs": {"u": "step(t)"},
}
RIGHT = r"G(s) = \frac{4}{s^2 + 3s + 2}"


@pytest.mark.parametrize("model", [STEPPED, WAVES, PULSE])
@pytest.mark.parametrize(
    ("text", "verdict"),
    [
        (RIGHT, "holds"),
        (r"G(s) = \frac{X(s)}{U(s)} = \frac{4}{(s+1)(s+2)}", "holds"),
        (r"\frac{X(s)}{U(s)} = \frac{4}{s+1} - \frac{4}{s+2}", "holds"),
        (r"H(s) = \frac{2}{0.5s^2 + 1.5s + 1}", "holds"),
        (r"G(s) = \frac{1}{s^2 + 3s + 2}", "fails"),
        (r"G(s) = \frac{4}{s^2 - 3s + 2}", "fails"),
        (r"\frac{X(s)}{U(s)} = \frac{4s}{(s+1)(s+2)}", "fails"),
    ],
)
def test_a_transfer_function_is_free_of_input_and_start(
    model: dict[str, Any], text: str, verdict: str
) -> None:
    (found,) = held(model, text)
    assert found.says.startswith("transfer function")
    assert found.verdict == verdict, found.reason


def test_letters_stay_letters() -> None:
    right, wrong = held(
        LETTERS, r"G(s) = \frac{1}{ms^2 + cs + k}", r"G(s) = \frac{1}{ms^2 + cs - k}"
    )
    assert (right.verdict, wrong.verdict) == ("holds", "fails")


@pytest.mark.parametrize(
    ("line", "verdict"),
    [
        (r"\frac{Z(s)}{U(s)} = \frac{2}{(s+1)(s+2)}", "holds"),
        (r"\frac{Y(s)}{U(s)} = \frac{1}{s+2}", "holds"),
        (r"\frac{Y(s)}{U(s)} = \frac{2}{(s+1)(s+2)}", "fails"),
        (("transfer function", r"G(s) = \frac{1}{s+2}", "y"), "holds"),
        (("transfer function", r"G(s) = \frac{1}{s+2}", "z"), "fails"),
        (r"G(s) = \frac{1}{s+2}", "not read"),
        (("transfer function", r"G(s) = \frac{1}{s+2}", "w"), "not read"),
    ],
)
def test_of_several_states_one_has_to_be_told(line: Line, verdict: str) -> None:
    (found,) = held(TANKS, line)
    assert found.verdict == verdict, found.reason


def test_an_impulse_is_no_input_to_divide_by() -> None:
    (found,) = held(STRUCK, RIGHT)
    assert found.verdict == "not read"
