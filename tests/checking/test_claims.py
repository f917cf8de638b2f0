"""Claims of every kind: right ones in many dresses, and wrong ones."""

from __future__ import annotations

from typing import Any

import pytest

from tests.checking.hold import Line, held, symbols

SPRING = {"equations": ["x'' + 2*x' + 5*x = 0"], "initial": {"x": "1", "x'": "0"}}
TANKS = {"states": ["x", "y"], "matrix": [["-1", "1"], ["0", "-2"]], "initial": ["1", "1"]}
CHAIN = {
    "states": ["x1", "x2", "x3", "x4"],
    "matrix": [
        ["-1", "2", "0", "0"],
        ["-2", "-1", "0", "0"],
        ["1", "0", "-3", "1"],
        ["0", "0", "0", "-3"],
    ],
    "initial": ["1", "0", "0", "2"],
}
DRIVEN = {"equations": ["x'' + 3*x' + 2*x = 4"], "initial": {"x": "1", "x'": "0"}}
SWITCHED = {
    "equations": ["x' + 2*x = u"],
    "initial": {"x": "0"},
    "inputs": {"u": "3*step(t) - 3*step(t - 1)"},
}
SPRING_IN_LETTERS = {
    "equations": ["m*x'' + c*x' + k*x = 0"],
    "initial": {"x": "x_0", "x'": "0"},
    "parameters": symbols(m=None, c=None, k=None, x_0=None),
}
RESONANT = {
    "equations": ["m*x'' + k*x = F*cos(w*t)"],
    "initial": {"x": "0", "x'": "0"},
    "parameters": symbols(m=None, k=None, F=None, w=None),
}
PUMP = {
    "states": ["p_0", "p_1"],
    "matrix": [["-l", "mu"], ["l", "-mu"]],
    "initial": ["1", "0"],
    "parameters": symbols(l="0.02", mu="0.5"),
}
MODAL = {
    "states": ["x1", "x2"],
    "matrix": [["-2", "1"], ["1", "-2"]],
    "initial": ["1", "0"],
    "outputs": {"s": "x1 + x2", "d": "x1 - x2"},
}
SURDS = {"states": ["x", "y"], "matrix": [["-2", "1"], ["2", "-2"]], "initial": ["1", "0"]}
CUBIC = {
    "states": ["x", "y", "z"],
    "matrix": [["-1", "1", "0"], ["0", "-1", "1"], ["-1", "0", "-2"]],
    "initial": ["1", "0", "0"],
}

RIGHT: list[tuple[dict[str, Any], list[Line]]] = [
    (
        SPRING,
        [
            r"\chi(s)=\left|sI-A\right|=s^2+2s+5=(s+1)^2+4",
            r"\lambda_{1,2}=\frac{-2\pm\sqrt{4-20}}{2}=-1\pm2\mathrm{j}",
            r"\omega_d=2\ \mathrm{rad/s}",
            r"\omega_n=\sqrt5\,\mathrm{s}^{-1}",
            r"X(s)=\frac{s+2}{s^2+2s+5}",
            r"x(t)=\mathcal{L}^{-1}\{X(s)\}=e^{-t}\left(\cos2t+\tfrac12\sin2t\right)",
            r"x(t)=\frac{\sqrt5}{2}e^{-t}\cos\left(2t-\arctan\tfrac12\right)",
            (
                r"x(t)=\mathrm{Re}\left\{\left(1-\tfrac{\mathrm{i}}{2}\right)"
                r"\mathrm{e}^{(-1+2\mathrm{i})t}\right\}"
            ),
            r"\dot x(t)=-\tfrac52e^{-t}\sin2t",
            r"\ddot x+2\dot x+5x=0",
            r"x(0)=1,\qquad\dot x(0)=0",
            r"x(\pi)=e^{-\pi}",
            r"\lim_{t\to\infty}x(t)=0",
            r"x(t)=A e^{-t}\cos(2t-\varphi),\quad\tan\varphi=\frac12,\quad A=\frac{\sqrt5}{2}",
        ],
    ),
    (
        TANKS,
        [
            r"\dot{\mathbf x}=\mathbf A\mathbf x",
            r"\det(\lambda I-A)=0",
            r"\mathbf A\mathbf v_1=\lambda_1\mathbf v_1",
            r"e^{At}=Pe^{Jt}P^{-1}",
            (
                r"(s\mathbf I-\mathbf A)^{-1}=\frac{1}{(s+1)(s+2)}"
                r"\begin{bmatrix}s+2&1\\0&s+1\end{bmatrix}"
            ),
            r"e^{At}=e^{-t}I+(e^{-t}-e^{-2t})(A+I)",
            (
                r"\mathbf x(t)=c_1e^{-t}\begin{pmatrix}1\\0\end{pmatrix}"
                r"+c_2e^{-2t}\begin{pmatrix}1\\-1\end{pmatrix}"
            ),
            r"c_1=2,\ c_2=-1",
            r"\mathbf x(t)=e^{At}\mathbf x(0)=\begin{bmatrix}2e^{-t}-e^{-2t}\\e^{-2t}\end{bmatrix}",
            r"x+y=2e^{-t}",
            r"\operatorname{tr}A=-3,\ \det A=2",
            r"A^2=\begin{pmatrix}1&-3\\0&4\end{pmatrix}",
            r"P^{-1}AP=\begin{pmatrix}-2&0\\0&-1\end{pmatrix}",
        ],
    ),
    (
        CHAIN,
        [
            r"\lambda_{1,2}=-1\pm2i,\qquad\lambda_{3,4}=-3",
            r"v_3=\begin{pmatrix}0\\0\\1\\0\end{pmatrix}",
            ("generalized eigenvector", r"w=(0,0,0,1)^T", "-3"),
            r"(A+3I)w=v_3",
            r"x_3(t)=\int_0^te^{-3(t-\tau)}\left(e^{-\tau}\cos2\tau+2e^{-3\tau}\right)d\tau",
            r"x_3(t)=\frac{e^{-t}}{4}(\cos2t+\sin2t)+\left(2t-\frac14\right)e^{-3t}",
            r"x_3(0{,}5)\approx0{,}377",
        ],
    ),
    (
        DRIVEN,
        [
            r"x_h=C_1e^{-t}+C_2e^{-2t}",
            r"x_p=2",
            r"x(t)=C_1e^{-t}+C_2e^{-2t}+2",
            r"\dot x(t)=-C_1e^{-t}-2C_2e^{-2t}",
            r"C_1=-2,\quad C_2=1",
            r"x(t)=2-2e^{-t}+e^{-2t}",
            r"x_\infty=2",
        ],
    ),
    (
        SWITCHED,
        [
            r"\dot x+2x=u(t)",
            r"x(t)=\tfrac32\left(1-e^{-2t}\right)-\tfrac32\left(1-e^{-2(t-1)}\right)\varepsilon(t-1)",
            (
                r"x(t)=\begin{cases}\tfrac32(1-e^{-2t})&0\le t<1\\"
                r"\tfrac32(e^2-1)e^{-2t}&t\ge1\end{cases}"
            ),
            r"x(2)\approx0.1755",
        ],
    ),
    (
        RESONANT,
        [
            r"m\ddot x+kx=F\cos wt",
            r"\omega_0=\sqrt{\frac km}",
            r"x_p(t)=\frac{F}{m(\omega_0^2-w^2)}\cos wt",
            r"x(t)=\frac{F/m}{\omega_0^2-w^2}\left(\cos wt-\cos\omega_0t\right)",
            r"x(t)=\frac{2F/m}{\omega_0^2-w^2}\sin\frac{\omega_0-w}{2}t\,\sin\frac{\omega_0+w}{2}t",
        ],
    ),
    (
        PUMP,
        [
            ("eigenvalues", r"\theta_1=0,\quad\theta_2=-(l+\mu)=-0.52"),
            r"p_0(t)=\frac{\mu}{l+\mu}+\frac{l}{l+\mu}e^{-(l+\mu)t}",
            r"p_0(t)\approx0.9615+0.0385\,e^{-0.52t}",
            r"p_0+p_1=1",
            r"p_0(\infty)=\frac{\mu}{l+\mu}\approx0.9615",
        ],
    ),
    (MODAL, [r"s(t)=e^{-t}", r"d(t)=e^{-3t}", r"x_1(t)=\frac{s+d}{2}"]),
    (
        SURDS,
        [
            r"\lambda_1\approx-0.586,\ \lambda_2\approx-3.414",
            r"P=\begin{bmatrix}1&1\\1.414&-1.414\end{bmatrix}",
            r"P^{-1}=\begin{bmatrix}0.5&0.354\\0.5&-0.354\end{bmatrix}",
            r"J=\begin{bmatrix}-0.586&0\\0&-3.414\end{bmatrix}",
            r"e^{Jt}=\operatorname{diag}(e^{-0.586t},e^{-3.414t})",
        ],
    ),
    (
        CUBIC,
        [
            r"\lambda^3+4\lambda^2+5\lambda+3=0",
            r"\lambda_1\approx-2.466",
            r"\lambda_{2,3}\approx-0.767\pm0.793\,\mathrm i",
            r"x(1)\approx0.32",
        ],
    ),
]


@pytest.mark.parametrize(
    ("keys", "number", "lines"),
    [(keys, k, lines) for keys, lines in RIGHT for k in range(len(lines))],
)
def test_right_lines_pass(keys: dict[str, Any], number: int, lines: list[Line]) -> None:
    found = held(keys, *lines[: number + 1])[number]
    assert found.passes, found


WRONG: list[tuple[dict[str, Any], Line]] = [
    (SPRING, r"\lambda^2-2\lambda+5=0"),
    (SPRING, r"\lambda_{1,2}=1\pm2\mathrm i"),
    (SPRING, r"\lambda_{1,2}=-1\pm4\mathrm i"),
    (SPRING, r"x(t)=e^{-t}\left(\cos2t-\tfrac12\sin2t\right)"),
    (SPRING, r"x(t)=\frac{\sqrt5}{2}e^{-t}\cos\left(2t+\arctan\tfrac12\right)"),
    (SPRING, r"x(t)\approx1.118\,e^{-t}\cos(2t-26.57)"),
    (SPRING, r"x(t)\approx1.119\,e^{-t}\cos(2t-0.4636)"),
    (SPRING, r"x(1)\approx0.0143"),
    (SPRING, r"\omega_d=\sqrt5"),
    (SPRING, r"\dot x(0)=1"),
    (SPRING, r"X(s)=\frac{s}{s^2+2s+5}"),
    (SPRING, r"\ddot x+2\dot x-5x=0"),
    (TANKS, r"e^{At}=\begin{bmatrix}e^{-t}&e^{-t}\\0&e^{-2t}\end{bmatrix}"),
    (TANKS, r"P^{-1}AP=\begin{pmatrix}-1&0\\0&-1\end{pmatrix}"),
    (TANKS, r"x+y=3e^{-t}"),
    (TANKS, r"\det A=-2"),
    (TANKS, r"A=\begin{pmatrix}-1&1&0\\0&-2&0\end{pmatrix}"),
    (TANKS, r"v_1=(1,2,3)^T"),
    (TANKS, r"\lambda_1=\lambda_2=-1"),
    (CHAIN, r"J=\operatorname{diag}(-1+2i,-1-2i,-3,-3)"),
    (CHAIN, r"x_4=2te^{-3t}"),
    (DRIVEN, r"x_p=4"),
    (DRIVEN, r"x_h=C_1e^{-t}+C_2e^{2t}"),
    (DRIVEN, r"x_\infty=4"),
    (SWITCHED, r"x(t)=\tfrac32(1-e^{-2t})-\tfrac32(1-e^{-2t})\varepsilon(t-1)"),
    (SWITCHED, r"x(t)=\tfrac32(1-e^{-2t})"),
    (RESONANT, r"x_p(t)=\frac{F}{k+mw^2}\cos wt"),
    (PUMP, r"p_0(t)\approx0.9616+0.0385\,e^{-0.52t}"),
    (PUMP, r"p_0(\infty)=\frac{l}{l+\mu}"),
    (SURDS, r"P=\begin{bmatrix}1&1\\1.414&1.414\end{bmatrix}"),
    (SURDS, r"J=\begin{bmatrix}-0.587&0\\0&-3.414\end{bmatrix}"),
    (CUBIC, r"\lambda_1\approx-2.467"),
    (CUBIC, r"x(1)\approx0.33"),
]


@pytest.mark.parametrize(("keys", "line"), WRONG)
def test_wrong_lines_fail(keys: dict[str, Any], line: Line) -> None:
    (found,) = held(keys, line)
    assert found.verdict == "fails", found


def test_one_slip_is_reported_once() -> None:
    found = held(
        DRIVEN,
        r"x_p=1",
        r"x(t)=1+e^{-2t}\cdot0",
        r"x(1)=1",
        r"C_1=2",
    )
    assert [v.verdict for v in found[:3]] == ["fails", "carried", "carried"]


def test_constants_of_integration_have_to_fit() -> None:
    found = held(DRIVEN, r"x(t)=C_1e^{-t}+C_2e^{-2t}+2", r"C_1=2,\quad C_2=1")
    assert found[1].verdict == "fails"


def test_a_claim_about_a_state_that_is_not_there_is_not_read() -> None:
    (found,) = held(TANKS, ("solution", r"z(t)=e^{-t}"))
    assert found.verdict == "not read"
    assert "z" in found.reason


def test_general_lines_with_names_nobody_stated_never_fail() -> None:
    (found,) = held(TANKS, r"e^{At}=P^{-1}e^{Jt}P")
    assert found.verdict == "not read"


def test_a_case_is_chosen_by_a_condition() -> None:
    keys = {
        "equations": ["m*x'' + c*x' + k*x = 0"],
        "initial": {"x": "x_0", "x'": "0"},
        "parameters": symbols(m=None, c=None, k=None, x_0=None),
    }
    line = r"x(t)=x_0\left(1+\frac{c}{2m}t\right)e^{-\frac{c}{2m}t}"
    assert held(keys, line, case="c^2 = 4*k*m")[0].passes
    assert held(keys, line, case="c^2 < 4*k*m")[0].verdict == "fails"


@pytest.mark.parametrize(
    ("shown", "passes"),
    [("1163", True), ("1160", True), ("1200", False), ("1150", False), ("1162", False)],
)
def test_zeros_at_the_end_of_a_whole_number_need_not_be_significant(
    shown: str, *, passes: bool
) -> None:
    keys = {"states": ["n"], "matrix": [["-1"]], "initial": ["3162"]}
    (found,) = held(keys, rf"n(1)\approx{shown}")
    assert found.passes == passes, found


def test_what_is_transformed_back_is_looked_at() -> None:
    right = r"y(t)=\mathcal{L}^{-1}\left\{\frac{1}{s+2}\right\}=e^{-2t}"
    wrong = r"y(t)=\mathcal{L}^{-1}\left\{\frac{1}{s+3}\right\}=e^{-2t}"
    matrix = r"e^{At}=\mathcal L^{-1}\{(sI-A)^{-1}\}"
    found = held(TANKS, right, wrong, matrix)
    assert [v.verdict for v in found] == ["holds", "fails", "holds"]


def test_a_name_may_be_used_before_it_is_defined() -> None:
    found = held(
        SPRING_IN_LETTERS,
        r"\omega_d=\omega_n\sqrt{1-\zeta^2}",
        r"\omega_n=\sqrt{k/m}",
        r"\zeta=\frac{c}{2\sqrt{km}}",
        r"x(t)=x_0e^{-\zeta\omega_nt}\left(\cos\omega_dt+\frac{\zeta\omega_n}{\omega_d}\sin\omega_dt\right)",
    )
    assert found[-1].passes, found[-1]


def test_the_order_of_a_derivative_is_not_cut_off() -> None:
    (found,) = held(SPRING, r"x^{(1234)}(0)=0")
    assert found.verdict == "not read"
