"""Random equations as typed, from the file's form to the record: they are solved."""

from __future__ import annotations

import re
from fractions import Fraction
from typing import Any

from flint import arb, ctx
from hypothesis import Phase, given, settings
from hypothesis import strategies as st

from tests.driven.held import check
from tests.driven.integrating import reached
from tests.driven.series import derivatives
from tests.driven.told import Told, record_of_driven
from tests.driven.typed import Stated
from tests.parametric.plain_reader import Number

BITS = 500
WHOLE = (Phase.explicit, Phase.generate)
"""Whole jobs take too long to make a failing example smaller."""
SMALL = st.sampled_from(["1", "2", "3", "(1/2)", "(3/2)"])
RATES = st.sampled_from(["-1", "-2", "-(1/2)", "(1/3)"])
INSTANTS = st.sampled_from(["1/2", "1", "2", "5/2"])


@st.composite
def waves(draw: st.DrawFn) -> str:
    parts = [draw(SMALL)]
    parts += draw(st.lists(st.sampled_from(["t", "(t - 1)"]), max_size=2))
    rate, frequency = draw(RATES), draw(st.sampled_from(["1", "2", "(3/2)", "sqrt(2)", "pi"]))
    kernel = draw(st.sampled_from(["", "exp", "sin", "cos", "both"]))
    parts += [f"exp({rate}*t)"] if kernel in ("exp", "both") else []
    phase = " + 1" if len(parts) == 1 and kernel == "sin" else ""  # sin(1) is no number here
    parts += [f"sin({frequency}*t{phase})"] if kernel in ("sin", "both") else []
    parts += [f"cos({frequency}*t)"] if kernel == "cos" else []
    return "*".join(parts)


@st.composite
def declared(draw: st.DrawFn) -> Any:
    """An input in any of the ways to declare one."""
    way = draw(st.sampled_from(["formula", "step", "pieces", "impulse", "periods"]))
    wave = draw(waves())
    at = draw(INSTANTS)
    match way:
        case "formula":
            return wave
        case "step":
            return f"{wave}*step(t - {at})"
        case "impulse":
            return {"is": f"{draw(SMALL)}*delta(t - {at})", "unit": "N s"}
        case "periods":
            return {"pieces": [{"from": "0", "to": at, "is": "2*t"}], "period": "3", "count": 2}
    return [
        {"from": at, "to": "3", "is": wave},
        {"from": "3", "is": f"{draw(SMALL)}*exp(-(t - 3))"},
    ]


@st.composite
def models(draw: st.DrawFn) -> dict[str, Any]:
    """Up to three unknowns of order 1 or 2, coupled; an algebraic one; inputs, also late."""
    count = draw(st.integers(1, 2))
    inputs = {f"u{k}": draw(declared()) for k in range(1, count + 1)}
    names = ["x", "y", "p"][: draw(st.integers(1, 3))]
    smooth = all(isinstance(i, str) and "step" not in i for i in inputs.values())
    equations, initial = [], {}
    for name in names:
        order = draw(st.sampled_from([1, 2]))
        left = f"{draw(SMALL)}*{name}''" if order == 2 else f"{draw(SMALL)}*{name}'"
        left += f" + {draw(SMALL)}*{name}'" if order == 2 and draw(st.booleans()) else ""
        left += f" + {draw(SMALL)}*{name}" if draw(st.booleans()) else ""
        driven = draw(st.sampled_from(sorted(inputs)))
        term = draw(
            st.sampled_from(
                [f"{driven}", f"2*{driven}", f"{driven}(t - 1)", f"3*{driven} - 1/2", "cos(t)"]
                + ([f"{driven}' + {driven}"] if smooth else [])
            )
        )
        other = draw(st.sampled_from(names))
        right = term + ("" if other == name else f" - {draw(SMALL)}*{other}")
        equations.append(f"{left} = {right}")
        initial[name] = draw(SMALL)
        if order == 2:
            initial[f"{name}'"] = draw(st.sampled_from(["0", "-1", "1/3"]))
    inputs = {name: told for name, told in inputs.items() if name in " ".join(equations)}
    if draw(st.booleans()):
        struck = any(isinstance(told, dict) and "is" in told for told in inputs.values())
        fed = "" if struck or not inputs else " - " + min(inputs)
        equations.append(f"z{fed} = 2*x - 1")
    return {"equations": equations, "inputs": inputs, "initial": initial}


def held(mapping: dict[str, Any], values: dict[str, Number]) -> tuple[Stated, Told]:
    """Solve, record, and hold the record against the equations; return what was read."""
    record = record_of_driven(mapping)
    stated = Stated(mapping, values)
    for told in Told.cases(record, values):
        between = [at + Fraction(2, 7) for at in stated.instants]
        check(stated, told.functions, [*stated.instants, *between])
    return stated, told


@settings(max_examples=20, phases=WHOLE)
@given(models())
def test_the_record_of_random_equations_solves_them(mapping: dict[str, Any]) -> None:
    with ctx.workprec(BITS):
        held(mapping, {})


@settings(max_examples=3, phases=WHOLE)
@given(models())
def test_it_is_what_taylors_method_makes_of_the_equations(mapping: dict[str, Any]) -> None:
    with ctx.workprec(BITS):
        stated, told = held(mapping, {})
        instants = stated.instants
        for begun, end in zip(instants[:2], [*instants[1:2], instants[-1] + 1], strict=False):
            until = begun + min(end - begun, Fraction(1)) * Fraction(2, 7)
            found = reached(stated, begun, told.functions(begun), until)
            for (name, order), number in found.items():
                ours = derivatives(told.functions(until)[name], order + 1)[order]
                assert abs(ours - number) < arb("1e-27") * (1 + abs(number)), (name, order)


@st.composite
def open_models(draw: st.DrawFn) -> tuple[dict[str, Any], dict[str, Number]]:
    """Equations with parameters, and values of these, some of them where cases meet."""
    equations, initial = draw(
        st.sampled_from(
            [
                (["m*x'' + c*x' + k*x = F"], {"x": "x0", "x'": 0}),
                (["m*x'' + k*x = F"], {"x": "x0", "x'": 1}),
                (["c*x' = F - x", "y' = x - m*y"], {"x": "x0", "y": 0}),
                (["c*x' + x = F", "z = k*x - F"], {"x": "x0"}),
            ]
        )
    )
    wave = draw(
        st.sampled_from(
            [
                "q*sin(w*t)",
                "q*exp(-w*t)",
                "q*step(t - T)",
                "q*(t - T)*step(t - T)",
                [{"from": "T", "to": "3*T", "is": "q*cos(w*(t - T))"}],
            ]
        )
    )
    formulas = [wave] if isinstance(wave, str) else [t for piece in wave for t in piece.values()]
    words = set(re.findall(r"\w+", " ".join([*equations, *formulas, "x0"])))
    told = {"m": "positive", "c": "positive", "k": "positive", "w": "positive", "T": "positive"}
    told |= {"q": "real", "x0": "real"}
    parameters = {name: how for name, how in told.items() if name in words}
    values: dict[str, Number] = {
        name: draw(st.sampled_from([Fraction(1), Fraction(2), Fraction(1, 2), Fraction(4)]))
        for name in parameters
    }
    mapping = {"equations": equations, "inputs": {"F": wave}, "initial": initial}
    return {**mapping, "parameters": parameters}, values


@settings(max_examples=8, phases=WHOLE)
@given(open_models())
def test_the_record_of_random_equations_with_parameters_solves_them(
    drawn: tuple[dict[str, Any], dict[str, Number]],
) -> None:
    with ctx.workprec(BITS):
        held(*drawn)
