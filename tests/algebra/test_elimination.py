"""Rows solved for columns say the same as before."""

from __future__ import annotations

import pickle
from fractions import Fraction
from typing import Any

import pytest
from hypothesis import given
from hypothesis import strategies as st

from closedform.algebra.elimination import SparseRow, eliminated, solved_for
from closedform.algebra.field import BaseField
from closedform.algebra.fraction_free import EliminationSizeError, fraction_free
from closedform.algebra.parameter_field import ParameterField

Q = BaseField()
FIELD = ParameterField(parameters=("a", "b", "c"))
A, B, C = FIELD.domain.gens
ELEMENTS = (0, 1, -2, A, B, A * B, A + B, 1 / (A - C), C**2 / B, Fraction(1, 2))


def numbers() -> st.SearchStrategy[int]:
    return st.integers(-3, 3)


@st.composite
def sparse_rows(draw: st.DrawFn, rows: int, columns: int) -> list[dict[int, Any]]:
    drawn = draw(
        st.lists(
            st.lists(numbers(), min_size=columns, max_size=columns), min_size=rows, max_size=rows
        )
    )
    return [{c: Q.scalar(e) for c, e in enumerate(row) if e} for row in drawn]


@st.composite
def open_rows(draw: st.DrawFn, rows: int, columns: int) -> list[dict[int, Any]]:
    drawn = draw(
        st.lists(
            st.lists(st.sampled_from(ELEMENTS), min_size=columns, max_size=columns),
            min_size=rows,
            max_size=rows,
        )
    )
    return [{c: FIELD.domain.convert(e) for c, e in enumerate(row) if e != 0} for row in drawn]


def dense(field: BaseField, rows: list[SparseRow], columns: int) -> Any:
    zero = field.domain.zero
    return field.matrix([[row.get(c, zero) for c in range(columns)] for row in rows])


@given(sparse_rows(3, 5))
def test_the_rows_span_the_same_space(rows: list[dict[int, Any]]) -> None:
    found = eliminated(Q, rows, [range(3)])
    after = [*found.solved.values(), *found.rest]
    assert dense(Q, after, 5).rank() == dense(Q, rows, 5).rank() == dense(Q, rows + after, 5).rank()


@given(sparse_rows(4, 4))
def test_a_column_that_is_solved_for_stands_in_its_row_only(rows: list[dict[int, Any]]) -> None:
    found = eliminated(Q, rows, [[2], [0, 3, 1]])
    for column, own in found.solved.items():
        assert own[column] == 1
        others = [row for row in (*found.solved.values(), *found.rest) if row is not own]
        assert not any(column in row for row in others)
    assert not any(found.rest)
    if len(found.solved) == 4:
        assert abs(found.minor) == abs(dense(Q, rows, 4).det())


def test_classes_come_in_turn_and_safe_pivots_first() -> None:
    rows = [{0: A, 1: B, 2: FIELD.domain.one}]
    assert list(eliminated(FIELD, rows, [[1], [0]]).solved) == [1]
    assert list(eliminated(FIELD, rows, [[1, 0]], lambda e: e == A).solved) == [0]
    assert list(eliminated(FIELD, rows, [[1, 0, 2]], lambda _: False).solved) == [2]
    assert list(eliminated(FIELD, rows, [[1, 0]], lambda _: False).solved) == [1]


@given(open_rows(3, 5))
def test_the_ways_to_solve_agree(rows: list[dict[int, Any]]) -> None:
    usual = eliminated(FIELD, rows, [range(3)])
    mixed = solved_for(FIELD, rows, range(3))
    if len(usual.solved) < 3:
        assert mixed is None
        return
    assert mixed is not None
    assert {c: dict(row) for c, row in mixed.solved.items()} == usual.solved
    assert mixed.minor in (usual.minor, -usual.minor)
    assert mixed.minor in (
        determinant := dense(FIELD, rows, 5)[:, :3].to_dense().det(),
        -determinant,
    )
    if all(rows):
        direct = fraction_free(FIELD, rows, range(3))
        assert direct is not None
        assert direct[0] == usual.solved
        assert direct[1] in (usual.minor, -usual.minor)


def test_what_grows_too_large_is_refused() -> None:
    n = 6
    names = {(i, j): f"p{i}{j}" for i in range(n) for j in range(i, n)}
    field = ParameterField(parameters=tuple(names.values()))
    rows = [
        {j: field.symbol(names[min(i, j), max(i, j)]) for j in range(n)} | {n: field.domain.one}
        for i in range(n)
    ]
    with pytest.raises(EliminationSizeError, match="more than 400 terms") as caught:
        solved_for(field, rows, range(n))
    again = pickle.loads(pickle.dumps(caught.value))  # noqa: S301 - made here
    assert str(again) == str(caught.value)
    with pytest.raises(EliminationSizeError, match="more than 60 terms"):
        eliminated(field, rows, [range(n)])
