"""Eigenvectors of an eigenvalue, and printed decimals held against them."""

from __future__ import annotations

from collections.abc import Sequence

from flint import acb

from closedform.algebra.elementary import Element
from closedform.checking.errors import NotJudgedError
from closedform.checking.judging.rounded_vectors import rounded_direction
from closedform.checking.standing.ground import Ground
from closedform.checking.standing.setting import Setting
from closedform.checking.values.matrices import ExactMatrix, characteristic_coefficients, identity
from closedform.notation.written.tree import Written

__all__ = ["eigenvalue_of_vector", "eigenvectors", "named_direction", "rounded_text"]


def eigenvalue_of_vector(vector: ExactMatrix, ground: Ground) -> Element | None:
    """Return the eigenvalue to which a vector belongs, None if it is no eigenvector."""
    image = ground.matrix @ vector
    for value in ground.eigenvalues:
        if (image - vector.scaled(value)).is_zero:
            return value
    return None


def eigenvectors(ground: Ground, value: Element) -> list[ExactMatrix]:
    """Return a basis of the eigenvectors of an eigenvalue."""
    return (ground.matrix - identity(ground.field, ground.size).scaled(value)).kernel()


def named_direction(ground: Ground, value: Element) -> list[ExactMatrix]:
    """Return an eigenvector of an eigenvalue that has a name and no formula.

    Its entries are polynomials in the name: a column of the adjugate of lambda I - A, found by
    the scheme of Horner, that is not zero at the value of the name.
    Raises:  NotJudgedError where there is more than one direction.
    """
    named = [root.value is None and root.geometric == 1 for root in ground.truth.eigenvalues]
    if not any(own == value and one for own, one in zip(ground.eigenvalues, named, strict=True)):
        raise NotJudgedError("the eigenvectors of this eigenvalue are not known in closed form")
    unit = identity(ground.field, ground.size)
    coefficients = characteristic_coefficients(ground.matrix)
    part, total = unit, unit
    for coefficient in reversed(coefficients[1:-1]):
        part = ground.matrix @ part + unit.scaled(coefficient)
        total = total.scaled(value) + part
    names = ground.sampled()
    for vector in total.columns:
        if any(not entry.enclosure(acb(0), names).contains(0) for entry in vector.entries):
            return [vector]
    raise NotJudgedError("the eigenvectors of this eigenvalue are not known in closed form")


def rounded_text(
    printed: Written | Sequence[Written],
    kernel: list[ExactMatrix],
    setting: Setting,
    ground: Ground,
) -> str | None:
    """Return words for printed decimals that are a direction of a kernel, rounded; else None."""

    def value(tree: Written) -> acb:
        number = setting.value(tree, ground)
        if isinstance(number, ExactMatrix):
            raise NotJudgedError("a matrix stands where a number is wanted")
        return number.enclosure(acb(0), ground.sampled())

    return rounded_direction(printed, kernel, ground.sampled, value)
