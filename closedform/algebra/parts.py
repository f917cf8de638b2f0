"""Whether the real or the imaginary part of an algebraic number vanishes, decided exactly.

The number is z = r(lambda)/p'(lambda) at one root lambda of an irreducible p.  It is a
root of the characteristic polynomial of multiplication by z on L, whose distinct roots
can be isolated.  z is real when its isolating ball is; it is purely imaginary when the
polynomial is even or odd and the ball around z is its own mirror image.
"""

from __future__ import annotations

from flint import acb, arb, ctx

from closedform.algebra.enclosure import value_at
from closedform.algebra.field import BaseField, Polynomial
from closedform.algebra.root_matrix import coefficients_low_first
from closedform.algebra.roots import enclosed_roots

__all__ = ["vanishing_parts"]

_BITS = 256


def vanishing_parts(
    field: BaseField, p: Polynomial, which: int, numerator: Polynomial
) -> tuple[bool, bool]:
    """Return whether the real, and whether the imaginary part of r(lambda)/p'(lambda) is zero.

    `which` counts the roots of p from 1, as `enclosed_roots` orders them.
    """
    with ctx.workprec(_BITS):
        z = _value(field, p, which, numerator)
        tiny = arb(2) ** (-_BITS // 2) * (abs(z.real) + abs(z.imag))
        suspects = (_below(z.real, tiny), _below(z.imag, tiny))
    if not any(suspects):
        return (False, False)
    return _decided(field, p, which, numerator)


def _value(field: BaseField, p: Polynomial, which: int, numerator: Polynomial) -> acb:
    root = enclosed_roots(field, p)[which - 1]
    return value_at(_balls(field, numerator), root) / value_at(_balls(field, p.diff()), root)


def _balls(field: BaseField, polynomial: Polynomial) -> list[arb]:
    return [field.enclose(c) for c in polynomial.to_list()]


def _below(ball: arb, bound: arb) -> bool:
    return bool(abs(ball).mid() <= bound.upper())


def _decided(
    field: BaseField, p: Polynomial, which: int, numerator: Polynomial
) -> tuple[bool, bool]:
    annihilator = _annihilator(field, p, numerator)
    bits = _BITS
    while True:
        with ctx.workprec(bits):
            z = _value(field, p, which, numerator)
            near = [root for root in enclosed_roots(field, annihilator) if root.overlaps(z)]
            if len(near) == 1:
                mirrored = -near[0].conjugate()
                images = [r for r in enclosed_roots(field, annihilator) if r.overlaps(mirrored)]
                imaginary = _is_even_or_odd(annihilator) and images == near
                return (imaginary, near[0].imag == 0)
        bits *= 2


def _annihilator(field: BaseField, p: Polynomial, numerator: Polynomial) -> Polynomial:
    """The squarefree polynomial of z = r/p' over K, from multiplication by z on L."""
    d = int(p.degree())
    z = (numerator * p.diff().invert(p)).rem(p)
    power = field.polynomial([field.domain.one])
    lam = field.polynomial([field.domain.one, field.domain.zero])
    rows = []
    for _ in range(d):
        rows.append(coefficients_low_first((z * power).rem(p), d))
        power = (power * lam).rem(p)
    return field.polynomial(field.matrix(rows).charpoly()).sqf_part().monic()


def _is_even_or_odd(polynomial: Polynomial) -> bool:
    coefficients = polynomial.to_list()
    return not any(coefficients[1::2])
