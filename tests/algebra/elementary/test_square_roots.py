"""Square roots of constants are principal, and equal ones are found equal."""

from __future__ import annotations

from collections.abc import Mapping
from fractions import Fraction

import pytest

from closedform.algebra.elementary import Element, ElementaryField, NotElementaryError


def positive(polynomial: Mapping[tuple[int, ...], Fraction]) -> int | None:
    """The sign of a polynomial in positive names, as far as its coefficients tell it."""
    signs = {1 if c > 0 else -1 for c in polynomial.values()}
    return signs.pop() if len(signs) == 1 else None


@pytest.fixture
def field() -> ElementaryField:
    return ElementaryField(("m", "k", "c"), positive)


def test_roots_of_numbers_are_drawn_out(field: ElementaryField) -> None:
    assert field.sqrt(12) == 2 * field.sqrt(3)
    assert field.sqrt(Fraction(1, 2)) == field.sqrt(2) / 2
    assert field.sqrt(6) == field.sqrt(2) * field.sqrt(3)
    assert field.sqrt(-4) == 2 * field.i
    assert field.sqrt(2) != field.sqrt(3)


def test_nested_roots_are_taken_with_the_right_sign(field: ElementaryField) -> None:
    assert field.sqrt(3 + 2 * field.sqrt(2)) == 1 + field.sqrt(2)
    assert field.sqrt(3 - 2 * field.sqrt(2)) == field.sqrt(2) - 1
    golden = field.sqrt((3 + field.sqrt(5)) / 2)
    assert golden == (1 + field.sqrt(5)) / 2
    assert golden * field.sqrt((3 - field.sqrt(5)) / 2) == 1


def test_roots_that_depend_on_nested_ones_are_found() -> None:
    field = ElementaryField()
    upper, lower = field.sqrt(2 + field.sqrt(2)), field.sqrt(2 - field.sqrt(2))
    assert upper * lower == field.sqrt(2)
    assert upper**2 * lower**2 == 2
    late = ElementaryField()
    nested = late.sqrt(5 + late.sqrt(24))
    assert nested == late.sqrt(2) + late.sqrt(3)


@pytest.mark.parametrize(("re", "im"), [(3, 4), (-3, 4), (-3, -4), (1, 2), (0, -1), (-1, 1)])
def test_complex_roots_are_principal(field: ElementaryField, re: int, im: int) -> None:
    z = re + im * field.i
    root = field.sqrt(z)
    assert root * root == z
    assert field.re(root).sign() == 1
    assert field.abs(z) ** 2 == re * re + im * im


def test_positive_names_come_out_of_roots(field: ElementaryField) -> None:
    m, k = field.name("m"), field.name("k")
    assert field.sqrt(4 * m * k) == 2 * field.sqrt(m) * field.sqrt(k)
    assert field.sqrt(k / m) == field.sqrt(k * m) / m
    assert field.sqrt(m * m) == m
    assert field.sqrt(m + k + 2 * field.sqrt(m * k)) == field.sqrt(m) + field.sqrt(k)


def test_a_discriminant_without_sign_has_one_root(field: ElementaryField) -> None:
    m, k, c = map(field.name, ("m", "k", "c"))
    root = field.sqrt(c * c - 4 * m * k)
    assert field.sqrt((c / (2 * m)) ** 2 - k / m) == root / (2 * m)
    assert root * root == c * c - 4 * m * k
    with pytest.raises(NotElementaryError, match="depend on each other"):
        field.sqrt(4 * m * k - c * c)


def test_what_takes_an_unknown_sign_is_refused(field: ElementaryField) -> None:
    free = field.name("q")
    with pytest.raises(NotElementaryError, match="sign"):
        field.sqrt(free * free)
    with pytest.raises(NotElementaryError, match="sign"):
        field.abs(free)


def test_roots_of_odd_degree_are_taken_where_they_are_exact(field: ElementaryField) -> None:
    m = field.name("m")
    assert field.root(Fraction(8, 27), 3) == Fraction(2, 3)
    assert field.root(m**3, 3) == m
    assert field.root(16, 4) == 2
    assert field.root(field.exp(6), 6) == field.e
    with pytest.raises(NotElementaryError, match="degree 3"):
        field.root(2, 3)


def test_inverses_undo_products(field: ElementaryField) -> None:
    x = (
        1
        + field.sqrt(2)
        + field.i * field.sqrt(3)
        + field.name("m") * field.sqrt(2 + field.sqrt(2))
    )
    assert x * (1 / x) == 1
    with pytest.raises(ZeroDivisionError):
        field.one / (field.sqrt(8) - 2 * field.sqrt(2))


def test_equal_constants_have_one_hash(field: ElementaryField) -> None:
    one: Element = field.sqrt(8) / 4
    assert hash(one) == hash(1 / field.sqrt(2))
    assert len({one, 1 / field.sqrt(2), field.sqrt(Fraction(1, 2))}) == 1


def test_elements_of_two_fields_do_not_go_together(field: ElementaryField) -> None:
    with pytest.raises(ValueError, match="two fields"):
        field.one + ElementaryField().one
