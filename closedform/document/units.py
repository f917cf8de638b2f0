"""Units as text, set as LaTeX: upright, with powers raised and products by thin spaces.

Source of the conventions:  ISO 80000-1:2022, clause 7.2.
"""

from __future__ import annotations

import re

from closedform.notation.latex.escape import escaped

__all__ = ["unit_latex"]

DEGREE = r"{}^{\circ}"
OHM = r"\Omega"
MICRO = r"\text{\textmu}"
KNOWN = {
    **dict.fromkeys(("degC", "°C", "℃"), rf"{DEGREE}\mathrm{{C}}"),
    **dict.fromkeys(("degF", "°F", "℉"), rf"{DEGREE}\mathrm{{F}}"),
    **dict.fromkeys(("deg", "°"), DEGREE),
    "%": r"\%",
}
"""Units whose sign is not their text."""
OHMS = ("Ohms", "ohms", "Ohm", "ohm", "Ω", "\u2126")
MICROS = ("u", "µ", "μ")
TAKE_MICRO = ("mol", "Pa", *"ACFHJLNSTVWlgms")
"""What may stand behind u for micro."""
LONGEST_SIGN = 4
"""Words with spaces between that are longer are text, and no product of units."""

RAISED = dict(zip("⁰¹²³⁴⁵⁶⁷⁸⁹⁻⁺", "0123456789-+", strict=True))
TOKEN = re.compile(
    rf"\s*(?:(?P<word>[^\W\d_{''.join(RAISED)}]+|°[CF]?|%)|(?P<number>[0-9]+(?:\.[0-9]+)?)"
    rf"|(?:\^|\*\*)\s*(?P<power>[-+]?[0-9.]+|\([-+]?[0-9.]+(?:/[0-9]+)?\))"
    rf"|(?P<raised>[{''.join(RAISED)}]+)|(?P<times>[*·⋅×])|(?P<over>/)|(?P<bracket>[()]))"
)
_FACTOR, _OPERATOR = "factor", "operator"


def unit_latex(text: str) -> str:
    r"""Return a unit as mathematics for a line of text; what is no unit, as escaped text.

    >>> unit_latex("kg m^2"), unit_latex("degC")
    ('$\\mathrm{kg}\\,\\mathrm{m}^{2}$', '${}^{\\circ}\\mathrm{C}$')
    """
    parts = _parts(text.strip())
    return escaped(text) if parts is None else f"${''.join(parts)}$"


def _parts(text: str) -> list[str] | None:
    """The LaTeX of each token, None if the text is no unit."""
    parts: list[str] = []
    depth, place, before = 0, 0, _OPERATOR
    spaced = " " in text
    while place < len(text):
        match = TOKEN.match(text, place)
        if match is None:
            return None
        kind, found = str(match.lastgroup), match[str(match.lastgroup)]
        place = match.end()
        opens = found == "(" and kind == "bracket"
        if kind in ("word", "number") or opens:
            sign = found if kind != "word" else _sign(found, spaced=spaced)
            if sign is None or (kind == "number" and before == _FACTOR):
                return None
            depth += opens
            parts += [r"\,", sign] if before == _FACTOR else [sign]
            before = _OPERATOR if opens else _FACTOR
            continue
        if before == _OPERATOR:
            return None
        match kind:
            case "power":
                parts.append(f"^{{{found.strip('()')}}}")
            case "raised":
                parts.append(f"^{{{''.join(RAISED[c] for c in found)}}}")
            case "over":
                parts.append("/")
            case "times":
                parts.append(r"\,")
            case _:
                parts.append(")")
                depth -= 1
        if depth < 0:
            return None
        before = _OPERATOR if kind in ("over", "times") else _FACTOR
    return None if depth or before == _OPERATOR else parts


def _sign(word: str, *, spaced: bool) -> str | None:
    """The sign of a unit with its prefix; None for a word that seems to be prose."""
    if word in KNOWN:
        return KNOWN[word]
    for ohm in OHMS:
        if word.endswith(ohm):
            prefix = word.removesuffix(ohm)
            before = MICRO if prefix in MICROS else rf"\mathrm{{{prefix}}}" if prefix else ""
            return before + OHM if len(prefix) <= 1 else None
    if word[0] in MICROS and word[1:] in TAKE_MICRO:
        return rf"{MICRO}\mathrm{{{word[1:]}}}"
    if not word.isascii() or (spaced and (len(word) > LONGEST_SIGN or word == "per")):
        return None
    return rf"\mathrm{{{word}}}"
