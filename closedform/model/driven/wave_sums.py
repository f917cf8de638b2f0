"""Sums of waves: like terms gathered, derivatives, polynomials about another origin.

The numbers are elements of a field, or the values of an arithmetic that is one.
"""

from __future__ import annotations

from collections.abc import Callable, Iterable, Sequence
from dataclasses import replace
from fractions import Fraction

from closedform.algebra.field import Scalar
from closedform.algebra.waves import Kernel, Wave

__all__ = [
    "derivative",
    "gathered",
    "is_polynomial",
    "is_zero",
    "re_expanded",
    "scaled_waves",
    "shortest",
]

MOST_MOVED = 6
"""The degree up to which polynomials are tried about other origins."""

Key = tuple[int, Scalar, Kernel, Scalar, Scalar]


def is_zero(value: Scalar) -> bool:
    """Whether a number is zero, of whatever kind it is."""
    return bool(value == value - value)


def is_polynomial(wave: Wave) -> bool:
    """Whether a wave is a power of the time alone."""
    return wave.kernel == "one" and is_zero(wave.rate)


def re_expanded(coefficients: Sequence[Scalar], shift: Scalar) -> list[Scalar]:
    """Return the coefficients of p(s + shift), lowest first, as those of p(s) are given."""
    moved = list(coefficients)
    for first in range(len(moved) - 1):
        for k in range(len(moved) - 2, first - 1, -1):
            moved[k] = moved[k] + shift * moved[k + 1]
    return moved


def scaled_waves(waves: Iterable[Wave], weight: Scalar) -> tuple[Wave, ...]:
    """Return weight · the sum of waves."""
    if is_zero(weight):
        return ()
    return tuple(replace(wave, amount=weight * wave.amount) for wave in waves)


def gathered(waves: Iterable[Wave]) -> tuple[Wave, ...]:
    """Return a sum of waves with like ones added up, and none that is zero.

    Polynomials are written about the origin 0.  A sum that is zero by its form is empty, so
    that two sums may be compared by their difference.
    """
    polynomial: list[Wave] = []
    amounts: dict[Key, Scalar] = {}
    for wave in waves:
        if is_polynomial(wave):
            polynomial.append(wave)
            continue
        key, amount = _key(wave), wave.amount
        opposite = (*key[:3], -wave.frequency, wave.origin)
        if wave.kernel != "one" and opposite in amounts:
            key = opposite
            amount = -amount if wave.kernel == "sin" else amount
        amounts[key] = amounts[key] + amount if key in amounts else amount
    found = [
        Wave(amount, power, rate, kernel, frequency, origin)
        for (power, rate, kernel, frequency, origin), amount in amounts.items()
        if not is_zero(amount)
    ]
    return (*_powers(polynomial), *found)


def shortest(waves: Iterable[Wave], *origins: Scalar | None) -> tuple[Wave, ...]:
    """Return the gathered sum with its polynomial about that origin which leaves fewest terms.

    Tried are 0 and the given origins, in this order; a polynomial of a high degree stays.
    """
    total = gathered(waves)
    powers = [wave for wave in total if is_polynomial(wave)]
    best = powers
    for origin in origins:
        if origin is not None and powers and powers[-1].power <= MOST_MOVED:
            moved = _about(powers, origin)
            best = moved if len(moved) < len(best) else best
    return (*best, *total[len(powers) :])


def derivative(waves: Iterable[Wave], number: Callable[[Fraction], Scalar]) -> tuple[Wave, ...]:
    """Return the derivative of a sum of waves; `number` makes numbers of their kind."""
    found = []
    for wave in waves:
        if wave.power:
            amount = wave.amount * number(Fraction(wave.power))
            found.append(replace(wave, amount=amount, power=wave.power - 1))
        found.append(replace(wave, amount=wave.amount * wave.rate))
        if wave.kernel == "cos":
            found.append(replace(wave, amount=-(wave.amount * wave.frequency), kernel="sin"))
        elif wave.kernel == "sin":
            found.append(replace(wave, amount=wave.amount * wave.frequency, kernel="cos"))
    return gathered(found)


def _key(wave: Wave) -> Key:
    return (wave.power, wave.rate, wave.kernel, wave.frequency, wave.origin)


def _powers(polynomial: Sequence[Wave]) -> list[Wave]:
    """The sum of powers of the time about different origins, about 0."""
    if not polynomial:
        return []
    zero = polynomial[0].amount - polynomial[0].amount
    total = [zero] * (1 + max(wave.power for wave in polynomial))
    for wave in polynomial:
        moved = re_expanded([zero] * wave.power + [wave.amount], -wave.origin)
        for k, c in enumerate(moved):
            total[k] = total[k] + c
    return [Wave(c, k, zero, "one", zero, zero) for k, c in enumerate(total) if not is_zero(c)]


def _about(powers: Sequence[Wave], origin: Scalar) -> list[Wave]:
    """Powers of the time about 0, written about another origin."""
    zero = origin - origin
    coefficients = [zero] * (1 + max(wave.power for wave in powers))
    for wave in powers:
        coefficients[wave.power] = wave.amount
    moved = re_expanded(coefficients, origin)
    return [Wave(c, k, zero, "one", zero, origin) for k, c in enumerate(moved) if not is_zero(c)]
