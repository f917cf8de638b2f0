"""Certified digits: decimals whose every figure is settled by ball arithmetic."""

from __future__ import annotations

from collections.abc import Callable, Iterator, Sequence
from fractions import Fraction

from flint import acb, arb, arb_mat, ctx, fmpq, fmpz

from closedform.algebra.surds import SurdSum
from closedform.errors import InputError

__all__ = [
    "MOST_BITS",
    "UnsettledError",
    "ball_of",
    "certified_decimal",
    "certified_decimals",
    "decimal_order",
    "enclosed_to",
    "exact_decimal",
    "exact_end",
    "value_at",
]

MOST_BITS = 1 << 16
"""The finest precision of ball arithmetic."""
_TIE_BITS = 2048
"""From this precision on it is asked whether a number lies exactly between two decimals."""
_LARGEST_PLAIN = 10**9
_SMALLEST_FIXED = -5


class UnsettledError(InputError):
    """Something that `bits` bits of ball arithmetic do not settle."""

    def __init__(self, what: str, bits: int) -> None:
        super().__init__(what, bits)
        self.what, self.bits = what, bits

    def __str__(self) -> str:
        return (
            f"{self.what} cannot be settled with {self.bits} bits of precision: the numbers of "
            "the model, its instants or the count of digits are too extreme; ask for fewer "
            "digits or smaller instants, or change the time unit of the model"
        )


def ball_of(value: SurdSum | Fraction) -> arb:
    """Return an exact number as a ball at FLINT's current precision."""
    if isinstance(value, Fraction):
        return arb(fmpq(value.numerator, value.denominator))
    return sum((ball_of(c) * arb(d).sqrt() for d, c in value.terms), arb(0))


def exact_end(end: arb) -> Fraction:
    """Return an exact ball, such as the lower end of another, as a fraction."""
    mantissa, exponent = map(int, end.man_exp())
    return mantissa * Fraction(2) ** exponent


def value_at(coefficients: Sequence[arb | acb], z: acb) -> acb:
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


def certified_decimal(
    evaluate: Callable[[], arb],
    digits: int,
    *,
    equals: Callable[[Fraction], bool] | None = None,
) -> str:
    """Return a real number correctly rounded to `digits` significant digits.

    `evaluate` encloses it at FLINT's current precision, which grows until it is settled.
    `equals` says whether the number is a given rational one, exactly; it is needed for a
    number that may be 0 or lie between two decimals, where no ball settles anything.  Such
    a number is rounded as `exact_decimal` does.

    Raises UnsettledError where `MOST_BITS` do not settle it.
    """
    for bits in _precisions(digits):
        with ctx.workprec(bits):
            ball = evaluate()
            text = _settled(ball, digits)
            if text is None and equals is not None and bits >= _TIE_BITS:
                tie = _tie(ball, digits)
                if tie is not None and equals(tie):
                    return exact_decimal(tie, digits)
        if text is not None:
            return text
    raise UnsettledError(f"a number to {digits} digits", bits)


def certified_decimals(evaluate: Callable[[], list[arb]], digits: int) -> list[str]:
    """Return numbers, none of them rational, as `certified_decimal` does."""
    for bits in _precisions(digits):
        with ctx.workprec(bits):
            found = [_settled(ball, digits) for ball in evaluate()]
        settled = [text for text in found if text is not None]
        if len(settled) == len(found):
            return settled
    raise UnsettledError(f"a number to {digits} digits", bits)


def _precisions(digits: int) -> Iterator[int]:
    """Yield doubled precisions up to `MOST_BITS`, or to what very many digits need."""
    bits, most = 64 + 4 * digits, max(MOST_BITS, 16 * digits)
    while bits < most:
        yield bits
        bits *= 2
    yield most


def exact_decimal(value: Fraction, digits: int) -> str:
    """Return a rational number rounded to `digits` significant digits, ties to even.

    A number that needs fewer digits is given exactly.
    """
    if value == 0:
        return "0"
    if value.denominator == 1 and abs(value) < min(_LARGEST_PLAIN, 10**digits):
        return str(value.numerator)
    unit = decimal_order(abs(value)) - digits + 1
    whole = round(abs(value) / Fraction(10) ** unit)  # Python rounds fractions half to even
    if value.denominator == 1 and whole * Fraction(10) ** unit == abs(value) < _LARGEST_PLAIN:
        return str(value.numerator)
    while whole % 10 == 0:
        whole, unit = whole // 10, unit + 1
    return _text(value < 0, fmpz(whole).str(), unit)


def decimal_order(value: Fraction) -> int:
    """Return the exponent of the first digit of a number > 0: floor(log10 x)."""
    bits = value.numerator.bit_length() - value.denominator.bit_length()
    order = bits * 30103 // 100000
    while Fraction(10) ** (order + 1) <= value:
        order += 1
    while Fraction(10) ** order > value:
        order -= 1
    return order


def _settled(ball: arb, digits: int) -> str | None:
    """The digits of a ball if they are the same all over it."""
    for exponent in _orders(ball):
        whole = (_in_units(ball, exponent - digits + 1) + arb(0.5)).floor().unique_fmpz()
        if whole is None:
            return None
        if abs(whole) < fmpz(10) ** digits:
            return _text(whole < 0, abs(whole).str(), exponent - digits + 1)
    return None


def _tie(ball: arb, digits: int) -> Fraction | None:
    """The one number in a ball that lies between two decimals, or 0; None if there is none."""
    if ball.contains(0):
        return Fraction(0)
    for exponent in _orders(ball):
        unit = exponent - digits + 1
        twice = _in_units(ball, unit) * 2
        whole = twice.unique_fmpz()
        if whole is not None and abs(whole) < 2 * fmpz(10) ** digits:
            return Fraction(int(whole), 2) * Fraction(10) ** unit
    return None


def _in_units(ball: arb, unit: int) -> arb:
    """The ball divided by 10^unit, with no more of it lost than the unit is long."""
    with ctx.extraprec(abs(unit).bit_length() + 32):
        return ball * arb(10) ** -fmpz(unit)


def _orders(ball: arb) -> tuple[int, ...]:
    """Two neighbours, one of them the exponent of the first digit of all numbers of a ball.

    None for a ball that holds 0, or is too wide for that.
    """
    if not ball.is_finite() or ball.contains(0):
        return ()
    _, exponent = ball.mid().man_exp()
    with ctx.extraprec(int(abs(exponent)).bit_length() + 64):
        lowest = (arb(ball.abs_lower()).log() / arb(10).log()).lower().floor().unique_fmpz()
    return () if lowest is None else (int(lowest), int(lowest) + 1)


def _text(negative: bool, figures: str, exponent: int) -> str:  # noqa: FBT001
    """Write figures times 10^exponent: fixed point for numbers of everyday size.

    No digit is added that is not settled: 123000 with three digits is 1.23e5.
    """
    first = exponent + len(figures) - 1
    if first >= _SMALLEST_FIXED and exponent <= 0:
        padded = figures.rjust(1 - exponent, "0")
        point = len(padded) + exponent
        text = padded[:point] + ("." + padded[point:] if exponent else "")
    else:
        text = figures[0] + ("." + figures[1:] if len(figures) > 1 else "") + f"e{first}"
    return f"-{text}" if negative else text
