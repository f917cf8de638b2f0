"""Numbers r(lambda)/p'(lambda) at a root of p, and whether a part of one vanishes.

z = r(lambda)/p'(lambda), at one root lambda of an irreducible p, is a root of the
characteristic polynomial of multiplication by z on L, whose distinct roots can be
isolated.  z is real when its isolating ball is; it is purely imaginary when the polynomial
is even or odd and the ball around z is its own mirror image.  Im z is a rational number h
when z - 2ih is a root too, namely the conjugate of z.
"""

from __future__ import annotations

from collections.abc import Callable, Iterator, Sequence
from fractions import Fraction

from flint import acb, ctx, fmpq
from sympy.polys.domains import QQ, QQ_I
from sympy.polys.polyclasses import DMP

from closedform.algebra.enclosure import value_at
from closedform.algebra.field import BaseField, Polynomial, Scalar, rational
from closedform.algebra.root_matrix import coefficients_low_first
from closedform.algebra.roots import enclosed_roots

__all__ = ["imaginary_part_is", "residue_value", "vanishing_parts"]

_FIRST_BITS = 256


def residue_value(field: BaseField, p: Polynomial, which: int, numerator: Polynomial) -> acb:
    """Return a ball for r(lambda)/p'(lambda) at FLINT's current precision.

    `which` counts the roots of p from 1, as `enclosed_roots` orders them.
    """
    root = enclosed_roots(field, p)[which - 1]
    above, below = (
        value_at([field.enclose(c) for c in f.to_list()], root) for f in (numerator, p.diff())
    )
    return above / below


def vanishing_parts(
    field: BaseField, p: Polynomial, which: int, numerator: Polynomial
) -> tuple[bool, bool]:
    """Return whether the real, and whether the imaginary part of r(lambda)/p'(lambda) is zero.

    p is irreducible; `which` counts its roots from 1, as `enclosed_roots` orders them.
    """
    numerator = numerator.rem(p)
    if numerator.is_zero:
        return (True, True)
    if enclosed_roots(field, p)[which - 1].imag == 0:
        return (False, True)
    # Mostly a part that does not vanish is seen to: at a few times the coefficients' length.
    for bits in _doubled(8 * _longest(field, [*numerator.to_list(), *p.to_list()])):
        with ctx.workprec(bits):
            z = residue_value(field, p, which, numerator)
        if not (z.real.contains(0) or z.imag.contains(0)):
            return (False, False)
    annihilator = _annihilator(field, p, numerator)
    even = not any(annihilator.to_list()[1::2])
    bits = _FIRST_BITS
    while True:
        with ctx.workprec(bits):
            z = residue_value(field, p, which, numerator)
            balls = enclosed_roots(field, annihilator)
            near = _places(z, balls)
            images = _places(-balls[near[0]].conjugate(), balls)
        if len(near) == len(images) == 1 or (len(near) == 1 and not even):
            return (even and images == near, balls[near[0]].imag == 0)
        bits *= 2


def imaginary_part_is(
    field: BaseField, p: Polynomial, which: int, numerator: Polynomial, value: Fraction
) -> bool:
    """Return whether Im(r(lambda)/p'(lambda)) is a given rational number, exactly.

    With f the annihilator of z over Q, z - 2ih is a root of f exactly when z is a root of
    the greatest common divisor of f(s) and f(s - 2ih) over Q(i).
    """
    if value == 0:
        return vanishing_parts(field, p, which, numerator)[1]
    f = _annihilator(field, p, numerator)
    f = (f.norm() if field.radicands else f).sqf_part()
    over_i = DMP([QQ_I.convert(c) for c in f.to_list()], QQ_I, 0)
    twice = QQ(2 * value.numerator, value.denominator)
    common = over_i.gcd(over_i.shift(QQ_I(QQ(0), -twice)))
    if not common.degree():
        return False
    parts = [_gaussian_ball(g.to_list()) for g in (common, over_i.quo(common))]
    return _root_of_first(lambda: residue_value(field, p, which, numerator), parts)


def _root_of_first(evaluate: Callable[[], acb], parts: Sequence[Callable[[], list[acb]]]) -> bool:
    """Whether a root of a squarefree product of two polynomials is one of the first."""
    bits = _FIRST_BITS
    while True:
        with ctx.workprec(bits):
            z = evaluate()
            zero = [value_at(part(), z).contains(0) for part in parts]
        if not all(zero):
            return zero[0]
        bits *= 2


def _gaussian_ball(coefficients: Sequence[Scalar]) -> Callable[[], list[acb]]:
    pairs = [(rational(c.x), rational(c.y)) for c in coefficients]

    def balls() -> list[acb]:
        return [
            acb(fmpq(x.numerator, x.denominator), fmpq(y.numerator, y.denominator))
            for x, y in pairs
        ]

    return balls


def _doubled(most: int) -> Iterator[int]:
    bits = _FIRST_BITS
    while bits <= max(most, 8 * _FIRST_BITS):
        yield bits
        bits *= 2


def _longest(field: BaseField, scalars: Sequence[Scalar]) -> int:
    """The bits of the longest integer in any of the scalars."""
    parts = [part for scalar in scalars for part in field.rational_parts(scalar)]
    return max(max(map(int.bit_length, part)) for part in parts)


def _places(z: acb, balls: Sequence[acb]) -> list[int]:
    return [place for place, ball in enumerate(balls) if ball.overlaps(z)]


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
