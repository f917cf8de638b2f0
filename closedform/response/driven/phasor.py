"""Steady oscillations by amplitude and phase."""

from __future__ import annotations

from dataclasses import dataclass
from fractions import Fraction
from typing import Literal

from closedform.algebra.field import Scalar
from closedform.algebra.sign_argument import SignArgument
from closedform.notation.expression import Expression

__all__ = ["Angle", "Lag", "Phasor", "Place", "Sinusoid"]

Place = Literal["I", "II", "III", "IV", "+x", "+y", "-x", "-y"]
"""A quadrant, or the half axis on which a point lies."""


@dataclass(frozen=True)
class Angle:
    """The angle phi of the point (x, y), with x = r cos phi, y = r sin phi, -pi < phi <= pi.

    `y` and `x` are elements, common factors of known sign taken out; `above` and `beside`
    are their formulas, so that phi = atan2(above, beside).  `signs` are those of y and x;
    `place` is where the point lies, None where these do not tell.
    `arc` = (turn, direction, ratio) says phi = turn · pi + direction · arctan(ratio), with
    direction 1 or -1; on an axis direction is 0.  It is None where the signs leave it open.
    """

    y: Scalar
    x: Scalar
    above: Expression
    beside: Expression
    signs: tuple[SignArgument, SignArgument]
    place: Place | None
    arc: tuple[Fraction, int, Expression] | None


@dataclass(frozen=True)
class Lag:
    """How a sinusoid follows the input of its frequency, where there is only one such input.

    The output is `gain` times the input, delayed by the angle `angle`:
    input U cos(w t - psi), output gain · U cos(w t - psi - angle).  `gain_square` is exact.
    """

    input: int
    gain_square: Scalar
    gain: Expression
    angle: Angle


@dataclass(frozen=True)
class Sinusoid:
    """cosine · cos(w s) + sine · sin(w s) = amplitude · cos(w s - phase), s = t - origin.

    Every Scalar is an element of the model's field.  `amplitude_square` is
    cosine^2 + sine^2, `amplitude` the formula of its root.
    """

    frequency: Scalar
    origin: Scalar
    cosine: Scalar
    sine: Scalar
    amplitude_square: Scalar
    amplitude: Expression
    phase: Angle
    lag: Lag | None


@dataclass(frozen=True)
class Phasor:
    """The steady state of one row as mean value + sinusoids.

    `row` is the place in the model's rows.  Sinusoids of one frequency that count from
    different origins stay apart.  The reference of each phase is cos(w (t - origin)).
    """

    row: int
    mean: Scalar
    mean_formula: Expression
    sinusoids: tuple[Sinusoid, ...]
