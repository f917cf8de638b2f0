"""Exact factors are written the short way and mean what they say."""

from __future__ import annotations

from fractions import Fraction

import pytest
from flint import arb, ctx
from hypothesis import given
from hypothesis import strategies as st

from closedform.algebra.enclosure import ball_of
from closedform.algebra.surds import SurdSum
from closedform.errors import Place
from closedform.notation import exact_value, read_formula
from closedform.notation.expression import (
    Name,
    Negation,
    Number,
    Quotient,
    Sum,
    operations,
)
from closedform.notation.plain import plain
from closedform.notation.terms import (
    content_of,
    negated,
    opened,
    radical_formula,
    square_root_of_surd,
    sum_of,
    surd_formula,
    weighted,
)
from tests.exact import value_of

SURDS = st.dictionaries(
    st.sampled_from([1, 2, 3, 5, 6]), st.fractions(-9, 9, max_denominator=9), max_size=3
).map(SurdSum.of)
X, Y = Name("x"), Name("y")
HERE = Place()


def surds(**terms: int | Fraction) -> SurdSum:
    """surds(r1=2, r3=-1) is 2 - sqrt(3)."""
    return SurdSum.of({int(k[1:]): Fraction(c) for k, c in terms.items()})


@pytest.mark.parametrize(
    ("value", "text"),
    [
        (surds(), "0"),
        (surds(r1=-3), "-3"),
        (surds(r1=Fraction(-3, 4)), "-3/4"),
        (surds(r2=1), "sqrt(2)"),
        (surds(r2=Fraction(1, 2)), "sqrt(2)/2"),
        (surds(r2=Fraction(3, 2)), "3/sqrt(2)"),
        (surds(r2=Fraction(1, 3)), "sqrt(2)/3"),
        (surds(r3=Fraction(-2, 3)), "-2/sqrt(3)"),
        (surds(r5=Fraction(2, 5)), "2/sqrt(5)"),
        (surds(r1=1, r2=1), "1 + sqrt(2)"),
        (surds(r1=1, r2=-1), "1 - sqrt(2)"),
        (surds(r1=-1, r2=1), "sqrt(2) - 1"),
        (surds(r1=-1, r2=-1), "-1 - sqrt(2)"),
        (surds(r1=Fraction(1, 2), r5=Fraction(1, 2)), "(1 + sqrt(5))/2"),
        (surds(r1=2, r5=4), "2 + 4*sqrt(5)"),
        (surds(r1=Fraction(3, 2), r5=Fraction(-9, 4)), "(6 - 9*sqrt(5))/4"),
    ],
    ids=str,
)
def test_numbers_are_written_the_short_way(value: SurdSum, text: str) -> None:
    found = plain(surd_formula(value))
    assert exact_value(read_formula(found, names=frozenset()), HERE) == value
    assert found == text


@given(SURDS)
def test_a_formula_of_a_number_is_that_number(value: SurdSum) -> None:
    formula = surd_formula(value)
    assert exact_value(formula, HERE) == value
    assert exact_value(read_formula(plain(formula), names=frozenset()), HERE) == value


@given(SURDS.filter(lambda v: not v.is_zero))
def test_a_weighted_term_means_value_times_factors_over_divisors(value: SurdSum) -> None:
    formula = weighted(value, [X], [Y])
    with ctx.workprec(200):
        names = {"x": arb(3).exp(), "y": arb(5).exp()}
        expected = ball_of(value) * names["x"] / names["y"]
        assert value_of(formula, names).overlaps(expected)


@given(SURDS)
def test_the_square_root_of_a_square_is_found_or_owned_not_to_be(value: SurdSum) -> None:
    if value.is_zero:
        return
    square = value * value
    root = square_root_of_surd(square)
    if root is not None:
        assert root * root == square
    with ctx.workprec(200):
        assert value_of(radical_formula(square), {}).overlaps(abs(ball_of(value)))


@pytest.mark.parametrize(
    ("square", "text"),
    [
        (surds(r1=4), "2"),
        (surds(r1=8), "2*sqrt(2)"),
        (surds(r1=3, r2=2), "1 + sqrt(2)"),
        (surds(r1=3, r2=-2), "sqrt(2) - 1"),
        (surds(r1=5, r6=2), "sqrt(2) + sqrt(3)"),
        (surds(r1=2, r2=1), "sqrt(2 + sqrt(2))"),
        (surds(r1=2, r3=1), "sqrt(3/2) + sqrt(1/2)"),
        (surds(r2=1), "sqrt(sqrt(2))"),
    ],
    ids=str,
)
def test_nested_roots_are_undone_where_there_is_a_short_form(square: SurdSum, text: str) -> None:
    found = radical_formula(square)
    with ctx.workprec(200):
        assert value_of(found, {}).overlaps(value_of(read_formula(text, names=frozenset()), {}))
        assert value_of(found, {}) > 0
    if square == surds(r1=2, r3=1):
        assert operations(found) <= operations(read_formula(text, names=frozenset()))
    else:
        assert plain(found) == text


@pytest.mark.parametrize(
    "square",
    [
        surds(r1=(10**30 + 57) * (10**31 + 33)),
        surds(r1=Fraction((10**30 + 57) * (10**31 + 33) * 44, 9 * (10**40 + 121))),
        surds(r1=2 * 10**60 + 2, r2=10**60),
    ],
    ids=["integer", "fraction", "nested"],
)
def test_roots_of_numbers_too_large_to_factor_stay_roots(square: SurdSum) -> None:
    assert square_root_of_surd(square) is None
    with ctx.workprec(500):
        assert (value_of(radical_formula(square), {}) ** 2).overlaps(ball_of(square))


def test_sums_are_flat_and_start_with_a_positive_term() -> None:
    minus_x = Negation(X)
    assert sum_of([]) == Number(Fraction(0))
    assert sum_of([X]) == X
    assert plain(sum_of([minus_x, Y])) == "y - x"
    assert plain(sum_of([Sum((X, Y)), minus_x])) == "x + y - x"
    assert sum_of([minus_x, Negation(Y)]) == Negation(Sum((X, Y)))
    assert plain(opened(sum_of([minus_x, Negation(Y)]))) == "-x - y"
    assert opened(minus_x) == minus_x


def test_a_sign_taken_twice_is_none() -> None:
    assert negated(negated(X)) == X
    assert negated(Quotient(X, Y)) == Negation(Quotient(X, Y))


@given(st.lists(SURDS.filter(lambda v: not v.is_zero), min_size=1, max_size=4))
def test_contents_divide_without_new_roots(values: list[SurdSum]) -> None:
    fronts = content_of(values)
    assert SurdSum.rational(1) in fronts
    assert len(set(fronts)) == len(fronts)
    whole = [v / fronts[1 if len(fronts) > 1 else 0] for v in values]
    if len(fronts) > 1 and fronts[1].as_fraction().numerator == 1:
        assert all(c.denominator == 1 for v in whole for _, c in v.terms)


def test_a_common_root_may_stand_in_front() -> None:
    values = [surds(r2=2), surds(r2=-4)]
    assert surds(r2=2) in content_of(values)
    assert all(not f.is_zero for f in content_of(values))
    assert surds(r2=2) not in content_of([surds(r2=2), surds(r1=4)])
