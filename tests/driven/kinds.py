"""A driven system for each kind of input, as typed and as worked into state form by hand."""

from __future__ import annotations

from typing import Any

from tests.driven.reference import Interval, Reference

__all__ = ["KINDS"]

OSCILLATOR = (("0", "1"), ("-4", "0"))
DAMPED = (("0", "1"), ("-5", "-2"))


def oscillator(
    u: str, *tones: tuple[str, str, int], matrix: Any = OSCILLATOR, last: str = "3"
) -> Reference:
    return Reference(
        ("x", "v"),
        matrix,
        (("0",), ("1",)),
        ("1", "0"),
        (Interval("0", (u,)),),
        (tones,),
        {"x": "x", "x_dot": "v"},
        last=last,
    )


KINDS: dict[str, tuple[dict[str, Any], Reference]] = {
    "polynomial": (
        {
            "equations": ["x' = -2*x + u", "y' = x - y"],
            "inputs": {"u": "3*t^2 - t + 1"},
            "initial": {"x": 1, "y": "-1/2"},
        },
        Reference(
            ("x", "y"),
            (("-2", "0"), ("1", "-1")),
            (("1",), ("0",)),
            ("1", "-1/2"),
            (Interval("0", ("3*t^2 - t + 1",)),),
            ((("0", "0", 3),),),
        ),
    ),
    "exponential": (
        {
            "equations": ["x' = -2*x + y + 5*exp(-3*t)", "y' = x - y - exp(t/2)"],
            "initial": {"x": 0, "y": 2},
        },
        Reference(
            ("x", "y"),
            (("-2", "1"), ("1", "-1")),
            (("5", "0"), ("0", "-1")),
            ("0", "2"),
            (Interval("0", ("exp(-3*t)", "exp(t/2)")),),
            ((("-3", "0", 1),), (("1/2", "0", 1),)),
        ),
    ),
    "sine with a phase": (
        {
            "equations": ["x'' + 2*x' + 5*x = F"],
            "inputs": {"F": "3*sin(2*t + 1) - cos(t/3)"},
            "initial": {"x": 1, "x'": 0},
        },
        oscillator("3*sin(2*t + 1) - cos(t/3)", ("0", "2", 1), ("0", "1/3", 1), matrix=DAMPED),
    ),
    "product": (
        {
            "equations": ["x'' + 2*x' + 5*x = F"],
            "inputs": {"F": "t*exp(-t/2)*cos(3*t)*sin(t)"},
            "initial": {"x": 1, "x'": 0},
        },
        oscillator(
            "t*exp(-t/2)*cos(3*t)*sin(t)", ("-1/2", "4", 2), ("-1/2", "2", 2), matrix=DAMPED
        ),
    ),
    "pieces": (
        {
            "equations": ["2*x' + x = q"],
            "inputs": {
                "q": [
                    {"from": "0", "to": "1", "is": "4*t"},
                    {"from": "1", "to": "3", "is": "4"},
                    {"from": "3", "to": "7/2", "is": "8*(7/2 - t)*exp(t - 3)"},
                ]
            },
            "initial": {"x": "1/3"},
        },
        Reference(
            ("x",),
            (("-1/2",),),
            (("1/2",),),
            ("1/3",),
            (
                Interval("0", ("4*t",)),
                Interval("1", ("4",)),
                Interval("3", ("8*(7/2 - t)*exp(t - 3)",)),
                Interval("7/2", ("0",)),
            ),
            ((("0", "0", 2), ("1", "0", 2)),),
        ),
    ),
    "delay": (
        {
            "equations": ["x' = -x + 2*u(t - 2)", "y' = x - 3*y + u"],
            "inputs": {"u": [{"from": "0", "to": "3", "is": "sin(t)"}]},
            "initial": {"x": 1, "y": 0},
        },
        Reference(
            ("x", "y"),
            (("-1", "0"), ("1", "-3")),
            (("2", "0"), ("0", "1")),
            ("1", "0"),
            (
                Interval("0", ("0", "sin(t)")),
                Interval("2", ("sin(t - 2)", "sin(t)")),
                Interval("3", ("sin(t - 2)", "0")),
                Interval("5", ("0", "0")),
            ),
            ((("0", "1", 1),), (("0", "1", 1),)),
        ),
    ),
    "steps": (
        {
            "equations": ["x'' + 2*x' + 5*x = 3*step(t - 1) - 2*t*step(2 - t)"],
            "initial": {"x": 1, "x'": 0},
        },
        Reference(
            ("x", "v"),
            DAMPED,
            (("0",), ("1",)),
            ("1", "0"),
            (Interval("0", ("-2*t",)), Interval("1", ("3 - 2*t",)), Interval("2", ("3",))),
            ((("0", "0", 2),),),
            {"x": "x", "x_dot": "v"},
        ),
    ),
    "impulses": (
        {
            "equations": ["2*x'' + 8*x = J", "y' = -y + x + 3*delta(t - 1)"],
            "inputs": {"J": "4*delta(t) - 6*delta(t - 2)"},
            "initial": {"x": 1, "x'": 0, "y": 0},
        },
        Reference(
            ("x", "v", "y"),
            (("0", "1", "0"), ("-4", "0", "0"), ("1", "0", "-1")),
            ((), (), ()),
            ("1", "0", "0"),
            (
                Interval("0", (), ("0", "2", "0")),
                Interval("1", (), ("0", "0", "3")),
                Interval("2", (), ("0", "-3", "0")),
            ),
            (),
            {"x": "x", "x_dot": "v", "y": "y"},
        ),
    ),
    # v = x' - F: then v' = F - 3 x' - 2 x, without a derivative of the input.
    "derivative of an input": (
        {
            "equations": ["x'' + 3*x' + 2*x = F' + F"],
            "inputs": {"F": [{"from": "1", "to": "2", "is": "t^2"}]},
            "initial": {"x": 1, "x'": 0},
        },
        Reference(
            ("x", "v"),
            (("0", "1"), ("-2", "-3")),
            (("1",), ("-2",)),
            ("1", "0"),
            (Interval("0", ("0",)), Interval("1", ("t^2",)), Interval("2", ("0",))),
            ((("0", "0", 3),),),
            {"x": "x"},
        ),
    ),
    "algebraic variables": (
        {
            "equations": [
                "i_s = v_s - v_1",
                "i_s = 0.5*v_1' + i_L",
                "2*i_L' = v_1 - v_2",
                "i_L = 0.25*v_2' + i_R",
                "i_R = v_2/4",
            ],
            "inputs": {"v_s": [{"from": "0", "to": "4", "is": "12"}]},
            "initial": {"v_1": 0, "i_L": 0, "v_2": 0},
        },
        Reference(
            ("v_1", "i_L", "v_2"),
            (("-2", "-2", "0"), ("1/2", "0", "-1/2"), ("0", "4", "-1")),
            (("2",), ("0",), ("0",)),
            ("0", "0", "0"),
            (Interval("0", ("12",)), Interval("4", ("0",))),
            ((("0", "0", 1),),),
            {"v_1": "v_1", "i_L": "i_L", "v_2": "v_2", "i_s": "u1 - v_1", "i_R": "v_2/4"},
        ),
    ),
    "resonance": (
        {
            "equations": ["x'' + 4*x = F"],
            "inputs": {"F": "3*cos(2*t)"},
            "initial": {"x": 1, "x'": 0},
        },
        oscillator("3*cos(2*t)", ("0", "2", 1)),
    ),
    "resonance of order two": (
        {
            "equations": ["x'' + 4*x = y", "y'' + 4*y = sin(2*t)"],
            "initial": {"x": 1, "x'": 0, "y": 0, "y'": 1},
        },
        Reference(
            ("x", "v", "y", "w"),
            (
                ("0", "1", "0", "0"),
                ("-4", "0", "1", "0"),
                ("0", "0", "0", "1"),
                ("0", "0", "-4", "0"),
            ),
            (("0",), ("0",), ("0",), ("1",)),
            ("1", "0", "0", "1"),
            (Interval("0", ("sin(2*t)",)),),
            ((("0", "2", 1),),),
            {"x": "x", "x_dot": "v", "y": "y", "y_dot": "w"},
        ),
    ),
    "resonance at zero": (
        {
            "equations": ["x'' = F"],
            "inputs": {"F": "t"},
            "initial": {"x": 1, "x'": 0},
        },
        oscillator("t", ("0", "0", 2), matrix=(("0", "1"), ("0", "0"))),
    ),
    "damped resonance": (
        {
            "equations": ["x'' + 2*x' + 5*x = F"],
            "inputs": {"F": "exp(-t)*(3*cos(2*t) + t*sin(2*t))"},
            "initial": {"x": 1, "x'": 0},
        },
        oscillator("exp(-t)*(3*cos(2*t) + t*sin(2*t))", ("-1", "2", 2), matrix=DAMPED),
    ),
    "repeated": (
        {
            "equations": ["g' = -2*g + d", "p' = 2*g - p/2 + r"],
            "inputs": {
                "d": {"is": "3*delta(t)", "period": "3", "count": 2},
                "r": {"pieces": [{"from": "0", "to": "1", "is": "t"}], "period": "2"},
            },
            "initial": {"g": 1, "p": 0},
        },
        Reference(
            ("g", "p"),
            (("-2", "0"), ("2", "-1/2")),
            (("0",), ("1",)),
            ("1", "0"),
            (
                Interval("0", ("t",), ("3", "0")),
                Interval("1", ("0",)),
                Interval("2", ("t - 2",)),
                Interval("3", ("0",), ("3", "0")),
                Interval("4", ("t - 4",)),
                Interval("5", ("0",)),
                Interval("6", ("t - 6",)),
                Interval("7", ("0",)),
            ),
            ((("0", "0", 2),),),
        ),
    ),
    "the number pi": (
        {
            "equations": ["x'' + 4*x = F"],
            "inputs": {"F": [{"from": "0", "to": "1/2", "is": "5*sin(2*pi*t)"}]},
            "initial": {"x": 1, "x'": 0},
        },
        Reference(
            ("x", "v"),
            OSCILLATOR,
            (("0",), ("1",)),
            ("1", "0"),
            (Interval("0", ("5*sin(2*pi*t)",)), Interval("1/2", ("0",))),
            ((("0", "2*pi", 1),),),
            {"x": "x", "x_dot": "v"},
        ),
    ),
    "mass, damping and stiffness": (
        {
            "states": ["x1", "x2"],
            "mass": [[2, 0], [0, 1]],
            "damping": [[3, -1], [-1, 1]],
            "stiffness": [[6, -2], [-2, 2]],
            "input_matrix": [[1], [0]],
            "inputs": {"F": "4*step(t - 1)"},
            "initial": {"x1": 0, "x1'": 0, "x2": 1, "x2'": 0},
        },
        Reference(
            ("x1", "v1", "x2", "v2"),
            (
                ("0", "1", "0", "0"),
                ("-3", "-3/2", "1", "1/2"),
                ("0", "0", "0", "1"),
                ("2", "1", "-2", "-1"),
            ),
            (("0",), ("1/2",), ("0",), ("0",)),
            ("0", "0", "1", "0"),
            (Interval("0", ("0",)), Interval("1", ("4",))),
            ((("0", "0", 1),),),
            {"x1": "x1", "x1_dot": "v1", "x2": "x2", "x2_dot": "v2"},
        ),
    ),
}
