from __future__ import annotations

import pytest

from closedform.notation.latex.names import is_long, name_box

CASES = [
    ("x", "x"),
    ("x1", "x_{1}"),
    ("k12", "k_{12}"),
    ("omega_d", r"\omega_{\mathrm{d}}"),
    ("omega_1", r"\omega_{1}"),
    ("v_left", r"v_{\mathrm{left}}"),
    ("omega_n_1", r"\omega_{\mathrm{n},1}"),
    ("Gamma", r"\Gamma"),
    ("lamda", r"\lambda"),
    ("x_alpha", r"x_{\alpha}"),
    ("mass", r"\mathrm{mass}"),
    ("mass2", r"\mathrm{mass}_{2}"),
    ("k1a", r"k_{\mathrm{1a}}"),
    ("x'", "x'"),
    ("x_1''", "x_{1}''"),
    ("x_", r"\text{x\_}"),
    (r"\write18{x}", r"\text{\textbackslash{}write18\{x\}}"),
    ("@i", r"\mathrm{i}"),
]


@pytest.mark.parametrize(("name", "latex"), CASES)
def test_a_name_is_set_as_the_obvious_symbol(name: str, latex: str) -> None:
    assert name_box(name).latex == latex


def test_more_indices_follow_those_of_the_name() -> None:
    assert name_box("lambda", extra=("1", "2")).latex == r"\lambda_{1,2}"


@pytest.mark.parametrize(("name", "long"), [("x", False), ("omega_d", False), ("mass", True)])
def test_words_are_told_from_letters(name: str, long: bool) -> None:  # noqa: FBT001
    assert is_long(name) is long
