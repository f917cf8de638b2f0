"""Sub- and superscripts of names: what belongs to the name, and what is no power."""

from __future__ import annotations

import re
from dataclasses import dataclass, field

from closedform.notation.written.latex_lexer import Raw
from closedform.notation.written.macros import ACCENTS, BOLD, DROPPED, FONTS, SPACES, SWITCHES
from closedform.notation.written.names import GREEK
from closedform.notation.written.written_errors import StopError, UnusableNotationError

__all__ = ["Scripts", "flattened", "mark_of"]

_WORDS = {
    "infty": "inf",
    "prime": "prime",
    "star": "star",
    "ast": "star",
    "max": "max",
    "min": "min",
    "parallel": "par",
    "perp": "perp",
    "circ": "circ",
    "dagger": "dagger",
    "pm": "pm",
    "cdot": "_",
    "to": "_to_",
    "rightarrow": "_to_",
    "ldots": "_",
    "dots": "_",
    "sim": "sim",
    "sin": "sin",
    "cos": "cos",
    "exp": "exp",
    "lim": "lim",
    "top": "top",
    "mid": "_",
    "leq": "le",
    "geq": "ge",
    "le": "le",
    "ge": "ge",
    "times": "x",
    "bullet": "bullet",
    "imath": "i",
    "jmath": "j",
    "ell": "ell",
    "emptyset": "0",
    "varnothing": "0",
}
_SIGNS = {",": "_", ";": "_", "/": "_", "|": "_", ":": "_", ".": "_", "-": "_minus_", "+": "_plus_"}
_SIGNS |= {"*": "star", "(": "", ")": "", "[": "", "]": "", "=": "_", "∞": "inf", "'": "prime"}


@dataclass(slots=True)
class Scripts:
    """What stands below and above a part: slices of raw tokens, and how many primes."""

    below: list[Raw] = field(default_factory=list)
    above: list[Raw] = field(default_factory=list)
    below_at: tuple[int, int] = (0, 0)
    above_at: tuple[int, int] = (0, 0)
    primes: int = 0
    start: int = 0
    end: int = 0
    bare: bool = False
    """Says that the superscript is one token without braces."""


def flattened(raws: list[Raw]) -> str:
    r"""Return a subscript as the end of a name: \\mathrm{n},1 is n_1, and 1/2 is 1_2.

    Raises:  StopError at a sign that no name has.
    """
    words: list[str] = []
    for raw in raws:
        match raw.kind:
            case "letter" | "digit":
                words.append(raw.text)
            case "text":
                words.append(re.sub(r"\W+", "_", " ".join(raw.arguments).strip()))
            case "_" | "^":
                words.append("_")
            case "'":
                words.append("prime")
            case "char" if raw.text in _SIGNS:
                words.append(_SIGNS[raw.text])
            case "command" if raw.text in GREEK or raw.text in _WORDS:
                words.append(raw.text if raw.text in GREEK else _WORDS[raw.text])
            case "command" if raw.text in ACCENTS:
                words.append("")
            case "command" if raw.text in FONTS | BOLD | DROPPED | SPACES.keys() | SWITCHES.keys():
                pass
            case "{" | "}":
                pass
            case _:
                raise StopError(
                    UnusableNotationError,
                    *(raw.start, raw.end, raw.text),
                    "no subscript has it; give the name a subscript of letters and digits",
                )
    return re.sub("__+", "_", "".join(words)).strip("_")


def mark_of(raws: list[Raw], *, transposed: bool) -> str:
    """Return what a superscript that is no power says: a postfix, star, plus, or (n).

    `transposed` says whether an italic T is the transpose.  Anything else gives nothing.
    """
    texts = [
        raw.arguments[0].strip() if raw.kind == "text" and raw.arguments else raw.text
        for raw in raws
        if raw.kind not in "{}"
        and not (
            raw.kind == "command" and raw.text in FONTS | SPACES.keys() | DROPPED | SWITCHES.keys()
        )
    ]
    upright = any(
        raw.kind == "text" or (raw.kind == "command" and raw.text in FONTS | SWITCHES.keys())
        for raw in raws
    )
    match texts:
        case ["top"] | ["intercal"] | ["tr"] | ["t", "r"]:
            return "transpose"
        case ["T"] if upright or transposed:
            return "transpose"
        case ["-", "T" | "top" | "intercal" as sign] if sign != "T" or upright or transposed:
            return "inverse transpose"
        case ["dagger"] | ["dag"]:
            return "adjoint"
        case ["H"] if upright:
            return "adjoint"
        case ["*"] | ["ast"] | ["star"]:
            return "star"
        case ["+"] | ["-"]:
            return "plus" if texts == ["+"] else "minus"
        case ["circ"] | ["degree"]:
            return "degree"
        case ["prime", *rest] if all(text == "prime" for text in rest):
            return f"primes {len(texts)}"
        case ["(", *inside, ")"] if inside and all(text.isalnum() for text in inside):
            return f"({''.join(inside)})"
        case [*letters] if _is_upright_word(raws) and all(text.isalpha() for text in letters):
            word = "".join(letters)
            return "" if word in ("e", "i", "j") else f"word {word}"
        case ["'", *rest] if all(text == "'" for text in rest):
            return f"primes {len(texts)}"
    return ""


def _is_upright_word(raws: list[Raw]) -> bool:
    """Tell whether a superscript is one text, or letters in one upright font."""
    if len(raws) < 2:
        return bool(raws) and raws[0].kind == "text"
    first = raws[1] if raws[0].kind == "{" else raws[0]
    set_upright = first.kind == "command" and first.text in FONTS | SWITCHES.keys()
    letters = [raw for raw in raws if raw is not first and raw.kind not in "{}"]
    return set_upright and bool(letters) and all(raw.kind == "letter" for raw in letters)
