"""Signs and sample points of the parameters of a truth."""

from __future__ import annotations

from collections.abc import Callable, Mapping
from fractions import Fraction

from closedform.algebra.elementary import Element, ElementaryField
from closedform.checking.truth import Truth
from closedform.checking.values.exact import exact
from closedform.checking.values.scope import Scope
from closedform.notation.written.tree import Written

__all__ = ["points_of", "sign_of"]


def sign_of(truth: Truth) -> Callable[[Mapping[tuple[int, ...], Fraction]], int | None]:
    """Return the truth's signs, for polynomials in which names without formula may stand."""
    count = len(truth.parameters)

    def sign(polynomial: Mapping[tuple[int, ...], Fraction]) -> int | None:
        if any(any(exponents[count:]) for exponents in polynomial):
            return None
        return truth.sign({exponents[:count]: c for exponents, c in polynomial.items()})

    return sign


def points_of(truth: Truth) -> list[dict[str, Fraction]]:
    """Return the samples of the parameters that are rational numbers."""
    points = []
    for sample in truth.samples:
        numbers = {name: rational(tree) for name, tree in sample.items()}
        known = {name: value for name, value in numbers.items() if value is not None}
        if len(known) == len(sample):
            points.append(known)
    return points


def rational(tree: Written) -> Fraction | None:
    """Return the rational number that a formula without names is, None if it is none."""
    value = exact(tree, Scope(ElementaryField(), "t"))
    return value.as_fraction() if isinstance(value, Element) else None
