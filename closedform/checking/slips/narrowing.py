"""Narrowing a trial to the one entry of a matrix that is wrong."""

from __future__ import annotations

from dataclasses import replace
from fractions import Fraction

from flint import arb

from closedform.checking.slips.measuring import largest, real, size
from closedform.checking.slips.spots import Spot, Step, put
from closedform.checking.slips.trial import EXACTLY, Effort, Point, Trial, Values
from closedform.checking.values.matrices import ExactMatrix
from closedform.notation.written.tree import Array, Written

__all__ = ["narrowed", "wrong_entries"]


def narrowed(trial: Trial) -> Trial:
    """Return the trial on the one entry that is wrong, if there is just one in an array."""
    shape, found = trial.shape, trial.values(trial.tree)
    if found is None or trial.entry is not None or shape == (1, 1):
        return trial
    wrong = wrong_entries(trial, shape)
    arrays = [spot for spot in trial.spots() if isinstance(spot.node, Array)]
    if len(wrong) > 1 and len(arrays) == 1:
        return replace(trial, array=arrays[0].path)
    if len(wrong) != 1 or len(arrays) != 1:
        return trial
    (i, j), array = wrong[0], arrays[0]
    at = (i - 1) * shape[1] + j - 1
    points = tuple(Point(p.names, (p.true[at],)) for p in trial.points)
    for row, column in ((i, j), (j, i)):
        own = _entry(trial, array, row, column, points)
        if own is not None and _is_entry(own, found, at):
            true = trial.true.rows[i - 1][j - 1] if isinstance(trial.true, ExactMatrix) else None
            return replace(own, entry=(i, j), true=true)
    return trial


def _entry(
    trial: Trial, array: Spot, row: int, column: int, points: tuple[Point, ...]
) -> Trial | None:
    assert isinstance(array.node, Array)  # noqa: S101  asked for before
    rows = array.node.rows
    if row > len(rows) or column > len(rows[0]):
        return None
    steps = (*array.path, ("rows", (row - 1, column - 1)))
    cut = len(array.path)

    def back(tree: Written) -> Written:
        return put(trial.tree, steps, part_at(tree, array.path))

    narrow = put(trial.tree, array.path, rows[row - 1][column - 1])
    return replace(
        trial, tree=narrow, points=points, start=array.path[:cut], back=back, effort=Effort()
    )


def _is_entry(own: Trial, found: Values, at: int) -> bool:
    values = own.values(own.tree)
    if values is None:
        return False
    return all(
        size(one[0] - two[at]) <= real(EXACTLY) * size(two[at]).max(arb(1) / 10**30)
        for one, two in zip(values, found, strict=True)
    )


def wrong_entries(trial: Trial, shape: tuple[int, int]) -> list[tuple[int, int]]:
    """Return which entries are not the true ones, counted from 1."""
    found = trial.values(trial.tree)
    if found is None:
        return []
    limit = real(Fraction(1, 100) if trial.loose else EXACTLY)
    wrong = []
    for k in range(shape[0] * shape[1]):
        far = any(
            size(values[k] - point.true[k]) > limit * largest(point.true)
            for values, point in zip(found, trial.points, strict=True)
        )
        if far:
            wrong.append((k // shape[1] + 1, k % shape[1] + 1))
    return wrong


def part_at(tree: Written, path: tuple[Step, ...]) -> Written:
    """Return the part of a formula at a place."""
    part: Written = tree
    for name, indices in path:
        value = getattr(part, name)
        for k in indices:
            value = value[k]
        part = value
    return part
