"""Certified decimals of a response, its instants, and intervals that isolate."""

from __future__ import annotations

from decimal import Decimal
from fractions import Fraction
from math import pi

import mpmath
import pytest
from flint import arb, ctx
from hypothesis import given, settings
from hypothesis import strategies as st

import closedform
from closedform.algebra.enclosure import ball_of
from closedform.algebra.field import BaseField
from closedform.algebra.roots import enclosed_roots
from closedform.algebra.surds import SurdSum
from closedform.response.names import NamedConstant, ResiduePart, RootPart
from closedform.response.response import Response
from closedform.response.sampling import (
    constant_decimal,
    default_times,
    isolating_interval,
    sampled,
    surd_decimal,
)
from tests.algebra.test_enclosure import rounded_by_mpmath
from tests.algebra.test_roots import changes, remainder
from tests.response.systems import KINDS, response_to
from tests.strategies import IRREDUCIBLE, irreducibles

Q = BaseField()


def sturm_count(p: tuple[Fraction, ...], low: Fraction, high: Fraction) -> int:
    """The number of real roots of p in (low, high]."""
    sequence = [list(p), [c * (len(p) - 1 - k) for k, c in enumerate(p[:-1])]]
    while len(sequence[-1]) > 1:
        rest = remainder(sequence[-2], sequence[-1])
        if not rest:
            break
        sequence.append([-c for c in rest])
    at = [[evaluate(f, x) for f in sequence] for x in (low, high)]
    return changes(at[0]) - changes(at[1])


def evaluate(p: list[Fraction], x: Fraction) -> Fraction:
    value = Fraction(0)
    for c in p:
        value = value * x + c
    return value


def test_sturm_counts_as_it_should() -> None:
    p = tuple(map(Fraction, (1, 0, -3, 1)))  # roots -1.879, 0.347, 1.532
    assert sturm_count(p, Fraction(-2), Fraction(2)) == 3
    assert sturm_count(p, Fraction(0), Fraction(2)) == 2
    assert sturm_count(p, Fraction(1), Fraction(3, 2)) == 0


@given(st.integers(3, 5).flatmap(irreducibles))
@settings(max_examples=40)
def test_intervals_isolate_what_they_are_said_to(p: tuple[Fraction, ...]) -> None:
    """Real roots by Sturm's theorem; pairs by the rectangles, against roots of mpmath."""
    polynomial = Q.polynomial([Q.scalar(c) for c in p])
    mp = mpmath.mp.clone()
    mp.dps = 60
    others = mp.polyroots(
        [mp.mpf(c.numerator) / c.denominator for c in p], maxsteps=500, extraprec=300
    )
    with ctx.workprec(100):
        roots = enclosed_roots(Q, polynomial)
    for which, root in enumerate(roots, start=1):
        left, right = interval(RootPart(Q, polynomial, which, "real"))
        low, high = interval(RootPart(Q, polynomial, which, "imaginary"))
        inside = [
            z for z in others if left <= real_part(z) <= right and low <= imaginary_part(z) <= high
        ]
        if root.imag == 0:
            assert sturm_count(p, left, right) == 1
            assert (low, high) == (0, 0)
            assert evaluate(list(p), left) != 0
        else:
            assert len(inside) == 1
        assert left < right or left == right == 0


def interval(part: RootPart) -> tuple[Fraction, Fraction]:
    low, high = isolating_interval(part)
    return Fraction(Decimal(low)), Fraction(Decimal(high))


def real_part(z: mpmath.mpc) -> Fraction:
    """As an exact fraction, for an imaginary root exactly 0."""
    x = mpmath.mpf(z.real)
    return Fraction(0) if abs(x) < mpmath.mpf(10) ** -45 else Fraction(Decimal(mpmath.nstr(x, 50)))


def imaginary_part(z: mpmath.mpc) -> Fraction:
    return real_part(mpmath.mpc(z.imag, 0))


@pytest.mark.parametrize("p", [p for ps in IRREDUCIBLE.values() for p in ps], ids=str)
def test_the_root_lies_in_its_own_interval(p: tuple[int, ...]) -> None:
    polynomial = Q.polynomial([Q.scalar(c) for c in p])
    with ctx.workprec(200):
        for which, root in enumerate(enclosed_roots(Q, polynomial), start=1):
            for part, ball in (("real", root.real), ("imaginary", root.imag)):
                low, high = interval(RootPart(Q, polynomial, which, part))
                assert not (ball < ball_of(low))
                assert not (ball > ball_of(high))


def test_close_roots_get_narrow_intervals() -> None:
    """(s^2 - 2)^2 - 10^-20 s, whose roots pair up 6e-11 apart."""
    p = tuple(map(Fraction, (1, 0, -4, Fraction(-1, 10**20), 4)))
    polynomial = Q.polynomial([Q.scalar(c) for c in p])
    with ctx.workprec(200):
        count = sum(z.imag == 0 for z in enclosed_roots(Q, polynomial))
    found = [interval(RootPart(Q, polynomial, which, "real")) for which in (1, 2, 3, 4)]
    assert count == 2
    real = [sturm_count(p, low, high) for low, high in found]
    assert real == [0, 0, 1, 1]
    assert found[2][1] <= found[3][0]


@pytest.mark.parametrize("kind", KINDS)
@pytest.mark.parametrize("digits", [1, 6, 30])
def test_every_digit_of_a_table_is_right(kind: str, digits: int) -> None:
    response = response_to(kind)
    times = (SurdSum(()), SurdSum.rational(Fraction(1, 3)), SurdSum.of({2: Fraction(5, 2)}))
    table = sampled(response.state, times, digits)
    assert (len(table), len(table[0])) == (3, len(response.model.states))
    mp = mpmath.mp.clone()
    mp.dps = digits + 40
    for t, row in zip(times, table, strict=True):
        for text, value in zip(row, expm_solution(response, t, mp), strict=True):
            if abs(value) < mp.mpf(10) ** -(digits + 20):
                assert text == "0"
            else:
                many = mp.nstr(value, digits + 20, strip_zeros=False)
                assert Decimal(text) == rounded_by_mpmath(many, digits)


def expm_solution(response: Response, t: SurdSum, mp: mpmath.MPContext) -> list[mpmath.mpf]:
    def number(value: SurdSum) -> mpmath.mpf:
        parts = [mp.mpf(c.numerator) / c.denominator * mp.sqrt(d) for d, c in value.terms]
        return mp.fsum(parts)

    model = response.model
    n = len(model.states)
    scaled = mp.matrix(n, n)
    start = mp.matrix(n, 1)
    for i in range(n):
        start[i] = number(model.initial[i])
        for k in range(n):
            scaled[i, k] = number(model.matrix[i][k]) * number(t)
    return list(mp.expm(scaled, method="taylor") * start)


@pytest.mark.parametrize(
    ("value", "digits", "text"),
    [
        (SurdSum.rational(Fraction(1, 3)), 4, "0.3333"),
        (SurdSum.rational(2), 4, "2"),
        (SurdSum.of({2: Fraction(1)}), 4, "1.414"),
        (SurdSum.of({1: Fraction(7), 2: Fraction(-5)}), 6, "-0.0710678"),
        (SurdSum(()), 6, "0"),
    ],
    ids=str,
)
def test_decimals_of_surds(value: SurdSum, digits: int, text: str) -> None:
    assert surd_decimal(value, digits) == text


@pytest.mark.parametrize(
    ("rows", "step"),
    [
        ([[0]], 1),
        ([[0, 1], [0, 0]], 1),
        ([[-1]], Fraction(1, 2)),  # half the time constant 1
        ([[-100]], Fraction(5, 1000)),
        ([["1/100"]], 50),
        ([[0, 1], [-1, 0]], Fraction(1, 2)),  # an eighth of 2 pi is 0.785
        ([[-1, 0], [0, -100]], Fraction(1, 2)),  # the longest time constant
        ([[0, 1, 0], [-10000, 0, 0], [0, 0, -1]], Fraction(5, 1000)),
        ([[-1, 0], [0, 50]], Fraction(2, 100)),  # e^30 at 30/50, a sixteenth of it a step
        ([["-1e400", 1], [0, "-1e600"]], Fraction(5, 10**401)),
        ([["-1e-400"]], 5 * 10**399),
        ([["-5e-18", 0], ["5e-18", "-8e-14"]], 10**17),
        ([[0, 1], ["-1e-60", 0]], 5 * 10**29),
        # s^4 = 2 (10^10 s - 1)^2: a root of 1.4e10 beside two near 1e-10
        (
            [[0, 1, 0, 0], [0, 0, 1, 0], [0, 0, 0, 1], [2, -4 * 10**10, 2 * 10**20, 0]],
            Fraction(1, 10**10),
        ),
    ],
    ids=str,
)
def test_default_instants_suit_the_slowest_motion(rows: list[list[object]], step: Fraction) -> None:
    response = closedform.respond(closedform.system(rows, initial=[1] * len(rows)))
    found = [t.as_fraction() for t in default_times(response)]
    assert found == [step * k for k in (0, 1, 2, 4, 8, 16)]


@pytest.mark.parametrize("power", [20, 60, 100])
def test_intervals_part_roots_that_are_closer_than_any_fixed_precision(power: int) -> None:
    """s^4 - 2 (a s - 1)^2 has two real roots near 1/a, about a^-3 apart."""
    a = 10**power
    p = tuple(map(Fraction, (1, 0, -2 * a * a, 4 * a, -2)))
    polynomial = Q.polynomial([Q.scalar(c) for c in p])
    found = [interval(RootPart(Q, polynomial, which, "real")) for which in (1, 2, 3, 4)]
    assert [sturm_count(p, low, high) for low, high in found] == [1, 1, 1, 1]


def test_constants_on_a_tie_are_rounded_to_even() -> None:
    """The imaginary part of sqrt(2) + 1.234565 i, and 1.234565 p'/p'."""
    h = Fraction("1.234565")
    p = Q.polynomial([Q.scalar(c) for c in (1, 0, 2 * h * h - 4, 0, (2 + h * h) ** 2)])
    part = NamedConstant("omega", RootPart(Q, p, 4, "imaginary"))
    assert [constant_decimal(part, digits) for digits in (6, 7)] == ["1.23456", "1.234565"]
    slope = p.diff().mul_ground(Q.scalar(h))
    residue = ResiduePart(Q, p, 4, slope, Fraction(-2), "real")
    assert constant_decimal(NamedConstant("C", residue), 6) == "-2.46913"
    assert residue.equals(-2 * h)
    residue = ResiduePart(Q, p, 4, slope, Fraction(1, 2), "real")
    assert residue.equals(h / 2)
    assert not residue.equals(h / 2 + Fraction(1, 10**99))
    assert constant_decimal(NamedConstant("C", residue), 6) == "0.617282"


def test_instants_far_out_are_sampled() -> None:
    response = closedform.respond(closedform.system([[-1, 1], [0, -2]], initial=[1, 1]))
    late = SurdSum.rational(10**300)
    mp = mpmath.mp.clone()
    mp.dps = 330
    log = [(mp.log(2) - mp.mpf(10) ** 300) / mp.log(10), -2 * mp.mpf(10) ** 300 / mp.log(10)]
    expected = []
    for x in log:
        order = int(mp.floor(x))
        expected.append(f"{mp.nstr(mp.mpf(10) ** (x - order), 6, strip_zeros=False)}e{order}")
    assert sampled(response.state, (late,), 6) == [expected]


@given(st.fractions(Fraction(1, 10**6), 10**6), st.sampled_from(("decay", "turn")))
@settings(max_examples=40)
def test_a_default_step_is_round_and_not_above_the_bound(size: Fraction, motion: str) -> None:
    turning = motion == "turn"
    rows = [[0, 1], [-size * size, 0]] if turning else [[-size]]
    response = closedform.respond(closedform.system(rows, initial=[1] * len(rows)))
    step = default_times(response)[1].as_fraction()
    bound = pi / 4 / float(size) if turning else 1 / (2 * float(size))
    assert bound / 2.51 < float(step) <= bound * (1 + 1e-12)
    digits = Decimal(step.numerator) / Decimal(step.denominator)
    assert digits.normalize().as_tuple().digits in {(1,), (2,), (5,)}


def test_balls_of_a_solution_are_settled() -> None:
    response = response_to("mixed")
    for ball in response.solution_at(Fraction(3, 2), 50):
        assert ball.rad() < arb(10) ** -49 * (1 + abs(ball))
    for row in response.transition_at(Fraction(3, 2), 50):
        assert all(ball.rad() < arb(10) ** -49 * (1 + abs(ball)) for ball in row)
