"""A function taken apart by the rates and frequencies of its terms."""

from __future__ import annotations

from collections.abc import Sequence
from typing import Literal

from closedform.algebra.field import Scalar
from closedform.algebra.parameter_field import ParameterField
from closedform.notation.rational_formula import rational_formula
from closedform.response.by_mode import ModePart, TermsOfMode
from closedform.response.parametric.terms import Term

__all__ = ["by_mode"]


def by_mode(writing: ParameterField, function: Sequence[Term]) -> tuple[ModePart, ...]:
    """Return the parts of a function of the time that share a rate and a frequency."""
    parts: dict[tuple[Scalar, Scalar | None], list[Term]] = {}
    for term in function:
        parts.setdefault((term.rate, term.frequency), []).append(term)
    return tuple(
        ModePart(
            rational_formula(writing, rate),
            _kind(terms[0]),
            None if frequency is None else rational_formula(writing, frequency),
            max(term.power for term in terms),
            TermsOfMode(writing, tuple(terms)),
        )
        for (rate, frequency), terms in parts.items()
    )


def _kind(term: Term) -> Literal["real", "circular", "hyperbolic"]:
    if term.kernel is None:
        return "real"
    return "circular" if term.kernel in ("cos", "sin") else "hyperbolic"
