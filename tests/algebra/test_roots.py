"""Roots: how they are classified, and that their order hangs on no precision."""

from __future__ import annotations

import itertools
from fractions import Fraction
from typing import Any

import mpmath
import pytest
from flint import acb, arb, ctx
from hypothesis import given, settings
from hypothesis import strategies as st

from closedform.algebra.enclosure import ball_of
from closedform.algebra.field import BaseField
from closedform.algebra.roots import (
    arrangement,
    enclosed_roots,
    root_set,
    roots_by_real_part,
)
from closedform.algebra.surds import SurdSum
from tests.strategies import IRREDUCIBLE, irreducibles, shifted

Q, Q2 = BaseField(), BaseField((2,))
PRECISIONS = (53, 64, 128, 500, 1500)


def over(field: BaseField, *coefficients: Any) -> Any:
    return field.polynomial([field.scalar(c) for c in coefficients])


def root2(c: Fraction | int = 1, plus: Fraction | int = 0) -> SurdSum:
    return SurdSum.of({1: Fraction(plus), 2: Fraction(c)})


@pytest.mark.parametrize(
    ("field", "p", "form", "centre"),
    [
        (Q, (1, 3), "single", -3),
        (Q, (1, 2, 5), "quadratic", -1),
        (Q, (1, -1, -1), "quadratic", Fraction(1, 2)),
        (Q, (1, 0, 4, 0, 2), "even", 0),  # -2 ± sqrt(2) < 0: two undamped modes
        (Q, (1, 0, -10, 0, 1), "even", 0),  # 5 ± 2 sqrt(6) > 0
        (Q, (1, 0, -2, 0, -1), "even", 0),  # 1 ± sqrt(2), of both signs
        (Q, (1, 0, 0, 0, 1), "named", 0),  # squares ± i
        (Q, shifted((1, 0, 4, 0, 2), 3), "even", 3),
        (Q, (1, 0, 6, 0, 9, 0, 3), "even", 0),  # three real negative squares
        (Q, (1, 0, -6, 0, 9, 0, -3), "named", 0),  # three positive squares help nobody
        (Q, (1, 0, 0, 0, 0, 0, 2), "named", 0),  # complex squares
        (Q, (1, 0, -1, -1), "named", 0),
        (Q, (1, 0, 0, -1, -1), "named", 0),
        (Q2, (1, root2()), "single", root2(-1)),
        (Q2, (1, root2(2), 3), "quadratic", root2(-1)),
        (Q2, (1, 0, 4, 0, root2()), "even", 0),
        (Q2, (1, 0, -4, 0, root2()), "named", 0),  # two surds under another root
    ],
)
def test_roots_are_classified(
    field: BaseField, p: tuple[Any, ...], form: str, centre: SurdSum | Fraction | int
) -> None:
    found = root_set(field, over(field, *p))
    assert found.form == form
    assert found.centre == field.scalar(centre)
    if form in {"quadratic", "even"}:
        # p(s) = q((s - a)^2), multiplied out
        s_less_a = field.polynomial([field.domain.one, -found.centre])
        value = field.polynomial([field.domain.zero])
        for c in found.squares.to_list():
            value = value * s_less_a * s_less_a + c
        assert value == found.p


def test_only_a_quadratic_has_a_discriminant_and_only_even_ones_have_squares() -> None:
    assert root_set(Q, over(Q, 1, 2, 5)).discriminant == -4
    assert root_set(Q, over(Q, 1, -1, -1)).discriminant == Q.scalar(Fraction(5, 4))
    with pytest.raises(ValueError, match="'even'"):
        root_set(Q, over(Q, 1, 0, 4, 0, 2)).discriminant  # noqa: B018
    with pytest.raises(ValueError, match="'named'"):
        root_set(Q, over(Q, 1, 0, -1, -1)).square_places()


UNDAMPED = (1, 0, 15, 0, 62, 0, 76)  # three pairs with equal real parts


@pytest.mark.parametrize(
    ("field", "p"),
    [
        (Q, UNDAMPED),
        (Q, shifted(UNDAMPED, Fraction(-1, 3))),
        *[(Q, p) for polynomials in IRREDUCIBLE.values() for p in polynomials],
        (Q, shifted((1, 0, 4, 0, 2), Fraction(-1, 7))),
        (Q2, (1, 0, 4, 0, root2())),
        (Q2, (1, root2(1), 4, 1, 7)),
        (Q2, (1, 0, 0, root2(-1, -3))),
    ],
)
def test_the_order_is_the_same_at_every_precision(field: BaseField, p: tuple[Any, ...]) -> None:
    polynomial = over(field, *p)
    orders = []
    for bits in PRECISIONS:
        with ctx.workprec(bits):
            orders.append(enclosed_roots(field, polynomial))
    for coarse, fine in itertools.pairwise(orders):
        assert len(coarse) == len(fine) == len(p) - 1
        for k, z in enumerate(coarse):
            assert [z.overlaps(w) for w in fine] == [i == k for i in range(len(fine))]
    finest = orders[-1]
    with ctx.workprec(1500):
        for one, two in itertools.pairwise(finest):
            # Real parts grow, or agree; where they agree, imaginary parts grow.
            assert one.real < two.real or (one.real.overlaps(two.real) and one.imag < two.imag)


@given(st.integers(1, 5).flatmap(irreducibles), st.sampled_from((64, 200, 700)))
@settings(max_examples=50)
def test_roots_are_roots_and_as_narrow_as_asked(p: tuple[Fraction, ...], bits: int) -> None:
    polynomial = over(Q, *p)
    with ctx.workprec(bits):
        found = enclosed_roots(Q, polynomial)
    with ctx.workprec(3 * bits + 100):
        for z in found:
            value = acb(0)
            for c in p:
                value = value * z + arb(c.numerator) / c.denominator
            assert value.contains(0)
            assert max(z.real.rad(), z.imag.rad()) <= arb(2) ** (8 - bits) * (1 + abs(z))
        total = sum(found, acb(0))
        assert total.overlaps(acb(-arb(p[1].numerator) / p[1].denominator))


@given(st.integers(1, 5).flatmap(irreducibles))
@settings(max_examples=40)
def test_a_root_is_called_real_when_it_is(p: tuple[Fraction, ...]) -> None:
    """The count of real roots by Sturm's theorem, which isolates nothing."""
    found = enclosed_roots(Q, over(Q, *p))
    assert sum(z.imag == 0 for z in found) == real_roots_by_sturm(p)
    for z in found:
        if z.imag != 0:
            assert not z.imag.contains(0)
            assert any(w.overlaps(z.conjugate()) for w in found if w.imag != 0)


def real_roots_by_sturm(p: tuple[Fraction, ...]) -> int:
    sequence = [list(p), [c * (len(p) - 1 - k) for k, c in enumerate(p[:-1])]]
    while len(sequence[-1]) > 1:
        rest = remainder(sequence[-2], sequence[-1])
        if not rest:
            break
        sequence.append([-c for c in rest])
    at_plus = [f[0] for f in sequence]
    at_minus = [f[0] * (-1) ** (len(f) - 1) for f in sequence]
    return changes(at_minus) - changes(at_plus)


def remainder(f: list[Fraction], g: list[Fraction]) -> list[Fraction]:
    f = list(f)
    while len(f) >= len(g):
        ratio = f[0] / g[0]
        f = [a - ratio * b for a, b in zip(f, g + [Fraction(0)] * (len(f) - len(g)), strict=True)]
        f = f[1:]
    while f and not f[0]:
        f = f[1:]
    return f


def changes(values: list[Fraction]) -> int:
    signs = [v > 0 for v in values if v]
    return sum(a != b for a, b in itertools.pairwise(signs))


def test_close_roots_are_told_apart() -> None:
    """± sqrt(2)·10^-30 at a precision of 53 bits."""
    polynomial = over(Q, 1, 0, -2 * Fraction(1, 10**60))
    with ctx.workprec(53):
        low, high = enclosed_roots(Q, polynomial)
    assert low.real < 0 < high.real
    assert low.imag == high.imag == 0


def test_roots_closer_than_the_first_resolution_keep_their_order() -> None:
    """± sqrt(2)·10^-50 agree to more than 96 bits."""
    polynomial = over(Q, 1, 0, -2 * Fraction(1, 10**100))
    orders = []
    for bits in (53, 1000):
        with ctx.workprec(bits):
            orders.append([bool(z.real > 0) for z in enclosed_roots(Q, polynomial)])
    assert orders == [[False, True]] * 2


def test_roots_over_surds_are_those_of_the_norm() -> None:
    """s^3 - (3 + sqrt(2)) has one real root and a pair, as mpmath finds them."""
    found = enclosed_roots(Q2, over(Q2, 1, 0, 0, root2(-1, -3)))
    mp = mpmath.mp.clone()
    mp.dps = 40
    others = sorted(
        mp.polyroots([1, 0, 0, -3 - mp.sqrt(2)], extraprec=200, maxsteps=200),
        key=lambda z: (round(float(z.real), 9), float(z.imag)),
    )
    assert [z.imag == 0 for z in found] == [False, False, True]
    for ours, theirs in zip(found, others, strict=True):
        assert abs(complex(ours.mid()) - complex(theirs)) < 1e-14


def test_the_slowest_factor_comes_first_then_the_lowest_frequency() -> None:
    slow, fast = root_set(Q, over(Q, 1, 1)), root_set(Q, over(Q, 1, 5))
    turning = root_set(Q, over(Q, 1, 2, 5))
    quick = root_set(Q, over(Q, 1, 2, 17))
    growing = root_set(Q, over(Q, 1, -2))
    expected = [growing, slow, turning, quick, fast]
    assert sorted([fast, quick, turning, slow, growing], key=arrangement) == expected


def test_rates_far_below_one_are_told_apart_in_the_order_of_factors() -> None:
    """Rates of 1e-40 and 2e-40, and a pair with Re = -1/2 beside the real root -1/2."""
    tiny = [root_set(Q, over(Q, 1, Fraction(k, 10**40))) for k in (1, 2, 3)]
    assert sorted([tiny[2], tiny[0], tiny[1]], key=arrangement) == tiny
    pair, real = root_set(Q, over(Q, 1, 1, 2)), root_set(Q, over(Q, 2, 1).monic())
    assert sorted([pair, real], key=arrangement) == [real, pair]


def near_pairs(digits: int) -> tuple[Fraction | int, ...]:
    """(s^2 + 2e s + 1)(s^2 + 4e s + 4) + e^2/7 with e = 10^-digits: real parts -e and -2e."""
    e = Fraction(1, 10**digits)
    return (1, 6 * e, 5 + 8 * e * e, 12 * e, 4 + e * e / 7)


@pytest.mark.parametrize("digits", [3, 31, 60, 120, 300])
def test_real_parts_are_ordered_however_small_their_difference(digits: int) -> None:
    polynomial = over(Q, *near_pairs(digits))
    for bits in (64, 3000):
        with ctx.workprec(bits):
            found = enclosed_roots(Q, polynomial)
        with ctx.workprec(3000):
            assert [round(float(z.imag.mid())) for z in found] == [-2, 2, -1, 1]
    assert roots_by_real_part(Q, polynomial) == ((1, 2), (3, 4))


def test_real_parts_that_nothing_tells_apart_count_as_equal() -> None:
    """(s^2 + 2 s + 3)(s^2 + 2 s + 7)(s^3 - 2): Re = -1 twice, and no axis in all."""
    polynomial = over(Q, 1, 2, 3) * over(Q, 1, 2, 7) * over(Q, 1, 0, 0, -2)
    assert roots_by_real_part(Q, polynomial) == ((1, 2, 3, 4), (5, 6), (7,))
    for bits in (64, 1000, 4000):
        with ctx.workprec(bits):
            found = enclosed_roots(Q, polynomial)[:4]
            assert all(a.imag < b.imag for a, b in itertools.pairwise(found))


@pytest.mark.parametrize("power", [-90, -40, 20, 60, 160])
@pytest.mark.parametrize("shift", [Fraction(0), Fraction(1, 3)])
def test_roots_on_an_axis_share_their_real_part_at_every_size(power: int, shift: Fraction) -> None:
    """Three undamped pairs, sizes far from 1: real parts are exactly those of the axis."""
    w = Fraction(10) ** (2 * power)
    polynomial = over(Q, *shifted((1, 0, 6 * w, 0, 9 * w * w, 0, 3 * w**3), shift))
    assert roots_by_real_part(Q, polynomial) == ((1, 2, 3, 4, 5, 6),)
    for bits in PRECISIONS:
        with ctx.workprec(bits):
            found = enclosed_roots(Q, polynomial)
            assert all(z.real.overlaps(ball_of(shift)) for z in found)
            assert len({z.real.mid().man_exp() for z in found}) == 1
            assert all(a.imag < b.imag for a, b in itertools.pairwise(found))


@pytest.mark.parametrize("power", [-90, -20, 0, 60, 300])
def test_roots_over_surds_are_found_at_every_size(power: int) -> None:
    """Of s^3 + sqrt(3) s^2 + s + sqrt(2), scaled, each to 60 bits of its own modulus."""
    w = Fraction(10) ** power
    r3 = SurdSum.of({3: w})
    field = BaseField((2, 3))
    found = enclosed_roots(field, over(field, 1, r3, w * w, root2(w**3)))
    assert [z.imag == 0 for z in found].count(True) == 1
    for z in found:
        assert z.rel_accuracy_bits() >= 60
        scaled = z / ball_of(w)
        value = ((scaled + arb(3).sqrt()) * scaled + 1) * scaled + arb(2).sqrt()
        assert value.contains(0)


def test_zero_is_a_root_exactly() -> None:
    assert enclosed_roots(Q2, over(Q2, 1, 0)) == (acb(0),)
    found = enclosed_roots(Q2, over(Q2, 1, 0, root2(-1), 0))
    assert [bool(z == 0) for z in found] == [False, True, False]


@pytest.mark.parametrize(
    ("p", "places"),
    [
        ((1, 0, 4, 0, 2), ((True, 3), (True, 4))),
        ((1, 0, 6, 0, 9, 0, 3), ((True, 4), (True, 5), (True, 6))),
        ((1, 0, -10, 0, 1), ((False, 3), (False, 4))),
        ((1, 0, -2, 0, -1), ((True, 3), (False, 4))),  # 1 - sqrt(2), 1 + sqrt(2)
        ((1, 0, 2, 0, -1), ((False, 4), (True, 3))),
        ((1, 0, 0, 0, -2), ((True, 3), (False, 4))),  # ± sqrt(2): the same modulus
    ],
    ids=str,
)
def test_places_of_roots_of_squares(
    p: tuple[int, ...], places: tuple[tuple[bool, int], ...]
) -> None:
    found = root_set(Q, over(Q, *p))
    assert found.square_places() == places
    for negative, which in places:
        z = found.enclosures()[which - 1]
        assert bool(z.real == 0 and z.imag > 0) if negative else bool(z.imag == 0 and z.real > 0)
    sizes = [abs(found.enclosures()[which - 1]) for _, which in places]
    assert all(a < b or a.overlaps(b) for a, b in itertools.pairwise(sizes))


def test_squares_that_are_no_known_surds_need_names() -> None:
    """mu = -b ± sqrt(E) with E too large to be factored."""
    unknown = (10**30 + 57) * (10**31 + 33)
    b = 10**31
    assert b * b > unknown
    circular = root_set(Q, over(Q, 1, 0, 2 * b, 0, b * b - unknown))
    assert (circular.form, circular.half_gap) == ("even", None)
    assert circular.square_places() == ((True, 3), (True, 4))
    assert root_set(Q, over(Q, 1, 0, -2 * b, 0, b * b - unknown)).form == "named"
    assert root_set(Q, over(Q, 1, 0, 4, 0, 2)).half_gap == root2()
