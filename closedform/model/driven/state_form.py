"""Models stated in state form:  x' = A x + B u."""

from __future__ import annotations

from collections.abc import Mapping
from fractions import Fraction
from typing import TypeVar

from closedform.model.driven.columns import InputColumns
from closedform.model.driven.model import Jet
from closedform.model.driven.numerals import Numerals
from closedform.model.driven.statement import Row, Statement, row_of
from closedform.model.statement import input_matrix_of, matrix_of

__all__ = ["stated_by_matrix"]

T = TypeVar("T")


def stated_by_matrix(
    mapping: Mapping[str, object],
    states: tuple[str, ...],
    numerals: Numerals[T],
    columns: InputColumns[T],
) -> Statement[T]:
    """Return what `matrix` and `input_matrix` state.

    Shapes:  n rows of n entries for n states; `input_matrix` n rows, an entry for each
    declared input.

    Raises:  RowCountError, RowLengthError, InputColumnsError, and what entries raise.
    """
    source, n, inputs = numerals.source, len(states), list(columns.declared)
    matrix = matrix_of(mapping["matrix"], n, source, numerals.entry)
    driving: tuple[tuple[T, ...], ...] = ((),) * n
    if "input_matrix" in mapping:
        driving = input_matrix_of(mapping["input_matrix"], n, len(inputs), source, numerals.entry)
    places = [columns.of(name) for name in inputs]
    one = numerals.arithmetic.number(Fraction(1))

    def row(i: int) -> Row[T]:
        jets = [(Jet(name), matrix[i][j]) for j, name in enumerate(states)]
        acting = list(zip(places, inputs, driving[i], strict=True))
        return row_of(numerals, [(Jet(states[i], 1), one)], (jets, acting), f"matrix[{i + 1}]")

    return Statement("state form", states, tuple(row(i) for i in range(n)))
