"""Derivations with parameters, and with steps: customary formulas, each in several forms.

The reference is mpmath's exponential of the matrix in numbers, with the input as a part of the
state, for two choices of the parameters.
"""

from __future__ import annotations

from collections.abc import Callable, Mapping, Sequence
from dataclasses import dataclass, field
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

__all__ = ["TEMPLATES", "Said", "Template"]

Env = Mapping[str, Any]


@dataclass(frozen=True)
class Said:
    """What a line says: one of the `forms` is chosen; `truth` gives its value in numbers."""

    says: str
    lefts: Sequence[str]
    forms: Sequence[F]
    truth: Callable[[Env], Any]
    subject: str = ""
    tail: str = ""
    needed: bool = False


@dataclass(frozen=True)
class Template:
    """A model, the names as they are set, admissible values, and what may be said."""

    kind: str
    text: dict[str, Any]
    names: dict[str, str]
    samples: tuple[Env, ...]
    said: tuple[Said, ...]
    keep: frozenset[str] = field(default=frozenset())


def state(matrix: Callable[[Env], Any], start: Callable[[Env], Any], k: int) -> Callable:
    """Return the k-th entry of e^(Mt) z."""

    def at(env: Env) -> Any:
        rows = mpmath.matrix(matrix(env))
        return (mpmath.expm(rows * env["t"]) * mpmath.matrix(start(env)))[k]

    return at


def parameters(rng: Random, *names: str) -> dict[str, Any]:
    """Return parameters that are positive."""
    del rng
    return {key: {"assume": "positive"} for key in names}


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
            lambda e: _rows(mpmath.expm(mpmath.matrix(matrix(e)) * e["t"])),
        ),
    )
    return Template("decay chain", text, {}, samples, said)


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
            lambda e: _rows(mpmath.expm(mpmath.matrix(matrix(e)) * e["t"])),
        ),
    )
    return Template("critical", text, {}, samples, said)


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
            lambda e: _rows(mpmath.expm(mpmath.matrix(matrix(e)) * e["t"])),
        ),
    )
    return Template("repair", text, {}, samples, said)


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


def _rows(matrix: mpmath.matrix) -> Any:
    return tuple(tuple(matrix[i, j] for j in range(matrix.cols)) for i in range(matrix.rows))


TEMPLATES = (
    damped,
    mass,
    charging,
    decay_chain,
    critical,
    repair,
    shaken,
    fading,
    stepped,
)
