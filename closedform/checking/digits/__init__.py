"""Rounded decimals in claims, judged by the exact numbers that they stand for."""

from closedform.checking.digits.difference import Difference, largest_difference
from closedform.checking.digits.match import (
    DigitsMatch,
    match_digits,
    told,
    value_digits,
    value_from_rounded,
)
from closedform.checking.digits.rounding import Judged

__all__ = [
    "Difference",
    "DigitsMatch",
    "Judged",
    "largest_difference",
    "match_digits",
    "told",
    "value_digits",
    "value_from_rounded",
]
