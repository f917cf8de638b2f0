"""Steady oscillations by amplitude and phase."""

from __future__ import annotations

from collections.abc import Callable, Sequence
from dataclasses import dataclass

from closedform.algebra.field import Scalar
from closedform.algebra.sign_argument import SignArgument
from closedform.model.driven.model import DrivenModel
from closedform.notation.expression import Expression
from closedform.response.driven.composition import element_formula
from closedform.response.driven.functions import DrivenFunctions
from closedform.response.driven.particular import Drive
from closedform.response.driven.polar import Angle, Place, polar
from closedform.response.driven.steady import waves_for_ever, waves_of_row

__all__ = ["Angle", "Lag", "Phasor", "Place", "Sinusoid", "phasors_of"]

SignOf = Callable[[Scalar], SignArgument]
Put = Callable[[Scalar], Scalar]


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

    `sine_phase` is the phase with respect to the sine, amplitude · sin(w s - sine_phase), where
    the inputs of this frequency are all sines: a cosine would turn every angle by pi/2.
    """

    frequency: Scalar
    origin: Scalar
    cosine: Scalar
    sine: Scalar
    amplitude_square: Scalar
    amplitude: Expression
    phase: Angle
    lag: Lag | None
    sine_phase: Angle | None = None


@dataclass(frozen=True)
class Phasor:
    """The steady state of one row as mean value + sinusoids.

    `row` is the place in the model's rows.  Sinusoids of one frequency that count from
    different origins stay apart.  The reference of each phase is cos(w (t - origin)), that of
    each `sine_phase` sin(w (t - origin)).
    """

    row: int
    mean: Scalar
    mean_formula: Expression
    sinusoids: tuple[Sinusoid, ...]


def phasors_of(
    model: DrivenModel, functions: DrivenFunctions, drive: Drive, sign_of: SignOf, put: Put
) -> tuple[Phasor | None, ...]:
    """Return a phasor for each row whose steady state is oscillating, None for the others.

    `drive` holds the tones in the case, `sign_of` tells signs there, `put` puts its equations
    into elements.
    """
    found: list[Phasor | None] = []
    zero = model.field.domain.zero
    for row in range(len(model.rows)):
        waves = waves_of_row(drive, functions, functions.steady or (), row)
        if any(w.power or w.rate for w in waves) or not any(w.frequency for w in waves):
            found.append(None)
            continue
        mean = sum((w.amount for w in waves if w.kernel == "one"), zero)
        parts: dict[tuple[Scalar, Scalar], list[Scalar]] = {}
        for wave in waves:
            if wave.kernel != "one":
                part = parts.setdefault((wave.frequency, wave.origin), [zero, zero])
                part[wave.kernel == "sin"] += wave.amount
        sinusoids = []
        for (frequency, origin), (cosine, sine) in parts.items():
            if not cosine and not sine:
                continue
            point = polar(model.field, sign_of, sine, cosine)
            held = _inputs_of(model, put, frequency)
            given = _only_input(held, origin)
            sinusoids.append(
                Sinusoid(
                    frequency,
                    origin,
                    cosine,
                    sine,
                    point.square,
                    point.modulus,
                    point.angle,
                    None if given is None else _lag(model, sign_of, given, (cosine, sine)),
                    polar(model.field, sign_of, -cosine, sine).angle
                    if all(not one.cosine for one in held)
                    else None,
                )
            )
        formula = element_formula(model.field, mean)
        found.append(Phasor(row, mean, formula, tuple(sinusoids)))
    return tuple(found)


@dataclass(frozen=True)
class _Given:
    """An input of t^power times cosine · cos(w s) + sine · sin(w s), s = t - origin."""

    place: int
    origin: Scalar
    power: int
    cosine: Scalar
    sine: Scalar


def _inputs_of(model: DrivenModel, put: Put, frequency: Scalar) -> list[_Given]:
    """What the inputs hold of a frequency for ever, apart where origins or powers are."""
    found: dict[tuple[int, Scalar, int], list[Scalar]] = {}
    zero = model.field.domain.zero
    for place, wave in waves_for_ever(model):
        own = put(wave.frequency)
        if put(wave.rate) or wave.kernel == "one" or own not in (frequency, -frequency):
            continue
        part = found.setdefault((place, put(wave.origin), wave.power), [zero, zero])
        turned = wave.kernel == "sin" and own != frequency
        part[wave.kernel == "sin"] += put(-wave.amount if turned else wave.amount)
    return [_Given(*key, *part) for key, part in found.items()]


def _only_input(held: Sequence[_Given], origin: Scalar) -> _Given | None:
    """The input that alone holds a sinusoid of a frequency, and holds it from this origin."""
    if len({one.place for one in held}) != 1:
        return None
    if any(one.power or one.origin != origin for one in held):
        return None
    (given,) = held
    return given if given.cosine or given.sine else None


def _lag(
    model: DrivenModel, sign_of: SignOf, given: _Given, response: tuple[Scalar, Scalar]
) -> Lag:
    """The ratio of the complex amplitudes a - ib of the response and U - iV of the input."""
    (a, b), (u, v) = response, (given.cosine, given.sine)
    size = u**2 + v**2
    point = polar(model.field, sign_of, (b * u - a * v) / size, (a * u + b * v) / size)
    return Lag(given.place, point.square, point.modulus, point.angle)
