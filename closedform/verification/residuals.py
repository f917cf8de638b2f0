"""What is left of an identity: the first place at which it is not zero."""

from __future__ import annotations

from collections.abc import Callable
from typing import Protocol

from closedform.algebra.canonical import JordanForm
from closedform.algebra.exponential import ExponentialMatrix
from closedform.algebra.field import BaseField, FieldMatrix, Scalar
from closedform.algebra.root_matrix import RootMatrix
from closedform.algebra.spectrum import Spectrum

__all__ = [
    "Solved",
    "Vanishes",
    "first_nonzero",
    "first_nonzero_over_roots",
    "is_zero_element",
    "monomial",
]


class Solved(Protocol):
    """A matrix with its spectrum, its chains and its exponential."""

    @property
    def field(self) -> BaseField:
        """The field K of the entries."""

    @property
    def matrix(self) -> FieldMatrix:
        """The matrix A, n x n."""

    @property
    def spectrum(self) -> Spectrum:
        """The factored characteristic polynomial of A."""

    @property
    def jordan(self) -> JordanForm:
        """Its chains, which span the space."""

    @property
    def exponential(self) -> ExponentialMatrix:
        """The functions e^(At)."""


Vanishes = Callable[[Scalar], bool]
"""Whether an element counts as zero: where a relation among parameters holds, say."""


def is_zero_element(element: Scalar) -> bool:
    """Whether an element is zero in its field."""
    return not element


def first_nonzero(
    matrix: FieldMatrix, vanishes: Vanishes = is_zero_element
) -> tuple[int, int] | None:
    """The place (from 1) of the first entry that is not zero, or None."""
    if matrix.is_zero_matrix:
        return None
    rows = matrix.to_list()
    places = (
        (i, k)
        for i, row in enumerate(rows, start=1)
        for k, element in enumerate(row, start=1)
        if not vanishes(element)
    )
    return next(places, None)


def first_nonzero_over_roots(
    matrix: RootMatrix, vanishes: Vanishes = is_zero_element
) -> tuple[int, int] | None:
    """The place (from 1) of the first entry that is not zero over L, or None."""
    faults = [first_nonzero(c, vanishes) for c in matrix.coefficients]
    return min((fault for fault in faults if fault is not None), default=None)


def monomial(degree: int, power: int) -> str:
    """Return the function of time that a coefficient belongs to, in words of print."""
    root = "e^(λt)" if degree == 1 else f"e^(λt), λ any of {degree} roots"
    return root if power == 0 else f"t^{power} {root}"
