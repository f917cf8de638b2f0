"""Waves: the functions an input is made of, and the constants they take as values.

A wave is amount · s^power · e^(rate s) · kernel(frequency s) with s = t - origin and all numbers
in a field K.  Products of polynomials, exponentials, sines and cosines are sums of waves.
A value of a wave at an instant of K is a sum of `Constant`s with weights in K.
"""

from __future__ import annotations

from collections.abc import Iterable
from dataclasses import dataclass
from typing import Literal

from closedform.algebra.field import BaseField, FieldMatrix, Scalar

__all__ = ["ONE", "Constant", "ConstantColumns", "Kernel", "Wave", "gathered_columns"]

Kernel = Literal["one", "cos", "sin"]


@dataclass(frozen=True, slots=True)
class Wave:
    """amount · s^power · e^(rate s) · kernel(frequency s), s = t - origin.

    Every number is an element of one field; the frequency is zero where the kernel is "one",
    and only there.
    """

    amount: Scalar
    power: int
    rate: Scalar
    kernel: Kernel
    frequency: Scalar
    origin: Scalar


@dataclass(frozen=True, slots=True)
class Constant:
    """The number e^growth · kernel(angle); growth and angle are elements of one field.

    The angle is zero where the kernel is "one", and only there.  `named` is the name of a
    number by which it is multiplied, if there is one.
    """

    growth: Scalar
    kernel: Kernel
    angle: Scalar
    named: str = ""

    @property
    def is_one(self) -> bool:
        """Whether the number is 1 by its form."""
        return self.kernel == "one" and not self.growth and not self.named


ConstantColumns = tuple[tuple[Constant, FieldMatrix], ...]
"""A column of numbers as a sum of constants times columns over K."""


def ONE(field: BaseField) -> Constant:  # noqa: N802  the number 1 of a field
    """Return the number 1 as a constant."""
    return Constant(field.domain.zero, "one", field.domain.zero)


def gathered_columns(parts: Iterable[tuple[Constant, FieldMatrix]]) -> ConstantColumns:
    """Return a sum of columns with those of one constant added up, and none that is zero."""
    found: dict[Constant, FieldMatrix] = {}
    for constant, column in parts:
        found[constant] = found[constant] + column if constant in found else column
    return tuple((c, column) for c, column in found.items() if not column.is_zero_matrix)
