"""Bases of what elements of a field add up to with whole numbers.

Elements are vectors over Q: surd sums by their radicands, rational functions over a common
denominator by their monomials.  Hermite's normal form gives a basis of the Z-module.
"""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass, replace
from fractions import Fraction
from math import lcm
from typing import Any

from flint import fmpz_mat
from sympy.polys.domains import QQ

from closedform.algebra.field import BaseField, Scalar, rational
from closedform.algebra.parameter_field import ParameterField
from closedform.algebra.surds import SurdSum

__all__ = ["Basis", "basis_of", "turned_down"]


@dataclass(frozen=True)
class Basis:
    """A basis of the sums of elements of a field: `rows` are those elements as vectors.

    If not `merged` there is an element, or its opposite, for each that is asked for.
    """

    field: BaseField
    below: Any
    keys: tuple[Any, ...]
    rows: tuple[tuple[Fraction, ...], ...]
    elements: tuple[Scalar, ...]
    merged: bool = True

    def counts(self, element: Scalar) -> tuple[int, ...]:
        """Return the whole numbers by which the basis adds up to an element."""
        vector = _vector(self.field, element, self.below)
        left = [vector.pop(key, Fraction(0)) for key in self.keys]
        if not self.merged:
            opposite = tuple(-c for c in left)
            return tuple(
                int(row == tuple(left)) - int(any(row) and row == opposite) for row in self.rows
            )
        found = []
        for row in self.rows:
            pivot = next(k for k, entry in enumerate(row) if entry)
            count = left[pivot] / row[pivot]
            if count.denominator != 1:
                raise ValueError(f"{element} is no sum of the basis")
            left = [a - count * b for a, b in zip(left, row, strict=True)]
            found.append(int(count))
        if any(left) or vector:
            raise ValueError(f"{element} is no sum of the basis")
        return tuple(found)


def basis_of(field: BaseField, elements: Sequence[Scalar], *, merged: bool = True) -> Basis:
    """Return a basis of what elements add up to, in Hermite's normal form.

    If not `merged` it is the elements themselves, one of each sign.
    """
    below = None
    if isinstance(field, ParameterField):
        below = field.domain.one.denom
        for element in elements:
            below = below.lcm(element.denom)
    vectors = [_vector(field, element, below) for element in elements]
    keys = tuple(sorted({key for vector in vectors for key in vector}, reverse=True))
    if not vectors:
        return Basis(field, below, keys, (), ())
    if not merged:
        return _each(field, below, keys, vectors)
    scale = lcm(*(c.denominator for vector in vectors for c in vector.values()))
    whole = [[int(v.get(key, Fraction(0)) * scale) for key in keys] for v in vectors]
    reduced = fmpz_mat(whole).hnf()
    rows = []
    for i in range(reduced.nrows()):
        entries = [Fraction(int(reduced[i, k]), scale) for k in range(reduced.ncols())]
        if any(entries):
            rows.append(tuple(entries))
    elements_of = tuple(_element(field, keys, r, below) for r in rows)
    return Basis(field, below, keys, tuple(rows), elements_of)


def turned_down(basis: Basis, elements: Sequence[Scalar]) -> Basis:
    """Return the basis with opposites of what occurs with a minus alone: e^(-T), not 1/e^T."""
    counts = [basis.counts(element) for element in elements]
    signs = [-1 if all(c[k] <= 0 for c in counts) else 1 for k in range(len(basis.rows))]
    return replace(
        basis,
        rows=tuple(
            tuple(sign * c for c in row) for sign, row in zip(signs, basis.rows, strict=True)
        ),
        elements=tuple(
            element * basis.field.domain.convert(sign)
            for sign, element in zip(signs, basis.elements, strict=True)
        ),
    )


def _each(
    field: BaseField, below: Any, keys: tuple[Any, ...], vectors: Sequence[dict[Any, Fraction]]
) -> Basis:
    rows: list[tuple[Fraction, ...]] = []
    for vector in vectors:
        row = tuple(vector.get(key, Fraction(0)) for key in keys)
        if next(c for c in row if c) < 0:
            row = tuple(-c for c in row)
        if row not in rows:
            rows.append(row)
    elements = tuple(_element(field, keys, row, below) for row in rows)
    return Basis(field, below, keys, tuple(rows), elements, merged=False)


def _vector(field: BaseField, element: Scalar, below: Any) -> dict[Any, Fraction]:
    """An element by its rational coordinates, over the denominator `below`."""
    if not isinstance(field, ParameterField):
        return dict(field.surds(element).terms)
    numerator = element.numer * below.exquo(element.denom)
    return {monomial: rational(c) for monomial, c in numerator.iterterms()}


def _element(field: BaseField, keys: Sequence[Any], row: Sequence[Fraction], below: Any) -> Scalar:
    if not isinstance(field, ParameterField):
        return field.scalar(SurdSum.of(dict(zip(keys, row, strict=True))))
    terms = {k: QQ(c.numerator, c.denominator) for k, c in zip(keys, row, strict=True) if c}
    above = below.ring.from_dict(terms)
    return field.of_polynomial(above) / field.of_polynomial(below)
