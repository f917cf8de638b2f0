"""Whether a matrix is similar to A, and whether it is made of the blocks of a canonical form."""

from __future__ import annotations

import itertools

from closedform.checking.standing.ground import Ground
from closedform.checking.values.matrices import ExactMatrix, characteristic_coefficients, identity

__all__ = ["is_block_form", "is_similar"]


def is_similar(matrix: ExactMatrix, ground: Ground) -> bool:
    """Whether a matrix is similar to the A of a ground.

    Both have the same characteristic polynomial, and (M - lambda I)^k the same rank for each
    eigenvalue of more than one block or chain length.  Where no eigenvalue is repeated, the
    polynomial decides.
    """
    mine = characteristic_coefficients(matrix)
    theirs = characteristic_coefficients(ground.matrix)
    if not all((a - b).is_zero for a, b in zip(mine, theirs, strict=True)):
        return False
    unit = identity(ground.field, ground.size)
    for root, value in zip(ground.truth.eigenvalues, ground.eigenvalues, strict=True):
        if root.algebraic == 1:
            continue
        one, other = matrix - unit.scaled(value), ground.matrix - unit.scaled(value)
        power_one, power_other = one, other
        for _ in range(root.algebraic):
            if power_one.rank() != power_other.rank():
                return False
            power_one, power_other = power_one @ one, power_other @ other
    return True


def is_block_form(matrix: ExactMatrix) -> bool:
    """Whether a matrix is a Jordan form or a real canonical form, chains above or below.

    It is then block diagonal; a block is a number, or [[a, b], [-b, a]] with either sign of b,
    repeated along its diagonal with units beside it.
    """
    size = matrix.shape[0]
    at = 0
    starts: list[tuple[int, int]] = []
    while at < size:
        width = 2 if _is_rotation(matrix, at) else 1
        starts.append((at, width))
        at += width
    inside: set[tuple[int, int]] = set()
    for start, width in starts:
        inside |= {(start + i, start + j) for i in range(width) for j in range(width)}
    above = below = 0
    for (start, width), (after, next_width) in itertools.pairwise(starts):
        if width != next_width:
            continue
        upper = [(start + k, after + k) for k in range(width)]
        lower = [(after + k, start + k) for k in range(width)]
        for places, is_above in ((upper, True), (lower, False)):
            if not all(matrix.rows[i][j].is_zero for i, j in places):
                if not _linked(matrix, places, start, after, width):
                    return False
                inside |= set(places)
                above, below = above + is_above, below + (not is_above)
    if above and below:
        return False
    return all(
        matrix.rows[i][j].is_zero for i in range(size) for j in range(size) if (i, j) not in inside
    )


def _is_rotation(matrix: ExactMatrix, at: int) -> bool:
    """Whether a block [[a, b], [-b, a]] with b not zero begins at a place of the diagonal."""
    if at + 1 >= matrix.shape[0]:
        return False
    (a, b), (c, d) = (matrix.rows[at][at : at + 2], matrix.rows[at + 1][at : at + 2])
    return not c.is_zero and not b.is_zero and (a - d).is_zero and (b + c).is_zero


def _linked(
    matrix: ExactMatrix, places: list[tuple[int, int]], start: int, after: int, width: int
) -> bool:
    """Whether units link two equal blocks."""
    one = matrix.field.one
    if not all((matrix.rows[i][j] - one).is_zero for i, j in places):
        return False
    return all(
        (matrix.rows[start + i][start + j] - matrix.rows[after + i][after + j]).is_zero
        for i in range(width)
        for j in range(width)
    )
