"""The printed formula is the shortest of equal ones, and equal it is."""

from __future__ import annotations

from fractions import Fraction
from typing import Any

import pytest
from flint import arb, arb_mat, ctx, fmpq
from hypothesis import given, settings
from hypothesis import strategies as st

import closedform
from closedform.algebra.surds import SurdSum
from closedform.notation import read_formula
from closedform.notation.expression import operations
from closedform.notation.plain import plain
from closedform.response.names import constant_values
from closedform.response.response import Response
from tests.exact import value_of
from tests.known_systems import KnownSystem
from tests.response.systems import KINDS, response_to
from tests.strategies import known_systems


def respond(rows: Any, initial: Any = None) -> Response:
    return closedform.respond(
        closedform.system(rows, initial=initial or list(range(1, len(rows) + 1)))
    )


def transition(rows: Any) -> list[list[str]]:
    return [[plain(f) for f in row] for row in respond(rows).closed_forms.transition]


@pytest.mark.parametrize(
    ("rows", "expected"),
    [
        # Each worked out by hand.
        ([[0]], [["1"]]),
        ([[-2]], [["exp(-2*t)"]]),
        ([["1/2"]], [["exp(t/2)"]]),
        ([["sqrt(2)"]], [["exp(sqrt(2)*t)"]]),
        ([[0, 0], [0, 0]], [["1", "0"], ["0", "1"]]),
        ([[0, 1], [0, 0]], [["1", "t"], ["0", "1"]]),
        ([[0, 1], [-4, 0]], [["cos(2*t)", "sin(2*t)/2"], ["-2*sin(2*t)", "cos(2*t)"]]),
        (
            [[-1, 2], [-2, -1]],
            [
                ["exp(-t)*cos(2*t)", "exp(-t)*sin(2*t)"],
                ["-exp(-t)*sin(2*t)", "exp(-t)*cos(2*t)"],
            ],
        ),
        (
            [[0, 1], [-6, -5]],
            [
                ["3*exp(-2*t) - 2*exp(-3*t)", "exp(-2*t) - exp(-3*t)"],
                ["6*(exp(-3*t) - exp(-2*t))", "3*exp(-3*t) - 2*exp(-2*t)"],
            ],
        ),
        (
            [[0, 1], [-1, -2]],
            [["(1 + t)*exp(-t)", "t*exp(-t)"], ["-t*exp(-t)", "(1 - t)*exp(-t)"]],
        ),
        (
            [[0, 1, 0], [0, 0, 1], [0, 0, 0]],
            [["1", "t", "t^2/2"], ["0", "1", "t"], ["0", "0", "1"]],
        ),
    ],
    ids=str,
)
def test_formulas_as_one_would_write_them(rows: Any, expected: list[list[str]]) -> None:
    found = transition(rows)
    for ours, theirs in zip(found, expected, strict=True):
        for one, other in zip(ours, theirs, strict=True):
            assert one == other or same_and_no_longer(one, other)


@pytest.mark.parametrize(
    ("rows", "constant", "entry"),
    [
        ([[0, 1], [2, 0]], "kappa_1", "kappa_1*sinh(kappa_1*t)"),
        ([[0, 1], [-2, 0]], "omega_1", "-omega_1*sin(omega_1*t)"),
    ],
)
def test_a_named_frequency_multiplies_where_that_is_shorter(
    rows: Any, constant: str, entry: str
) -> None:
    """2/w is w for w = sqrt(2)."""
    response = respond(rows)
    assert [c.name for c in response.closed_forms.constants] == [constant]
    assert plain(response.closed_forms.transition[1][0]) == entry


def same_and_no_longer(one: str, other: str) -> bool:
    """Whether two texts have one value, and ours has no more operations than the other."""
    names = frozenset({"t"})
    ours, theirs = read_formula(one, names=names), read_formula(other, names=names)
    with ctx.workprec(200):
        t = arb(fmpq(3, 7))
        same = value_of(ours, {"t": t}).overlaps(value_of(theirs, {"t": t}))
    return same and operations(ours) <= operations(theirs)


@pytest.mark.parametrize("kind", KINDS)
def test_what_stands_in_front_never_makes_the_matrix_longer(kind: str) -> None:
    forms = response_to(kind).closed_forms
    front, rows = forms.fronted_transition
    inside = sum(operations(f) for row in rows for f in row)
    plainly = sum(operations(f) for row in forms.transition for f in row)
    assert inside + (0 if front is None else operations(front) + 1) <= plainly


TIMES = (Fraction(0), Fraction(2, 7), Fraction(-9, 5))


def assert_formulas_are_the_exact_object(response: Response) -> None:
    forms, model = response.closed_forms, response.model
    front, fronted = forms.fronted_transition
    for t in TIMES:
        with ctx.workprec(500):
            time = arb(fmpq(t.numerator, t.denominator))
            values = {**constant_values(forms.constants), model.time: time}
            exact = response.exponential.enclosure(time)
            assert_same(forms.transition, exact, values)
            weight = arb(1) if front is None else value_of(front, values)
            assert_same(fronted, exact, values, weight)
            column = [(f,) for f in forms.solution]
            assert_same(column, response.state.enclosure(time), values)
            if response.output is not None:
                column = [(f,) for f in forms.outputs]
                assert_same(column, response.output.enclosure(time), values)


def assert_same(rows: Any, exact: arb_mat, values: dict[str, arb], weight: arb = arb(1)) -> None:  # noqa: B008
    largest = 1 + max(abs(e).upper() for e in exact.entries())
    for i, row in enumerate(rows):
        for k, formula in enumerate(row):
            ball = value_of(formula, values) * weight
            assert ball.overlaps(exact[i, k])
            assert ball.rad() <= largest * arb(10) ** -80


@pytest.mark.parametrize("kind", KINDS)
def test_formulas_of_every_kind_are_the_exact_object(kind: str) -> None:
    assert_formulas_are_the_exact_object(response_to(kind))


@given(known_systems(largest=5))
@settings(max_examples=40)
def test_formulas_of_random_systems_are_the_exact_object(system: KnownSystem) -> None:
    model = closedform.system(
        system.matrix,
        initial=[Fraction((-1) ** i, i + 1) for i in range(system.order)],
        outputs={"y": " + ".join(f"{i + 2}*x{i + 1}" for i in range(system.order))},
    )
    assert_formulas_are_the_exact_object(closedform.respond(model))


SMALL_SURDS = st.builds(
    lambda a, b, d: SurdSum.of({1: Fraction(a), d: Fraction(b, 2)}),
    st.integers(-2, 2),
    st.integers(-2, 2),
    st.sampled_from((2, 3)),
)


@given(
    st.integers(1, 3).flatmap(
        lambda n: st.lists(st.lists(SMALL_SURDS, min_size=n, max_size=n), min_size=n, max_size=n)
    )
)
@settings(max_examples=25)
def test_formulas_of_random_surd_systems_are_the_exact_object(rows: list[list[SurdSum]]) -> None:
    n = len(rows)
    model = closedform.system(rows, initial=[SurdSum.of({2: Fraction(1, i + 1)}) for i in range(n)])
    assert_formulas_are_the_exact_object(closedform.respond(model))


@given(known_systems(largest=4), st.sampled_from((2, 3, 5, 6)))
@settings(max_examples=20)
def test_formulas_of_scaled_structures_are_the_exact_object(system: KnownSystem, d: int) -> None:
    """sqrt(d) A has the block structure of A, over another field."""
    root = SurdSum.of({d: Fraction(1)})
    rows = [[SurdSum.rational(x) * root for x in row] for row in system.matrix]
    model = closedform.system(rows, initial=[1] * system.order)
    response = closedform.respond(model)
    assert_formulas_are_the_exact_object(response)
    blocks = sorted(b for f in response.spectrum.factors for b in f.blocks * f.degree)
    expected = sorted(b.size for b in system.blocks for _ in range(b.degree))
    assert blocks == expected
