"""Whether a printed number is a certified one, rounded to the digits shown."""

from __future__ import annotations

from collections.abc import Iterator
from dataclasses import dataclass, replace
from fractions import Fraction
from typing import Literal as OneOf

from flint import arb, fmpq

from closedform.algebra.enclosure import UnsettledError, ball_of, decimal_order
from closedform.notation.written.tree import Literal

__all__ = ["Judged", "Rounding", "decimal_text", "judged", "shown_exactly"]

Rounding = OneOf["right", "truncated", "last place", "off"]
_MORE_DIGITS = 4
_SMALLEST_FIXED = -5
_LAST_PLACES = 2
FEWEST_DIGITS = 3


@dataclass(frozen=True, slots=True)
class Judged:
    """A printed number and the exact one that it stands for.

    `ball` holds the exact value.  `verdict` is "right" if the number is that value rounded to
    its last place, halves away from zero or to even; "truncated" if digits were cut off where
    rounding goes up; "last place" if it is at most two units of its last place off; else
    "off".  `correct` is the value rounded as far as shown, `exact` with four more digits,
    or all if these are all (`ends`).  `pair` counts the formulas from 0.
    """

    literal: Literal
    ball: arb
    verdict: Rounding
    correct: str
    exact: str
    ends: bool
    pair: int = 0

    @property
    def deviation(self) -> arb:
        """How far the printed number is from the exact one."""
        return abs(ball_of(self.literal.value) - self.ball)


def judged(literal: Literal, ball: arb, pair: int = 0) -> Judged:
    """Return the judgement of a printed number, given a ball around the exact one.

    A ball that holds a number half way between two decimals is taken for it, so the ball must
    be small: what it holds by chance is not told from what is so.
    Raises:  UnsettledError if the ball is too wide for the digits shown.
    """
    for place in _places(literal):
        units = ball / ball_of(place)
        if literal.value / place in _rounded(units):
            literal = replace(literal, last_place=place)
            break
    units = ball / ball_of(literal.last_place)
    rounded = _rounded(units)
    printed = int(literal.value / literal.last_place)
    verdict: Rounding
    if printed in rounded:
        verdict = "right"
    elif printed == _cut(units):
        verdict = "truncated"
    elif abs(printed - rounded[0]) <= _LAST_PLACES:
        verdict = "last place"
    else:
        verdict = "off"
    exact, ends = shown_exactly(ball, literal.last_place / 10**_MORE_DIGITS)
    correct = decimal_text(rounded[0], literal.last_place)
    return Judged(literal, ball, verdict, correct, exact, ends, pair)


def _places(literal: Literal) -> Iterator[Fraction]:
    """Yield what a unit of the last significant digit may be worth.

    Zeros at the end of a whole number need not be significant (ISO 80000-1, annex B); three
    digits are taken to be at least: 1160 may stand for 1162.5, but 1200 not for 1234.
    """
    yield literal.last_place
    place = literal.last_place
    while (
        not literal.is_decimal
        and literal.value % (10 * place) == 0
        and literal.value >= 10 ** (FEWEST_DIGITS) * place
    ):
        place *= 10
        yield place


def shown_exactly(ball: arb, last_place: Fraction) -> tuple[str, bool]:
    """Return a value rounded to a last place, and whether that is all of it.

    A value that is a shorter decimal is written without zeros behind it.
    """
    whole = _rounded(ball / ball_of(last_place))[0]
    ends = bool(ball.contains(_real(whole * last_place)))
    while ends and whole and whole % 10 == 0 and last_place < 1:
        whole, last_place = whole // 10, last_place * 10
    return (decimal_text(whole, last_place) if whole or not ends else "0"), ends


def decimal_text(whole: int, last_place: Fraction) -> str:
    """Return whole · last_place, a power of ten, as a decimal that ends at the last place."""
    exponent = decimal_order(last_place)
    figures = str(abs(whole))
    sign = "-" if whole < 0 else ""
    first = exponent + len(figures) - 1
    if exponent > 0 or (whole and first < _SMALLEST_FIXED):
        point = "." if len(figures) > 1 else ""
        return f"{sign}{figures[0]}{point}{figures[1:]}e{first}"
    padded = figures.rjust(1 - exponent, "0")
    cut = len(padded) + exponent
    return sign + padded[:cut] + (f".{padded[cut:]}" if exponent else "")


def _rounded(units: arb) -> tuple[int, ...]:
    """The nearest whole number; of a value half way the outer one, and the even one if another."""
    whole = (units + arb(0.5)).floor().unique_fmpz()
    if whole is not None:
        return (int(whole),)
    twice = (2 * units).unique_fmpz()
    if twice is None:
        raise UnsettledError("a number to the digits shown", _bits(units))
    lower = (int(twice) - 1) // 2
    outer = lower + 1 if twice > 0 else lower
    even = lower if lower % 2 == 0 else lower + 1
    return (outer,) if outer == even else (outer, even)


def _cut(units: arb) -> int:
    """The whole number left when the digits behind are cut off."""
    exact = units.unique_fmpz()
    whole = abs(units).floor().unique_fmpz() if exact is None else abs(exact)
    if whole is None:
        raise UnsettledError("a number to the digits shown", _bits(units))
    return int(whole) if units > 0 else -int(whole)


def _bits(ball: arb) -> int:
    return max(0, ball.rel_accuracy_bits())


def _real(value: Fraction) -> arb:
    return arb(fmpq(value.numerator, value.denominator))
