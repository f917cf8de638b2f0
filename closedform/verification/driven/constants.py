"""The numbers e^growth cos(angle) and e^growth sin(angle): one form for equal ones."""

from __future__ import annotations

from collections.abc import Callable, Mapping
from dataclasses import replace
from fractions import Fraction

from flint import arb

from closedform.algebra.field import BaseField, Scalar
from closedform.algebra.parameter_field import PI, ParameterField
from closedform.algebra.waves import Constant

__all__ = ["enclosed_constant", "settled_constant"]

_HALF = Fraction(1, 2)


def settled_constant(field: BaseField, constant: Constant) -> tuple[tuple[Scalar, Constant], ...]:
    """Return a number as weight · constant, nothing if it is 0.

    The cosine is even and the sine odd, so that the angle is given a leading sign; a multiple
    of pi is folded into the first quarter.
    """
    one, zero = field.domain.one, field.domain.zero
    bare = replace(constant, kernel="one", angle=zero)
    if constant.kernel == "one":
        return ((one, bare),)
    if not constant.angle:
        return ((one, bare),) if constant.kernel == "cos" else ()
    turns = _half_turns(field, constant.angle)
    if turns is not None:
        return _folded(field, constant, turns)
    if _leads_with_minus(field, constant.angle):
        weight = one if constant.kernel == "cos" else -one
        return ((weight, replace(constant, angle=-constant.angle)),)
    return ((one, constant),)


def enclosed_constant(
    enclose: Callable[[Scalar], arb], constant: Constant, named: Mapping[str, arb]
) -> arb:
    """Return a ball for a number; `named` has those of numbers with names."""
    value = enclose(constant.growth).exp()
    if constant.named:
        value = value * named.get(constant.named, arb("nan"))
    if constant.kernel == "one":
        return value
    angle = enclose(constant.angle)
    return value * (angle.cos() if constant.kernel == "cos" else angle.sin())


def _half_turns(field: BaseField, angle: Scalar) -> Fraction | None:
    """The angle divided by pi, where that is a rational number."""
    if not isinstance(field, ParameterField) or PI not in field.parameters:
        return None
    return field.constant(angle / field.symbol(PI))


def _folded(
    field: BaseField, constant: Constant, turns: Fraction
) -> tuple[tuple[Scalar, Constant], ...]:
    """The cosine or sine of turns · pi by an angle in the first quarter."""
    sign, turns = 1, turns % 2
    if turns > 1:
        turns = 2 - turns
        sign = sign if constant.kernel == "cos" else -sign
    if turns > _HALF:
        turns = 1 - turns
        sign = -sign if constant.kernel == "cos" else sign
    bare = replace(constant, kernel="one", angle=field.domain.zero)
    opposite = turns if constant.kernel == "sin" else _HALF - turns
    exact = {Fraction(0): Fraction(0), Fraction(1, 6): _HALF, _HALF: Fraction(1)}.get(opposite)
    if exact is not None:
        return ((field.scalar(exact * sign), bare),) if exact else ()
    if not isinstance(field, ParameterField):
        raise TypeError("only a field with pi has angles in turns")
    angle = field.symbol(PI) * field.scalar(turns)
    return ((field.scalar(sign), replace(constant, angle=angle)),)


def _leads_with_minus(field: BaseField, angle: Scalar) -> bool:
    if isinstance(field, ParameterField):
        return bool(angle.numer.LC < 0)
    return field.sign(angle) < 0
