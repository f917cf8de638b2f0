"""Text of the user's on its way to TeX: every character stands for itself.

One pass of ``str.translate`` over a table, so that nothing that is put in for one
character is seen again.  What the plain TeX fonts cannot set appears as ``[U+XXXX]``
instead of vanishing or stopping the run.
"""

from __future__ import annotations

import re
import unicodedata

__all__ = ["escaped"]

SPECIAL = {
    "\\": r"\textbackslash{}",
    "{": r"\{",
    "}": r"\}",
    "%": r"\%",
    "#": r"\#",
    "$": r"\$",
    "&": r"\&",
    "_": r"\_",
    "~": r"\textasciitilde{}",
    "^": r"\textasciicircum{}",
    "<": r"\textless{}",
    ">": r"\textgreater{}",
    "|": r"\textbar{}",
    '"': r"\textquotedbl{}",
    "`": r"\textasciigrave{}",
    "\u00a0": "~",
    "\u202f": r"\,",
    "\u2009": r"\,",
    "–": "--",
    "—": "---",
    "‘": r"\textquoteleft{}",
    "’": r"\textquoteright{}",
    "“": r"\textquotedblleft{}",
    "”": r"\textquotedblright{}",
    "…": r"\dots{}",
    "•": r"\textbullet{}",
    "§": r"\S{}",
    "°": r"\textdegree{}",
}

SMALL_GREEK = "αβγδεζηθικλμνξοπρςστυφχψω"
SMALL_GREEK_COMMANDS = (
    r"\alpha \beta \gamma \delta \varepsilon \zeta \eta \theta \iota \kappa \lambda \mu \nu "
    r"\xi o \pi \rho \varsigma \sigma \tau \upsilon \varphi \chi \psi \omega"
)
GREAT_GREEK = "ΓΔΘΛΞΠΣΥΦΨΩ"
GREAT_GREEK_COMMANDS = r"\Gamma \Delta \Theta \Lambda \Xi \Pi \Sigma \Upsilon \Phi \Psi \Omega"

MATHEMATICAL = {
    "±": r"\pm",
    "−": "-",
    "×": r"\times",
    "·": r"\cdot",
    "÷": r"\div",
    "≤": r"\le",
    "≥": r"\ge",
    "≠": r"\ne",
    "≈": r"\approx",
    "∞": r"\infty",
    "√": r"\surd",
    "∂": r"\partial",
    "∑": r"\sum",
    "∫": r"\int",
    "→": r"\to",
    "←": r"\leftarrow",
    "↔": r"\leftrightarrow",
    "⇒": r"\Rightarrow",
    "∈": r"\in",
    "′": "{}'",
    "″": "{}''",
    "½": r"\tfrac{1}{2}",
    "¼": r"\tfrac{1}{4}",
    "¾": r"\tfrac{3}{4}",
    "µ": r"\mu",
    **{sign: f"{{}}^{{{digit}}}" for digit, sign in enumerate("⁰¹²³⁴⁵⁶⁷⁸⁹")},
    **{sign: f"{{}}_{{{digit}}}" for digit, sign in enumerate("₀₁₂₃₄₅₆₇₈₉")},
    "⁻": "{}^{-}",
    **dict(zip(SMALL_GREEK, SMALL_GREEK_COMMANDS.split(), strict=True)),
    **dict(zip(GREAT_GREEK, GREAT_GREEK_COMMANDS.split(), strict=True)),
    "ϑ": r"\vartheta",
    "ϕ": r"\phi",
    "ϵ": r"\epsilon",
    "Ω": r"\Omega",
}

LATIN = frozenset(
    "¡£«»¿ÀÁÂÃÄÅÆÇÈÉÊËÌÍÎÏÐÑÒÓÔÕÖØÙÚÛÜÝÞßàáâãäåæçèéêëìíîïðñòóôõöøùúûüýþÿĂăĄąĆćČčĎďĐđĘęĚěĞğĹĺĽľŁłŃńŇň"
    "ŐőŒœŔŕŘřŚśŞşŠšŢţŤťŮůŰűŸŹźŻżŽž"
)
"""Letters that have a glyph of their own in the T1 encoding, so that every engine sets them."""

LONGEST_WORD = 24
SHELF = "\u200b"
"""Marks a place where a word may be broken; it becomes a space of no width."""


class _Table(dict[int, str]):
    """The table, with an answer for every character that it does not list."""

    def __missing__(self, code: int) -> str:
        sign = chr(code)
        if (sign.isascii() and sign.isprintable()) or sign in LATIN:
            return sign
        return f"[U+{code:04X}]"


TABLE = _Table(
    {ord(sign): latex for sign, latex in SPECIAL.items()}
    | {ord(sign): rf"\ensuremath{{{latex}}}" for sign, latex in MATHEMATICAL.items()}
    | {ord(SHELF): r"\hspace{0pt}"}
)


def _shelved(word: re.Match[str]) -> str:
    text = word.group()
    half = LONGEST_WORD // 2
    return SHELF.join(text[i : i + half] for i in range(0, len(text), half))


def escaped(text: str) -> str:
    r"""Return text as LaTeX that prints it, on one line and in one paragraph.

    White space of any kind counts as one space.  Words longer than `LONGEST_WORD` may be
    broken, as no hyphenation is known for them.

    >>> escaped("50 % of \\input{x}")
    '50 \\% of \\textbackslash{}input\\{x\\}'
    >>> escaped("ω and 漢")
    '\\ensuremath{\\omega} and [U+6F22]'
    """
    words = " ".join(unicodedata.normalize("NFC", text).replace(SHELF, "").split())
    return re.sub(rf"\S{{{LONGEST_WORD + 1},}}", _shelved, words).translate(TABLE)
