"""Models of first order with parameters, and inputs that are switched on."""
# ruff: noqa: ARG005

from __future__ import annotations

from random import Random
from typing import Any

import mpmath

from tests.checking.generated.forms import (
    F,
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
)
from tests.checking.generated.template import Env, Said, Template, matrix_rows, parameters, state

__all__ = ["charging", "decay_chain", "fading", "repair", "stepped"]


def charging(rng: Random) -> Template:
    """A capacitor charged through a resistor."""
    r, c, v, v0, tau = map(name, ("R", "C", "E", "v_0", "tau"))
    exponents = [neg(div(T, mul(r, c))), neg(div(T, tau))]
    e1 = exp(rng.choice(exponents))
    matrix = lambda e: [[-1 / e["R"] / e["C"], 1 / e["R"] / e["C"]], [0, 0]]  # noqa: E731
    text = {
        "title": "charging",
        "equations": ["R*C*v' + v = E"],
        "states": ["v"],
        "initial": {"v": "v_0"},
        "parameters": parameters(rng, "R", "C", "E", "v_0"),
    }
    samples = tuple(
        {
            "R": mpmath.mpf(a),
            "C": mpmath.mpf(b),
            "E": mpmath.mpf(5),
            "v_0": mpmath.mpf(2),
            "tau": mpmath.mpf(a) * b,
        }
        for a, b in ((2, 1), (3, 2))
    )
    said = (
        Said("time constant", (r"\tau",), (mul(r, c),), lambda e: e["tau"], needed=True),
        Said(
            "eigenvalues", ("lambda",), (neg(div(num(1), mul(r, c))),), lambda e: (-1 / e["tau"], 0)
        ),
        Said(
            "solution",
            ("v(t)", "v"),
            (
                add(v, mul(add(v0, neg(v)), e1)),
                add(v, neg(mul(add(v, neg(v0)), e1))),
                add(mul(v0, e1), mul(v, add(num(1), neg(e1)))),
            ),
            state(matrix, lambda e: [e["v_0"], e["E"]], 0),
            "v",
        ),
        Said("steady state", (r"v_\infty", r"\lim_{t\to\infty}v(t)"), (v,), lambda e: e["E"], "v"),
        Said(
            "solution",
            (r"\dot v(t)",),
            (mul(div(add(v, neg(v0)), mul(r, c)), e1), mul(div(add(v, neg(v0)), tau), e1)),
            lambda e: (e["E"] - e["v_0"]) / e["tau"] * mpmath.exp(-e["t"] / e["tau"]),
            "v'",
        ),
    )
    return Template("charging", text, {"tau": r"\tau"}, samples, said)


def decay_chain(rng: Random) -> Template:
    """Two members of a decay chain with different rates."""
    a, b, n0 = map(name, ("k_1", "k_2", "N_0"))
    ea, eb = exp(neg(mul(a, T))), exp(neg(mul(b, T)))
    matrix = lambda e: [[-e["k_1"], 0], [e["k_1"], -e["k_2"]]]  # noqa: E731
    text = {
        "title": "decay chain",
        "equations": ["N_1' = -k_1*N_1", "N_2' = k_1*N_1 - k_2*N_2"],
        "states": ["N_1", "N_2"],
        "initial": {"N_1": "N_0", "N_2": "0"},
        "conditions": ["k_1 != k_2"],
        "parameters": parameters(rng, "k_1", "k_2", "N_0"),
    }
    samples = tuple(
        {"k_1": mpmath.mpf(x), "k_2": mpmath.mpf(y), "N_0": mpmath.mpf(7)}
        for x, y in ((1, 3), (2, 1))
    )
    front = div(a, add(b, neg(a)))
    start = lambda e: [e["N_0"], 0]  # noqa: E731
    z = name("lambda")
    said = (
        Said(
            "characteristic polynomial",
            ("p(lambda)",),
            (
                mul(add(z, a), add(z, b)),
                add(power(z, 2), mul(add(a, b), z), mul(a, b)),
            ),
            lambda e: (e["lambda"] + e["k_1"]) * (e["lambda"] + e["k_2"]),
        ),
        Said("solution", ("N_1(t)",), (mul(n0, ea),), state(matrix, start, 0), "N_1"),
        Said(
            "solution",
            ("N_2(t)", "N_2"),
            (
                mul(front, n0, add(ea, neg(eb))),
                mul(div(mul(n0, a), add(b, neg(a))), add(ea, neg(eb))),
                mul(div(mul(a, n0), add(a, neg(b))), add(eb, neg(ea))),
                div(mul(a, n0, add(ea, neg(eb))), add(b, neg(a))),
            ),
            state(matrix, start, 1),
            "N_2",
        ),
        Said(
            "exp A",
            ("e^{At}",),
            (F("mat", (F("row", (ea, num(0))), F("row", (mul(front, add(ea, neg(eb))), eb)))),),
            lambda e: matrix_rows(mpmath.expm(mpmath.matrix(matrix(e)) * e["t"])),
        ),
    )
    return Template("decay chain", text, {}, samples, said)


def repair(rng: Random) -> Template:
    """A unit that fails and is repaired."""
    f, r = map(name, ("f", "r"))
    total = add(f, r)
    decay = exp(neg(mul(total, T)))
    matrix = lambda e: [[-e["f"], e["r"]], [e["f"], -e["r"]]]  # noqa: E731
    text = {
        "title": "repair",
        "equations": ["p_0' = -f*p_0 + r*p_1", "p_1' = f*p_0 - r*p_1"],
        "states": ["p_0", "p_1"],
        "initial": {"p_0": "1", "p_1": "0"},
        "parameters": parameters(rng, "f", "r"),
    }
    samples = tuple({"f": mpmath.mpf(x), "r": mpmath.mpf(y)} for x, y in ((1, 3), (2, 1)))
    start = lambda e: [1, 0]  # noqa: E731
    said = (
        Said(
            "solution",
            ("p_0(t)",),
            (
                add(div(r, total), mul(div(f, total), decay)),
                div(add(r, mul(f, decay)), total),
                add(num(1), neg(mul(div(f, total), add(num(1), neg(decay))))),
            ),
            state(matrix, start, 0),
            "p_0",
        ),
        Said(
            "solution",
            ("p_1(t)",),
            (
                mul(div(f, total), add(num(1), neg(decay))),
                div(mul(f, add(num(1), neg(decay))), total),
            ),
            state(matrix, start, 1),
            "p_1",
        ),
        Said(
            "steady state",
            (r"p_0(\infty)",),
            (div(r, total),),
            lambda e: e["r"] / (e["f"] + e["r"]),
            "p_0",
        ),
        Said(
            "exp A",
            ("e^{At}",),
            (
                mul(
                    div(num(1), total),
                    F(
                        "mat",
                        (
                            F("row", (add(r, mul(f, decay)), add(r, neg(mul(r, decay))))),
                            F("row", (add(f, neg(mul(f, decay))), add(f, mul(r, decay)))),
                        ),
                    ),
                ),
            ),
            lambda e: matrix_rows(mpmath.expm(mpmath.matrix(matrix(e)) * e["t"])),
        ),
    )
    return Template("repair", text, {}, samples, said)


def fading(rng: Random) -> Template:
    """A first-order lag under a fading input."""
    a, b, f, x0 = map(name, ("a", "b", "F", "x_0"))
    ea, eb = exp(neg(mul(a, T))), exp(neg(mul(b, T)))
    matrix = lambda e: [[-e["a"], e["F"]], [0, -e["b"]]]  # noqa: E731
    text = {
        "title": "fading",
        "equations": ["x' = -a*x + F*exp(-b*t)"],
        "states": ["x"],
        "initial": {"x": "x_0"},
        "conditions": ["a != b"],
        "parameters": parameters(rng, "a", "b", "F", "x_0"),
    }
    samples = tuple(
        {"a": mpmath.mpf(x), "b": mpmath.mpf(y), "F": mpmath.mpf(4), "x_0": mpmath.mpf(3)}
        for x, y in ((1, 3), (2, 1))
    )
    front = div(f, add(a, neg(b)))
    said = (
        Said("eigenvalues", ("lambda",), (neg(a),), lambda e: (-e["a"], 0)),
        Said(
            "solution",
            ("x(t)", "x"),
            (
                add(mul(x0, ea), mul(front, add(eb, neg(ea)))),
                add(mul(add(x0, neg(front)), ea), mul(front, eb)),
                add(mul(x0, ea), div(mul(f, add(ea, neg(eb))), add(b, neg(a)))),
            ),
            state(matrix, lambda e: [e["x_0"], 1], 0),
            "x",
        ),
        Said(
            "particular solution",
            ("x_p(t)",),
            (mul(front, eb),),
            lambda e: e["F"] / (e["a"] - e["b"]) * mpmath.exp(-e["b"] * e["t"]),
            "x",
        ),
    )
    return Template("fading", text, {}, samples, said)


def stepped(rng: Random) -> Template:
    """A lag or an oscillator with an input that is switched on later, in numbers."""
    a, b, start = rng.randint(1, 4), rng.choice((2, 3, 6, 8)), rng.choice((1, 2))
    late = F("shift", (num(start),))
    step = F("step", (late,))
    if rng.random() < 0.5:
        x0 = rng.randint(-2, 4) or 5
        free = mul(num(x0), exp(neg(mul(num(a), T))))
        forced = mul(div(num(b), num(a)), add(num(1), neg(exp(neg(mul(num(a), late))))))
        equation, initial = f"x' = -{a}*x + {b}*step(t - {start})", {"x": str(x0)}

        def truth(e: Env) -> Any:
            t = e["t"]
            total = x0 * mpmath.exp(-a * t)
            return total + (b * (1 - mpmath.exp(-a * (t - start))) / a if t >= start else 0)
    else:
        free = mul(num(2), fn("cos", mul(num(a), T)))
        forced = mul(div(num(b), num(a * a)), add(num(1), neg(fn("cos", mul(num(a), late)))))
        equation = f"x'' + {a * a}*x = {b}*step(t - {start})"
        initial = {"x": "2", "x'": "0"}

        def truth(e: Env) -> Any:
            t = e["t"]
            total = 2 * mpmath.cos(a * t)
            return total + (b * (1 - mpmath.cos(a * (t - start))) / a**2 if t >= start else 0)

    text = {"title": "stepped", "equations": [equation], "states": ["x"], "initial": initial}
    said = (
        Said(
            "solution",
            ("x(t)", "x"),
            (add(free, mul(forced, step)), add(free, mul(step, forced))),
            truth,
            "x",
        ),
    )
    return Template("stepped", text, {}, ({},), said)
