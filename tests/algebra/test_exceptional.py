"""The exceptional set: denominators and discriminants, each irreducible and once."""

from __future__ import annotations

import pickle
from functools import reduce
from itertools import combinations
from operator import mul

import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from closedform.algebra import exceptional
from closedform.algebra.branches import case_tree
from closedform.algebra.domain import ParameterDomain
from closedform.algebra.exceptional import (
    MOST_IN_DISCRIMINANT,
    RootsUnknownError,
    discriminant_of,
    exceptional_elements,
    roots_unknown,
)
from closedform.algebra.exponential import exponential_by_resolvent
from closedform.algebra.field import Polynomial, Scalar
from closedform.algebra.parameter_field import ParameterField
from closedform.algebra.parametric_spectrum import parametric_spectrum
from closedform.errors import ClosedformError, InputError
from tests.rational_elements import element, field_of

FIELD = field_of("a b c d e")
ROOTS = ("a", "b", "-a", "a + b", "0", "1", "a*b", "c/2", "1/a")


def polynomial(*coefficients: str) -> Polynomial:
    return FIELD.polynomial([element(FIELD, c) for c in coefficients])


def exceptions(field: ParameterField, rows: list[list[str]]) -> list[tuple[Scalar, ...]]:
    matrix = field.matrix([[element(field, e) for e in row] for row in rows])
    spectrum = parametric_spectrum(field, matrix)
    exponential = exponential_by_resolvent(field, matrix, spectrum)
    structures = [None] * len(spectrum.factors)
    everywhere = ParameterDomain(field, ())
    return list(exceptional_elements(field, exponential, structures, everywhere))


@given(st.lists(st.sampled_from(ROOTS), min_size=2, max_size=3))
@settings(max_examples=30)
def test_a_discriminant_is_the_product_of_squared_differences_up_to_a_square(
    texts: list[str],
) -> None:
    roots = [element(FIELD, t) for t in texts]
    factors = [FIELD.polynomial([FIELD.domain.one, -r]) for r in roots]
    found = discriminant_of(FIELD, reduce(mul, factors))
    expected = reduce(mul, ((x - y) ** 2 for x, y in combinations(roots, 2)))
    if not expected:
        assert not found
        return
    ratio = FIELD.factored(found / expected)
    assert ratio.content > 0
    assert all(e % 2 == 0 for _, e in ratio.factors)


@pytest.mark.parametrize(
    ("coefficients", "expected"),
    [
        (("1", "b", "c"), "b^2 - 4*c"),
        (("1", "0", "a", "b"), "-4*a^3 - 27*b^2"),
        (("1", "b", "c/a"), "a*(a*b^2 - 4*c)"),
    ],
)
def test_discriminants_known_by_heart(coefficients: tuple[str, ...], expected: str) -> None:
    assert discriminant_of(FIELD, polynomial(*coefficients)) == element(FIELD, expected)


def test_a_discriminant_of_high_degree_in_many_parameters_is_refused() -> None:
    few = polynomial("1", "a", "b", "c", "d")
    assert len(few.to_list()) - 1 == MOST_IN_DISCRIMINANT
    assert discriminant_of(FIELD, few)
    with pytest.raises(RootsUnknownError) as caught:
        discriminant_of(FIELD, polynomial("1", "a", "b", "c", "d", "e"))
    assert (caught.value.degree, caught.value.parameters) == (5, ("a", "b", "c", "d", "e"))
    assert discriminant_of(FIELD, polynomial("1", "a + b", "c + d", "e"))


def test_rates_that_may_meet_are_listed_once_each() -> None:
    field = field_of("a b c")
    found = exceptions(field, [["-a", "0", "0"], ["a", "-b", "0"], ["0", "b", "-c"]])
    differences = [element(field, t) for t in ("a - b", "a - c", "b - c")]
    assert all(len(group) == 1 for group in found)
    assert sorted(str(g) for (g,) in found) == sorted(map(str, differences))


def test_rates_that_only_one_state_has_do_not_meet() -> None:
    assert exceptions(field_of("a b"), [["-a", "0"], ["0", "-b"]]) == []


def test_a_cubic_with_named_roots_has_its_discriminant() -> None:
    field = field_of("a b")
    found = exceptions(field, [["0", "1", "0"], ["0", "0", "1"], ["-b", "-a", "0"]])
    assert found == [(element(field, "4*a^3 + 27*b^2"),)]


def test_an_even_quartic_divides_by_its_frequencies_and_their_distance() -> None:
    field = field_of("b c")
    rows = [
        ["0", "1", "0", "0"],
        ["0", "0", "1", "0"],
        ["0", "0", "0", "1"],
        ["-c", "0", "-b", "0"],
    ]
    found = set(exceptions(field, rows))
    assert found == {(element(field, "c"),), (element(field, "b^2 - 4*c"),)}


def test_exceptions_are_irreducible_polynomials() -> None:
    field = field_of("m c k")
    for (e,) in exceptions(field, [["0", "1"], ["-k/m", "-c/m"]]):
        assert e.denom == 1
        assert [k for _, k in field.factored(e).factors] == [1]


# --- the error -----------------------------------------------------------------------------

UNKNOWN = RootsUnknownError(5, ("a", "b"))


def test_the_error_says_what_is_not_known_and_what_to_do() -> None:
    text = str(UNKNOWN)
    assert "irreducible factor of degree 5" in text
    assert "the parameters a, b decide how many roots are real" in text
    assert text.endswith("give some of these parameters as numbers")


def test_the_error_is_one_about_the_input() -> None:
    assert isinstance(UNKNOWN, InputError)
    assert isinstance(UNKNOWN, ClosedformError)


def test_the_error_survives_pickling() -> None:
    again = pickle.loads(pickle.dumps(UNKNOWN))  # noqa: S301 - made here
    assert type(again) is RootsUnknownError
    assert (again.degree, again.parameters) == (5, ("a", "b"))
    assert str(again) == str(UNKNOWN)


def test_the_error_about_a_factor_names_its_parameters_in_their_order() -> None:
    error = roots_unknown(FIELD, polynomial("1", "0", "c", "0", "a", "b"))
    assert (error.degree, error.parameters) == (5, ("a", "b", "c"))


def test_no_error_of_the_module_goes_untested() -> None:
    found = {n for n in vars(exceptional) if n.endswith("Error")} & set(exceptional.__all__)
    assert found == {"RootsUnknownError"}


def test_a_factor_whose_roots_are_not_known_is_refused_before_it_is_solved() -> None:
    field = field_of("a b")
    rows = [
        ["0", "1", "0", "0"],
        ["0", "0", "1", "0"],
        ["0", "0", "0", "1"],
        ["-a", "-b", "0", "0"],
    ]
    matrix = field.matrix([[element(field, e) for e in row] for row in rows])
    with pytest.raises(RootsUnknownError) as caught:
        case_tree(field, matrix, ParameterDomain(field, ()))
    assert (caught.value.degree, caught.value.parameters) == (4, ("a", "b"))
