"""How large functions are, told without writing them."""

from __future__ import annotations

from collections.abc import Sequence
from functools import lru_cache

from closedform.algebra.field import Scalar
from closedform.notation.laurent_sum import flat_size, laurent_of
from closedform.notation.rational_formula import taken_apart
from closedform.response.parametric.terms import Term

__all__ = ["are_long", "estimate"]

LONG = 300
"""Functions whose amounts have more terms than this together are compared by an estimate.

Nobody reads such formulas side by side, and writing each of many forms takes minutes."""


def are_long(functions: Sequence[Sequence[Term]]) -> bool:
    """Whether functions are too long to write every form that they may have."""
    return sum(len(t.amount.numer) + len(t.amount.denom) for f in functions for t in f) > LONG


def estimate(functions: Sequence[Sequence[Term]]) -> int:
    """Return the operations of functions whose amounts stand in factors, term by term."""
    return sum(
        _operations(term.amount)
        + _operations(term.rate)
        + (0 if term.frequency is None else _operations(term.frequency))
        for terms in functions
        for term in terms
    )


@lru_cache(maxsize=16384)
def _operations(element: Scalar) -> int:
    if not element:
        return 0
    return sum(
        flat_size(laurent_of(factor)) + 1 + (abs(exponent) > 1)
        for factor, exponent in taken_apart(element).factors
    )
