"""Random driven models: everything is proved, and 30 digits agree."""

from __future__ import annotations

from fractions import Fraction
from typing import Any

from hypothesis import given, settings
from hypothesis import strategies as st

from closedform.response.driven.response import respond_driven
from closedform.verification.driven.verify import verify_driven
from tests.verification.driven.made import stated

SMALL = st.integers(-3, 3)
RATES = st.sampled_from(["0", "-1", "-2", "-1/2", "1/3"])
FREQUENCIES = st.sampled_from(["1", "2", "3", "1/2", "sqrt(2)"])
INSTANTS = st.sampled_from(["0", "1", "2", "7/2", "5"])


@st.composite
def matrices(draw: st.DrawFn, n: int) -> list[list[int]]:
    """Companion blocks of the exponents that inputs have too, coupled at random."""
    rows = [
        [draw(st.sampled_from([0, 0, 1, -1])) if k > i else 0 for k in range(n)] for i in range(n)
    ]
    i = 0
    while i < n:
        if i + 1 < n and draw(st.booleans()):
            square = draw(st.sampled_from([1, 4, 9, 2, 5]))
            rows[i][i : i + 2] = [0, 1]
            rows[i + 1][i : i + 2] = [-square, draw(st.sampled_from([0, 0, -2]))]
            i += 2
        else:
            rows[i][i] = draw(st.sampled_from([0, -1, -2]))
            i += 1
    return rows


@st.composite
def functions_of_time(draw: st.DrawFn) -> str:
    """A wave with any origin, perhaps switched on or off, or an impulse."""
    if draw(st.integers(0, 4)) == 0:
        return f"{draw(SMALL)}*delta(t - {draw(INSTANTS)})"
    origin = draw(INSTANTS)
    power, rate = draw(st.integers(0, 2)), draw(RATES)
    parts = [str(draw(st.sampled_from(["1", "-2", "3/2"])))]
    parts += [f"(t - {origin})^{power}"] if power else []
    parts += [f"exp(({rate})*(t - {origin}))"] if rate != "0" else []
    kernel = draw(st.sampled_from(["", "sin", "cos"]))
    parts += [f"{kernel}({draw(FREQUENCIES)}*(t - {origin}))"] if kernel else []
    window = draw(st.sampled_from(["", "step(t - 1)", "step(2 - t)", "step(t - 1)*step(4 - t)"]))
    parts += [window] if window else []
    return "*".join(parts)


@st.composite
def models(draw: st.DrawFn) -> dict[str, Any]:
    n = draw(st.integers(1, 4))
    m = draw(st.integers(1, 2))
    inputs = {
        f"u{k}": " + ".join(draw(st.lists(functions_of_time(), min_size=1, max_size=2)))
        for k in range(1, m + 1)
    }
    fed = [[draw(st.sampled_from([0, 1, -1, 2])) for _ in range(m)] for _ in range(n)]
    fed[n - 1] = [1] * m
    return {
        "states": [f"x{k}" for k in range(1, n + 1)],
        "matrix": draw(matrices(n)),
        "input_matrix": fed,
        "inputs": inputs,
        "initial": [draw(SMALL) for _ in range(n)],
        "start": draw(st.sampled_from(["0", "0", "1/2"])),
        "outputs": {"y": f"x1 - 2*x{n}" + ("" if "delta" in inputs["u1"] else " + u1")},
    }


@settings(max_examples=25)
@given(models())
def test_every_random_model_is_proved(mapping: dict[str, Any]) -> None:
    record = verify_driven(respond_driven(stated(mapping)))
    assert not record.refuted
    assert not record.left_open
    assert record.holds


@st.composite
def open_models(draw: st.DrawFn) -> dict[str, Any]:
    """An oscillator or a chain of two, with parameters in the model and in its input."""
    names = {"a": "positive", "q": "real", "x0": "real"}
    wave = draw(
        st.sampled_from(
            [
                "q",
                "q*sin(w*t)",
                "q*exp(-b*t)",
                "q*(t - T)*step(t - T)",
                "q*cos(w*(t - T))*step(t - T)",
            ]
        )
    )
    equations = draw(
        st.sampled_from(
            [
                ["x'' + a^2*x = u"],
                ["x'' + 2*a*x' + a^2*x = u"],
                ["x' = -a*x + u", "y' = a*x - 2*y"],
                ["x' + x = u", "z = a*x - u"],
            ]
        )
    )
    for name in "wbT":
        if name in wave:
            names[name] = "positive"
    initial: dict[str, Any] = {"x": "x0"}
    initial |= {"x'": 0} if "x''" in equations[0] else {}
    initial |= {"y": 1} if len(equations) > 1 and "y" in equations[1] else {}
    blow = draw(st.booleans()) and "T" in names and "z" not in equations[-1]
    return {
        "equations": equations,
        "parameters": names,
        "inputs": {"u": wave + (" + 3*delta(t - T)" if blow else "")},
        "initial": initial,
    }


@settings(max_examples=8)
@given(open_models())
def test_every_random_model_with_parameters_is_proved(mapping: dict[str, Any]) -> None:
    records = verify_driven(respond_driven(stated(mapping)))
    assert not records.refuted
    assert not records.left_open
    assert records.holds


def test_sums_of_roots_that_surds_need_are_proved() -> None:
    model = stated(
        {
            "states": ["x"],
            "matrix": [[-1]],
            "input_matrix": [["sqrt(3)"]],
            "inputs": {"F": "sqrt(2)*sin(sqrt(5)*t)*step(t - sqrt(3))"},
            "initial": [Fraction(1, 3)],
        }
    )
    assert verify_driven(respond_driven(model)).holds
