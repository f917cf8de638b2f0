"""General solutions, ansatzes and their constants, as they stand in derivations."""

from __future__ import annotations

from pathlib import Path

import pytest

from tests.checking.engineers import Written, written

FREE = """
title = "Free motion"
equations = ["x'' + 4*x' + 13*x = 0"]
initial = { x = 2, "x'" = -1 }
"""
FORCED = """
title = "Forced motion"
equations = ["x'' + 2*x' + 10*x = 20*cos(2*t)"]
initial = { x = 0, "x'" = 0 }
"""
CRITICAL = """
title = "Critical damping"
equations = ["i'' + 4*i' + 4*i = 0"]
initial = { i = 0, "i'" = 6 }
"""
CHARGING = """
title = "Charging"
equations = ["R*C*vC' + vC = Vs"]
initial = { vC = 0 }
[parameters]
R = { assume = "positive" }
C = { assume = "positive" }
Vs = { assume = "real" }
"""
STEP = """
title = "Step response"
equations = ["y''' + 6*y'' + 11*y' + 6*y = 6*step(t)"]
initial = { y = 0, "y'" = 0, "y''" = 0 }
"""
COMPANION = """
title = "Companion form"
states = ["x1", "x2"]
matrix = [[0, 1], [-2, -3]]
initial = [1, 0]
"""
COIL = """
title = "Coil on a sine"
equations = ["0.2*i' + 40*i = 100*cos(200*t)"]
initial = { i = 0 }
"""

DERIVATIONS = (
    written(
        "constants from the initial values",
        FREE,
        r"ok x(t) = e^{-2t}\left(C_1\cos 3t + C_2\sin 3t\right)",
        r"ok x(0) = C_1 = 2",
        r"ok \dot x(0) = -2C_1+3C_2 = -1 \quad\Rightarrow\quad C_2 = \frac{-1+4}{3} = 1",
        r"ok x(t) = e^{-2t}(2\cos 3t+\sin 3t)",
    ),
    written(
        "a wrong constant carries on, others being right",
        FREE,
        r"ok x(t) = e^{-2t}\left(A\cos 3t + B\sin 3t\right)",
        r"bad \dot x(0) = -2A+3B = -1 \quad\Rightarrow\quad B = \frac{-1-4}{3} = -\frac53",
        r"carried x(t) = e^{-2t}(2\cos 3t-\tfrac53\sin 3t)",
    ),
    written(
        "a wrong equation for the constants",
        FREE,
        r"ok x(t) = e^{-2t}\left(A\cos 3t + B\sin 3t\right)",
        r"bad \dot x(0) = 2A+3B = -1",
        r"bad x(0) = B = 2",
    ),
    written(
        "an ansatz with open coefficients",
        FORCED,
        r"ok x_p(t) = a\cos 2t+b\sin 2t",
        r"ok 6a+4b=20,\quad -4a+6b=0 \Rightarrow a=\frac{30}{13},\ b=\frac{20}{13}",
        r"bad x_p(t) = a\cos 3t+b\sin 3t",
        r"bad x_p(t) = a\cos 2t",
        r"bad b = \frac{30}{13}",
    ),
    written(
        "too few constants, or none that fit",
        FORCED,
        r"bad x(t) = C_1 e^{-t}\cos 3t + \frac{30}{13}\cos 2t+\frac{20}{13}\sin 2t",
        r"bad x_h(t) = C_1 e^{-t}\cos 3t",
        r"bad x_h(t) = C_1 e^{-t}\cos 3t + 2C_2e^{-t}\cos 3t",
        r"ok x_h(t) = e^{-t}(C_1\cos 3t + C_2\sin 3t)",
        r"ok x(t) = e^{-t}(-\frac{30}{13}\cos 3t + C_2\sin 3t) + \frac{30}{13}\cos 2t"
        r"+\frac{20}{13}\sin 2t",
    ),
    written(
        "a double root wants a factor t",
        CRITICAL,
        r"bad i(t)=(D_1+D_2)e^{-2t}",
        r"ok i(t)=(D_1t+D_2)\,e^{-2t}",
        r"bad D_1 = 3",
    ),
    written(
        "an ansatz for a first-order circuit",
        CHARGING,
        r"ok \tau = RC",
        r"ok v_C(t)=A+Be^{-t/\tau}",
        r"ok v_C(\infty)=A=V_s,\qquad v_C(0)=A+B=0\Rightarrow B=-V_s",
        r"ok v_C(t)=V_s\left(1-\mathrm e^{-t/\tau}\right)",
        r"bad v_C(t)=A+Be^{-2t/\tau}",
    ),
    written(
        "partial fractions",
        STEP,
        r"ok Y(s)=\frac{6}{s(s+1)(s+2)(s+3)}=\frac{A}{s}+\frac{B}{s+1}+\frac{C}{s+2}+\frac{D}{s+3}",
        r"ok A=1,\quad B=-3",
        r"bad C=-3,\quad D=-1",
        r"carried Y(s)=\frac1s-\frac3{s+1}-\frac3{s+2}-\frac1{s+3}",
        r"carried y(t)=1-3e^{-t}-3e^{-2t}-e^{-3t}",
        r"bad Y(s)=\frac{A}{s}+\frac{B}{s+1}+\frac{C}{s+2}",
    ),
    written(
        "the exponential as a polynomial in A",
        COMPANION,
        r"ok e^{\mathbf At}=\alpha_0\mathbf I+\alpha_1\mathbf A",
        r"ok e^{-t}=\alpha_0-\alpha_1,\qquad e^{-2t}=\alpha_0-2\alpha_1",
        r"ok \alpha_1=e^{-t}-e^{-2t},\quad \alpha_0=2e^{-t}-e^{-2t}",
        r"bad e^{-2t}=\alpha_0+2\alpha_1",
        r"bad \alpha_0=e^{-t}-e^{-2t}",
    ),
    written(
        "a rounded particular solution",
        COIL,
        r"ok i_p(t) = 1{,}768\cos(200t-45^\circ)\,\mathrm A",
        r"ok \varphi = 0{,}785,\quad i_p(t) = 1{,}768\cos(200t-\varphi)",
        r"ok \varphi = \operatorname{atan2}(1, 1)",
        r"bad i_p(t) = 1{,}768\cos(200t+45^\circ)\,\mathrm A",
        r"bad i_p(t) = 1{,}25\cos(200t-\frac{\pi}{4})\,\mathrm A",
        r"bad i_p(t) = 1{,}768\sin(200t-45^\circ)\,\mathrm A",
    ),
)


@pytest.mark.parametrize("derivation", DERIVATIONS, ids=lambda item: item.name)
def test_constants_are_what_the_truth_makes_them(derivation: Written, tmp_path: Path) -> None:
    assert derivation.words(tmp_path) == [word for word, _ in derivation.lines]
