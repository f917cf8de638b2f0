"""Lines with conditions, inequalities and names that are given beside the formula."""

from __future__ import annotations

from pathlib import Path

import pytest

from tests.checking.engineers import Written, written

FREE = """
title = "Free motion"
equations = ["x'' + 4*x' + 13*x = 0"]
initial = { x = 2, "x'" = -1 }
"""
RATES = """
title = "Two rates"
equations = ["C1' = -a*C1", "C2' = a*C1 - b*C2"]
initial = { C1 = "M", C2 = 0 }
[parameters]
a = { assume = "positive" }
b = { assume = "positive" }
M = { assume = "positive" }
"""
MOUNT = """
title = "Mount"
equations = ["m*x'' + c*x' + k*x = 0"]
initial = { x = "1/100", "x'" = 0 }
[parameters]
m = { assume = "positive", value = 5 }
c = { assume = "positive", value = 10 }
k = { assume = "positive", value = 2000 }
"""
TWO = """
title = "Companion form"
states = ["x1", "x2"]
matrix = [[0, 1], [-2, -3]]
initial = [1, 0]
"""

DERIVATIONS = (
    written(
        "inequalities",
        MOUNT,
        r"ok \zeta = 0.05 < 1",
        r"ok c^2 = 100 < 4km = 40000",
        r"ok c^2-4km<0",
        r"bad \zeta = 0.05 > 1",
        r"bad c^2 = 100 > 4km = 40000",
        r"bad c^2 = 101 < 4km = 40000",
        r"bad c^2-4km>0",
        r"bad 0.05 < \zeta < 0.01",
    ),
    written(
        "conditions choose the case",
        RATES,
        r"ok C_2(t)=\frac{aM}{b-a}\left(e^{-at}-e^{-bt}\right),\qquad a\neq b",
        r"ok C_2(t)=aMte^{-at},\qquad a=b",
        r"ok a = b:\quad C_2(t)=aMt\,e^{-at}",
        r"bad a\ne b:\quad C_2(t)=aMt\,e^{-at}",
        r"bad C_2(t)=\frac{aM}{b-a}\left(e^{-bt}-e^{-at}\right)\quad\text{for }a\ne b",
        r"bad C_2(t)=2aMte^{-at}\quad\text{where } a=b",
    ),
    written(
        "pieces told apart by parameters hold in every case",
        RATES,
        r"ok C_2(t)=\begin{cases}\frac{aM}{b-a}(e^{-at}-e^{-bt})&a\ne b\\aMte^{-at}&a=b\end{cases}",
        r"bad C_2=\begin{cases}\frac{bM}{b-a}(e^{-at}-e^{-bt})&a\ne b\\aMte^{-at}&a=b\end{cases}",
        r"bad C_2(t)=\begin{cases}\frac{aM}{b-a}(e^{-at}-e^{-bt})&a\ne b\\aMe^{-at}&a=b\end{cases}",
    ),
    written(
        "names given on the same line",
        FREE,
        r"ok \omega_d = \sqrt{\omega_0^2-\delta^2} = 3 \quad\text{with}\quad"
        r" \omega_0=\sqrt{13},\ \delta = 2",
        r"bad \omega_d = \sqrt{\omega_0^2+\delta^2} = 3 \quad\text{with}\quad"
        r" \omega_0=\sqrt{13},\ \delta = 2",
        r"bad x(t)=e^{-\delta t}(2\cos 3t+\sin 3t),\quad\delta=4",
    ),
    written(
        "a member in unknown names is not passed over",
        FREE,
        r"unread \omega_d = \sqrt{\omega_n^2+\delta_0^2} = 3",
        r"unread x(t) = B_7 e^{-2t}\ell\cos 3t = e^{-2t}(2\cos 3t+\sin 3t)",
        r"bad x(t) = e^{-2t}(2\cos 3t+\sin 4t) = e^{-2t}(2\cos 3t+\sin 3t)",
    ),
    written(
        "a general member is",
        TWO,
        r"ok e^{At} = P e^{Jt} P^{-1} = \begin{bmatrix}2e^{-t}-e^{-2t}&e^{-t}-e^{-2t}\\"
        r"-2e^{-t}+2e^{-2t}&-e^{-t}+2e^{-2t}\end{bmatrix}",
        r"ok \Phi(t)=\mathcal L^{-1}\{(s\mathbf I-\mathbf A)^{-1}\}="
        r"\begin{bmatrix}2e^{-t}-e^{-2t}&e^{-t}-e^{-2t}\\"
        r"-2e^{-t}+2e^{-2t}&-e^{-t}+2e^{-2t}\end{bmatrix}",
    ),
    written(
        "numbers from a wrong name are carried",
        FREE,
        r"bad \omega_d = \sqrt{13-2} = \sqrt{11}",
        r"carried T_d = \frac{2\pi}{\omega_d} = 1.894\,\mathrm s",
        r"carried n = 10/T_d = 5.28",
    ),
    written(
        "a slip inside a chain that ends right is no consequence",
        FREE,
        r"bad x(t) = e^{-2t}(2\cos 3t+\sin 4t) = e^{-2t}(2\cos 3t+\sin 3t)",
        r"bad x(0) = 1+1 = 3 = 2",
        r"bad \dot x(0) = x(0)-1 = -1",
    ),
    written(
        "parameters that are equated are no condition behind a formula",
        MOUNT,
        r"bad x(t) = 0.01e^{-t}\cos 20t,\quad k = 300c",
    ),
    written(
        "two vectors on a line",
        TWO,
        r"ok \lambda_1=-1:\quad v_1=[1\;\;{-1}]^T,\qquad \lambda_2=-2:\quad v_2=[1\;\;{-2}]^T",
        r"bad \lambda_1=-1:\quad v_1=[1\;\;{-1}]^T,\qquad \lambda_2=-2:\quad v_2=[1\;\;{-3}]^T",
    ),
)


@pytest.mark.parametrize("derivation", DERIVATIONS, ids=lambda item: item.name)
def test_lines_have_the_verdicts_that_a_colleague_would_give(
    derivation: Written, tmp_path: Path
) -> None:
    assert derivation.words(tmp_path) == [word for word, _ in derivation.lines]
