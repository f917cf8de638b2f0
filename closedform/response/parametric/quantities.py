"""Named quantities of a case: frequencies, rates and roots, each with its definition.

A definition is a formula in the parameters and in names that come before it, or says
which root of a polynomial in the parameters the quantity is.
"""

from __future__ import annotations

from collections.abc import Iterable, Iterator
from dataclasses import dataclass
from typing import Literal

from closedform.algebra.field import Scalar
from closedform.notation.latex.names import printed_key

__all__ = [
    "Letters",
    "Part",
    "Quantity",
    "ResidueDefinition",
    "RootDefinition",
    "SquareRoot",
    "SumOfRoots",
    "Value",
]

Part = Literal["real", "imaginary"]


@dataclass(frozen=True)
class Value:
    """An element of the writing field."""

    value: Scalar


@dataclass(frozen=True)
class SquareRoot:
    """The positive square root of an element of the writing field."""

    square: Scalar


@dataclass(frozen=True)
class SumOfRoots:
    """(total + sign · sqrt(total^2 - 4 product))/2, or its square root where `rooted`.

    The two roots of x^2 - total x + product, both real: rates alpha and beta, or squares of
    frequencies.
    """

    total: Scalar
    product: Scalar
    sign: int
    rooted: bool = False


@dataclass(frozen=True)
class RootDefinition:
    """A real root of a polynomial in the parameters, coefficients highest first.

    `which` is its place among the roots, ordered by real, then imaginary part.  With `part`,
    for a polynomial in numbers, that part of a root that is not real.
    """

    polynomial: tuple[Scalar, ...]
    which: int
    part: Part | None = None


@dataclass(frozen=True)
class ResidueDefinition:
    """`weight` times a part of numerator(lambda)/(p'(lambda) g(lambda)) at a root of p.

    The polynomials p, g = `beside` and the numerator are in numbers, coefficients highest first;
    `which` as for roots.
    """

    polynomial: tuple[Scalar, ...]
    which: int
    part: Part
    numerator: tuple[Scalar, ...]
    weight: int
    beside: tuple[Scalar, ...]


Definition = Value | SquareRoot | SumOfRoots | RootDefinition | ResidueDefinition


@dataclass(frozen=True)
class Quantity:
    """A name and what it stands for.  All quantities are real; `positive` says more."""

    name: str
    definition: Definition
    positive: bool = True


class Letters:
    """Hands out names that do not print like those of the model, or like each other."""

    def __init__(self, taken: Iterable[str]) -> None:
        self._taken = {printed_key(name) for name in taken}

    def take(self, stem: str, number: int | None = None) -> str:
        """Return `stem`, or `stem` with a number, or the next spelling that is free."""
        for spelling in _spellings(stem, number):
            key = printed_key(spelling)
            if key not in self._taken:
                self._taken.add(key)
                return spelling
        raise AssertionError("spellings never end")


def _spellings(stem: str, number: int | None) -> Iterator[str]:
    joint = "" if "_" in stem else "_"
    yield stem if number is None else f"{stem}{joint}{number}"
    mark = "r"
    while True:
        yield f"{stem}{joint}{mark}" + ("" if number is None else f"_{number}")
        mark += "r"
