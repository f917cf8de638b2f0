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
    "ohm",
    "Ohm",
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
    "degC",
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
_COHERENT = frozenset(_BARE) - {"g", "L", "l", "bar", "eV"} | {"kg", "°C", "Np"}
_FACTOR = re.compile(r"(?P<symbol>[^\W\d_]+|°[CF]?|%|1)(?:\^?(?P<power>[-−]?[0-9]+))?")
_COMPACT = re.compile(r"(?<=[NVAW])(?=[smh](?![A-Za-z]))")
"""Between two units without a gap: Ns, Vs, Nm, Wh."""
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
    "squared": "^2",
    "cubed": "^3",
}
_POWERS = {"square": "^2", "cubic": "^3"}
"""Commands for the power of the unit behind them."""
_PREFIX_COMMANDS = {
    "kilo": "k",
    "milli": "m",
    "mega": "M",
    "giga": "G",
    "nano": "n",
    "pico": "p",
    "tera": "T",
    "hecto": "h",
    "centi": "c",
    "deci": "d",
    "deca": "da",
    "micro": "µ",
    "femto": "f",
}


def is_unit(text: str) -> bool:
    """Tell whether a text is a product of powers of units, as rad/s, N s/m or kg·m^-3."""
    if re.match(r"\(?in\s", text):
        return False  # the word: t in s
    factors = [factor for factor in _BETWEEN.split(_COMPACT.sub(" ", text)) if factor]
    forms = [_FACTOR.fullmatch(factor) for factor in factors]
    known = all(form and form["symbol"] in (*_SYMBOLS, "1") for form in forms)
    return known and any(form and form["symbol"] != "1" for form in forms)


def is_scaled(text: str) -> bool:
    """Tell whether a unit is a multiple or a part of a coherent one: ms, kN, min, but not kg."""
    factors = [factor for factor in _BETWEEN.split(_COMPACT.sub(" ", text)) if factor]
    symbols = [form["symbol"] for factor in factors if (form := _FACTOR.fullmatch(factor))]
    return any(symbol not in (*_COHERENT, "1") for symbol in symbols)


def unit_text(raws: list[Raw]) -> str:
    """Return a unit set in LaTeX as text, or nothing if it is none."""
    if raws and raws[0].text in FRACTIONS and raws[-1].kind == "}":
        middle = next((k for k in range(2, len(raws) - 1) if _parts(raws, k)), 0)
        if not middle:
            return ""
        above, below = unit_text(raws[1:middle]), unit_text(raws[middle:])
        return f"{above}/{below}" if above and below else ""
    words: list[str] = []
    glued, power = False, ""
    for raw in raws:
        if raw.kind == "text":
            words.append(raw.arguments[0] if raw.arguments else "")
        elif raw.kind == "command":
            if raw.text in _PREFIX_COMMANDS:
                words.append(f" {_PREFIX_COMMANDS[raw.text]}")
                glued = True
                continue
            if raw.text in _POWERS:
                power = _POWERS[raw.text]
                continue
            named = _NAMED.get(raw.text)
            if named is None and raw.text not in _WORDS:
                return ""
            joined = glued or named is None or named[:1] == "^"
            words.append(("" if joined else " ") + (named or _WORDS[raw.text]) + power)
            power = ""
        elif raw.kind in ("letter", "digit", "char", "^"):
            words.append(raw.text)
        elif raw.kind not in "{}":
            return ""
        glued = False
    text = re.sub(r"\s+", " ", "".join(words).replace("~", " ")).strip()
    text = text.replace("^°", "°").replace("° ", "°") if "°" in text else text
    text = re.sub(r" ?/ ?", "/", text).strip()
    text = f"1{text}" if text.startswith("/") else text
    return text if is_unit(text) else ""


def _parts(raws: list[Raw], at: int) -> bool:
    """Tell whether a group ends before an index, and another begins there."""
    depth = sum((raw.kind == "{") - (raw.kind == "}") for raw in raws[:at])
    return depth == 0 and raws[at].kind == "{" and raws[at - 1].kind == "}"
