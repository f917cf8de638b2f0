"""The base field is Q with independent square roots; numbers go in and come out unchanged."""

from __future__ import annotations

import pickle
from fractions import Fraction

import pytest
from flint import arb, ctx, fmpq
from hypothesis import given, settings
from hypothesis import strategies as st

import closedform
from closedform.algebra.field import MOST_ROOTS, BaseField, TooManyRootsError, base_field
from closedform.algebra.surds import SurdSum
from closedform.errors import InputError

FIELDS = [BaseField(), BaseField((2,)), BaseField((2, 3)), BaseField((6, 10)), BaseField((2, 3, 5))]
BASES = {
    (): (1,),
    (2,): (1, 2),
    (2, 3): (1, 2, 3, 6),
    (6, 10): (1, 6, 10, 15),
    (2, 3, 5): (1, 2, 3, 5, 6, 10, 15, 30),
}


def root(d: int, c: Fraction | int = 1) -> SurdSum:
    return SurdSum.of({d: Fraction(c)})


@st.composite
def numbers_in(draw: st.DrawFn, field: BaseField) -> SurdSum:
    basis = st.sampled_from(BASES[field.radicands])
    coefficients = st.fractions(-9, 9, max_denominator=12)
    return SurdSum.of(draw(st.dictionaries(basis, coefficients, max_size=4)))


@st.composite
def pairs(draw: st.DrawFn) -> tuple[BaseField, SurdSum, SurdSum]:
    field = draw(st.sampled_from(FIELDS))
    return field, draw(numbers_in(field)), draw(numbers_in(field))


@pytest.mark.parametrize(
    ("radicands", "expected"),
    [
        ((), ()),
        ((1,), ()),
        ((2, 3, 6), (2, 3)),
        ((6, 2, 3), (2, 3)),
        ((6, 3), (3, 6)),
        ((6, 10, 15), (6, 10)),
        ((2, 6, 10, 15), (2, 6, 10)),
        ((30, 2, 15), (2, 15)),
        ((7, 7), (7,)),
        ((2, 3, 5, 30), (2, 3, 5)),
    ],
)
def test_only_independent_roots_are_adjoined(
    radicands: tuple[int, ...], expected: tuple[int, ...]
) -> None:
    field = base_field([root(d) for d in radicands])
    assert field.radicands == expected
    assert field.domain.zero == field.scalar(SurdSum(()))


def test_a_number_of_several_roots_brings_them_all() -> None:
    number = SurdSum.of({1: Fraction(1, 2), 2: Fraction(3), 6: Fraction(-1)})
    field = base_field([number])
    assert field.radicands == (2, 6)
    assert field.surds(field.scalar(number)) == number
    three = root(3)  # sqrt(3) = sqrt(2) sqrt(6)/2 is in the field, though nobody wrote it
    assert field.surds(field.scalar(three)) == three


def test_products_of_large_radicands_are_not_factored() -> None:
    p, q, r = 10**23 + 117, 10**24 + 7, 10**25 + 13
    field = base_field([root(p * q), root(p * r)])
    x = SurdSum.of({p * q: Fraction(2), p * r: Fraction(-1, 3), q * r: Fraction(5), 1: Fraction(1)})
    assert field.surds(field.scalar(x)) == x
    assert field.surds(field.scalar(x) * field.scalar(x)) == x * x


def test_more_independent_roots_than_are_computed_with_are_refused() -> None:
    primes = [2, 3, 5, 7, 11, 13, 17, 19]
    assert base_field([root(d) for d in (*primes[:MOST_ROOTS], 6, 10)]).radicands == tuple(
        primes[:MOST_ROOTS]
    )
    with pytest.raises(TooManyRootsError, match=r"sqrt\(2\), sqrt\(3\)") as caught:
        closedform.respond(
            closedform.system(
                [[" + ".join(f"sqrt({d})" for d in primes)]], initial=[1], states=["x"]
            )
        )
    assert isinstance(caught.value, InputError)
    again = pickle.loads(pickle.dumps(caught.value))  # noqa: S301
    assert again.limit == MOST_ROOTS
    assert again.radicands == tuple(primes[: MOST_ROOTS + 1])
    assert str(again) == str(caught.value)


def test_a_number_outside_the_field_is_refused() -> None:
    with pytest.raises(KeyError):
        BaseField((2,)).scalar(root(3))


@given(pairs())
def test_numbers_make_the_round_trip(case: tuple[BaseField, SurdSum, SurdSum]) -> None:
    field, x, _ = case
    assert field.surds(field.scalar(x)) == x


@given(pairs())
def test_the_field_computes_as_surd_sums_do(case: tuple[BaseField, SurdSum, SurdSum]) -> None:
    field, x, y = case
    a, b = field.scalar(x), field.scalar(y)
    assert field.surds(a + b) == x + y
    assert field.surds(a - b) == x - y
    assert field.surds(a * b) == x * y
    if not y.is_zero:
        assert field.surds(a / b) == x / y
    assert bool(a) == (not x.is_zero)


@given(pairs(), st.integers(53, 400))
def test_an_enclosure_holds_the_number_and_is_narrow(
    case: tuple[BaseField, SurdSum, SurdSum], bits: int
) -> None:
    field, x, _ = case
    with ctx.workprec(bits):
        ball = field.enclose(field.scalar(x))
    with ctx.workprec(1000):
        finer = sum((arb(fmpq(*c.as_integer_ratio())) * arb(d).sqrt() for d, c in x.terms), arb(0))
        assert ball.overlaps(finer)
        assert ball.rad() < arb(2) ** (12 - bits)


@pytest.mark.parametrize(
    ("number", "sign"),
    [
        (SurdSum(()), 0),
        (SurdSum.of({1: Fraction(-1, 10**30)}), -1),
        (SurdSum.of({1: Fraction(7), 2: Fraction(-5)}), -1),  # 49 < 50
        (SurdSum.of({1: Fraction(17), 2: Fraction(-12)}), 1),  # 289 > 288
        (SurdSum.of({2: Fraction(1), 3: Fraction(1), 6: Fraction(-1)}), 1),
    ],
)
def test_the_sign_is_decided_however_small_the_number(number: SurdSum, sign: int) -> None:
    field = BaseField((2, 3))
    assert field.sign(field.scalar(number)) == sign
    assert field.sign(-field.scalar(number)) == -sign


@pytest.mark.parametrize("steps", [1, 2, 51, 200, 401])
def test_the_sign_of_a_convergent_less_its_root_alternates(steps: int) -> None:
    """p/q - sqrt(2) is about 1/q^2: far below what the first precision can tell."""
    p, q = 1, 1
    for _ in range(steps):
        p, q = p + 2 * q, p + q
    field = BaseField((2,))
    number = SurdSum.of({1: Fraction(p), 2: Fraction(-q)})
    assert field.sign(field.scalar(number)) == (1 if p * p > 2 * q * q else -1)


@given(pairs())
@settings(max_examples=25)
def test_signs_multiply(case: tuple[BaseField, SurdSum, SurdSum]) -> None:
    field, x, y = case
    a, b = field.scalar(x), field.scalar(y)
    assert field.sign(a * b) == field.sign(a) * field.sign(b)
    assert field.sign(a - b) == -field.sign(b - a)


def test_polynomials_lose_leading_zeros() -> None:
    field = BaseField((2,))
    zero, one = field.domain.zero, field.domain.one
    assert field.polynomial([zero, zero, one]).degree() == 0
    assert field.polynomial([zero]).is_zero


@pytest.mark.parametrize("field", FIELDS, ids=str)
def test_matrices_have_the_shapes_they_are_asked_for(field: BaseField) -> None:
    one = field.domain.one
    assert field.matrix([[one, one, one]]).shape == (1, 3)
    assert field.identity(3) * field.zeros(3, 2) == field.zeros(3, 2)
    assert field.identity(2) == field.matrix([[one, one - one], [one - one, one]])
