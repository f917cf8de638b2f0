"""Formulas of every textbook, and the forms in which they are often misremembered.

All of these are from memory; no source was looked up.  The wrong forms look much like the right
ones, and agree with them in some limit: for light damping, at the start, for one unit of time.
"""

from __future__ import annotations

from pathlib import Path
from typing import Any

import pytest

from closedform.checking.check import check_lines
from closedform.checking.claim import SourceLine
from closedform.checking.source.reading import Source
from closedform.model import model_from

SPRING: dict[str, Any] = {
    "equations": ["m*x'' + c*x' + k*x = 0"],
    "initial": {"x": "x_0", "x'": "v_0"},
    "conditions": ["c^2 < 4*k*m"],
    "parameters": {"m": "positive", "c": "positive", "k": "positive", "x_0": "real", "v_0": "real"},
}
SHAKEN: dict[str, Any] = {
    "equations": ["x'' + 2*z*w_0*x' + w_0^2*x = a*cos(w*t)"],
    "initial": {"x": 0, "x'": 0},
    "conditions": ["z < 1"],
    "parameters": dict.fromkeys(("z", "w_0", "a", "w"), "positive"),
}
CIRCUIT: dict[str, Any] = {
    "equations": ["L*q'' + R*q' + q/C = u"],
    "initial": {"q": 0, "q'": 0},
    "inputs": {"u": "U*step(t)"},
    "conditions": ["R^2*C < 4*L"],
    "parameters": dict.fromkeys(("R", "L", "C", "U"), "positive"),
}
DECAY: dict[str, Any] = {
    "equations": ["N' = -lamda*N"],
    "initial": {"N": "N_0"},
    "parameters": {"lamda": "positive", "N_0": "positive"},
}
CHAIN: dict[str, Any] = {
    "equations": ["A' = -k_1*A", "B' = k_1*A - k_2*B"],
    "initial": {"A": "A_0", "B": 0},
    "conditions": ["k_1 != k_2"],
    "parameters": dict.fromkeys(("k_1", "k_2", "A_0"), "positive"),
}
CHARGE: dict[str, Any] = {
    "equations": ["R*C*v' + v = U"],
    "initial": {"v": 0},
    "parameters": {"R": "positive", "C": "positive", "U": "positive"},
}
DAMPED = r"\omega_d = \sqrt{\frac{k}{m} - \frac{c^2}{4m^2}}"

FORMULAS: list[tuple[dict[str, Any], list[str], str, str]] = [
    (SPRING, [], r"\omega_n = \sqrt{\frac{k}{m}}", r"\omega_n = \frac{k}{m}"),
    (SPRING, [], r"\zeta = \frac{c}{2\sqrt{km}}", r"\zeta = \frac{c}{\sqrt{km}}"),
    (
        SPRING,
        [],
        r"\zeta = \frac{c}{2m\omega_n}, \quad \omega_n = \sqrt{k/m}",
        r"\zeta = \frac{c}{2}\sqrt{\frac{k}{m}}",
    ),
    (SPRING, [], DAMPED, r"\omega_d = \sqrt{\frac{k}{m} - \frac{c^2}{2m^2}}"),
    (
        SPRING,
        [r"\zeta = \frac{c}{2\sqrt{km}}"],
        r"\omega_d = \sqrt{\frac{k}{m}}\sqrt{1 - \zeta^2}",
        r"\omega_d = \sqrt{\frac{k}{m}}\sqrt{1 - \zeta}",
    ),
    (SPRING, [], r"T_d = \frac{4\pi m}{\sqrt{4km - c^2}}", r"T_d = 2\pi\sqrt{\frac{m}{k}}"),
    (SPRING, [], r"\tau = \frac{2m}{c}", r"\tau = \frac{m}{c}"),
    (
        SPRING,
        [],
        r"\lambda_{1,2} = -\frac{c}{2m} \pm \frac{i}{2m}\sqrt{4km - c^2}",
        r"\lambda_{1,2} = -\frac{c}{2m} \pm i\sqrt{4km - c^2}",
    ),
    (
        SPRING,
        [DAMPED, r"\delta = \frac{c}{2m}"],
        r"x = e^{-\delta t}(x_0\cos\omega_d t + \frac{v_0 + \delta x_0}{\omega_d}\sin\omega_d t)",
        r"x = e^{-\delta t}(x_0\cos\omega_d t + \frac{v_0}{\omega_d}\sin\omega_d t)",
    ),
    (
        SPRING,
        [r"\zeta = \frac{c}{2\sqrt{km}}", r"T = \frac{4\pi m}{\sqrt{4km - c^2}}"],
        r"\ln\frac{x(0)}{x(T)} = \frac{2\pi\zeta}{\sqrt{1 - \zeta^2}}",
        r"\ln\frac{x(0)}{x(T)} = 2\pi\zeta",
    ),
    (CIRCUIT, [], r"\omega_0 = \frac{1}{\sqrt{LC}}", r"\omega_0 = \sqrt{LC}"),
    (
        CIRCUIT,
        [],
        r"\zeta = \frac{R}{2}\sqrt{\frac{C}{L}}",
        r"\zeta = \frac{R}{2}\sqrt{\frac{L}{C}}",
    ),
    (CIRCUIT, [], r"\lim_{t\to\infty} q(t) = CU", r"\lim_{t\to\infty} q(t) = \frac{U}{C}"),
    (
        CIRCUIT,
        [],
        r"p(s) = s^2 + \frac{R}{L}s + \frac{1}{LC}",
        r"p(s) = s^2 + \frac{1}{RC}s + \frac{1}{LC}",
    ),
    (DECAY, [], r"T_{1/2} = \frac{\ln 2}{\lambda}", r"T_{1/2} = \frac{1}{\lambda}"),
    (DECAY, [], r"T_{1/2} = \frac{0.693}{\lambda}", r"T_{1/2} = \frac{0.639}{\lambda}"),
    (
        DECAY,
        [r"T_{1/2} = \frac{\ln 2}{\lambda}"],
        r"N(t) = N_0\,2^{-t/T_{1/2}}",
        r"N(t) = N_0\,e^{-t/T_{1/2}}",
    ),
    (
        CHAIN,
        [],
        r"B(t) = \frac{k_1 A_0}{k_2 - k_1}\left(e^{-k_1 t} - e^{-k_2 t}\right)",
        r"B(t) = \frac{k_2 A_0}{k_2 - k_1}\left(e^{-k_1 t} - e^{-k_2 t}\right)",
    ),
    (
        CHARGE,
        [],
        r"v(t) = U\left(1 - e^{-\frac{t}{RC}}\right)",
        r"v(t) = U\left(1 - e^{-RCt}\right)",
    ),
    (CHARGE, [], r"\tau = RC", r"\tau = \frac{1}{RC}"),
    (SHAKEN, [], r"\omega_d = w_0\sqrt{1 - z^2}", r"\omega_d = w_0\sqrt{1 - 2z^2}"),
    (
        SHAKEN,
        [r"K = (w_0^2 - w^2)^2 + (2zw_0w)^2"],
        r"x_p(t) = \frac{a}{K}\left((w_0^2 - w^2)\cos wt + 2zw_0w\sin wt\right)",
        r"x_p(t) = \frac{a}{\sqrt{K}}\cos wt",
    ),
]


@pytest.mark.parametrize(("model", "before", "right", "wrong"), FORMULAS)
def test_a_formula_holds_and_its_misremembered_form_fails(
    model: dict[str, Any], before: list[str], right: str, wrong: str
) -> None:
    read = model_from({"title": "A textbook's", **model}, name="textbook")
    for text, verdict in ((right, "holds"), (wrong, "fails")):
        lines = tuple(SourceLine(k, line) for k, line in enumerate([*before, text], 1))
        source = Source(Path("a.tex"), "m.toml", Path("m.toml"), "", lines)
        found = check_lines(source, read).lines[-1]
        assert found.verdict.startswith(verdict), (text, found.says, found.verdict, found.reason)
        assert found.says not in ("definition", "identity") or r"\ln\frac" in text
