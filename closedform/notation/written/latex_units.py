"""Units behind numbers: which words are units, and how they are set in LaTeX."""

from __future__ import annotations

import re

from closedform.notation.written.latex_lexer import Raw
from closedform.notation.written.macros import FRACTIONS

__all__ = ["is_unit", "unit_text"]

_BARE = [
    "m",
    "g",
    "s",
    "A",
    "K",
    "mol",
    "cd",
    "rad",
    "sr",
    "Hz",
    "N",
    "Pa",
    "J",
    "W",
    "C",
    "F",
    "V",
    "Ω",
    "S",
    "Wb",
    "T",
    "H",
    "lm",
    "lx",
    "Bq",
    "Gy",
    "Sv",
    "L",
    "l",
    "eV",
    "VA",
    "var",
    "bar",
    "Nm",
]
_ALONE = [
    "min",
    "h",
    "d",
    "day",
    "days",
    "yr",
    "a",
    "deg",
    "°",
    "°C",
    "°F",
    "%",
    "dB",
    "rpm",
    "ppm",
    "ft",
    "in",
    "lb",
    "lbf",
    "hp",
    "kn",
    "Np",
    "bit",
    "B",
    "ohm",
    "Ohm",
    "sec",
    "s.u.",
    "atm",
    "cal",
    "u",
    "Da",
    "rev",
    "cycles",
    "samples",
    "K/W",
    "mrad",
    "ms",
    "hr",
    "hours",
    "minutes",
    "seconds",
    "years year",
]
_PREFIXES = (
    "",
    *[
        "y",
        "z",
        "a",
        "f",
        "p",
        "n",
        "µ",
        "μ",
        "u",
        "m",
        "c",
        "d",
        "da",
        "h",
        "k",
        "M",
        "G",
        "T",
        "P",
    ],
)
_SYMBOLS = frozenset(prefix + unit for prefix in _PREFIXES for unit in _BARE) | frozenset(_ALONE)
_FACTOR = re.compile(r"(?P<symbol>[^\W\d_]+|°[CF]?|%|1)(?:\^?(?P<power>[-−]?[0-9]+))?")
_BETWEEN = re.compile(r"[ ·*/().]+")

_WORDS = {
    "Omega": "Ω",
    "mu": "µ",
    "circ": "°",
    "degree": "°",
    "celsius": "°C",
    "ohm": "Ω",
    "%": "%",
    **dict.fromkeys((",", ";", ":", " ", "cdot", "times", "quad", ".", "thinspace"), " "),
    **dict.fromkeys(("!", "mathrm", "text", "rm", "mathsf", "left", "right", "mathit"), ""),
    "micro": "µ",
    "upmu": "µ",
    "upOmega": "Ω",
    "per": "/",
    "textdegree": "°",
    "textmu": "µ",
    "textohm": "Ω",
    "slash": "/",
}
_NAMED = {
    "metre": "m",
    "meter": "m",
    "second": "s",
    "ampere": "A",
    "kelvin": "K",
    "mole": "mol",
    "kilogram": "kg",
    "gram": "g",
    "radian": "rad",
    "hertz": "Hz",
    "newton": "N",
    "volt": "V",
    "pascal": "Pa",
    "joule": "J",
    "watt": "W",
    "coulomb": "C",
    "farad": "F",
    "henry": "H",
    "siemens": "S",
    "weber": "Wb",
    "tesla": "T",
    "minute": "min",
    "hour": "h",
    "day": "d",
    "degreeCelsius": "°C",
    "percent": "%",
    "litre": "L",
    "liter": "L",
    "bar": "bar",
    "kilo": "k",
    "milli": "m",
    "mega": "M",
    "giga": "G",
    "nano": "n",
    "pico": "p",
    "hecto": "h",
    "centi": "c",
    "deci": "d",
    "squared": "^2",
    "cubed": "^3",
    "square": "",
    "cubic": "",
}


def is_unit(text: str) -> bool:
    """Tell whether a text is a product of powers of units, as rad/s, N s/m or kg·m^-3."""
    factors = [factor for factor in _BETWEEN.split(text) if factor]
    forms = [_FACTOR.fullmatch(factor) for factor in factors]
    known = all(form and form["symbol"] in (*_SYMBOLS, "1") for form in forms)
    return known and any(form and form["symbol"] != "1" for form in forms)


def unit_text(raws: list[Raw]) -> str:
    """Return a unit set in LaTeX as text, or nothing if it is none."""
    if raws and raws[0].text in FRACTIONS and raws[-1].kind == "}":
        middle = next((k for k in range(2, len(raws) - 1) if _parts(raws, k)), 0)
        if not middle:
            return ""
        above, below = unit_text(raws[1:middle]), unit_text(raws[middle:])
        return f"{above}/{below}" if above and below else ""
    words: list[str] = []
    for raw in raws:
        if raw.kind == "text":
            words.append(raw.arguments[0] if raw.arguments else "")
        elif raw.kind == "command":
            if raw.text in _NAMED:
                prefix = words and words[-1] in ("k", "m", "M", "G", "n", "p", "µ", "h", "c", "d")
                joined = prefix or _NAMED[raw.text][:1] in ("^", "")
                words.append(_NAMED[raw.text] if joined else " " + _NAMED[raw.text])
            elif raw.text in _WORDS:
                words.append(_WORDS[raw.text])
            else:
                return ""
        elif raw.kind in ("letter", "digit", "char", "^"):
            words.append(raw.text)
        elif raw.kind not in "{}":
            return ""
    text = re.sub(r"\s+", " ", "".join(words).replace("~", " ")).strip()
    text = text.replace("^°", "°").replace("° ", "°") if "°" in text else text
    text = re.sub(r" ?/ ?", "/", text).strip()
    return text if is_unit(text) else ""


def _parts(raws: list[Raw], at: int) -> bool:
    """Tell whether a group ends before an index, and another begins there."""
    depth = sum((raw.kind == "{") - (raw.kind == "}") for raw in raws[:at])
    return depth == 0 and raws[at].kind == "{" and raws[at - 1].kind == "}"
