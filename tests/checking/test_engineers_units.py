"""Printed units, where the model names those of its parameters and where it names none."""

from __future__ import annotations

from fractions import Fraction
from pathlib import Path

import pytest

from closedform.checking.standing.units import read_unit, seconds_in_time
from tests.checking.engineers import Written, written
from tests.checking.hold import held

MOUNT = """
title = "Mount"
equations = ["m*x'' + c*x' + k*x = 0"]
initial = { x = "1/100", "x'" = 0 }
[parameters]
m = { assume = "positive", value = 5, unit = "kg" }
c = { assume = "positive", value = 10, unit = "N*s/m" }
k = { assume = "positive", value = 2000, unit = "N/m" }
"""
COIL = """
title = "Coil"
equations = ["0.1*i' + 20*i = 10"]
initial = { i = 0 }
"""
DOSE = """
title = "Dose"
equations = ["C' = -k*C"]
initial = { C = 3 }
[parameters]
k = { assume = "positive", value = "1/4", unit = "1/h" }
"""

DERIVATIONS = (
    written(
        "units of parameters",
        MOUNT,
        r"ok m = 5\,\mathrm{kg},\quad c = 10\,\mathrm{N\,s/m},\quad k = 2000\,\mathrm{N/m}",
        r"ok k = 2\,\mathrm{kN/m}",
        r"ok m = \qty{5000}{\gram}",
        r"bad k = 2\,\mathrm{N/m}",
        r"bad k = 2000\,\mathrm{kN/m}",
        r"bad k = 2000\,\mathrm{N}",
        r"bad m = 6\,\mathrm{kg}",
    ),
    written(
        "times where the parameters have seconds in their units",
        MOUNT,
        r"ok T_d = 314.6\,\mathrm{ms}",
        r"ok T_d = 0.3146\,\mathrm{s}",
        r"bad T_d = 0.3146\,\mathrm{ms}",
        r"bad T_d = 314.6\,\mathrm{s}",
        r"ok \zeta=\frac{c}{2\sqrt{km}}=0.05=5\,\%",
        r"bad \zeta=\frac{c}{2\sqrt{km}}=0.05=0.5\,\%",
        r"ok x(0) = 10\,\mathrm{mm} ",
        r"bad x(0) = 12\,\mathrm{mm} ",
    ),
    written(
        "later lines use a time in the units of the model",
        MOUNT,
        r"ok T_d = 314.6\,\mathrm{ms}",
        r"ok N_1 = \frac{3.146}{T_d} = 10.0",
        r"bad N_2 = \frac{3.146}{T_d} = 0.010",
    ),
    written(
        "hours and minutes",
        DOSE,
        r"ok t_{1/2} = 2.77\,\mathrm{h}",
        r"ok t_{1/2} = 166.4\,\mathrm{min}",
        r"bad t_{1/2} = 2.77\,\mathrm{min}",
        r"bad t_{1/2}=\frac{\ln2}{k}=2.77\,\mathrm{min} = 0.693",
        r"ok k = 0.25\,\mathrm{h^{-1}}",
    ),
    written(
        "a model without units",
        COIL,
        r"ok \tau = 5\,\mathrm{ms}",
        r"ok \tau = 0.005\,\mathrm{s}",
        r"bad \tau = 5\,\mathrm{s}",
        r"bad \tau = 50\,\mathrm{ms}",
    ),
)


@pytest.mark.parametrize("derivation", DERIVATIONS, ids=lambda item: item.name)
def test_printed_values_are_in_printed_units(derivation: Written, tmp_path: Path) -> None:
    assert derivation.words(tmp_path) == [word for word, _ in derivation.lines]


@pytest.mark.parametrize(
    ("text", "factor"),
    [
        ("kN/m", Fraction(1000)),
        ("N s/m", Fraction(1)),
        ("N*s/m", Fraction(1)),
        ("min^-1", Fraction(1, 60)),
        ("mm", Fraction(1, 1000)),
        ("µF", Fraction(1, 10**6)),
        ("kg m^2", Fraction(1)),
        ("%", Fraction(1, 100)),
    ],
)
def test_units_are_read(text: str, factor: Fraction) -> None:
    found = read_unit(text)
    assert found is not None
    assert found.factor == factor


@pytest.mark.parametrize("text", ["", "foo", "J/kg K", "N//m"])
def test_what_is_no_unit_or_could_be_two_is_not_read(text: str) -> None:
    assert read_unit(text) is None


def test_the_unit_of_time_is_told_by_the_units_of_parameters() -> None:
    assert seconds_in_time({"k": "1/h", "V": "L"}) == 3600
    assert seconds_in_time({"m": "kg", "k": "N/m"}) == 1
    assert seconds_in_time({"R": "kohm", "C": "uF"}) is None
    assert seconds_in_time({"a": "1/h", "b": "1/s"}) is None
    assert seconds_in_time({}) is None


def test_an_instant_in_another_unit_of_time_is_not_read() -> None:
    """The reader leaves out units of instants; a minute is no second."""
    parameters = {
        "C": {"assume": "positive", "value": "100", "unit": "J/K"},
        "G": {"assume": "positive", "value": "5", "unit": "W/K"},
    }
    keys = {"equations": ["C*T' = -G*T"], "initial": {"T": "12"}, "parameters": parameters}
    found = held(keys, r"T(60\,\mathrm{s})\approx0.597", r"T(1\,\mathrm{min})\approx11.4")
    assert [v.verdict for v in found] == ["holds to the digits shown", "not read"]
