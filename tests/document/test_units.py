"""Units as they are typed, and as they are printed."""

from __future__ import annotations

from pathlib import Path

import pytest
from hypothesis import given
from hypothesis import strategies as st

from closedform.document.units import unit_latex
from closedform.document.writeup import write_up
from closedform.model.building import model_from
from closedform.notation.latex.escape import escaped

M, S, KG, N = (rf"\mathrm{{{sign}}}" for sign in ("m", "s", "kg", "N"))


@pytest.mark.parametrize(
    ("text", "latex"),
    [
        ("m", M),
        ("m^2", M + "^{2}"),
        ("m**2", M + "^{2}"),
        ("m²", M + "^{2}"),
        ("kg m^2", KG + r"\," + M + "^{2}"),
        ("kg*m^2", KG + r"\," + M + "^{2}"),
        ("kg·m²", KG + r"\," + M + "^{2}"),
        ("m^3/s", M + "^{3}/" + S),
        ("N s/m", N + r"\," + S + "/" + M),
        ("1/s", "1/" + S),
        ("s^-1", S + "^{-1}"),
        ("s^(-1/2)", S + "^{-1/2}"),
        ("s⁻¹", S + "^{-1}"),
        ("J/(kg K)", r"\mathrm{J}/(\mathrm{kg}\,\mathrm{K})"),
        ("degC", r"{}^{\circ}\mathrm{C}"),
        ("°C", r"{}^{\circ}\mathrm{C}"),
        ("W/(m^2 degC)", r"\mathrm{W}/(" + M + r"^{2}\,{}^{\circ}\mathrm{C})"),
        ("Ohm", r"\Omega"),
        ("kohm", r"\mathrm{k}\Omega"),
        ("MΩ", r"\mathrm{M}\Omega"),
        ("uF", r"\text{\textmu}\mathrm{F}"),
        ("µm", r"\text{\textmu}\mathrm{m}"),
        ("%", r"\%"),
        ("vehicles/h", r"\mathrm{vehicles}/\mathrm{h}"),
    ],
)
def test_units_are_upright_with_raised_powers(text: str, latex: str) -> None:
    assert unit_latex(text) == f"${latex}$"


@pytest.mark.parametrize(
    "text",
    [
        *("", "parts per million", "mg per L", "m^", "m/", "/m", "(m", "m)", "m//s", "()"),
        *("m^^2", "^2", "$5", "m_2", r"\input{x}", "€", "mètre", "1e3", "abcohm"),
    ],
)
def test_what_is_no_unit_is_text(text: str) -> None:
    assert unit_latex(text) == escaped(text)


@given(st.text())
def test_any_text_gives_balanced_latex_without_commands_of_its_own(text: str) -> None:
    found = unit_latex(text)
    if found == escaped(text):
        return
    assert found.count("{") == found.count("}")
    bare = found
    for command in (r"\mathrm", r"\text{\textmu}", r"\,", r"\Omega", r"\circ", r"\%"):
        bare = bare.replace(command, "")
    assert "\\" not in bare


def test_units_of_parameters_and_inputs_are_printed_so(tmp_path: Path) -> None:
    table = {
        "title": "Flywheel",
        "equations": ["J*w' + d*w = M"],
        "initial": {"w": 0},
        "inputs": {"M": {"is": "sin(t)", "unit": "N m"}},
        "parameters": {
            "J": {"assume": "positive", "unit": "kg m^2"},
            "d": {"assume": "positive"},
        },
    }
    tex = next(
        f
        for f in write_up(model_from(table, name="flywheel"), into=tmp_path).files
        if f.suffix == ".tex"
    )
    printed = tex.read_text(encoding="utf-8")
    assert unit_latex("kg m^2") in printed
    assert unit_latex("N m") in printed
