"""A canonical form or an inverse in printed decimals, and the exact one that it stands for."""

from __future__ import annotations

from collections.abc import Iterator

from flint import acb, ctx

from closedform.algebra.elementary import Element, NotElementaryError
from closedform.checking.judging.similar import is_block_form, is_similar
from closedform.checking.standing.ground import Ground
from closedform.checking.values.matrices import ExactMatrix

__all__ = ["exact_form"]

NEAR = 0.02
"""Farther from an exact value, relative to the largest, no printed number stands for it."""


def exact_form(matrix: ExactMatrix, ground: Ground) -> ExactMatrix | None:
    """Return the canonical form of A that a matrix of rounded numbers stands for, or None.

    Every entry is replaced by the nearest of 0, 1, the eigenvalues, their real parts and their
    imaginary parts with either sign; what results has to be similar to A, and in blocks.
    """
    if matrix.shape != ground.matrix.shape or not matrix.is_constant:
        return None
    candidates = list(dict.fromkeys(_candidates(ground)))
    with ctx.workprec(64):
        names = ground.sampled()
        points = [complex(c.enclosure(acb(0), names)) for c in candidates]
        scale = max(1.0, *map(abs, points))
        rows = []
        for row in matrix.rows:
            entries = [complex(entry.enclosure(acb(0), names)) for entry in row]
            nearest = [min(range(len(points)), key=lambda k: abs(points[k] - e)) for e in entries]
            near = [abs(points[k] - e) for k, e in zip(nearest, entries, strict=True)]
            if any(distance > NEAR * scale for distance in near):
                return None
            rows.append(tuple(candidates[k] for k in nearest))
    found = ExactMatrix(ground.field, tuple(rows))
    return found if is_block_form(found) and is_similar(found, ground) else None


def _candidates(ground: Ground) -> Iterator[Element]:
    field = ground.field
    yield from (field.zero, field.one)
    for value in ground.eigenvalues:
        yield value
        try:
            imaginary = field.im(value)
            yield from (field.re(value), imaginary, -imaginary)
        except NotElementaryError:
            continue
