"""The field of the numbers that elements with parameters become at values of these.

It is a base field Q(sqrt(d_1), …), with the number pi adjoined where pi is left: pi is
transcendental over every base field, so this is a field of rational functions in it.
"""

from __future__ import annotations

from collections.abc import Iterable, Mapping
from dataclasses import dataclass
from fractions import Fraction
from functools import cached_property
from typing import Any

from flint import arb, ctx
from sympy import Symbol

from closedform.algebra.field import BaseField, Scalar, base_field
from closedform.algebra.parameter_field import PI, ParameterField
from closedform.algebra.surds import SurdSum

__all__ = ["FieldWithPi", "element_at", "value_field"]


@dataclass(frozen=True)
class FieldWithPi(BaseField):
    """Q(sqrt(d_1), …, sqrt(d_k))(pi): rational functions in pi, which are real numbers."""

    @cached_property
    def _base(self) -> BaseField:
        return BaseField(self.radicands)

    @cached_property
    def domain(self) -> Any:
        """The SymPy domain whose elements are the scalars of this field."""
        return self._base.domain.frac_field(Symbol(PI))

    @property
    def encloses_only(self) -> bool:
        """Elements are known to FLINT by balls."""
        return True

    @property
    def pi(self) -> Scalar:
        """The number pi as an element."""
        return self.domain.gens[0]

    def scalar(self, value: SurdSum | Fraction | int) -> Scalar:
        """Return a number as an element of the field.  Raises KeyError if it is not in it."""
        return self.domain.convert(self._base.scalar(value), self._base.domain)

    def number(self, element: Scalar) -> SurdSum | None:
        """Return an element as a sum of square roots, or None if it has pi in it."""
        if not element:
            return SurdSum(())
        if not (element.numer.is_ground and element.denom.is_ground):
            return None
        return self._base.surds(element.numer.LC / element.denom.LC)

    def surds(self, element: Scalar) -> SurdSum:
        """Return an element without pi as a sum of square roots.  Raises ValueError for others."""
        value = self.number(element)
        if value is None:
            raise ValueError(f"{element} has the number pi in it")
        return value

    def rational_parts(self, element: Scalar) -> list[tuple[int, int, int]]:
        """Return (numerator, denominator, radicand) for every coefficient of an element."""
        if not element:
            return []
        coefficients = [*element.numer.coeffs(), *element.denom.coeffs()]
        return [part for c in coefficients for part in self._base.rational_parts(c)]

    def enclose(self, element: Scalar) -> arb:
        """Return a ball that holds the element, at FLINT's current precision."""
        above, below = (self._enclosed(q) for q in (element.numer, element.denom))
        return above / below

    def _enclosed(self, polynomial: Any) -> arb:
        terms = (self._base.enclose(c) * arb.pi() ** m[0] for m, c in polynomial.iterterms())
        return sum(terms, arb(0))

    def sign(self, element: Scalar) -> int:
        """Return -1, 0 or 1; an element that is not 0 is told from 0 by balls narrow enough."""
        bits = 64
        while element:
            with ctx.workprec(bits):
                ball = self.enclose(element)
            if not ball.contains(0):
                return 1 if ball > 0 else -1
            bits *= 2
        return 0


def value_field(
    field: ParameterField,
    elements: Iterable[Scalar],
    values: Mapping[str, SurdSum],
    *,
    others: Iterable[SurdSum] = (),
) -> BaseField:
    """Return the smallest of these fields that holds elements at values, and `others`.

    Raises TooManyRootsError.
    """
    numbers, with_pi = list(others), False
    for element in elements:
        for polynomial in (element.numer, element.denom):
            coefficients = field.in_pi(polynomial, values)
            numbers += coefficients
            with_pi |= len(coefficients) > 1
    base = base_field(numbers)
    return FieldWithPi(base.radicands) if with_pi else base


def element_at(
    field: ParameterField, element: Scalar, values: Mapping[str, SurdSum], into: BaseField
) -> Scalar:
    """Return an element at values, in a field that holds it.

    Raises ZeroDivisionError where it is not defined; KeyError if the field does not hold it.
    """
    pi = into.pi if isinstance(into, FieldWithPi) else into.domain.zero
    above, below = (
        sum(
            (into.scalar(c) * pi**k for k, c in enumerate(field.in_pi(polynomial, values))),
            into.domain.zero,
        )
        for polynomial in (element.numer, element.denom)
    )
    if not below:
        raise ZeroDivisionError(str(element))
    return above / below
