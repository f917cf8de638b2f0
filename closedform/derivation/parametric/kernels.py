"""The even and the odd function of a pair of eigenvalues: their letters, and what they are."""

from __future__ import annotations

from closedform.derivation.parametric.case_steps import case_conditions_of
from closedform.derivation.parametric.spectrum import kernels_of
from closedform.derivation.step import Statement, Symbol
from closedform.notation.expression import (
    Name,
)
from closedform.response.parametric.case import Case
from closedform.response.parametric.quantities import Letters
from closedform.response.parametric.response import ParametricResponse

__all__ = ["PAIR", "function_of", "kernel_letters", "kernel_row"]

PAIR = frozenset({"circular", "double", "hyperbolic"})
"""Regimes of a quadratic factor that are written with an even and an odd function."""


def kernel_letters(letters: Letters, number: int | None = None) -> tuple[str, str]:
    """Return two letters for the even and the odd function of a pair, C and S if both are free."""
    for even, odd in (("C", "S"), ("f", "g"), ("phi", "psi")):
        taken = letters.take(even, number), letters.take(odd, number)
        plain = (even, odd) if number is None else (f"{even}_{number}", f"{odd}_{number}")
        if taken == plain:
            return taken
    return letters.take("chi", number), letters.take("sigma", number)


def function_of(name: str, t: Name) -> Symbol:
    """Return name(t)."""
    return Symbol("scalar", letter=name, argument=t)


def kernel_row(
    response: ParametricResponse, case: Case, place: int, kernels: tuple[Symbol, Symbol]
) -> dict[str, object]:
    """Return what both functions are in a case, for a row of their table."""
    found = kernels_of(response.model.field, case.modes[place], response.model.time)
    if found is None:
        raise TypeError("only a pair has an even and an odd function")
    return {
        "number": case.number + 1,
        "cases": (case.number,),
        "conditions": case_conditions_of(case),
        "even": Statement("kernel", (kernels[0], found[0])),
        "odd": Statement("kernel", (kernels[1], found[1])),
    }
