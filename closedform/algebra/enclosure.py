"""Certified digits: decimals whose every figure is settled by ball arithmetic."""

from __future__ import annotations

from collections.abc import Callable, Sequence
from decimal import ROUND_HALF_EVEN, Context, Decimal
from fractions import Fraction

from flint import acb, arb, arb_mat, ctx, fmpq

from closedform.algebra.surds import SurdSum

__all__ = [
    "ball_of",
    "certified_decimal",
    "certified_decimals",
    "enclosed_to",
    "exact_decimal",
    "value_at",
]

_MOST_BITS = 1 << 16
_LARGEST_PLAIN = 10**9
_SMALLEST_FIXED = -5


def ball_of(value: SurdSum | Fraction) -> arb:
    """Return an exact number as a ball at FLINT's current precision."""
    if isinstance(value, Fraction):
        return arb(fmpq(value.numerator, value.denominator))
    return sum((ball_of(c) * arb(d).sqrt() for d, c in value.terms), arb(0))


def value_at(coefficients: Sequence[arb], z: acb) -> acb:
    """Return the value of a polynomial, its coefficients highest first, by Horner's rule."""
    value = acb(0)
    for c in coefficients:
        value = value * z + c
    return value


def enclosed_to(evaluate: Callable[[], arb_mat], digits: int) -> arb_mat:
    """Return what `evaluate` encloses, at a precision that settles `digits` digits.

    Every entry gets a radius below 10^-digits times the larger of 1 and its modulus.
    """
    bits = 64 + 4 * digits
    goal = arb(10) ** (-digits)
    while True:
        with ctx.workprec(bits):
            balls = evaluate()
            if all(e.rad() < goal * max(arb(1), abs(e.mid())) for e in balls.entries()):
                return balls
        bits *= 2


def certified_decimal(evaluate: Callable[[], arb], digits: int) -> str:
    """Return one number as `certified_decimals` does."""
    return certified_decimals(lambda: [evaluate()], digits)[0]


def certified_decimals(evaluate: Callable[[], list[arb]], digits: int) -> list[str]:
    """Return irrational numbers correctly rounded to `digits` significant digits.

    `evaluate` encloses them at FLINT's current precision, which grows until all are
    settled.  A number that is still not told from zero at 2^16 bits is given as 0.
    """
    bits = 64 + 4 * digits
    while True:
        with ctx.workprec(bits):
            found = [_settled(ball, digits) for ball in evaluate()]
        if None not in found or bits >= _MOST_BITS:
            return [text or "0" for text in found]
        bits *= 2


def exact_decimal(value: Fraction, digits: int) -> str:
    """Return a rational number rounded to `digits` significant digits, ties to even.

    A number that needs fewer digits is given exactly.
    """
    context = Context(prec=digits, rounding=ROUND_HALF_EVEN)
    quotient = context.divide(Decimal(value.numerator), Decimal(value.denominator))
    if value.denominator == 1 and quotient == value.numerator and abs(value) < _LARGEST_PLAIN:
        return str(value.numerator)
    return _text(quotient.normalize(context))


def _settled(ball: arb, digits: int) -> str | None:
    """The digits of a ball if they are the same all over it."""
    if not ball.is_finite() or ball.contains(0):
        return None
    order = _decimal_order(ball)
    for exponent in (order, order + 1):
        whole = ((ball * arb(10) ** (digits - 1 - exponent)) + arb(0.5)).floor().unique_fmpz()
        if whole is None:
            return None
        if abs(int(whole)) < 10**digits:
            figures = tuple(map(int, str(abs(int(whole)))))
            return _text(Decimal((int(whole) < 0, figures, exponent - digits + 1)))
    return None


def _decimal_order(ball: arb) -> int:
    """The exponent of the first digit: floor(log10 |x|) of the midpoint."""
    mantissa, exponent = ball.mid().man_exp()
    # A first guess from the binary length, put right by comparing.
    guess = (abs(int(mantissa)).bit_length() - 1 + int(exponent)) * 30103 // 100000
    while arb(10) ** (guess + 1) <= abs(ball.mid()):
        guess += 1
    while arb(10) ** guess > abs(ball.mid()):
        guess -= 1
    return guess


def _text(value: Decimal) -> str:
    """Fixed point for numbers of everyday size, otherwise with a power of ten.

    No digit is added that is not settled: 123000 with three digits is 1.23e5.
    """
    if value == 0:
        return "0"
    sign, figures, exponent = value.as_tuple()
    if value.adjusted() >= _SMALLEST_FIXED and int(exponent) <= 0:
        return format(value, "f")
    text = "".join(map(str, figures))
    mantissa = text[0] + ("." + text[1:] if len(text) > 1 else "")
    return f"{'-' if sign else ''}{mantissa}e{value.adjusted()}"
