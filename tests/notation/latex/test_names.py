from __future__ import annotations

import pytest
from hypothesis import given
from hypothesis import strategies as st

from closedform.notation.latex.names import (
    IMAGINARY,
    dot_ending,
    is_long,
    is_raised,
    name_box,
    printed_key,
)

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
    ("omicron", "o"),
    ("x_omicron", r"x_{\mathrm{o}}"),
    ("omega_r_1", r"\omega_{\mathrm{r},1}"),
    ("C_rr_1", r"C_{\mathrm{rr},1}"),
    ("x_alpha", r"x_{\alpha}"),
    ("mass", r"\mathrm{mass}"),
    ("mass2", r"\mathrm{mass}_{2}"),
    ("k1a", r"k_{\mathrm{1a}}"),
    ("x'", r"\dot{x}"),
    ("x_1''", r"\ddot{x}_{1}"),
    ("x1_ddot", r"\ddot{x}_{1}"),
    ("x1_dot3", r"\dddot{x}_{1}"),
    ("x'''", r"\dddot{x}"),
    ("x''''", "x^{(4)}"),
    ("x1_dot12", "x_{1}^{(12)}"),
    ("v_C1_dot", r"\dot{v}_{\mathrm{C1}}"),
    ("omega_d'", r"\dot{\omega}_{\mathrm{d}}"),
    ("mass_dot", r"\dot{\mathrm{mass}}"),
    ("x_dot_1", r"x_{\mathrm{dot},1}"),
    ("x_dot0", r"x_{\mathrm{dot0}}"),
    ("xdot", r"\mathrm{xdot}"),
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


ALIKE = [
    ("x1", "x_1"),
    ("omega1", "omega_1"),
    ("lambda", "lamda"),
    ("lambda_3", "lamda3"),
    ("omicron", "o"),
    ("x_omicron", "x_o"),
    ("k1a", "k_1a"),
    ("k1_2", "k_1_2"),
    ("mass2", "mass_2"),
    ("x1'", "x_1_dot"),
    ("x_ddot", "x''"),
    ("x_dddot", "x_dot3"),
    ("x_dot1", "x'"),
    ("x_dot'", "x_ddot"),
    ("x_dot4", "x''''"),
]
DIFFERENT = [
    ("x_", "x"),
    ("a_b", "a__b"),
    ("k_12", "k_1_2"),
    ("k_1", "k_01"),
    ("x", "X"),
    ("omega_1", "omega_r_1"),
    ("C1", "C_r_1"),
    ("epsilon", "varepsilon"),
    ("i", IMAGINARY),
    ("x", "x'"),
    ("x'", "x''"),
    ("x_dot", "xdot"),
    ("x_dot_dot", "x_ddot"),
    (" @i", IMAGINARY),
]


@pytest.mark.parametrize(("one", "other"), ALIKE)
def test_names_that_are_printed_alike_share_a_key(one: str, other: str) -> None:
    assert name_box(one).latex == name_box(other).latex
    assert printed_key(one) == printed_key(other)


@pytest.mark.parametrize(("one", "other"), DIFFERENT)
def test_names_that_are_printed_differently_have_keys_of_their_own(one: str, other: str) -> None:
    assert name_box(one).latex != name_box(other).latex
    assert printed_key(one) != printed_key(other)


WORDS = (
    "x",
    "o",
    "omicron",
    "lambda",
    "lamda",
    "mass",
    "1",
    "12",
    "2a",
    "_",
    "__",
    "'",
    "_dot",
    "_ddot",
    "_dot3",
    " ",
    "@i",
)


@given(*[st.lists(st.sampled_from(WORDS), max_size=4).map("".join)] * 2)
def test_a_key_is_shared_exactly_by_names_that_are_printed_alike(one: str, other: str) -> None:
    alike = name_box(one).latex == name_box(other).latex
    assert (printed_key(one) == printed_key(other)) is alike


@given(*[st.text(max_size=4)] * 2)
def test_the_same_holds_for_any_text(one: str, other: str) -> None:
    alike = name_box(one).latex == name_box(other).latex
    assert (printed_key(one) == printed_key(other)) is alike


@given(st.lists(st.sampled_from(WORDS), max_size=4).map("".join))
def test_a_key_of_a_name_is_a_name_that_is_printed_like_it(name: str) -> None:
    key = printed_key(name)
    if "\\" not in key:
        assert name_box(key).latex == name_box(name).latex
        assert printed_key(key) == key


@given(st.sampled_from(["x", "x1", "v_C1", "omega_d", "mass"]), st.integers(0, 12))
def test_primes_and_endings_are_printed_alike(name: str, order: int) -> None:
    primed, ended = name + "'" * order, name + dot_ending(order)
    assert name_box(primed) == name_box(ended)
    assert printed_key(primed) == printed_key(ended)
    assert is_raised(primed) is ("^" in name_box(primed).latex)


@given(st.integers(0, 3))
def test_dots_take_no_room_beside_the_letter(order: int) -> None:
    assert name_box("x1" + "'" * order).width == name_box("x1").width
