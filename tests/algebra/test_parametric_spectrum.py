"""Spectra over Q(parameters): built in, and where one relation holds among the parameters."""

from __future__ import annotations

from functools import reduce
from operator import mul

import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from closedform.algebra.domain import ParameterDomain
from closedform.algebra.normal_form import UnderRelation, under_relation
from closedform.algebra.parameter_field import ParameterField
from closedform.algebra.parametric_spectrum import (
    parametric_spectrum,
    spectrum_under_relation,
    vanishes_under,
)
from closedform.algebra.spectrum import Spectrum
from tests.rational_elements import element, field_of

FIELD = field_of("a b c")
RATES = ("-a", "-b", "a", "-c", "a - b", "0", "-2", "1/a")


def spectrum(field: ParameterField, rows: list[list[str]]) -> Spectrum:
    return parametric_spectrum(
        field, field.matrix([[element(field, e) for e in row] for row in rows])
    )


def under(texts: list[str], relation: str) -> Spectrum:
    """The spectrum of a companion matrix, highest coefficient first without the 1."""
    n = len(texts)
    rows = [["1" if k == i + 1 else "0" for k in range(n)] for i in range(n - 1)]
    rows.append([f"-({c})" for c in reversed(texts)])
    return spectrum_under_relation(FIELD, spectrum(FIELD, rows), held(relation))


def held(relation: str) -> UnderRelation:
    return under_relation(ParameterDomain(FIELD, ()), element(FIELD, relation))


@given(st.lists(st.sampled_from(RATES), min_size=1, max_size=4))
@settings(max_examples=30)
def test_the_roots_of_a_chain_are_its_rates(rates: list[str]) -> None:
    """Couplings of 1 below the diagonal make one block for each root."""
    n = len(rates)
    rows = [
        [rates[i] if i == k else "1" if i == k + 1 else "0" for k in range(n)] for i in range(n)
    ]
    found = spectrum(FIELD, rows)
    assert {(f.roots.centre, f.blocks) for f in found.factors} == {
        (element(FIELD, r), (rates.count(r),)) for r in rates
    }
    assert all(f.roots.form == "single" for f in found.factors)
    product = reduce(mul, (f.p**f.multiplicity for f in found.factors))
    assert found.characteristic_polynomial == product


def test_uncoupled_equal_rates_are_blocks_of_size_one() -> None:
    found = spectrum(FIELD, [["-a", "0", "0"], ["0", "-a", "b"], ["0", "0", "-a"]])
    (factor,) = found.factors
    assert factor.blocks == (2, 1)


def test_roots_come_by_degree_and_then_as_they_stand_on_the_diagonal() -> None:
    rows = [["0", "1", "0", "0"], ["-c", "0", "0", "0"], ["0", "0", "b", "0"], ["0", "0", "0", "a"]]
    found = spectrum(FIELD, rows)
    assert [f.degree for f in found.factors] == [1, 1, 2]
    assert [f.roots.centre for f in found.factors[:2]] == [
        element(FIELD, "b"),
        element(FIELD, "a"),
    ]


@pytest.mark.parametrize(
    ("coefficients", "form", "centre"),
    [
        (["b", "c"], "quadratic", "-b/2"),
        (["0", "a", "b"], "named", "0"),
        (["0", "b", "0", "c"], "even", "0"),
        (["4*a", "6*a^2 + b", "4*a^3 + 2*a*b", "a^4 + a^2*b + c"], "even", "-a"),
        (["a", "b", "c", "1"], "named", "-a/4"),
    ],
)
def test_the_form_of_a_factor_says_how_its_roots_are_shown(
    coefficients: list[str], form: str, centre: str
) -> None:
    n = len(coefficients)
    rows = [["1" if k == i + 1 else "0" for k in range(n)] for i in range(n - 1)]
    rows.append([f"-({c})" for c in reversed(coefficients)])
    (factor,) = spectrum(FIELD, rows).factors
    assert (factor.roots.form, factor.roots.centre) == (form, element(FIELD, centre))
    if factor.roots.squares is not None:
        moved = factor.p.shift(factor.roots.centre)
        squares = factor.roots.squares
        assert [moved.nth(2 * k) for k in range(n // 2 + 1)] == [
            squares.nth(k) for k in range(n // 2 + 1)
        ]


# --- under a relation ----------------------------------------------------------------------


def test_a_vanishing_discriminant_makes_a_double_root() -> None:
    found = under(["b", "c"], "b^2 - 4*c")
    (factor,) = found.factors
    assert (factor.degree, factor.multiplicity) == (1, 2)
    assert factor.roots.centre == element(FIELD, "-b/2")


def test_a_cubic_has_a_double_root_where_its_discriminant_vanishes() -> None:
    relation = element(FIELD, "4*a^3 + 27*b^2")
    found = under(["0", "a", "b"], "4*a^3 + 27*b^2")
    assert sorted((f.degree, f.multiplicity) for f in found.factors) == [(1, 1), (1, 2)]
    given_coefficients = [element(FIELD, c) for c in ("1", "0", "a", "b")]
    difference = found.characteristic_polynomial - FIELD.polynomial(given_coefficients)
    assert all(vanishes_under(c, relation) for c in difference.to_list())
    assert not difference.is_zero


def test_roots_that_do_not_meet_are_left_as_they_are() -> None:
    found = under(["b", "c"], "a - b")
    assert [(f.degree, f.multiplicity) for f in found.factors] == [(2, 1)]


def test_factors_that_meet_in_one_root_are_split() -> None:
    """a is a root of x^2 + b x + c where a^2 + a b + c = 0; the other root is -a - b."""
    relation = element(FIELD, "a^2 + a*b + c")
    rows = [["a", "0", "0"], ["0", "0", "1"], ["1", "-c", "-b"]]
    found = spectrum_under_relation(FIELD, spectrum(FIELD, rows), held("a^2 + a*b + c"))
    assert sorted((f.degree, f.multiplicity) for f in found.factors) == [(1, 1), (1, 2)]
    double = next(f for f in found.factors if f.multiplicity == 2)
    assert vanishes_under(double.roots.centre - element(FIELD, "a"), relation)


@pytest.mark.parametrize(
    ("text", "relation", "vanishes"),
    [
        ("0", None, True),
        ("a", None, False),
        ("a^2 - b^2", "a - b", True),
        ("(a - b)/c", "a - b", True),
        ("a + b", "a - b", False),
        ("c/(a + b)", "a - b", False),
    ],
)
def test_zero_under_a_relation_is_a_multiple_of_it(
    text: str, relation: str | None, *, vanishes: bool
) -> None:
    held = None if relation is None else element(FIELD, relation)
    assert vanishes_under(element(FIELD, text), held) == vanishes
