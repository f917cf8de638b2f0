"""Factors with parameters in the model but none in their coefficients: their roots are numbers.

The coefficients are rational, or have the number pi in them.  The roots are isolated, told
apart as real roots and pairs, and ordered, as those of a model without parameters are.
"""

from __future__ import annotations

from dataclasses import dataclass

from closedform.algebra.field import BaseField, Polynomial
from closedform.algebra.parameter_field import ParameterField
from closedform.algebra.parts import vanishing_parts
from closedform.algebra.roots import enclosed_roots, roots_by_real_part
from closedform.algebra.value_field import element_at, value_field

__all__ = ["KnownRoot", "has_known_roots", "known_roots", "over_numbers"]


@dataclass(frozen=True)
class KnownRoot:
    """A real root, or a pair by its member with a positive imaginary part.

    `which` is its place among the roots, from 1, ordered by real and then by imaginary part.
    With `centred` the real part of a pair is the mean of all roots.
    """

    which: int
    is_real: bool
    centred: bool = False


def has_known_roots(field: ParameterField, p: Polynomial) -> bool:
    """Return whether the coefficients of a polynomial are numbers."""
    return not any(field.names_in(c) for c in p.to_list())


def over_numbers(
    field: ParameterField, *polynomials: Polynomial
) -> tuple[BaseField, tuple[Polynomial, ...]]:
    """Return polynomials in numbers over the smallest field that holds these.

    Raises KeyError for one with parameters in it.
    """
    rows = [p.to_list() for p in polynomials]
    base = value_field(field, [c for row in rows for c in row], {})
    made = (base.polynomial([element_at(field, c, {}, base) for c in row]) for row in rows)
    return base, tuple(made)


def known_roots(field: ParameterField, p: Polynomial) -> tuple[KnownRoot, ...]:
    """Return the roots of an irreducible monic polynomial in numbers, slowest first."""
    base, (own,) = over_numbers(field, p)
    balls = enclosed_roots(base, own)
    found = []
    for group in reversed(roots_by_real_part(base, own)):
        for which in group:
            if balls[which - 1].imag == 0:
                found.append(KnownRoot(which, is_real=True))
            elif balls[which - 1].imag > 0:
                found.append(KnownRoot(which, is_real=False, centred=_centred(base, own, which)))
    return tuple(found)


def _centred(base: BaseField, p: Polynomial, which: int) -> bool:
    """Whether Re(lambda) is the mean a of all roots: (lambda - a) p'/p' has no real part."""
    degree = int(p.degree())
    mean = -p.nth(degree - 1) / base.scalar(degree)
    offset = base.polynomial([base.domain.one, -mean]) * p.diff()
    return vanishing_parts(base, p, which, offset.rem(p))[0]
