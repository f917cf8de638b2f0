from __future__ import annotations

import pytest
from hypothesis import given
from hypothesis import strategies as st

from closedform.notation.latex.names import IMAGINARY, is_long, name_box, printed_key

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


WORDS = ("x", "o", "omicron", "lambda", "lamda", "mass", "1", "12", "2a", "_", "__", "'", " ", "@i")


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
