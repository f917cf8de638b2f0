"""e^(At) as an exact object: its laws, and its values at exact instants."""

from __future__ import annotations

from dataclasses import replace
from fractions import Fraction
from math import factorial

import pytest
from flint import arb, arb_mat, ctx
from hypothesis import given, settings
from hypothesis import strategies as st

from closedform.algebra.enclosure import ball_of
from closedform.algebra.exponential import ExponentialMatrix, exponential_by_resolvent
from closedform.algebra.field import BaseField
from closedform.algebra.spectrum import spectrum_of
from closedform.algebra.surds import SurdSum
from closedform.response.sampling import sampled
from tests.known_systems import KnownSystem
from tests.response.systems import KINDS, response_to
from tests.strategies import known_systems

Q = BaseField()


def exponential(rows: object) -> ExponentialMatrix:
    matrix = Q.matrix([[Q.scalar(x) for x in row] for row in rows])
    return exponential_by_resolvent(Q, matrix, spectrum_of(Q, matrix))


def at(function: ExponentialMatrix, t: Fraction | SurdSum) -> arb_mat:
    with ctx.workprec(400):
        return function.enclosure(ball_of(t))


def assert_meet(left: arb_mat, right: arb_mat) -> None:
    largest = max(abs(e).upper() for e in right.entries())
    for one, other in zip(left.entries(), right.entries(), strict=True):
        assert one.overlaps(other)
        assert max(one.rad(), other.rad()) <= (largest + 1) * arb(10) ** -60


@given(known_systems(largest=5))
@settings(max_examples=40)
def test_the_derivative_is_a_times_the_function_and_the_start_the_unit(system: KnownSystem) -> None:
    """Coefficients of t^j/j!: (A - lambda) R_j = R_(j+1), and none beyond the index."""
    function = exponential(system.matrix)
    matrix = Q.matrix([[Q.scalar(x) for x in row] for row in system.matrix])
    for term in function.terms:
        assert len(term.residues) == term.factor.index
        following = [*term.residues[1:], term.residues[0] - term.residues[0]]
        for residue, successor in zip(term.residues, following, strict=True):
            assert (residue.shifted(matrix) - successor).is_zero
    assert function.at_zero() == Q.identity(system.order)


@given(known_systems(largest=5), st.fractions(-2, 2, max_denominator=9))
@settings(max_examples=30)
def test_values_are_those_known_by_construction(system: KnownSystem, t: Fraction) -> None:
    known = system.transition(t)
    with ctx.workprec(500):
        assert_meet(at(exponential(system.matrix), t), arb_mat(known))


@given(
    known_systems(largest=5),
    st.fractions(-2, 2, max_denominator=7),
    st.fractions(-2, 2, max_denominator=7),
)
@settings(max_examples=30)
def test_times_add_as_matrices_multiply(system: KnownSystem, s: Fraction, t: Fraction) -> None:
    function = exponential(system.matrix)
    with ctx.workprec(400):
        assert_meet(at(function, s) * at(function, t), at(function, s + t))


@pytest.mark.parametrize("kind", KINDS)
def test_times_add_for_every_kind_at_surds(kind: str) -> None:
    function = response_to(kind).exponential
    s, t = SurdSum.of({2: Fraction(1, 3)}), SurdSum.of({1: Fraction(1, 2), 3: Fraction(-1)})
    with ctx.workprec(400):
        assert_meet(at(function, s) * at(function, t), at(function, s + t))


@given(known_systems(largest=4), st.data())
@settings(max_examples=30)
def test_products_from_both_sides(system: KnownSystem, data: st.DataObject) -> None:
    n = system.order
    numbers = data.draw(st.lists(st.integers(-3, 3), min_size=2 * n, max_size=2 * n))
    left = Q.matrix([[Q.scalar(x) for x in numbers[:n]]])
    right = Q.matrix([[Q.scalar(x)] for x in numbers[n:]])
    function = exponential(system.matrix)
    assert function.times(right).shape == (n, 1)
    assert function.after(left).shape == (1, n)
    with ctx.workprec(400):
        a = arb_mat(1, n, numbers[:n]) * at(function, Fraction(1, 3)) * arb_mat(n, 1, numbers[n:])
        assert_meet(at(function.after(left).times(right), Fraction(1, 3)), a)
    assert function.after(left).times(right).at_zero() == left * right


def test_a_nilpotent_matrix_has_exact_entries_at_every_surd() -> None:
    function = response_to("nilpotent").exponential  # [[0, 1, 2], [0, 0, 3], [0, 0, 0]]
    t = SurdSum.of({1: Fraction(1), 2: Fraction(1)})
    assert function.exact_entry(0, 1, t) == t
    assert function.exact_entry(0, 2, t) == t + t + t * t * SurdSum.rational(Fraction(3, 2))
    assert function.exact_entry(2, 0, t) == SurdSum(())
    assert function.exact_entry(1, 1, t) == SurdSum.rational(1)


@pytest.mark.parametrize("kind", KINDS)
def test_every_entry_is_exact_at_zero(kind: str) -> None:
    function = response_to(kind).exponential
    n, _ = function.shape
    for i in range(n):
        for k in range(n):
            assert function.exact_entry(i, k, SurdSum(())) == SurdSum.rational(int(i == k))


def test_an_entry_with_an_exponential_in_it_has_no_exact_value_and_one_without_has() -> None:
    function = exponential([[0, 1, 0], [0, -1, 0], [5, 0, 0]])
    t = SurdSum.rational(Fraction(1, 2))
    assert function.exact_entry(0, 1, t) is None  # 1 - e^(-t)
    assert function.exact_entry(0, 0, t) == SurdSum.rational(1)
    assert function.exact_entry(2, 0, t) == SurdSum.rational(Fraction(5, 2))
    assert function.exact_entry(1, 0, t) == SurdSum(())


def test_exponentials_that_drop_out_at_one_instant_leave_an_exact_entry() -> None:
    """(t - 1) e^(-t) + c, c = 1.2345665, is c at t = 1 and transcendental elsewhere."""
    c = SurdSum.rational(Fraction("1.2345665"))
    function = exponential([[-1, 1, 0], [0, -1, 0], [0, 0, 0]])
    start = Q.matrix([[Q.scalar(x)] for x in (-1, 1, Fraction("1.2345665"))])
    output = function.times(start).after(Q.matrix([[Q.scalar(x) for x in (1, 0, 1)]]))
    assert output.exact_entry(0, 0, SurdSum.rational(1)) == c
    assert output.exact_entry(0, 0, SurdSum.rational(2)) is None
    assert sampled(output, (SurdSum.rational(1),), 6) == [["1.23457"]]


def test_exponentials_of_a_pair_drop_out_at_one_instant_too() -> None:
    """A double pair ± i: (t - 2) cos t is 0 at t = 2, exactly."""
    function = exponential([[0, 1, 1, 0], [-1, 0, 0, 1], [0, 0, 0, 1], [0, 0, -1, 0]])
    start = Q.matrix([[Q.scalar(x)] for x in (-2, 0, 1, 0)])
    output = function.times(start)
    assert output.exact_entry(0, 0, SurdSum.rational(2)) == SurdSum(())
    assert output.exact_entry(0, 0, SurdSum.rational(1)) is None


@given(known_systems(largest=4), st.fractions(-2, 2, max_denominator=5))
@settings(max_examples=40)
def test_exact_entries_agree_with_the_balls(system: KnownSystem, t: Fraction) -> None:
    function = exponential(system.matrix)
    balls = at(function, t)
    for i in range(system.order):
        for k in range(system.order):
            exact = function.exact_entry(i, k, SurdSum.rational(t))
            if exact is not None:
                with ctx.workprec(400):
                    assert balls[i, k].overlaps(ball_of(exact))


@pytest.mark.parametrize("n", [1, 2, 5, 9])
def test_a_shift_matrix_gives_the_powers_over_factorials(n: int) -> None:
    function = exponential([[int(k == i + 1) for k in range(n)] for i in range(n)])
    t = SurdSum.rational(3)
    for k in range(n):
        assert function.exact_entry(0, k, t) == SurdSum.rational(Fraction(3**k, factorial(k)))


def test_the_zero_matrix_gives_the_unit_matrix_for_good() -> None:
    function = exponential([[0, 0], [0, 0]])
    (term,) = function.terms
    assert len(term.residues) == 1
    assert at(function, Fraction(99)) == arb_mat([[1, 0], [0, 1]])


def test_equal_functions_are_equal_objects() -> None:
    first, second = exponential([[0, 1], [-5, -2]]), exponential([[0, 1], [-5, -2]])
    assert first.terms[0].residues == second.terms[0].residues
    assert first != replace(second, terms=second.terms * 2)


def test_powers_of_a_ball_around_zero_are_finite() -> None:
    jordan = exponential([[0, 1, 0], [0, 0, 1], [0, 0, 0]])
    around_zero = arb(0, 2.0**-60)
    for entry in jordan.enclosure(around_zero).entries():
        assert entry.is_finite()
        assert entry.rad() < arb(2) ** -59
    assert jordan.enclosure(around_zero)[0, 1].contains(0)
