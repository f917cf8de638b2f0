"""The signs that people type in mathematics, and what each stands for."""

from __future__ import annotations

import re
import unicodedata
from fractions import Fraction

from closedform.notation.greek import LETTERS

__all__ = [
    "ACCENTS",
    "COMMENT",
    "FRACTIONS",
    "INDICES",
    "LABEL",
    "OPERATORS",
    "PRIMES",
    "RELATIONS",
    "ROOTS",
    "SUPERSCRIPTS",
    "is_letter",
    "is_part_of_word",
    "spelled_out",
    "why_stray",
]

OPERATORS = {
    **dict.fromkeys(("+/-", "+-", "±", "(+/-)", "(+-)"), "PLUS_MINUS"),
    **dict.fromkeys(("-/+", "-+", "∓"), "MINUS_PLUS"),
    **dict.fromkeys(("**", "^"), "POWER"),
    **dict.fromkeys(("*", "·", "⋅", "×", "∗", "∙", "•"), "TIMES"),
    **dict.fromkeys(("/", "÷", "∕", "⁄"), "OVER"),
    **dict.fromkeys(("-", "−", "–", "‐", "‑", "﹣", "－"), "MINUS"),
    **dict.fromkeys(("+", "＋"), "PLUS"),
}
"""Operators, to their token."""
RELATIONS = {
    **dict.fromkeys(("=", ":=", "==", "≔"), "="),
    **dict.fromkeys(("~=", "≈", "~", "≅", "≃", "∼", "≐", "=~", "~~"), "≈"),
    **dict.fromkeys(("!=", "≠", "<>"), "≠"),
    **dict.fromkeys(("<=", "≤", "=<", "⩽", "≦"), "≤"),
    **dict.fromkeys((">=", "≥", "⩾", "≧"), "≥"),
    **dict.fromkeys(("<", "≪"), "<"),
    **dict.fromkeys((">", "≫"), ">"),
    **dict.fromkeys(("->", "→", "-->", "⟶"), "→"),
    **dict.fromkeys(("≡",), "≡"),
    **dict.fromkeys(("∝",), "∝"),
}
"""Signs between the members of a chain, to their sign in the tree."""
PRIMES = {"'": 1, "’": 1, "′": 1, "´": 1, "″": 2, "‴": 3, '"': 2}
ROOTS = {"√": 2, "∛": 3, "∜": 4}
SUPERSCRIPTS = dict(zip("⁰¹²³⁴⁵⁶⁷⁸⁹⁺⁻⁼⁽⁾ⁿᵗˢᵀ˙ᵏⁱʲ", "0123456789+-=()ntsT.kij", strict=True))
SUBSCRIPTS = dict(zip("₀₁₂₃₄₅₆₇₈₉ₐₑₕᵢⱼₖₗₘₙₒₚᵣₛₜᵤᵥₓ", "0123456789aehijklmnoprstuvx", strict=True))
FRACTIONS = {
    sign: Fraction(unicodedata.normalize("NFKD", sign).replace("⁄", "/"))
    for sign in "½⅓⅔¼¾⅕⅖⅗⅘⅙⅚⅛⅜⅝⅞⅐⅑⅒"
}
DOTS = {"\u0307": 1, "\u0308": 2, "\u20db": 3}
ACCENTS = {"\u0302": "hat", "\u0304": "bar", "\u0305": "bar", "\u0303": "tilde"}
INDICES = re.compile(r"(?:,\s?[0-9₀-₉])+(?=\s*(?:[=≈~∈]|:=))")
LABEL = re.compile(r"\{(?P<inside>[A-Za-z0-9, ]+)\}")
COMMENT = re.compile(r"#\s*(?:[^\W\d_]{2,}|\n|$)")


def is_letter(sign: str) -> bool:
    """Say whether a sign may begin a name."""
    return sign.isalpha() and sign not in SUPERSCRIPTS and sign not in SUBSCRIPTS


def is_part_of_word(sign: str) -> bool:
    """Say whether a sign may stand inside a name."""
    return (
        is_letter(sign)
        or sign in "0123456789_"
        or sign in SUBSCRIPTS
        or sign in DOTS
        or sign in ACCENTS
    )


def spelled_out(word: str) -> tuple[str, int]:
    """Return a word in its ASCII spelling, and the number of dots on it.

    Greek letters are written out, digits and letters set low follow an underscore.

    >>> spelled_out("ẋ₁"), spelled_out("ω_n"), spelled_out("λ₁₂")
    (('x_1', 1), ('omega_n', 0), ('lambda_12', 0))
    """
    letters, dots, low = "", 0, False
    for sign in unicodedata.normalize("NFD", word):
        if sign in DOTS:
            dots += DOTS[sign]
            continue
        if sign in SUBSCRIPTS:
            letters += ("" if low or letters.endswith("_") else "_") + SUBSCRIPTS[sign]
            low = True
            continue
        letters += ACCENTS.get(sign) or LETTERS.get(sign, sign)
        low = False
    return letters, dots


def why_stray(sign: str) -> str:
    """Return what to do about a sign that means nothing."""
    if sign in "∫∂∑∮":
        return "integrals and sums are not read from typed text; write the formula in LaTeX"
    return "this sign has no meaning in typed mathematics; leave it out or write it in words"
