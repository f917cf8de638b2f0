"""New functions and numbers made of the model's, equations with solutions put in, intervals."""

from __future__ import annotations

from pathlib import Path

import pytest

from tests.checking.engineers import Written, written

SWITCHED = """
title = "Switched section"
equations = ["2*v' + v = u"]
initial = { v = 0 }
[inputs]
u = [{ from = "0", to = "4", is = "10" }]
"""
SERIES = """
title = "Series circuit"
equations = ["i = 0.25*vC'", "1*i' + 5*i + vC = 12"]
initial = { vC = 0, i = 0 }
"""
THIRDS = """
title = "Equation with thirds"
equations = ["3*x'' + 2*x' + 4*x = 0"]
initial = { x = 2, "x'" = -1 }
"""
MASSES = """
title = "Two equal masses"
equations = ["2*x1'' = -4*x1 + 2*(x2-x1)", "2*x2'' = -4*x2 - 2*(x2-x1)"]
initial = { x1 = 1, "x1'" = 0, x2 = 0, "x2'" = 0 }
"""
DEPOT = """
title = "Depot"
equations = ["D' = -ka*D", "C' = ka*D/V - ke*C"]
initial = { D = "F*D0", C = 0 }
conditions = ["ka != ke"]
[parameters]
ka = { assume = "positive" }
ke = { assume = "positive" }
V = { assume = "positive" }
F = { assume = "positive" }
D0 = { assume = "positive" }
"""
EXCHANGE = """
title = "Exchange"
equations = ["a' = -kf*a + kr*b", "b' = kf*a - kr*b"]
initial = { a = "a0", b = 0 }
[parameters]
kf = { assume = "positive" }
kr = { assume = "positive" }
a0 = { assume = "positive" }
"""
CASCADE = """
title = "Cascade"
states = ["c1", "c2", "c3"]
matrix = [[-1, 0, 0], [1, -1, 0], [0, 1, -1]]
initial = [5, 0, 0]
"""
COMPANION = """
title = "Companion form"
states = ["x1", "x2"]
matrix = [[0, 1], [-2, -3]]
initial = [1, 0]
"""

TANKS = """
title = "Two tanks"
equations = ["V1' = -0.25*V1", "V2' = 0.25*V1 - 0.4*V2"]
initial = { V1 = 120, V2 = 40 }
"""

DERIVATIONS = (
    written(
        "a new function holds on every interval",
        SWITCHED,
        r"ok v(8) = v(4) e^{-2}",
        r"bad v(8) = v(4) e^{-1}",
        r"ok w(t) = 3v(t) = \begin{cases}30(1-e^{-t/2}) & 0\le t<4\\"
        r" 30(e^2-1)e^{-t/2} & t\ge 4\end{cases}",
        r"bad w(t) = 3v(t) = 30(1-e^{-t/2})",
        r"ok z(t) = 2 v(t) = 20(1-e^{-t/2}),\quad 0\le t\le 4",
    ),
    written(
        "equations of higher order that follow",
        SERIES,
        r"ok \ddot v_C+5\dot v_C+4v_C=48",
        r"bad \ddot v_C+4\dot v_C+5v_C=48",
        r"bad 0.25\ddot v_C+1.35\dot v_C+v_C=12",
        r"ok \dddot v_C + 5\ddot v_C + 4\dot v_C = 0",
        r"bad \dddot v_C + 5\ddot v_C - 4\dot v_C = 0",
    ),
    written(
        "equations with a solution put in",
        DEPOT,
        r"ok \frac{dC}{dt}=\frac{k_aFD_0}{V}e^{-k_at}-k_eC",
        r"bad \frac{dC}{dt}=\frac{k_aFD_0}{V}e^{-k_et}-k_eC",
        r"bad \frac{dC}{dt}=\frac{k_aFD_0}{V}e^{-k_at}+k_eC",
        r"ok \mathrm{AUC}=\int_0^\infty C\,dt=\frac{FD_0}{Vk_e}",
        r"bad \mathrm{AUC}=\int_0^\infty C\,dt=\frac{FD_0}{Vk_a}",
    ),
    written(
        "equations with rounded coefficients",
        THIRDS,
        r"ok \ddot x + 0.667\dot x + 1.333 x = 0",
        r"bad \ddot x + 0.667\dot x + 1.433 x = 0",
        r"bad \ddot x - 0.667\dot x + 1.333 x = 0",
    ),
    written(
        "modal coordinates",
        MASSES,
        r"ok q_1 = \frac{x_1+x_2}{2},\qquad q_2 = \frac{x_1-x_2}{2}",
        r"ok \ddot q_1 + 2q_1 = 0",
        r"bad \ddot q_2 + 6q_2 = 0",
        r"ok q_1(0) = \tfrac12,\quad \dot q_1(0) = 0",
        r"bad q_1(t) = \cos\sqrt2\,t",
    ),
    written(
        "masses and springs as matrices",
        MASSES,
        r"ok \mathbf M = \begin{pmatrix}2&0\\0&2\end{pmatrix},"
        r"\ \mathbf K=\begin{pmatrix}6&-2\\-2&6\end{pmatrix}",
        r"ok \mathbf M\ddot{\mathbf x}+\mathbf K\mathbf x=\mathbf 0",
        r"bad \mathbf M\ddot{\mathbf x}-\mathbf K\mathbf x=\mathbf 0",
        r"ok \det(\mathbf K-\omega^2\mathbf M)=4\omega^4-24\omega^2+32=0",
        r"bad \det(\mathbf K-\omega^2\mathbf M)=4\omega^4-24\omega^2+36=0",
        r"bad \ddot{\mathbf x}+\begin{pmatrix}3&1\\1&3\end{pmatrix}\mathbf x=\mathbf 0",
    ),
    written(
        "limits of functions inside formulas",
        EXCHANGE,
        r"ok K=\frac{b(\infty)}{a(\infty)}=\frac{k_f}{k_r}",
        r"bad L=\frac{b(\infty)}{a(\infty)}=\frac{k_r}{k_f}",
    ),
    written(
        "matrices that are zero",
        CASCADE,
        r"ok N=A+I=\begin{pmatrix}0&0&0\\1&0&0\\0&1&0\end{pmatrix},\quad N^3=0",
        r"bad N^2=0",
        r"ok \chi_A(\lambda)=(\lambda+1)^3",
        r"bad \chi_A(\lambda)=(\lambda-1)^3",
        r"ok (A+I)v_1=0\implies v_1=(0,0,1)^{\mathsf T};\qquad (A+I)v_2=v_1\implies"
        r" v_2=(0,1,0)^{\mathsf T}",
        r"bad (A+I)v_3=v_2\implies v_3=(2,0,0)^{\mathsf T}",
    ),
    written(
        "equations that are solved for an instant",
        TANKS,
        r"ok 120e^{-t/4}=60 \implies t_{1/2}=4\ln 2=2.77",
        r"bad 120e^{-t/4}=60 \implies t_{1/2}=4\ln 3",
        r"ok V_1(t_1) = 30 \implies t_1 = 4\ln 4",
        r"ok \dot V_2 = 0: \quad -50e^{-0{,}25t^*}+64e^{-0{,}4t^*}=0 \quad\Rightarrow\quad"
        r" t^*=\frac{\ln 1{,}28}{0{,}15}=1{,}646",
        r"bad \dot V_2 = 0 \Rightarrow t_m = \frac{\ln 1{,}6}{0{,}15}",
    ),
    written(
        "a transition matrix of another time",
        COMPANION,
        r"ok \Phi(t)=\begin{bmatrix}2e^{-t}-e^{-2t}&e^{-t}-e^{-2t}\\"
        r"-2e^{-t}+2e^{-2t}&-e^{-t}+2e^{-2t}\end{bmatrix}",
        r"ok \Phi^{-1}(t)=\Phi(-t)",
    ),
    written(
        "P and J on one line",
        CASCADE,
        r"ok P=\begin{pmatrix}0&0&1\\0&1&0\\1&0&0\end{pmatrix},\quad"
        r" J=\begin{pmatrix}-1&1&0\\0&-1&1\\0&0&-1\end{pmatrix}",
        r"bad P=\begin{pmatrix}1&0&0\\0&1&0\\0&0&1\end{pmatrix},\quad"
        r" J=\begin{pmatrix}-1&1&0\\0&-1&1\\0&0&-1\end{pmatrix}",
    ),
    written(
        "what P^-1 A P is",
        COMPANION,
        r"ok T=\begin{pmatrix}1&1\\-1&-2\end{pmatrix},\quad"
        r" T^{-1}AT=\begin{pmatrix}-1&0\\0&-2\end{pmatrix}",
        r"bad T^{-1}AT=\begin{pmatrix}-2&0\\0&-1\end{pmatrix}",
    ),
    written(
        "inverse transforms",
        COMPANION,
        r"ok x_1(t) = \mathcal{L}^{-1}\left\{\frac{s+3}{(s+1)(s+2)}\right\} = 2e^{-t}-e^{-2t}",
        r"bad x_1(t) = \mathcal{L}^{-1}\left\{\frac{s+2}{(s+1)(s+2)}\right\} = 2e^{-t}-e^{-2t}",
    ),
    written(
        "the transition matrix as a function",
        COMPANION,
        r"ok \Phi(0)=\mathbf I,\qquad \Phi^{-1}(t)=\begin{bmatrix}2e^{t}-e^{2t}&e^{t}-e^{2t}\\"
        r"-2e^{t}+2e^{2t}&-e^{t}+2e^{2t}\end{bmatrix}",
        r"ok \mathbf x(t)=\Phi(t)\mathbf x(0)=\begin{bmatrix}2e^{-t}-e^{-2t}\\"
        r"-2e^{-t}+2e^{-2t}\end{bmatrix}",
        r"bad \Phi^{-1}(t)=\Phi(t)",
        r"ok r_1(t)=e^{-t},\quad r_2(t)=e^{-t}-e^{-2t},\quad P_0=I,\ P_1=A+I",
        r"ok e^{At}=r_1P_0+r_2P_1",
        r"bad e^{At}=r_1P_0-r_2P_1",
    ),
)


@pytest.mark.parametrize("derivation", DERIVATIONS, ids=lambda item: item.name)
def test_what_is_made_of_the_models_functions_is_judged(
    derivation: Written, tmp_path: Path
) -> None:
    assert derivation.words(tmp_path) == [word for word, _ in derivation.lines]
