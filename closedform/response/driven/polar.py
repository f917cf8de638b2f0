"""Points of the plane by modulus and angle, exactly: a cos(w t) + b sin(w t) = r cos(w t - phi).

With (x, y) = (a, b) the modulus is r = sqrt(x^2 + y^2) and the angle phi = atan2(y, x).  Factors
that x and y share and whose signs are known are taken out; the quadrant is told by signs.
"""

from __future__ import annotations

from collections.abc import Callable
from dataclasses import dataclass
from fractions import Fraction
from math import gcd, lcm
from typing import Literal

from flint import arb, fmpq

from closedform.algebra.field import BaseField, Scalar
from closedform.algebra.parameter_field import ParameterField
from closedform.algebra.sign_argument import SignArgument
from closedform.algebra.surds import drawn_out
from closedform.notation.expression import (
    ONE,
    ZERO,
    Call,
    Expression,
    Negation,
    Power,
    Quotient,
    Sum,
    number,
    operations,
)
from closedform.notation.rational_formula import rational_formula, weighted_rational
from closedform.notation.terms import content_of, radical_formula, sum_of
from closedform.response.driven.composition import element_formula

__all__ = ["Angle", "Place", "Polar", "polar"]

Place = Literal["I", "II", "III", "IV", "+x", "+y", "-x", "-y"]
"""A quadrant, or the half axis on which a point lies."""

SignOf = Callable[[Scalar], SignArgument]
Arc = tuple[Fraction, int, Expression]

_PLACES: dict[tuple[int, int], Place] = {
    (1, 1): "I",
    (1, -1): "II",
    (-1, -1): "III",
    (-1, 1): "IV",
    (0, 1): "+x",
    (1, 0): "+y",
    (0, -1): "-x",
    (-1, 0): "-y",
}
"""The place of a point by the signs of y and x."""
_AXES = {"+x": Fraction(0), "+y": Fraction(1, 2), "-x": Fraction(1), "-y": Fraction(-1, 2)}
_KNOWN_TURNS = {Fraction(1): Fraction(1, 4), Fraction(3): Fraction(1, 3)}
_KNOWN_TURNS[Fraction(1, 3)] = Fraction(1, 6)
"""arctan(r)/pi by r^2, for r > 0 (Euclid, Elements, books IV and XIII)."""


@dataclass(frozen=True)
class Angle:
    """The angle phi of the point (x, y), with x = r cos phi, y = r sin phi, -pi < phi <= pi.

    `y` and `x` are elements, common factors of known sign taken out; `above` and `beside`
    are their formulas, so that phi = atan2(above, beside).  `signs` are those of y and x;
    `place` is where the point lies, None where these do not tell.
    `arc` = (turn, direction, ratio) says phi = turn · pi + direction · arctan(ratio), with
    direction 1 or -1; it is 0 where phi is known as a part of pi.  `arc` is None where the
    signs leave it open.
    """

    y: Scalar
    x: Scalar
    above: Expression
    beside: Expression
    signs: tuple[SignArgument, SignArgument]
    place: Place | None
    arc: Arc | None

    def ball(self, enclose: Callable[[Scalar], arb]) -> arb:
        """Return a ball for the angle, from y and x themselves."""
        return arb.atan2(enclose(self.y), enclose(self.x))

    def ball_of_arc(self, enclose: Callable[[Expression], arb]) -> arb | None:
        """Return a ball for the angle as `arc` gives it, None without one."""
        if self.arc is None:
            return None
        turn, direction, ratio = self.arc
        found = arb.pi() * arb(fmpq(turn.numerator, turn.denominator))
        return found + direction * enclose(ratio).atan() if direction else found


@dataclass(frozen=True)
class Polar:
    """A point by `square` = x^2 + y^2, the formula of its root, and its angle."""

    square: Scalar
    modulus: Expression
    angle: Angle


def polar(field: BaseField, sign_of: SignOf, y: Scalar, x: Scalar) -> Polar:
    """Return modulus and angle of the point (x, y), not both of which are the element 0.

    Exact:   signs come from `sign_of`; where the modulus is 0 the angle is any angle.
    """
    if isinstance(field, ParameterField):
        front, above, beside = _reduced(field, sign_of, y, x)
        modulus = _modulus(field, sign_of, front, above, beside)
    else:
        above, beside = _reduced_numbers(field, y, x)
        modulus = radical_formula(field.surds(x**2 + y**2))
    return Polar(x**2 + y**2, modulus, _angle(field, sign_of, above, beside))


def _angle(field: BaseField, sign_of: SignOf, y: Scalar, x: Scalar) -> Angle:
    signs = sign_of(y), sign_of(x)
    place = _place(*signs)
    above, beside = element_formula(field, y), element_formula(field, x)
    arc = (_AXES[place], 0, ZERO) if place in _AXES else _arc(field, signs, y, x)
    return Angle(y, x, above, beside, signs, place, arc)


def _place(up: SignArgument, right: SignArgument) -> Place | None:
    found = [_PLACES.get((v, h)) for v in up.values for h in right.values]
    return found[0] if len(found) == 1 else None


def _arc(
    field: BaseField, signs: tuple[SignArgument, SignArgument], y: Scalar, x: Scalar
) -> Arc | None:
    up, right = (argument.values for argument in signs)
    if right == {1}:
        return _beyond(field, Fraction(0), *((-1, -y, x) if up == {-1} else (1, y, x)))
    if right == {-1} and up <= {0, 1}:
        return _beyond(field, Fraction(1), -1, y, -x)
    if right == {-1} and up == {-1}:
        return _beyond(field, Fraction(-1), 1, -y, -x)
    if up == {1}:
        return Fraction(1, 2), -1, _quotient(field, x, y)
    if up == {-1}:
        return Fraction(-1, 2), 1, _quotient(field, x, -y)
    return None


def _beyond(field: BaseField, turn: Fraction, direction: int, above: Scalar, below: Scalar) -> Arc:
    """Return turn · pi + direction · arctan(above/below), as a part of pi where that is known."""
    square = _rational(field, (above / below) ** 2)
    part = None if square is None else _KNOWN_TURNS.get(square)
    if part is None:
        return turn, direction, _quotient(field, above, below)
    return turn + direction * field.sign(above / below) * part, 0, ZERO


def _rational(field: BaseField, element: Scalar) -> Fraction | None:
    if isinstance(field, ParameterField):
        return field.constant(element)
    value = field.surds(element)
    return value.as_fraction() if value.is_rational else None


def _quotient(field: BaseField, above: Scalar, below: Scalar) -> Expression:
    """Return above/below with both as they stand in atan2(above, below)."""
    upper, lower = element_formula(field, above), element_formula(field, below)
    if not isinstance(field, ParameterField) or ONE in {upper, lower}:
        return element_formula(field, above / below)
    if isinstance(upper, Negation):
        return Negation(Quotient(upper.operand, lower))
    return Quotient(upper, lower)


def _reduced(
    field: ParameterField, sign_of: SignOf, y: Scalar, x: Scalar
) -> tuple[Scalar, Scalar, Scalar]:
    """Return (g, y/g, x/g) with g >= 0 what both share; no denominator is left."""
    parts = [field.factored(e) for e in (y, x) if e]
    contents = [abs(p.content) for p in parts]
    common = Fraction(
        gcd(*(c.numerator for c in contents)), lcm(*(c.denominator for c in contents))
    )
    front = field.scalar(common)
    exponents = [dict(p.factors) for p in parts]
    for factor in dict.fromkeys(f for powers in exponents for f in powers):
        exponent = min(powers.get(factor, 0) for powers in exponents)
        element = field.of_polynomial(factor)
        values = sign_of(element).values if exponent else frozenset({1})
        if values <= {0, 1}:
            front *= element**exponent
        elif values <= {-1, 0}:
            front *= (-element) ** exponent
        else:
            front *= element ** (2 * (exponent // 2))
    return front, y / front, x / front


def _reduced_numbers(field: BaseField, y: Scalar, x: Scalar) -> tuple[Scalar, Scalar]:
    """Return the point with what both numbers share taken out, by positive factors."""
    one = field.domain.one
    if not y or not x:
        return one * field.sign(y), one * field.sign(x)
    ratio = _rational(field, y / x)
    if ratio is not None:
        sign = field.sign(x)
        return field.scalar(sign * ratio.numerator), field.scalar(sign * ratio.denominator)
    shared = field.scalar(content_of([field.surds(y), field.surds(x)])[-1])
    return y / shared, x / shared


def _modulus(
    field: ParameterField, sign_of: SignOf, front: Scalar, y: Scalar, x: Scalar
) -> Expression:
    """Return front · sqrt(x^2 + y^2), with the root above or below: F/sqrt(D), not F sqrt(D)/D."""
    square = x**2 + y**2
    outside, above, below = _drawn_out(field, sign_of, square * front**2)
    if above == 1 and below == 1:
        return rational_formula(field, outside)
    roots = [[] if e == 1 else [Call("sqrt", rational_formula(field, e))] for e in (above, below)]
    forms = [weighted_rational(field, outside, *roots)]
    if x and y:
        squares = [_squared(field, x), _squared(field, y)]
        squares.sort(key=lambda formula: not isinstance(formula, Power))
        root = Call("sqrt", sum_of(squares))
        forms.insert(0, weighted_rational(field, front, [root], []))
        forms.insert(0, weighted_rational(field, front * square, [], [root]))
    return min(forms, key=operations)


def _squared(field: ParameterField, element: Scalar) -> Expression:
    formula = rational_formula(field, element)
    if isinstance(formula, Sum):
        return Power(formula, number(2))
    return rational_formula(field, element**2)


def _drawn_out(
    field: ParameterField, sign_of: SignOf, square: Scalar
) -> tuple[Scalar, Scalar, Scalar]:
    """Return (o, a, b) with square = o^2 a/b and o >= 0, for an element that is not zero."""
    parts = field.factored(square)
    size = abs(parts.content)
    whole, rest = drawn_out(size.numerator * size.denominator)
    outside = field.scalar(Fraction(whole, size.denominator))
    sides = [field.scalar(rest if parts.content > 0 else -rest), field.domain.one]
    for polynomial, exponent in parts.factors:
        factor = field.of_polynomial(polynomial)
        half = abs(exponent) // 2 * (1 if exponent > 0 else -1)
        values = sign_of(factor).values if half % 2 else frozenset({1})
        if values <= {-1, 0}:
            outside *= (-factor) ** half
        elif values <= {0, 1}:
            outside *= factor**half
        else:
            half = 0
        left = exponent - 2 * half
        sides[left < 0] *= factor ** abs(left)
    return outside, sides[0], sides[1]
