"""Slips with whole matrices: transposed, exchanged, not divided by the determinant."""

from __future__ import annotations

from collections.abc import Iterator
from itertools import combinations
from typing import TypeVar

from closedform.checking.judging.authors_matrices import authors_matrix
from closedform.checking.slips import names
from closedform.checking.slips.making import ONE, ZERO, negated, over, times
from closedform.checking.slips.spots import Spot
from closedform.checking.slips.trial import Candidate, Trial
from closedform.checking.values.matrices import ExactMatrix
from closedform.checking.values.written_back import written_back
from closedform.notation.written.tree import Array, Written

__all__ = ["inverses", "rearranged", "swapped_products"]

MATRICES = (
    "matrix",
    "P",
    "P inverse",
    "J",
    "real form",
    "exp J",
    "exp A",
    "identity",
    "definition",
)


def swapped_products(trial: Trial) -> Iterator[Candidate]:
    """Yield the right e^(At) where the line has P^(-1) e^(Jt) P for the author's P."""
    right = trial.right_in_known_names()
    if trial.claim.says != "exp A" or right is None:
        return
    own = trial.own()
    for p in _transformations(trial):
        if isinstance(own, ExactMatrix) and own.shape == p.shape and p.is_square:
            inverse = p.inverse()
            middle = inverse @ trial.ground.transition @ p
            if (own - inverse @ middle @ p).is_zero:
                yield Candidate(names.SWAPPED_P, "P^-1 e^(Jt) P for P e^(Jt) P^-1", right)


def _transformations(trial: Trial) -> Iterator[ExactMatrix]:
    stated = authors_matrix("P", trial.setting, trial.ground)
    if stated is not None:
        yield stated
    columns = []
    for entry in trial.setting.author.entries:
        if entry.says in ("eigenvector", "generalized eigenvector") and entry.values:
            value = trial.setting.value(entry.value, trial.ground)
            if isinstance(value, ExactMatrix):
                columns.append(value.entries)
    size = trial.ground.size
    if len(columns) == size and all(len(column) == size for column in columns):
        yield ExactMatrix(trial.ground.field, tuple(zip(*columns, strict=True)))


def inverses(trial: Trial) -> Iterator[Candidate]:
    """Yield P^(-1) divided by the determinant, and with the signs and places of the adjugate."""
    if trial.claim.says == "P":
        yield from _inverted(trial)
    if trial.claim.says != "P inverse":
        return
    p = authors_matrix("P", trial.setting, trial.ground)
    if p is not None and p.is_square:
        determinant = written_back(p.determinant())
        one = times(over(ONE, determinant), trial.tree)
        yield Candidate(names.MISSING_DETERMINANT, "the factor in front", one)
        yield Candidate(names.MISSING_DETERMINANT, "the factor in front", negated(one))
        twice = times(over(ONE, times(determinant, determinant)), trial.tree)
        yield Candidate(names.DETERMINANT_TWICE, "the factor in front", twice)
        own = trial.own()
        if isinstance(own, ExactMatrix) and own.shape == p.shape and (own - p).is_zero:
            yield Candidate(names.INVERSE_FOR_P, "all of it", written_back(p.inverse()))
    for spot in _arrays(trial):
        yield from _adjugates(trial, spot)


def _inverted(trial: Trial) -> Iterator[Candidate]:
    own = trial.own()
    if isinstance(own, ExactMatrix) and own.is_square and not own.determinant().is_zero:
        yield Candidate(names.INVERSE_FOR_P, "all of it", written_back(own.inverse()))


def _adjugates(trial: Trial, spot: Spot) -> Iterator[Candidate]:
    assert isinstance(spot.node, Array)  # noqa: S101  a spot of _arrays
    rows = spot.node.rows
    signed = tuple(
        tuple(negated(e) if (i + j) % 2 else e for j, e in enumerate(row))
        for i, row in enumerate(rows)
    )
    yield Candidate(
        names.ADJUGATE_SIGN, "the entries with i + j odd", trial.changed(spot, Array(signed))
    )
    if len(rows) == len(rows[0]) == 2:
        (a, b), (c, d) = rows
        turned = trial.changed(spot, Array(((d, b), (c, a))))
        yield Candidate(names.ADJUGATE_DIAGONAL, "the diagonal", turned)


def rearranged_first(trial: Trial) -> Iterator[Candidate]:
    """Yield the same as `rearranged` where no balls sort candidates out."""
    if not trial.points and not trial.roots:
        yield from rearranged(trial)


def rearranged(trial: Trial) -> Iterator[Candidate]:
    """Yield the matrix transposed, and with two rows, columns or entries exchanged."""
    for spot in _arrays(trial):
        assert isinstance(spot.node, Array)  # noqa: S101  a spot of _arrays
        for name, where, rows in _orders(trial, spot.node.rows):
            yield Candidate(name, where, trial.changed(spot, Array(rows)))


Rows = tuple[tuple[Written, ...], ...]
LARGEST = 16
"""Matrices of so many entries are tried with two of them exchanged."""


def _orders(trial: Trial, rows: Rows) -> Iterator[tuple[str, str, Rows]]:
    height, width = len(rows), len(rows[0])
    if height == width:
        name = {"P": names.TRANSPOSED_P, "P inverse": names.TRANSPOSED_INVERSE}.get(
            trial.claim.says, names.TRANSPOSED
        )
        if trial.claim.says in ("J", "exp J", "exp A") and _is_lower(rows):
            name = names.CHAIN_SIDE
        yield name, "all of it", tuple(zip(*rows, strict=True))
    if min(height, width) > 1:
        for i, j in combinations(range(width), 2):
            where = f"columns {i + 1} and {j + 1}"
            yield names.COLUMNS, where, tuple(_exchanged(row, i, j) for row in rows)
        for i, j in combinations(range(height), 2):
            yield names.ROWS, f"rows {i + 1} and {j + 1}", _exchanged(rows, i, j)
    flat = [(i, j) for i in range(height) for j in range(width)]
    for one, two in combinations(flat, 2):
        if rows[one[0]][one[1]] == rows[two[0]][two[1]] or len(flat) > LARGEST:
            continue
        where = f"entries {one[0] + 1, one[1] + 1} and {two[0] + 1, two[1] + 1}"
        places = {one: two, two: one}
        new = tuple(
            tuple(
                rows[places.get((i, j), (i, j))[0]][places.get((i, j), (i, j))[1]]
                for j in range(width)
            )
            for i in range(height)
        )
        yield names.ENTRIES, where, new


def _is_lower(rows: Rows) -> bool:
    """Whether zeros stand above the diagonal, and not everywhere below."""
    above = [e for i, row in enumerate(rows) for j, e in enumerate(row) if j > i]
    below = [e for i, row in enumerate(rows) for j, e in enumerate(row) if j < i]
    return set(above) == {ZERO} and set(below) != {ZERO}


T = TypeVar("T")


def _exchanged(items: tuple[T, ...], i: int, j: int) -> tuple[T, ...]:
    found = list(items)
    found[i], found[j] = found[j], found[i]
    return tuple(found)


def _arrays(trial: Trial) -> list[Spot]:
    return [spot for spot in trial.spots() if isinstance(spot.node, Array)]
