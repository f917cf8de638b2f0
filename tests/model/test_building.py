"""Models are built from Python values by the same rules as from files."""

from __future__ import annotations

from collections.abc import Mapping
from decimal import Decimal
from fractions import Fraction
from typing import Any

import flint
import numpy as np
import pytest
import sympy
from hypothesis import given
from hypothesis import strategies as st

from closedform.algebra.surds import SurdSum
from closedform.errors import Place
from closedform.model import model_from
from closedform.model.errors import (
    BinaryFractionError,
    LookalikeNamesError,
    ModelError,
    UnknownKeyError,
    WrongKindError,
)
from closedform.model.model import Model
from closedform.notation.errors import FormulaSyntaxError, NotFiniteError, SizeError
from closedform.notation.plain import plain
from closedform.notation.terms import surd_formula

SOUND: Mapping[str, Any] = {
    "title": "Two carts",
    "states": ("x1", "x2"),
    "matrix": [[0, 1], [-2, -3]],
    "initial": [1, 0],
}


def built(**changes: Any) -> Model:
    return model_from({**SOUND, **changes}, name="bench")


EXACT: list[tuple[object, dict[int, Fraction]]] = [
    (3, {1: Fraction(3)}),
    (Fraction(1, 3), {1: Fraction(1, 3)}),
    (Decimal("0.1"), {1: Fraction(1, 10)}),
    (Decimal("1E-2"), {1: Fraction(1, 100)}),
    ("0.1", {1: Fraction(1, 10)}),
    ("-2/4", {1: Fraction(-1, 2)}),
    (" 1/3 ", {1: Fraction(1, 3)}),
    ("−1", {1: Fraction(-1)}),
    ("sqrt(2)/2", {2: Fraction(1, 2)}),
    (SurdSum.of({1: Fraction(1), 5: Fraction(2)}), {1: Fraction(1), 5: Fraction(2)}),
    (sympy.Rational(2, 3), {1: Fraction(2, 3)}),
    (np.int64(7), {1: Fraction(7)}),
]


@pytest.mark.parametrize(("value", "terms"), EXACT)
def test_numbers_are_taken_exactly(value: object, terms: dict[int, Fraction]) -> None:
    assert built(initial=[value, 0]).initial[0] == SurdSum.of(terms)


@given(st.fractions(), st.fractions(max_denominator=50), st.sampled_from([2, 3, 30]))
def test_a_number_written_as_text_is_that_number(r: Fraction, c: Fraction, d: int) -> None:
    value = SurdSum.of({1: r, d: c})
    assert built(initial=[plain(surd_formula(value)), str(r)]).initial == (
        value,
        SurdSum.rational(r),
    )


@given(st.decimals(min_value=-(10**9), max_value=10**9, places=20))
def test_a_decimal_as_text_or_number_is_its_fraction(value: Decimal) -> None:
    exact = SurdSum.rational(Fraction(value))
    assert built(initial=[value, f"{value:f}"]).initial == (exact, exact)
    assert built(initial=[f"{value:e}", f"{value:e}/1"]).initial == (exact, exact)


REFUSED: list[tuple[object, type[Exception], str]] = [
    (0.1, BinaryFractionError, 'give it as text, "0.1", or as a Fraction'),
    (np.float64(0.5), BinaryFractionError, "0.5 is a binary floating-point number"),
    (float("nan"), NotFiniteError, "'nan' is no value"),
    (float("-inf"), NotFiniteError, "'-inf' is no value"),
    (Decimal("NaN"), NotFiniteError, "'NaN' is no value"),
    (Decimal("Infinity"), NotFiniteError, "is no value"),
    (True, WrongKindError, "the truth value true"),
    (1j, WrongKindError, "a value of type complex"),
    (None, WrongKindError, "here stands None"),
    (flint.fmpq(1, 2), WrongKindError, "a value of type fmpq"),
    (10**3000, SizeError, "'this number' is too large"),
    (Fraction(1, 10**3000), SizeError, "'this number' is too large"),
    ("2 +", FormulaSyntaxError, "an operator has nothing after it"),
    ("__import__('os').system('true')", FormulaSyntaxError, "character does not belong"),
]


@pytest.mark.parametrize(("value", "error", "words"), REFUSED)
def test_what_is_no_exact_number_is_refused(
    value: object, error: type[Exception], words: str
) -> None:
    with pytest.raises(error) as caught:
        built(matrix=[[0, 1], [value, 0]])
    assert words in str(caught.value)
    assert str(caught.value).startswith("matrix[2][1]")


def test_arrays_of_other_packages_are_taken() -> None:
    model = built(
        matrix=sympy.Matrix([[0, 1], [sympy.Rational(1, 2), 3]]), initial=np.array([1, 2])
    )
    assert model.matrix[1][0].as_fraction() == Fraction(1, 2)
    assert [value.as_fraction() for value in model.initial] == [1, 2]


def test_the_given_place_stands_before_each_error() -> None:
    with pytest.raises(ModelError, match=r"^notebook, plant\.states: there are no states"):
        model_from({**SOUND, "states": []}, name="a", place=Place("notebook", "plant"))


def test_titles_take_one_line() -> None:
    assert built(title=" Two\n  carts ").title == "Two carts"


def test_a_key_that_is_no_text_is_refused() -> None:
    with pytest.raises(ModelError, match="there is no key '3'"):
        model_from({**SOUND, 3: 1}, name="a")  # type: ignore[dict-item]


USUAL = [
    *[("a", "matrix"), ("A", "matrix"), ("x0", "initial"), ("init", "initial")],
    *[("initial_conditions", "initial"), ("state", "states"), ("y", "outputs")],
    *[("output", "outputs"), ("name", "title"), ("MATRIX", "matrix"), ("t", "times")],
]


@pytest.mark.parametrize(("key", "meant"), USUAL)
def test_a_key_by_its_usual_name_elsewhere_is_understood(key: str, meant: str) -> None:
    with pytest.raises(UnknownKeyError, match=rf"no key '{key}'; did you mean '{meant}'\?"):
        built(**{key: []})


def test_the_state_cannot_have_the_name_of_the_time() -> None:
    with pytest.raises(ModelError, match="the name of the time"):
        built(time="x2")
    assert built(time="z", states=["t", "x2"]).states == ("t", "x2")


@pytest.mark.parametrize(
    "pair", [("x1", "x_1"), ("lambda", "lamda"), ("omicron", "o"), ("omega1", "omega_1")]
)
def test_states_that_are_printed_alike_are_refused(pair: tuple[str, str]) -> None:
    with pytest.raises(LookalikeNamesError) as caught:
        built(states=pair)
    assert (caught.value.other, caught.value.name) == pair


@pytest.mark.parametrize("pair", [("x1", "x_1_1"), ("x", "X"), ("k_12", "k_1_2")])
def test_states_that_are_printed_differently_are_taken(pair: tuple[str, str]) -> None:
    assert built(states=pair).states == pair


def test_outputs_keep_their_order() -> None:
    model = built(outputs={"b": "x2", "a": "x1"})
    assert [output.name for output in model.outputs] == ["b", "a"]


def test_building_twice_gives_equal_models() -> None:
    assert built() == built()
    assert hash(built()) == hash(built())
