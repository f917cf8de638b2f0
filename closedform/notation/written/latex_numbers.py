"""Numbers as printed: decimal points and commas, groups of thousands, powers of ten."""

from __future__ import annotations

import re
from dataclasses import replace
from fractions import Fraction

from closedform.notation.written.latex_lexer import Raw
from closedform.notation.written.tree import Literal
from closedform.notation.written.written_errors import StopError, UnusableNotationError

__all__ = ["literal", "number_at", "printed_number", "scaled"]

MOST_DIGITS = 1_000
"""Digits of one number, and powers of ten of it either way."""
_GAPS = frozenset({",", " ", ";", ":", "!", "thinspace"})
_PRINTED = re.compile(
    r"(?P<sign>[+-]?)(?P<digits>[0-9]*(?:[.,][0-9]*)?)"
    r"(?:(?:[eEdD]|x10\^|x10|\\times10\^)\{?(?P<exponent>[+-]?[0-9]+)\}?)?"
)


def literal(digits: str, exponent: int, start: int, end: int) -> Literal:
    """Return the number of its digits with a point, times a power of ten.

    >>> literal("0.040", 0, 0, 5).last_place
    Fraction(1, 1000)
    """
    whole, point, places = digits.partition(".")
    if len(digits) > MOST_DIGITS or abs(exponent) > MOST_DIGITS:
        raise StopError(
            UnusableNotationError,
            *(start, end, digits[:40]),
            f"a number has up to {MOST_DIGITS} digits and powers of ten; write it shorter",
        )
    last = Fraction(10) ** (exponent - len(places))
    return Literal(
        int(whole + places or "0") * last, last, bool(point) or exponent != 0, start, end
    )


def scaled(number: Literal, exponent: int, end: int) -> Literal:
    """Return a printed number times the power of ten behind it."""
    if abs(exponent) > MOST_DIGITS:
        raise StopError(
            UnusableNotationError,
            *(number.start, end, f"10^{exponent}"),
            f"powers of ten go up to {MOST_DIGITS}; choose another unit",
        )
    scale = Fraction(10) ** exponent
    return replace(
        number,
        value=number.value * scale,
        last_place=number.last_place * scale,
        is_decimal=True,
        end=end,
    )


def number_at(raws: list[Raw], at: int, end: int) -> tuple[Literal, int]:
    r"""Return the number whose first digit or point is at an index, and the index behind it.

    0{,}25 has a decimal comma and 12\\,000 is a group of thousands; a comma without braces is
    left, since it may part two numbers.
    """
    first, digits = raws[at].start, ""
    digits, at = _digits(raws, at, end)
    after = _mark(raws, at, end)
    if after and "." not in digits:
        places, behind = _digits(raws, after, end)
        if places:
            digits, at = f"{digits}.{places}", behind
    exponent = 0
    if at + 1 < end and raws[at].text in ("e", "E") and raws[at].kind == "letter":
        signed = raws[at + 1].kind == "char" and raws[at + 1].text in "+-−"
        power, behind = _digits(raws, at + 1 + signed, end)
        beside = all(
            a.end == b.start
            for a, b in zip(raws[at - 1 : behind - 1], raws[at:behind], strict=True)
        )
        if power and beside and (signed or len(power) < 3):
            exponent = -int(power[:9]) if raws[at + 1].text in "-−" else int(power[:9])
            at = behind
    return literal(digits, exponent, first, raws[at - 1].end), at


def _mark(raws: list[Raw], at: int, end: int) -> int:
    """Return the index behind a decimal sign, or 0 if there is none."""
    texts = [raw.text for raw in raws[at : min(at + 3, end)]]
    if texts in (["{", ",", "}"], ["{", ".", "}"]):
        return at + 3
    return at + 1 if texts[:1] == ["."] and raws[at].kind == "char" else 0


def _digits(raws: list[Raw], at: int, end: int) -> tuple[str, int]:
    """Return digits side by side, with groups of three behind narrow spaces."""
    digits: list[str] = []
    grouped = False
    while at < end:
        if raws[at].kind == "digit" and (not digits or raws[at].start == raws[at - 1].end):
            digits.append(raws[at].text)
            at += 1
            continue
        gap = raws[at].kind == "command" and raws[at].text in _GAPS
        first = at + gap
        group = [raw for raw in raws[first : min(first + 4, end)] if raw.kind == "digit"]
        if not digits or len(group) != 3 or raws[first].kind != "digit":
            break
        if any(raw.kind != "digit" for raw in raws[first : first + 3]):
            break
        if (not grouped and len(digits) > 3) or (digits[0] == "0" and len(digits) == 1):
            break
        grouped = True
        digits += [raw.text for raw in group]
        at = first + 3
    return "".join(digits), at


def printed_number(raw: Raw, text: str) -> tuple[Literal, bool]:
    r"""Return the number in \\num or its like, and whether it is negative.

    Raises:  StopError if it is no plain number.
    """
    bare = re.sub(r"[\s~]|\\[,;: ]", "", text.replace("{,}", ","))
    form = _PRINTED.fullmatch(bare.replace("−", "-"))
    if form is None or not re.search("[0-9]", form["digits"] or (form["exponent"] and "1") or ""):
        raise StopError(
            UnusableNotationError,
            *(raw.start, raw.end, text),
            "it is no plain number; write one number there, without an uncertainty",
        )
    start = raw.at if raw.at >= 0 else raw.start
    digits = (form["digits"] or "1").replace(",", ".")
    exponent = int((form["exponent"] or "0")[:9])
    return literal(digits, exponent, start, start + len(text)), form["sign"] == "-"
