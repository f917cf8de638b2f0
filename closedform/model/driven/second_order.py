"""Models stated by mass, damping and stiffness:  M x'' + C x' + K x = B u."""

from __future__ import annotations

from collections.abc import Mapping
from typing import TypeVar

from closedform.model.driven.columns import InputColumns
from closedform.model.driven.model import Jet
from closedform.model.driven.numerals import Numerals
from closedform.model.driven.statement import Row, Statement, row_of
from closedform.model.statement import input_matrix_of, matrix_of

__all__ = ["stated_by_masses"]

T = TypeVar("T")


def stated_by_masses(
    mapping: Mapping[str, object],
    coordinates: tuple[str, ...],
    numerals: Numerals[T],
    columns: InputColumns[T],
) -> Statement[T]:
    """Return what `mass`, `damping`, `stiffness` and `input_matrix` state.

    One of `mass` and `damping` may be left out: that matrix is zero.

    Shapes:  n rows of n entries for n coordinates; `input_matrix` n rows, an entry for each
    declared input.

    Raises:  RowCountError, RowLengthError, InputColumnsError, and what entries raise.
    """
    source, n, inputs = numerals.source, len(coordinates), list(columns.declared)
    blocks = [
        (order, matrix_of(mapping[key], n, source, numerals.entry, key))
        for key, order in (("mass", 2), ("damping", 1), ("stiffness", 0))
        if key in mapping
    ]
    driving: tuple[tuple[T, ...], ...] = ((),) * n
    if "input_matrix" in mapping:
        driving = input_matrix_of(mapping["input_matrix"], n, len(inputs), source, numerals.entry)
    places = [columns.of(name) for name in inputs]
    first = "mass" if "mass" in mapping else "damping"

    def row(i: int) -> Row[T]:
        jets = [
            (Jet(name, order), block[i][j])
            for order, block in blocks
            for j, name in enumerate(coordinates)
        ]
        acting = list(zip(places, inputs, driving[i], strict=True))
        return row_of(numerals, jets, ((), acting), f"{first}[{i + 1}]")

    return Statement("second order", coordinates, tuple(row(i) for i in range(n)))
