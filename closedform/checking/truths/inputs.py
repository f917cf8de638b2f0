"""The inputs of a driven model as functions of the time, interval by interval."""

from __future__ import annotations

from closedform.algebra.field import Scalar
from closedform.derivation.driven.signals import waves_formula, waves_in
from closedform.derivation.driven.writing import Writing
from closedform.model.driven.model import DrivenModel
from closedform.notation.expression import ZERO, Expression, Name

__all__ = ["drives_of", "inputs_of"]


def inputs_of(model: DrivenModel) -> dict[str, tuple[Expression, ...]]:
    """Return the inputs that have a name, each with a formula in every interval.

    Impulses are in none: they strike between intervals.
    """
    by_column = _columns(model)
    return {
        given.formula.text: formulas
        for given, formulas in zip(model.inputs, by_column, strict=True)
        if given.name and isinstance(given.formula, Name)
    }


def drives_of(model: DrivenModel) -> tuple[tuple[Expression, ...], ...]:
    """Return B u(t) in every interval, a row for each state; nothing if there is no input."""
    matrix = model.reduction.input_matrix
    if matrix is None:
        return ()
    by_interval = list(zip(*_columns(model), strict=True))
    return tuple(
        tuple(_combined(Writing(model), row, values) for values in by_interval)
        for row in matrix.to_list()
    )


def _columns(model: DrivenModel) -> list[tuple[Expression, ...]]:
    writing, intervals = Writing(model), range(1 + len(model.timeline))
    return [
        tuple(waves_formula(writing, waves_in(writing, column, k)) for k in intervals)
        for column in range(len(model.inputs))
    ]


def _combined(writing: Writing, row: list[Scalar], values: tuple[Expression, ...]) -> Expression:
    pairs = [(e, v) for e, v in zip(row, values, strict=True) if e and v != ZERO]
    return writing.combination(([e for e, _ in pairs], [v for _, v in pairs]))
