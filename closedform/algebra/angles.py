"""Angles sqrt(D) d: what is below the root, the amount, and multiples of pi."""

from __future__ import annotations

from collections.abc import Sequence
from fractions import Fraction

from flint import arb
from sympy.polys.domains import QQ
from sympy.polys.polyclasses import DMP

from closedform.algebra.field import BaseField, Scalar, rational
from closedform.algebra.parameter_field import PI, ParameterField
from closedform.algebra.surds import SurdSum, drawn_out

__all__ = ["angle_of", "cosine_polynomial"]

Pair = tuple[Scalar, Scalar]


def angle_of(
    field: BaseField, square: Scalar, amount: Scalar
) -> tuple[Scalar, Scalar, Fraction, Scalar]:
    """Return (core, root, r, rest): square = core · root^2, root · amount = r pi + rest.

    A multiple of pi is taken apart where the core is -1: of cosines and sines.
    """
    core, root = _core(field, square)
    whole = root * amount
    if core == field.domain.convert(-1) and isinstance(field, ParameterField):
        part = _of_pi(field, whole)
        return core, root, part, whole - field.scalar(part) * _pi(field)
    return core, root, Fraction(0), whole


def _pi(field: ParameterField) -> Scalar:
    return field.symbol(PI) if PI in field.parameters else field.domain.zero


def _of_pi(field: ParameterField, element: Scalar) -> Fraction:
    """The rational number of times that pi by itself is a term of an element."""
    if PI not in field.parameters or not element.denom.is_ground:
        return Fraction(0)
    place = field.parameters.index(PI)
    monomial = tuple(int(k == place) for k in range(len(field.parameters)))
    found = element.numer.get(monomial)
    return Fraction(0) if found is None else rational(found) / rational(element.denom.LC)


def _core(field: BaseField, square: Scalar) -> Pair:
    """The core and the root of square = core · root^2, square factors drawn out."""
    if isinstance(field, ParameterField):
        parts = field.factored(square)
        whole, free = _rational_core(parts.content)
        core, root = field.scalar(free), field.scalar(whole)
        for factor, exponent in parts.factors:
            held = field.of_polynomial(factor)
            core *= held ** (exponent % 2)
            root *= held ** (exponent // 2)
        return core, root
    value = field.surds(square)
    if not value.is_rational:
        return square, field.domain.one
    whole, free = _rational_core(value.as_fraction())
    sign = -1 if free < 0 else 1
    try:
        inside = field.scalar(SurdSum.of({abs(free): Fraction(1)}))
    except KeyError:
        return field.scalar(free), field.scalar(whole)
    return field.scalar(sign), field.scalar(whole) * inside


def _rational_core(value: Fraction) -> tuple[Fraction, int]:
    """(root, core) with value = core · root^2."""
    sign = -1 if value < 0 else 1
    whole, free = drawn_out(abs(value.numerator) * value.denominator)
    return Fraction(whole, value.denominator), sign * free


def cosine_polynomial(n: int) -> list[Fraction]:
    """Return the monic irreducible polynomial over Q, lowest power first, of cos(pi/n).

    It divides T_n(x) + 1, T_n the polynomial of Chebyshev.
    """
    one, two = [Fraction(1)], [Fraction(0), Fraction(1)]
    for _ in range(n - 1):
        longer = [Fraction(0), *(2 * c for c in two)]
        for k, c in enumerate(one):
            longer[k] -= c
        one, two = two, longer
    two[0] += 1
    coefficients = [QQ(c.numerator, c.denominator) for c in reversed(two)]
    _, factors = DMP(coefficients, QQ, 0).factor_list()
    found = [[rational(c) for c in reversed(p.monic().to_list())] for p, _ in factors]
    return next(p for p in found if _has_cosine(p, n))


def _has_cosine(polynomial: Sequence[Fraction], n: int) -> bool:
    """Whether cos(pi/n) is a root: of the factors, which share none, only one comes near 0."""
    value = arb(0)
    for c in reversed(polynomial):
        value = value * (arb.pi() / n).cos() + arb(c.numerator) / c.denominator
    return bool(value.contains(0))
