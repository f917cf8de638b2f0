"""Whether Re or Im of r(lambda)/p'(lambda) vanishes, on numbers worked out by hand."""

from __future__ import annotations

from fractions import Fraction
from typing import Any

import pytest
from flint import acb, ctx
from hypothesis import given, settings
from hypothesis import strategies as st

from closedform.algebra.enclosure import value_at
from closedform.algebra.field import BaseField
from closedform.algebra.parts import imaginary_part_is, vanishing_parts
from closedform.algebra.roots import enclosed_roots
from closedform.algebra.surds import SurdSum
from tests.strategies import IRREDUCIBLE, irreducibles

Q, Q2 = BaseField(), BaseField((2,))


def over(field: BaseField, *coefficients: Any) -> Any:
    return field.polynomial([field.scalar(c) for c in coefficients])


@pytest.mark.parametrize(
    ("p", "which", "numerator", "expected"),
    [
        # s^4 + 1 at (1 + i)/sqrt(2): p' = 4 s^3; s^3/p' = 1/4; s/p' = s^-2/4 = -i/4.
        ((1, 0, 0, 0, 1), 4, (1, 0, 0, 0), (False, True)),
        ((1, 0, 0, 0, 1), 4, (1, 0), (True, False)),
        ((1, 0, 0, 0, 1), 4, (1,), (False, False)),
        ((1, 0, 0, 0, 1), 4, (0,), (True, True)),
        # s^3 - 2 at its pair: p' = 3 s^2, so s^2/p' = 1/3 and 1/p' = s/6.
        ((1, 0, 0, -2), 2, (1, 0, 0), (False, True)),
        ((1, 0, 0, -2), 2, (1,), (False, False)),
        # a root that is real itself
        ((1, 0, 0, -2), 3, (1,), (False, True)),
        # s^4 + 4 s^2 + 2: imaginary roots, p' odd, so even numerators are imaginary.
        ((1, 0, 4, 0, 2), 4, (1,), (True, False)),
        ((1, 0, 4, 0, 2), 4, (1, 0), (False, True)),
        ((1, 0, 4, 0, 2), 4, (1, 1), (False, False)),
    ],
)
def test_parts_vanish_as_worked_out_by_hand(
    p: tuple[int, ...], which: int, numerator: tuple[int, ...], expected: tuple[bool, bool]
) -> None:
    assert vanishing_parts(Q, over(Q, *p), which, over(Q, *numerator)) == expected


def test_parts_over_surds() -> None:
    """s^4 + sqrt(2): s^3/p' = 1/4 again."""
    p = over(Q2, 1, 0, 0, 0, SurdSum.of({2: Fraction(1)}))
    assert vanishing_parts(Q2, p, 4, over(Q2, 1, 0, 0, 0)) == (False, True)
    assert vanishing_parts(Q2, p, 4, over(Q2, 1, 0)) == (True, False)


@pytest.mark.parametrize("digits", [45, 200, 2000])
@pytest.mark.parametrize("p", [(1, 0, -1, -1), (1, 0, 0, -1, -1)])
def test_a_part_that_is_tiny_is_not_zero(p: tuple[int, ...], digits: int) -> None:
    """p'/p' = 1, and a little lambda more: real only where lambda is."""
    polynomial = over(Q, *p)
    numerator = polynomial.diff() + over(Q, Fraction(1, 10**digits), 0)
    for which, root in enumerate(enclosed_roots(Q, polynomial), start=1):
        expected = (False, root.imag == 0)
        assert vanishing_parts(Q, polynomial, which, numerator) == expected


# The roots ± sqrt(2) ± h i have a polynomial that is even; at h = 1 it is s^4 - 2 s^2 + 9.
@pytest.mark.parametrize("h", [Fraction(1), Fraction("1.234565"), Fraction(1, 10**30)])
def test_rational_imaginary_parts_are_told_from_near_ones(h: Fraction) -> None:
    p = over(Q, 1, 0, 2 * h * h - 4, 0, (2 + h * h) ** 2)
    times_root = (over(Q, 1, 0) * p.diff()).rem(p)
    with ctx.workprec(300):
        signs = [1 if z.imag > 0 else -1 for z in enclosed_roots(Q, p)]
    assert sorted(signs) == [-1, -1, 1, 1]
    for which, sign in enumerate(signs, start=1):
        assert imaginary_part_is(Q, p, which, times_root, sign * h)
        assert not imaginary_part_is(Q, p, which, times_root, -sign * h)
        assert not imaginary_part_is(Q, p, which, times_root, sign * h + Fraction(1, 10**200))
        assert not imaginary_part_is(Q, p, which, times_root, Fraction(0))


def test_rational_imaginary_parts_over_surds() -> None:
    """s^2 + 2 sqrt(2) s + 3 has the roots -sqrt(2) ± i; at them z = s p'/p'."""
    p = over(Q2, 1, SurdSum.of({2: Fraction(2)}), 3)
    times_root = (over(Q2, 1, 0) * p.diff()).rem(p)
    assert imaginary_part_is(Q2, p, 2, times_root, Fraction(1))
    assert not imaginary_part_is(Q2, p, 1, times_root, Fraction(1))
    assert not imaginary_part_is(Q2, p, 2, times_root, Fraction(2))


@given(st.integers(3, 5).flatmap(irreducibles), st.data())
@settings(max_examples=25)
def test_a_part_said_to_vanish_is_within_every_ball(
    p: tuple[Fraction, ...], data: st.DataObject
) -> None:
    d = len(p) - 1
    numbers = data.draw(st.lists(st.integers(-2, 2), min_size=1, max_size=d))
    which = data.draw(st.integers(1, d))
    polynomial, numerator = over(Q, *p), over(Q, *numbers)
    real, imaginary = vanishing_parts(Q, polynomial, which, numerator)
    with ctx.workprec(600):
        root = enclosed_roots(Q, polynomial)[which - 1]

        def at(f: Any) -> acb:
            return value_at([Q.enclose(c) for c in f.to_list()], root)

        z = at(numerator) / at(polynomial.diff())
        assert z.real.contains(0) == real
        assert z.imag.contains(0) == imaginary


@pytest.mark.parametrize("p", IRREDUCIBLE[3])
def test_a_constant_multiple_of_the_slope_is_real(p: tuple[int, ...]) -> None:
    polynomial = over(Q, *p)
    for which in (1, 2, 3):
        assert vanishing_parts(Q, polynomial, which, polynomial.diff()) == (False, True)
