"""Elements of Q(parameters) are taken apart, put together and evaluated without loss."""

from __future__ import annotations

from fractions import Fraction

import pytest
from flint import arb, ctx, fmpq
from hypothesis import given
from hypothesis import strategies as st

from closedform.algebra.field import Scalar
from closedform.algebra.parameter_field import Factored, ParameterField
from closedform.algebra.sample import value_at
from closedform.algebra.surds import SurdSum
from tests.rational_elements import element, elements, field_of, numbers, polynomials

FIELD = field_of("a b c")
ELEMENTS = elements(FIELD)
POLYNOMIALS = polynomials(FIELD)


def of(text: str) -> Scalar:
    return element(FIELD, text)


@given(ELEMENTS.filter(bool))
def test_the_factors_of_an_element_multiply_back(e: Scalar) -> None:
    parts = FIELD.factored(e)
    assert FIELD.product_of(parts) == e
    assert all(exponent for _, exponent in parts.factors)
    assert all(f.LC > 0 and f.content() == 1 for f, _ in parts.factors)


@given(ELEMENTS.filter(bool), ELEMENTS.filter(bool))
def test_the_factors_of_a_product_are_those_of_its_parts(e: Scalar, f: Scalar) -> None:
    both = FIELD.factored(e * f)
    assert both.content == FIELD.factored(e).content * FIELD.factored(f).content
    exponents: dict[object, int] = {}
    for part in (e, f):
        for polynomial, exponent in FIELD.factored(part).factors:
            exponents[polynomial] = exponents.get(polynomial, 0) + exponent
    assert dict(both.factors) == {p: k for p, k in exponents.items() if k}


def test_factors_come_simple_ones_first_in_the_order_of_the_parameters() -> None:
    parts = FIELD.factored(of("6*(a^2 + b)*c*(a - b)*b^2/(4*a)"))
    assert parts.content == Fraction(3, 2)
    assert [(str(f), e) for f, e in parts.factors] == [
        ("a", -1),
        ("b", 2),
        ("c", 1),
        ("a - b", 1),
        ("a**2 + b", 1),
    ]


def test_a_number_has_no_factors() -> None:
    assert FIELD.factored(of("-3/7")) == Factored(Fraction(-3, 7), ())


@given(numbers)
def test_a_number_is_put_in_and_read_back(value: Fraction) -> None:
    e = FIELD.scalar(value)
    assert FIELD.constant(e) == value
    assert FIELD.surds(e) == SurdSum.rational(value)
    assert FIELD.sign(e) == (value > 0) - (value < 0)
    assert FIELD.names_in(e) == frozenset()
    assert FIELD.scalar(SurdSum.rational(value)) == e


def test_what_is_no_number_is_none() -> None:
    assert FIELD.constant(of("a/b")) is None
    assert FIELD.constant(of("a/a")) == 1
    with pytest.raises(ValueError, match="a is no number"):
        FIELD.surds(of("a"))
    with pytest.raises(ValueError, match="is no number"):
        FIELD.sign(of("b - a"))


def test_a_square_root_is_no_element() -> None:
    with pytest.raises(KeyError):
        FIELD.scalar(SurdSum(((2, Fraction(1)),)))


def test_a_name_that_is_no_parameter_has_no_symbol() -> None:
    with pytest.raises(KeyError):
        FIELD.symbol("d")


@pytest.mark.parametrize(
    ("text", "names"),
    [("a/b", "ab"), ("a*b/b", "a"), ("(a + b)^2 - a^2 - 2*a*b", "b"), ("c - c", ""), ("1/c", "c")],
)
def test_names_are_those_that_an_element_hangs_on(text: str, names: str) -> None:
    assert FIELD.names_in(of(text)) == frozenset(names)


@given(ELEMENTS, POLYNOMIALS, st.fixed_dictionaries(dict.fromkeys("abc", numbers)))
def test_substitution_and_evaluation_commute(
    e: Scalar, put: Scalar, at: dict[str, Fraction]
) -> None:
    expected = value_at(e, {**at, "a": value_at(put, at)})
    try:
        substituted = FIELD.substituted(e, {"a": put})
    except ZeroDivisionError:
        assert expected is None
        return
    assert expected in (None, value_at(substituted, at))


def test_substitution_is_of_all_at_once() -> None:
    swapped = FIELD.substituted(of("a/(b + c)"), {"a": of("b"), "b": of("a")})
    assert swapped == of("b/(a + c)")
    assert FIELD.substituted(of("b"), {"a": of("c")}) == of("b")


def test_a_denominator_that_vanishes_by_a_substitution_is_an_error() -> None:
    with pytest.raises(ZeroDivisionError):
        FIELD.substituted(of("1/(a - b)"), {"a": of("b")})


@given(ELEMENTS, ELEMENTS)
def test_derivatives_obey_the_rule_for_products(e: Scalar, f: Scalar) -> None:
    for name in FIELD.parameters:
        whole = FIELD.derivative(e * f, name)
        assert whole == FIELD.derivative(e, name) * f + e * FIELD.derivative(f, name)


@given(ELEMENTS, st.fixed_dictionaries(dict.fromkeys("abc", numbers)))
def test_balls_and_exact_values_agree(e: Scalar, at: dict[str, Fraction]) -> None:
    ctx.prec = 200
    exact = {name: SurdSum.rational(value) for name, value in at.items()}
    balls = {name: arb(fmpq(v.numerator, v.denominator)) for name, v in at.items()}
    try:
        value = FIELD.exact_at(e, exact).as_fraction()
    except ZeroDivisionError:
        assert not FIELD.enclose_at(e, balls).is_finite()
        return
    ball = FIELD.enclose_at(e, balls)
    if ball.is_finite():
        assert ball.overlaps(arb(fmpq(value.numerator, value.denominator)))
    assert value == value_at(e, at)


def test_a_value_with_square_roots_is_exact() -> None:
    root = SurdSum(((2, Fraction(1)),))
    at = {"a": root, "b": SurdSum.rational(Fraction(3)), "c": root}
    assert FIELD.exact_at(of("a*c + b"), at) == SurdSum.rational(Fraction(5))
    with pytest.raises(ZeroDivisionError):
        FIELD.exact_at(of("1/(a^2 - 2)"), at)


@given(ELEMENTS, ELEMENTS)
def test_a_wider_field_computes_the_same(e: Scalar, f: Scalar) -> None:
    wider = ParameterField(parameters=("w", "c", "b", "a"))
    assert FIELD.into(wider, e * f) == FIELD.into(wider, e) * FIELD.into(wider, f)
    assert wider.names_in(FIELD.into(wider, e)) == FIELD.names_in(e)


@given(ELEMENTS)
def test_coefficients_are_listed_above_and_below(e: Scalar) -> None:
    parts = FIELD.rational_parts(e)
    assert (parts == []) == (not e)
    assert all(radicand == 1 and below > 0 for _, below, radicand in parts)
