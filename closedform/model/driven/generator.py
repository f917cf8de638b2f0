"""The linear system whose output an input is.

A sum of waves solves alpha(d/dt) u = 0 with alpha the product over the rates and frequencies
of (s - rate)^m, or ((s - rate)^2 + frequency^2)^m.  With w = (u, u', …, u^(q-1)) that is
w' = S w, S the companion matrix of alpha, whatever the waves' amounts and origins are.
"""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass
from itertools import accumulate

from closedform.algebra.field import BaseField, FieldMatrix, Polynomial, Scalar
from closedform.algebra.waves import Wave

__all__ = ["Generator", "Tone", "generator_of", "wave_series"]


@dataclass(frozen=True, slots=True)
class Tone:
    """(s - rate)^size, or ((s - rate)^2 + frequency^2)^size where the frequency is not zero."""

    rate: Scalar
    frequency: Scalar
    size: int


@dataclass(frozen=True)
class Generator:
    """w' = S w and u = R w for all inputs together, a block of S for each.

    Shapes:  `matrix` S is q x q, `readout` R is m x q for m inputs.  `tones` are those of each
    input; its block begins at the place that `first` gives.  An input without waves (impulses
    alone) has an empty block.
    """

    field: BaseField
    tones: tuple[tuple[Tone, ...], ...]
    matrix: FieldMatrix
    readout: FieldMatrix

    @property
    def order(self) -> int:
        """The number q of rows of S."""
        return int(self.matrix.shape[0])

    @property
    def orders(self) -> tuple[int, ...]:
        """The number of rows in the block of each input."""
        return tuple(_order(tones) for tones in self.tones)

    @property
    def first(self) -> tuple[int, ...]:
        """The row at which the block of each input begins."""
        return tuple(accumulate(self.orders, initial=0))[:-1]

    def start(self, place: int, wave: Wave) -> FieldMatrix:
        """Return w, q x 1, at the wave's own origin if the input at `place` is that wave."""
        column = [[self.field.domain.zero] for _ in range(self.order)]
        size, first = self.orders[place], self.first[place]
        factorial = self.field.domain.one
        for k, c in enumerate(wave_series(self.field, wave, size)):
            factorial = factorial * k if k else factorial
            column[first + k] = [c * factorial]
        return self.field.matrix(column)


def generator_of(field: BaseField, waves: Sequence[Sequence[Wave]]) -> Generator | None:
    """Return the generator of inputs with these waves, or None if none has any."""
    tones = tuple(_tones(of_input) for of_input in waves)
    order = sum(_order(t) for t in tones)
    if not order:
        return None
    zero, one = field.domain.zero, field.domain.one
    rows = [[zero] * order for _ in range(order)]
    readout = [[zero] * order for _ in tones]
    first = 0
    for place, of_input in enumerate(tones):
        alpha = _annihilator(field, of_input).to_list()
        size = len(alpha) - 1
        for k in range(size - 1):
            rows[first + k][first + k + 1] = one
        for k, c in enumerate(reversed(alpha[1:])):
            rows[first + size - 1][first + k] = -c
        if size:
            readout[place][first] = one
        first += size
    return Generator(field, tones, field.matrix(rows), field.matrix(readout))


def wave_series(field: BaseField, wave: Wave, length: int) -> list[Scalar]:
    """Return the Taylor coefficients of a wave at its origin, `length` of them."""
    one, zero = field.domain.one, field.domain.zero
    # e^((rate + i frequency) s): the powers of a complex number, its parts in K.
    real, imaginary, factorial = one, zero, one
    series = [zero] * length
    for k in range(length - wave.power):
        part = imaginary if wave.kernel == "sin" else real
        series[wave.power + k] = wave.amount * part / factorial
        real, imaginary = (
            real * wave.rate - imaginary * wave.frequency,
            real * wave.frequency + imaginary * wave.rate,
        )
        factorial = factorial * field.domain.convert(k + 1)
    return series


def _tones(waves: Sequence[Wave]) -> tuple[Tone, ...]:
    sizes: dict[tuple[Scalar, Scalar], int] = {}
    for wave in waves:
        key = (wave.rate, wave.frequency)
        if (wave.rate, -wave.frequency) in sizes:
            key = (wave.rate, -wave.frequency)
        sizes[key] = max(sizes.get(key, 0), wave.power + 1)
    return tuple(Tone(rate, frequency, size) for (rate, frequency), size in sizes.items())


def _order(tones: Sequence[Tone]) -> int:
    return sum(tone.size * (2 if tone.frequency else 1) for tone in tones)


def _annihilator(field: BaseField, tones: Sequence[Tone]) -> Polynomial:
    one = field.domain.one
    product = field.polynomial([one])
    for tone in tones:
        factor = field.polynomial([one, -tone.rate])
        if tone.frequency:
            factor = factor**2 + field.polynomial([tone.frequency**2])
        product = product * factor**tone.size
    return product
