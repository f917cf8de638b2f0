"""Steps, pieces and conditions at the instants at which an author puts them."""

from __future__ import annotations

import pytest

from tests.checking.hold import held, symbols

LATE = {"equations": ["x'' + 4*x = 4*step(t - 1)"], "initial": {"x": "0", "x'": "0"}}
SOON = {"equations": ["y' + y = 1"], "initial": {"y": "0"}}
INFUSION = {
    "equations": ["c' = -k*c + r*(step(t) - step(t - T_0))"],
    "initial": {"c": "0"},
    "parameters": symbols(k=None, r=None, T_0=None),
}
RIGHT = (
    (LATE, r"\dot x(t)=2\sin(2(t-1))u(t-1)"),
    (LATE, r"x(t)=\begin{cases}0&t<1\\1-\cos(2(t-1))&t\ge1\end{cases}"),
    (LATE, r"x(t)=0,\quad 0\le t\le 1"),
    (LATE, r"X(s)=\frac{4e^{-s}}{s(s^2+4)}"),
    (SOON, r"y(t)=(1-e^{-t})u(t)"),
    (INFUSION, r"c(t)=\frac rk\left(1-e^{-kt}\right)-\frac rk\left(1-e^{-k(t-T_0)}\right)u(t-T_0)"),
    (INFUSION, r"c(t)=\frac rk(1-e^{-kt}),\quad 0\le t\le T_0"),
    (INFUSION, r"C(s)=\frac{r(1-e^{-sT_0})}{s(s+k)}"),
)
WRONG = (
    (LATE, r"\dot x(t)=2\sin(2(t-1))u(t-2)"),
    (LATE, r"x(t)=\begin{cases}0&t<1.5\\1-\cos(2(t-1))&t\ge1.5\end{cases}"),
    (LATE, r"x(t)=1-\cos(2(t-1)),\quad t\ge 0.5"),
    (LATE, r"X(s)=\frac{4e^{-2s}}{s(s^2+4)}"),
    (SOON, r"y(t)=(1-e^{-t})u(t-1)"),
    (INFUSION, r"c(t)=\frac rk(1-e^{-kt})-\frac rk(1-e^{-k(t-T_0)})u(t-2T_0)"),
    (INFUSION, r"c(t)=\frac rk(1-e^{-kt}),\quad 0\le t\le 2T_0"),
)


@pytest.mark.parametrize(("keys", "text"), RIGHT)
def test_right_switching_passes(keys: dict[str, object], text: str) -> None:
    (found,) = held(keys, text)
    assert found.passes, found


@pytest.mark.parametrize(("keys", "text"), WRONG)
def test_wrong_switching_fails(keys: dict[str, object], text: str) -> None:
    (found,) = held(keys, text)
    assert found.verdict == "fails", found


APPROXIMATE = {"equations": ["x'' + 2*x' + 5*x = 0"], "initial": {"x": "1", "x'": "0"}}


@pytest.mark.parametrize("front", [r"\tfrac{\sqrt7}{2}", r"\tfrac65", "1"])
def test_short_exact_numbers_are_no_rounded_ones(front: str) -> None:
    (found,) = held(APPROXIMATE, rf"x(t)\approx{front}\,e^{{-t}}\cos(2t-0.4636)")
    assert found.verdict == "fails", found


def test_a_value_is_judged_by_the_quantity_it_is_said_to_be() -> None:
    keys = {
        "equations": ["m*x'' + c*x' + k*x = 0"],
        "initial": {"x": "1", "x'": "0"},
        "parameters": symbols(m="5", c="60", k="500"),
    }
    right, wrong, other = held(
        keys,
        ("value", r"\zeta=\frac{c}{2\sqrt{km}}=0.6", "damping ratio zeta"),
        ("value", r"\zeta=\frac{c}{\sqrt{km}}=1.2", "damping ratio zeta"),
        ("value", r"D=\frac{c}{\sqrt{km}}=1.2", "damping ratio"),
    )
    assert right.passes
    assert wrong.verdict == other.verdict == "fails"


def test_the_order_of_the_eigenvalues_tells_which_of_p_and_j_is_wrong() -> None:
    keys = {
        "equations": ["a' = -2*a + 2*b", "b' = a - b"],
        "states": ["a", "b"],
        "initial": {"a": "90", "b": "30"},
    }
    roots = r"\lambda_1=0,\ \lambda_2=-3"
    p, turned = (
        r"P=\begin{pmatrix}1&-2\\1&1\end{pmatrix}",
        r"P=\begin{pmatrix}-2&1\\1&1\end{pmatrix}",
    )
    j, other = r"J=\operatorname{diag}(0,-3)", r"J=\operatorname{diag}(-3,0)"
    assert [v.verdict for v in held(keys, roots, p, other)] == ["holds", "holds", "fails"]
    assert [v.verdict for v in held(keys, roots, turned, j)] == ["holds", "fails", "holds"]
    assert all(v.passes for v in held(keys, roots, turned, other))
    assert all(v.passes for v in held(keys, roots, p, j))


def test_i_beside_a_line_is_the_imaginary_unit() -> None:
    keys = {
        "equations": ["a' = -a - 2*b", "b' = 2*a - b"],
        "states": ["a", "b"],
        "initial": {"a": "1", "b": "0"},
    }
    right, wrong = held(
        keys,
        ("eigenvector", r"v=\begin{pmatrix}1\\-i\end{pmatrix}", "-1 + 2*I"),
        ("eigenvector", r"v=\begin{pmatrix}1\\i\end{pmatrix}", "-1 + 2*I"),
    )
    assert right.passes
    assert wrong.verdict == "fails"
