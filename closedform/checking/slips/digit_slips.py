"""Slips of the pen in a printed number: digits exchanged, the decimal point moved, one digit."""

from __future__ import annotations

from closedform.checking.slips import names
from closedform.notation.written.tree import Literal, Written

__all__ = ["digit_slip"]

FEWEST_DIGITS = 2


def digit_slip(printed: Literal, right: Written) -> str:
    """Return the name of the slip of the pen that makes one number of another, empty if none."""
    if not isinstance(right, Literal) or right.value == 0 or printed.value == 0:
        return ""
    if _is_power_of_ten(printed, right):
        return names.DECIMAL_POINT
    one, other = _digits(printed), _digits(right)
    if right.last_place != printed.last_place or len(one) != len(other):
        return ""
    different = [k for k, (a, b) in enumerate(zip(one, other, strict=True)) if a != b]
    if len(different) == 2 and different[1] == different[0] + 1:
        i, j = different
        if one[i] == other[j] and one[j] == other[i]:
            return names.DIGITS_EXCHANGED
    if len(different) == 1 and len(one) > FEWEST_DIGITS and printed.is_decimal:
        return names.ONE_DIGIT
    return ""


def _is_power_of_ten(printed: Literal, right: Literal) -> bool:
    ratio = printed.value / right.value
    if ratio == 1:
        return False
    whole = ratio if ratio > 1 else 1 / ratio
    return whole.denominator == 1 and str(whole.numerator).strip("0") == "1"


def _digits(number: Literal) -> str:
    return str(int(number.value / number.last_place))
