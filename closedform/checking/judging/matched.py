"""Eigenvalues and eigenvectors put side by side, where some of the ones or the others are wrong."""

from __future__ import annotations

from collections.abc import Iterator, Sequence
from itertools import permutations

from closedform.algebra.elementary import Element
from closedform.checking.standing.ground import Ground
from closedform.checking.values.matrices import ExactMatrix, identity

__all__ = ["eigenvalues_for", "eigenvectors_for", "transformations_for"]

MOST_LEFT = 2
"""So many may be wrong: more can be matched in too many ways."""


def eigenvalues_for(columns: ExactMatrix, ground: Ground) -> Iterator[tuple[Element, ...]]:
    """Yield the eigenvalues of A in the order of the columns of P.

    A column that is no eigenvector has one of those that are left.  Nothing is yielded where A
    has repeated eigenvalues.
    """
    found = [_owner(entries, ground) for entries in columns.columns]
    yield from _filled(found, ground)


def eigenvectors_for(values: Sequence[Element], ground: Ground) -> Iterator[ExactMatrix]:
    """Yield P whose columns are eigenvectors of A, in the order of a list of eigenvalues.

    For one that is no eigenvalue, the vector of one of those that are left is taken.  Nothing
    is yielded where A has repeated eigenvalues.
    """
    own = [value if value in ground.eigenvalues else None for value in values]
    for chosen in _filled(own, ground):
        kernels = [_shifted(value, ground).kernel() for value in chosen]
        if all(len(kernel) == 1 for kernel in kernels):
            rows = zip(*(kernel[0].entries for kernel in kernels), strict=True)
            yield ExactMatrix(ground.field, tuple(rows))


def transformations_for(form: ExactMatrix, ground: Ground) -> Iterator[ExactMatrix]:
    """Yield a P with A P = P J for a J that is similar to A: a sum of all that satisfy this.

    Nothing is yielded where the model is large, or that sum happens to have no inverse.
    """
    size, zero = ground.size, ground.field.zero
    if size > MOST_STATES:
        return
    places = [(i, j) for i in range(size) for j in range(size)]
    rows = []
    for i, j in places:
        row = [zero] * len(places)
        for k in range(size):
            row[k * size + j] = row[k * size + j] + ground.matrix.rows[i][k]
            row[i * size + k] = row[i * size + k] - form.rows[k][j]
        rows.append(tuple(row))
    total = [zero] * len(places)
    for weight, vector in enumerate(ExactMatrix(ground.field, tuple(rows)).kernel(), start=1):
        scaled = [entry * weight for entry in vector.entries]
        total = [one + other for one, other in zip(total, scaled, strict=True)]
    p = ExactMatrix(
        ground.field, tuple(tuple(total[i * size : (i + 1) * size]) for i in range(size))
    )
    if not p.determinant().is_zero:
        yield p


MOST_STATES = 4
"""The largest model for which P is sought by n^2 linear equations."""


def _filled(found: Sequence[Element | None], ground: Ground) -> Iterator[tuple[Element, ...]]:
    """Yield the eigenvalues with those that are left in the places of None."""
    known = [value for value in found if value is not None]
    left = [value for value in ground.eigenvalues if value not in known]
    simple = len(ground.eigenvalues) == ground.size == len(found)
    if not simple or len(left) != len(found) - len(known) or len(left) > MOST_LEFT:
        return
    for order in permutations(left):
        rest = iter(order)
        yield tuple(value if value is not None else next(rest) for value in found)


def _owner(vector: ExactMatrix, ground: Ground) -> Element | None:
    return next((v for v in ground.eigenvalues if (_shifted(v, ground) @ vector).is_zero), None)


def _shifted(value: Element, ground: Ground) -> ExactMatrix:
    return ground.matrix - identity(ground.field, ground.size).scaled(value)
