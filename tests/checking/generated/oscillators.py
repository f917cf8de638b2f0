"""Oscillators with parameters: damped, critical, shaken."""
# ruff: noqa: ARG005

from __future__ import annotations

from random import Random
from typing import Any

import mpmath

from tests.checking.generated.forms import (
    F,
    I,
    T,
    add,
    div,
    exp,
    fn,
    mul,
    name,
    neg,
    num,
    power,
    sqrt,
)
from tests.checking.generated.template import Env, Said, Template, matrix_rows, parameters, state

__all__ = ["critical", "damped", "mass", "shaken"]


def damped(rng: Random) -> Template:
    """A damped oscillator in its damping ratio and natural frequency."""
    zeta, wn, x0, v0, wd = map(name, ("zeta", "omega_n", "x_0", "v_0", "omega_d"))
    rest = rng.random() < 0.5
    root = sqrt(add(num(1), neg(power(zeta, 2))))
    decay = exp(neg(mul(zeta, wn, T)))
    cos, sin = fn("cos", mul(wd, T)), fn("sin", mul(wd, T))

    def matrix(e: Env) -> Any:
        return [[0, 1], [-(e["omega_n"] ** 2), -2 * e["zeta"] * e["omega_n"]]]

    def start(e: Env) -> Any:
        return [e["x_0"], 0 if rest else e["v_0"]]

    def damped_at(e: Env) -> Any:
        return e["omega_n"] * mpmath.sqrt(1 - e["zeta"] ** 2)

    if rest:
        solutions = [
            mul(x0, decay, add(cos, mul(div(zeta, root), sin))),
            mul(x0, decay, add(cos, mul(div(mul(zeta, wn), wd), sin))),
            mul(div(x0, root), decay, fn("sin", add(mul(wd, T), fn("arccos", zeta)))),
        ]
        rates = [
            neg(mul(div(mul(x0, power(wn, 2)), wd), decay, sin)),
            neg(mul(div(mul(wn, x0), root), decay, sin)),
        ]
    else:
        second = div(add(v0, mul(zeta, wn, x0)), wd)
        solutions = [
            mul(decay, add(mul(x0, cos), mul(second, sin))),
            add(mul(x0, decay, cos), mul(second, decay, sin)),
        ]
        slope = div(add(mul(zeta, v0), mul(wn, x0)), root)
        rates = [mul(decay, add(mul(v0, cos), neg(mul(slope, sin))))]
    z = name("lambda")
    polynomial = add(power(z, 2), mul(num(2), zeta, wn, z), power(wn, 2))
    given = parameters(rng, "omega_n", "zeta", "x_0", *(() if rest else ("v_0",)))
    text = {
        "title": "damped",
        "equations": ["x'' + 2*zeta*omega_n*x' + omega_n^2*x = 0"],
        "states": ["x"],
        "initial": {"x": "x_0", "x'": "0" if rest else "v_0"},
        "conditions": ["zeta < 1"],
        "parameters": given,
    }
    samples = (
        {
            "zeta": mpmath.mpf(1) / 5,
            "omega_n": mpmath.mpf(3),
            "x_0": mpmath.mpf(2),
            "v_0": mpmath.mpf(5),
        },
        {
            "zeta": mpmath.mpf(2) / 3,
            "omega_n": mpmath.mpf(1),
            "x_0": mpmath.mpf(4),
            "v_0": mpmath.mpf(1),
        },
    )
    said = (
        Said(
            "characteristic polynomial",
            ("p(lambda)",),
            (polynomial,),
            lambda e: (
                e["lambda"] ** 2 + 2 * e["zeta"] * e["omega_n"] * e["lambda"] + e["omega_n"] ** 2
            ),
        ),
        Said(
            "eigenvalues",
            (r"lambda_{1,2}",),
            (
                F("pm", (neg(mul(zeta, wn)), mul(I, wn, root))),
                F("pm", (neg(mul(zeta, wn)), mul(wn, root, I))),
            ),
            lambda e: (
                -e["zeta"] * e["omega_n"],
                damped_at(e) * mpmath.mpc(0, 1),
            ),
        ),
        Said("damped frequency", (r"\omega_d",), (mul(wn, root),), damped_at, needed=True),
        Said("solution", ("x(t)",), solutions, state(matrix, start, 0), "x"),
        Said("solution", (r"\dot x(t)", "x'(t)"), rates, state(matrix, start, 1), "x'"),
    )
    samples = tuple({**s, "omega_d": damped_at(s)} for s in samples)
    names = {"zeta": r"\zeta", "omega_n": r"\omega_n", "omega_d": r"\omega_d"}
    return Template("damped", text, names, samples, said)


def mass(rng: Random) -> Template:
    """A mass, a damper and a spring."""
    m, c, k, x0, d, wd = map(name, ("m", "c", "k", "x_0", "delta", "omega_d"))
    inside = add(div(k, m), neg(div(power(c, 2), mul(num(4), power(m, 2)))))
    decay = exp(neg(mul(d, T)))
    cos, sin = fn("cos", mul(wd, T)), fn("sin", mul(wd, T))
    full = exp(neg(mul(div(c, mul(num(2), m)), T)))

    def matrix(e: Env) -> Any:
        return [[0, 1], [-e["k"] / e["m"], -e["c"] / e["m"]]]

    def damped_at(e: Env) -> Any:
        return mpmath.sqrt(e["k"] / e["m"] - e["c"] ** 2 / 4 / e["m"] ** 2)

    text = {
        "title": "mass",
        "equations": ["m*x'' + c*x' + k*x = 0"],
        "states": ["x"],
        "initial": {"x": "x_0", "x'": "0"},
        "conditions": ["c^2 < 4*k*m"],
        "parameters": parameters(rng, "m", "c", "k", "x_0"),
    }
    samples = (
        {"m": mpmath.mpf(2), "c": mpmath.mpf(1), "k": mpmath.mpf(9), "x_0": mpmath.mpf(3)},
        {"m": mpmath.mpf(1), "c": mpmath.mpf(3), "k": mpmath.mpf(5), "x_0": mpmath.mpf(2)},
    )
    samples = tuple({**s, "delta": s["c"] / 2 / s["m"], "omega_d": damped_at(s)} for s in samples)
    said = (
        Said(
            "natural frequency",
            (r"\omega_n", r"\omega_0"),
            (sqrt(div(k, m)),),
            lambda e: mpmath.sqrt(e["k"] / e["m"]),
        ),
        Said(
            "damping ratio",
            (r"\zeta", "D"),
            (div(c, mul(num(2), sqrt(mul(k, m)))), div(c, mul(num(2), sqrt(mul(m, k))))),
            lambda e: e["c"] / 2 / mpmath.sqrt(e["k"] * e["m"]),
        ),
        Said(
            "definition", (r"\delta",), (div(c, mul(num(2), m)),), lambda e: e["delta"], needed=True
        ),
        Said(
            "damped frequency",
            (r"\omega_d",),
            (
                sqrt(inside),
                div(sqrt(add(mul(num(4), k, m), neg(power(c, 2)))), mul(num(2), m)),
            ),
            damped_at,
            needed=True,
        ),
        Said(
            "eigenvalues",
            ("lambda_{1,2}",),
            (
                F("pm", (neg(div(c, mul(num(2), m))), mul(I, sqrt(inside)))),
                div(
                    F("pm", (neg(c), sqrt(add(power(c, 2), neg(mul(num(4), m, k)))))),
                    mul(num(2), m),
                ),
            ),
            lambda e: (-e["delta"], damped_at(e) * mpmath.mpc(0, 1)),
        ),
        Said(
            "solution",
            ("x(t)", "x"),
            (
                mul(x0, decay, add(cos, mul(div(d, wd), sin))),
                mul(x0, full, add(cos, mul(div(c, mul(num(2), m, wd)), sin))),
            ),
            state(matrix, lambda e: [e["x_0"], 0], 0),
            "x",
        ),
        Said(
            "solution",
            (r"\dot{x}(t)",),
            (neg(mul(div(mul(k, x0), mul(m, wd)), decay, sin)),),
            state(matrix, lambda e: [e["x_0"], 0], 1),
            "x'",
        ),
    )
    names = {"delta": r"\delta", "omega_d": r"\omega_d"}
    return Template("mass", text, names, samples, said)


def critical(rng: Random) -> Template:
    """A critically damped motion."""
    a, x0, v0 = map(name, ("a", "x_0", "v_0"))
    decay = exp(neg(mul(a, T)))
    matrix = lambda e: [[0, 1], [-(e["a"] ** 2), -2 * e["a"]]]  # noqa: E731
    start = lambda e: [e["x_0"], e["v_0"]]  # noqa: E731
    text = {
        "title": "critical",
        "equations": ["x'' + 2*a*x' + a^2*x = 0"],
        "states": ["x"],
        "initial": {"x": "x_0", "x'": "v_0"},
        "parameters": parameters(rng, "a", "x_0", "v_0"),
    }
    samples = tuple(
        {"a": mpmath.mpf(x), "x_0": mpmath.mpf(3), "v_0": mpmath.mpf(y)}
        for x, y in ((1, 4), (2, 5))
    )
    slope = add(v0, mul(a, x0))
    said = (
        Said("eigenvalues", (r"lambda_{1,2}",), (neg(a),), lambda e: (-e["a"], 0)),
        Said(
            "solution",
            ("x(t)",),
            (
                mul(decay, add(x0, mul(slope, T))),
                add(mul(x0, decay), mul(slope, T, decay)),
                mul(add(mul(x0, add(num(1), mul(a, T))), mul(v0, T)), decay),
            ),
            state(matrix, start, 0),
            "x",
        ),
        Said(
            "solution",
            (r"\dot x(t)", "x'(t)"),
            (mul(decay, add(v0, neg(mul(a, slope, T)))),),
            state(matrix, start, 1),
            "x'",
        ),
        Said(
            "exp A",
            ("e^{At}", r"\Phi(t)"),
            (
                mul(
                    decay,
                    F(
                        "mat",
                        (
                            F("row", (add(num(1), mul(a, T)), T)),
                            F("row", (neg(mul(power(a, 2), T)), add(num(1), neg(mul(a, T))))),
                        ),
                    ),
                ),
            ),
            lambda e: matrix_rows(mpmath.expm(mpmath.matrix(matrix(e)) * e["t"])),
        ),
    )
    return Template("critical", text, {}, samples, said)


def shaken(rng: Random) -> Template:
    """An oscillator at rest under a cosine, off or in resonance."""
    w, w0, f = map(name, ("w", "w_0", "F"))
    resonant = rng.random() < 0.5
    own = w if resonant else w0
    text = {
        "title": "shaken",
        "equations": [f"x'' + {'w' if resonant else 'w_0'}^2*x = F*cos(w*t)"],
        "states": ["x"],
        "initial": {"x": "0", "x'": "0"},
        "parameters": parameters(rng, "w", "F", *(() if resonant else ("w_0",))),
    }
    if not resonant:
        text["conditions"] = ["w != w_0"]
    key = own.args[0]
    matrix = lambda e: [  # noqa: E731
        [0, 1, 0, 0],
        [-(e[key] ** 2), 0, e["F"], 0],
        [0, 0, 0, 1],
        [0, 0, -(e["w"] ** 2), 0],
    ]
    start = lambda e: [0, 0, 1, 0]  # noqa: E731
    samples = tuple(
        {"w": mpmath.mpf(x), "w_0": mpmath.mpf(y), "F": mpmath.mpf(4)} for x, y in ((1, 3), (2, 1))
    )
    gap = add(power(w0, 2), neg(power(w, 2)))
    cos, cos0 = fn("cos", mul(w, T)), fn("cos", mul(w0, T))
    if resonant:
        solutions = [
            mul(div(f, mul(num(2), w)), T, fn("sin", mul(w, T))),
            div(mul(f, T, fn("sin", mul(w, T))), mul(num(2), w)),
        ]
    else:
        solutions = [
            mul(div(f, gap), add(cos, neg(cos0))),
            div(mul(f, add(cos, neg(cos0))), gap),
            mul(div(f, add(power(w, 2), neg(power(w0, 2)))), add(cos0, neg(cos))),
        ]
    said = (
        Said(
            "eigenvalues",
            ("lambda_{1,2}",),
            (F("pm", (num(0), mul(I, own))),),
            lambda e: (0, e[key] * mpmath.mpc(0, 1)),
        ),
        Said("solution", ("x(t)", "x"), solutions, state(matrix, start, 0), "x"),
    )
    return Template("shaken", text, {}, samples, said)
