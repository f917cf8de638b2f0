"""Numbers as they are typed, and commas that are no decimal sign."""

from __future__ import annotations

import re
from collections.abc import Iterator
from fractions import Fraction

from closedform.notation.reader import LARGEST_EXPONENT, MOST_DIGITS
from closedform.notation.written.tree import Literal

__all__ = [
    "MILLE",
    "MINUS",
    "NUMBER",
    "TEN",
    "THOUSANDS",
    "is_bounded",
    "listing_commas",
    "literal",
]

MINUS = "[-−–]"
NUMBER = re.compile(r"(?:[0-9]+(?:\.[0-9]*)?|\.[0-9]+)(?:[eE][+-]?[0-9]+(?![0-9.]))?")
THOUSANDS = re.compile(r"[0-9]{1,3}(?:[ \u00a0\u2009\u202f][0-9]{3})+(?![0-9])")
MILLE = re.compile(r"(?<![0-9.,])[1-9][0-9]{0,2}(?:,[0-9]{3})+\.[0-9]+(?![0-9.,])")
"""Thousands parted by commas, if a decimal point makes that sure."""
TEN = re.compile(
    rf"\s*[*×·⋅x]\s*10\s*(?:(?:\^|\*\*)\s*(?P<b>[({{]?)\s*(?P<n>(?:{MINUS}|\+)?[0-9]{{1,4}})\s*"
    r"(?(b)[)}]?)|(?P<s>[⁻⁺]?[⁰¹²³⁴⁵⁶⁷⁸⁹]{1,3}))(?![0-9.])"
)
MANY = ("atan2", "arctan2", "min", "max", "diag", "Min", "Max", "blkdiag", "piecewise")


def is_bounded(written: str) -> bool:
    """Say whether a number is of a size that can be worked with."""
    digits, _, exponent = written.lower().partition("e")
    size = exponent.lstrip("+-0")
    return len(digits) <= MOST_DIGITS and len(size) <= 4 and int(size or "0") <= LARGEST_EXPONENT


def literal(written: str, power: int, start: int, end: int, *, scaled: bool = False) -> Literal:
    """Return a number from its digits, times ten to a power; `scaled` says that that is printed."""
    mantissa, _, exponent = written.lower().partition("e")
    shift = power + int(exponent or 0)
    whole, _, digits = mantissa.partition(".")
    last = Fraction(10) ** (shift - len(digits))
    value = int((whole + digits) or "0") * last
    decimal = scaled or bool(exponent) or "." in mantissa
    return Literal(value, last, decimal, start, end)


def listing_commas(text: str) -> Iterator[int]:
    """Yield the places of commas between digits that stand in a list and are no decimal sign."""
    opened: list[tuple[int, list[int], bool]] = []
    for at, sign in enumerate(text):
        if sign in "([{":
            word = re.search(r"[A-Za-z0-9]+$", text[:at])
            opened.append((at, [], sign != "(" or bool(word and word[0] in MANY)))
        elif sign in ")]}" and opened:
            start, commas, listed = opened.pop()
            turned = re.match(r"\s*(?:\^\s*\{?T|'|ᵀ)", text[at + 1 : at + 6])
            loose = any(not re.fullmatch("[0-9],[0-9]", text[c - 1 : c + 2]) for c in commas)
            chained = re.search("[0-9],[0-9]+,[0-9]", text[start:at])
            if listed or turned or loose or chained:
                yield from commas
        elif sign == "," and opened:
            opened[-1][1].append(at)
