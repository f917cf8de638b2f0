"""Truths of models in numbers, against series in balls."""

from __future__ import annotations

from fractions import Fraction

import pytest
from flint import arb, ctx
from hypothesis import given, settings
from hypothesis import strategies as st

from closedform.checking.truth import Truth
from closedform.checking.truths.solved import truths_of
from closedform.model.building import system
from closedform.notation.written.plain_form import plain_written
from tests.checking.truths.series import BITS, check, constant, names_at, same, series

MODELS = {
    "complex": [[0, 1], [-2, -2]],
    "surds": [[0, 1], [1, 1]],
    "defective": [[-1, 1, 0], [0, -1, 1], [0, 0, -1]],
    "semisimple": [[-3, 0, 0], [0, -3, 0], [1, 0, -2]],
    "cubic": [[0, 1, 0], [0, 0, 1], [-1, -1, -5]],
    "far apart": [[0, 1], [-1, -300]],
    "two masses": [[0, 0, 1, 0], [0, 0, 0, 1], [-2, 1, 0, 0], [1, -3, 0, 0]],
    "quartic": [[0, 1, 0, 0], [0, 0, 1, 0], [0, 0, 0, 1], [-1, -1, 0, -1]],
    "double pair": [[0, 1, 0, 0], [-4, 0, 1, 0], [0, 0, 0, 1], [0, 0, -4, 0]],
}


def truth_of(matrix: list[list[object]], **more: object) -> Truth:
    initial = [Fraction(k + 1, 2) for k in range(len(matrix))]
    (truth,) = truths_of(system(matrix, initial=initial, **more))
    return truth


@pytest.mark.parametrize("name", MODELS)
def test_functions_and_eigenvalues_are_those_of_the_matrix(name: str) -> None:
    check(truth_of(MODELS[name]))


@settings(max_examples=15, deadline=None)
@given(
    st.integers(2, 3).flatmap(
        lambda n: st.lists(
            st.lists(st.integers(-3, 3), min_size=n, max_size=n), min_size=n, max_size=n
        )
    )
)
def test_any_small_matrix_has_its_truth(matrix: list[list[int]]) -> None:
    check(truth_of(matrix))


@pytest.mark.parametrize(
    ("name", "counts"),
    [
        ("defective", {(3, 1, 3)}),
        ("semisimple", {(2, 2, 1), (1, 1, 1)}),
        ("double pair", {(2, 1, 2)}),
        ("complex", {(1, 1, 1)}),
    ],
)
def test_multiplicities_and_index(name: str, counts: set[tuple[int, int, int]]) -> None:
    truth = truth_of(MODELS[name])
    assert {(e.algebraic, e.geometric, e.index) for e in truth.eigenvalues} == counts


def test_roots_of_degree_three_are_named_and_have_balls() -> None:
    truth = truth_of(MODELS["cubic"])
    assert [e.named for e in truth.eigenvalues] == [
        "alpha_1 + omega_1*i",
        "alpha_1 - omega_1*i",
        "lambda_3",
    ]
    assert all(e.value is None for e in truth.eigenvalues)
    assert set(truth.enclosures()) == {name for name, f in truth.quantities if f is None}


def test_what_a_quadratic_names_has_a_formula() -> None:
    truth = truth_of(MODELS["far apart"])
    assert truth.quantities
    assert all(formula is not None for _, formula in truth.quantities)
    assert not truth.enclosures()


def test_a_chain_tends_to_its_stationary_state() -> None:
    truth = truth_of([[-3, 2], [3, -2]], outputs={"both": "x1 + x2"})
    told = {name: plain_written(tree) for name, tree in truth.steady.items()}
    assert told == {"x1": "3/5", "x2": "9/10", "both": "3/2"}
    with ctx.workprec(BITS):
        names = names_at(truth, {}, arb(200))
        for name, limit in truth.steady.items():
            late = series(truth.solution[name][0].formula, names)[0]
            assert same(late, series(limit, names)[0])


@pytest.mark.parametrize("matrix", [[[0, 1], [0, 0]], [[0, 1], [-1, 0]], [[1]]])
def test_what_tends_to_nothing_has_no_steady_state(matrix: list[list[int]]) -> None:
    assert truth_of(matrix).steady == {}


def test_a_power_of_the_time_that_does_not_occur_does_no_harm() -> None:
    (truth,) = truths_of(system([[0, 1], [0, 0]], initial=[3, 0]))
    assert plain_written(truth.steady["x1"]) == "3"


def test_a_large_model_has_no_matrix_written_out() -> None:
    n = 9
    matrix = [[-2 if i == k else int(abs(i - k) == 1) for k in range(n)] for i in range(n)]
    truth = truth_of(matrix)
    assert truth.transition is None
    assert sum(e.algebraic for e in truth.eigenvalues) == n


def test_the_characteristic_polynomial_is_monic_in_lambda() -> None:
    truth = truth_of(MODELS["complex"])
    assert plain_written(truth.characteristic) == "lambda^2 + 2*lambda + 2"
    assert series(truth.characteristic, {"lambda": constant(arb(1))})[0] == 5
