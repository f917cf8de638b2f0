"""The exponential of a small constant matrix, whatever its form, by Putzer's method."""

from __future__ import annotations

import itertools
from collections.abc import Iterable, Sequence
from fractions import Fraction

from closedform.algebra.elementary import Element, NotElementaryError
from closedform.checking.values.matrices import ExactMatrix, identity

__all__ = ["eigenvalues_of", "matrix_exponential"]


def matrix_exponential(matrix: ExactMatrix, candidates: Iterable[Element] = ()) -> ExactMatrix:
    """Return e^(M t) for a constant square matrix.

    It is the sum of r_k(t) P_k with P_0 = I, P_k = P_(k-1) (M - lambda_k I), and
    r_1' = lambda_1 r_1, r_k' = lambda_k r_k + r_(k-1), over the eigenvalues of each of the
    blocks into which the matrix falls.  `candidates` are numbers among which eigenvalues may
    be looked for where neither a triangle nor a quadratic equation gives them.

    Raises:  NotElementaryError if the eigenvalues of a block are not found.
    Source:  E. J. Putzer, Avoiding the Jordan canonical form in the discussion of linear
             systems with constant coefficients, The American Mathematical Monthly 73 (1966).
    """
    field = matrix.field
    size = matrix.shape[0]
    entries = [[field.zero] * size for _ in range(size)]
    for block in _connected(matrix):
        inside = ExactMatrix(field, tuple(tuple(matrix.rows[i][j] for j in block) for i in block))
        found = _putzer(inside, eigenvalues_of(inside, candidates))
        for i, row in zip(block, found.rows, strict=True):
            for j, entry in zip(block, row, strict=True):
                entries[i][j] = entry
    return ExactMatrix(field, tuple(map(tuple, entries)))


LARGEST_TRIED = 12
"""Rows of a matrix whose eigenvalues are sought among candidates."""


def eigenvalues_of(matrix: ExactMatrix, candidates: Iterable[Element] = ()) -> list[Element]:
    """Return the eigenvalues of a constant matrix with their multiplicities.

    Raises:  NotElementaryError if they are not found.
    """
    field, size = matrix.field, matrix.shape[0]
    rows = matrix.rows
    below = all(rows[i][j].is_zero for i in range(size) for j in range(i))
    above = all(rows[i][j].is_zero for i in range(size) for j in range(i + 1, size))
    if below or above:
        return [rows[k][k] for k in range(size)]
    if size == 2:
        half = matrix.trace() / field.number(Fraction(2))
        root = field.sqrt(half * half - matrix.determinant())
        return [half + root, half - root]
    if size > LARGEST_TRIED:
        raise NotElementaryError(f"eigenvalues of {size} rows that are no triangle are not sought")
    found: list[Element] = []
    for candidate in candidates:
        if candidate not in found:
            found += [candidate] * _multiplicity(matrix, candidate)
    if len(found) != size:
        raise NotElementaryError("the eigenvalues of a matrix in this line are not found")
    return found


def _multiplicity(matrix: ExactMatrix, value: Element) -> int:
    """Return the algebraic multiplicity of a number as an eigenvalue."""
    size = matrix.shape[0]
    shifted = matrix - identity(matrix.field, size).scaled(value)
    return size - shifted.power(size).rank()


def _connected(matrix: ExactMatrix) -> list[list[int]]:
    """Return the sets of indices that entries off the diagonal connect."""
    size = matrix.shape[0]
    left, blocks = set(range(size)), []
    while left:
        pending, block = [min(left)], set()
        while pending:
            at = pending.pop()
            if at in block:
                continue
            block.add(at)
            pending += [
                j
                for j in left - block
                if not (matrix.rows[at][j].is_zero and matrix.rows[j][at].is_zero)
            ]
        left -= block
        blocks.append(sorted(block))
    return blocks


def _putzer(matrix: ExactMatrix, eigenvalues: Sequence[Element]) -> ExactMatrix:
    field, size = matrix.field, matrix.shape[0]
    product, function = identity(field, size), field.exp(eigenvalues[0] * field.t)
    total = product.scaled(function)
    for before, value in itertools.pairwise(eigenvalues):
        product = product @ (matrix - identity(field, size).scaled(before))
        function = _convolved(value, function)
        total = total + product.scaled(function)
    return total


def _convolved(rate: Element, function: Element) -> Element:
    """Return the solution of r' = rate r + function with r(0) = 0."""
    field = function.field
    inside = (function * field.exp(-rate * field.t)).integral()
    return field.exp(rate * field.t) * (inside - inside.at(field.zero))
