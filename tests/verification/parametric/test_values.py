"""Names of a case in numbers, from their definitions alone."""

from __future__ import annotations

from dataclasses import replace
from fractions import Fraction

import pytest
from flint import arb, arb_mat, ctx, fmpq, fmpq_poly
from hypothesis import given
from hypothesis import strategies as st

from closedform.notation import plain
from closedform.response.parametric.points import Point
from closedform.response.parametric.quantities import RootDefinition
from closedform.verification.parametric.values import (
    NamesAt,
    enclosed_matrix,
    exponential_at,
    read_back,
    trial_times,
)
from tests.rational_elements import element, field_of
from tests.verification.parametric.spoiling import KINDS, response_to


def names_at(kind: str, values: str, number: int = 0) -> dict[str, arb]:
    response = response_to(kind)
    numbers = tuple(
        (name, Fraction(text))
        for name, text in zip(response.model.field.parameters, values.split(), strict=True)
    )
    return NamesAt(response.model, response.cases[number], Point(numbers)).balls()


def test_an_abbreviation_and_a_frequency_have_the_values_of_their_formulas() -> None:
    ctx.prec = 128
    known = names_at("pair", "1 2 5 1")  # m, c, k, x0: delta = 1, omega_d = 2
    assert known["delta"].overlaps(arb(1))
    assert known["omega_d"].overlaps(arb(2))
    assert known["omega_d"].rad() < arb(10) ** -30


def test_rates_are_in_their_order() -> None:
    ctx.prec = 128
    known = names_at("exchange", "1 1 1 1")
    assert known["alpha"] > known["beta"] > 0
    assert (known["alpha"] * known["beta"]).overlaps(arb(1))


def test_roots_are_told_apart_by_their_place() -> None:
    ctx.prec = 128
    known = names_at("star", "1 2 3")
    assert known["alpha"] > known["beta"] > known["gamma"] > 0


def root_at(coefficients: list[int], which: int) -> arb:
    """The value of a root of a polynomial over Q, as a name of a case."""
    response = response_to("star")
    field, case = response.model.field, response.cases[0]
    root = RootDefinition(tuple(field.scalar(c) for c in coefficients), which)
    quantity = replace(case.quantities[0], root=root)
    point = Point(tuple((name, Fraction(1)) for name in field.parameters))
    spoiled = replace(case, quantities=(quantity,))
    return NamesAt(response.model, spoiled, point).balls()[quantity.name]


@given(st.lists(st.integers(-9, 9), min_size=1, max_size=4, unique=True))
def test_the_root_of_each_place_is_found(roots: list[int]) -> None:
    ctx.prec = 128
    polynomial = fmpq_poly([1])
    for root in roots:
        polynomial *= fmpq_poly([-root, 1])
    coefficients = [int(c.p) for c in reversed(polynomial.coeffs())]
    for place, root in enumerate(sorted(roots), start=1):
        assert root_at(coefficients, place).overlaps(arb(root))


@pytest.mark.parametrize(
    ("coefficients", "which", "value"),
    [
        ([1, 0, 1, 0], 2, 0),  # 0 and ±i: all on one line
        ([1, 1, 1, 1], 1, -1),  # -1 and ±i
        ([1, -1, 1, -1], 3, 1),
        ([1, 3, 4, 2], 2, -1),  # -1 and -1 ± i
    ],
)
def test_a_root_beside_a_pair_has_its_place_by_the_real_part(
    coefficients: list[int], which: int, value: int
) -> None:
    ctx.prec = 128
    assert root_at(coefficients, which).overlaps(arb(value))
    for other in {0, 1, 2, 3, 4} - {which}:
        assert not root_at(coefficients, other).is_finite()


@pytest.mark.parametrize("coefficients", [[1, 0, 1], [1, -2, 1]])
def test_a_root_that_is_not_real_or_has_no_certain_place_has_no_value(
    coefficients: list[int],
) -> None:
    assert not root_at(coefficients, 1).is_finite()


@pytest.mark.parametrize("bits", [64, 1000, 17000])
def test_the_value_of_a_root_is_as_sharp_as_the_precision_asks(bits: int) -> None:
    with ctx.workprec(bits):
        third = root_at([3, 7, 2], 2)  # -2 and -1/3
        assert third.overlaps(arb(fmpq(-1, 3)))
        assert third.rad() < arb(2) ** (-bits // 2)


@pytest.mark.parametrize("kind", KINDS)
def test_formulas_are_read_back_as_they_were_written(kind: str) -> None:
    response = response_to(kind)
    for case in response.cases:
        for formula in (*case.solution, *case.outputs):
            back = read_back(response.model, case, formula)
            assert plain(back) == plain(formula)


def test_a_matrix_is_enclosed_entry_by_entry() -> None:
    field = field_of("a b")
    rows = field.matrix([[element(field, "a/b"), element(field, "1")]])
    found = enclosed_matrix(field, rows, {"a": arb(1), "b": arb(4)})
    assert (found.nrows(), found.ncols()) == (1, 2)
    assert found[0, 0] == arb("0.25")
    assert found[0, 1] == arb(1)


def test_the_exponential_of_a_rotation_is_sine_and_cosine() -> None:
    ctx.prec = 128
    found = exponential_at(arb_mat(2, 2, [0, -1, 1, 0]), Fraction(2))
    assert found[0, 0].overlaps(arb(2).cos())
    assert found[1, 0].overlaps(arb(2).sin())


@pytest.mark.parametrize("size", ["0", "1", "1000", "1e-30", "3e40"])
def test_trial_times_suit_the_size_of_the_matrix(size: str) -> None:
    short, long = trial_times(arb_mat(1, 1, [arb(size)]))
    assert short * 3 == long
    assert long.numerator == 1 or long.denominator == 1
    if size != "0":
        product = arb(size) * arb(fmpq(long.numerator, long.denominator))
        assert arb("0.4") < product <= 1
