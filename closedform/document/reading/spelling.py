r"""Our LaTeX spelled so that a reader of anybody's formulas takes every sign as we mean it.

Upright words are our names of quantities, and would be units or functions to others; bold
letters are matrices and vectors, beside numbers of the same letter; upright e and i are the
numbers though a quantity may have that letter.  Each gets a word of its own, which `restored`
takes back: in trees, a name that begins with `BOLD` is one in bold.
"""

from __future__ import annotations

import re

from closedform.notation.latex.names import GREEK
from closedform.notation.written.tree import IMAGINARY, Declared, Jet, Symbol, Written, changed

__all__ = ["BOLD", "restored", "spelled", "spelled_name"]

BOLD = "*"
BOLD_WORD, NAME_WORD, UNIT_WORD = "boldface", "word", "imaginaryunit"
BOLD_LETTER = re.compile(r"\\boldsymbol\{(?:\\mathrm\{([A-Za-z]+)\}|\\?([A-Za-z]+))\}")
BOLD_ZERO = r"\boldsymbol{0}"
UPRIGHT_WORD = re.compile(r"(?<!_\{)(?<![^\\],)\\mathrm\{([A-Za-z]{2,})\}")
LESS_ONE = re.compile(r"\\mathrm\{([A-Za-z]+)-([0-9]+)\}")
BEFORE_BRACKET = re.compile(r"(?<!\\cdot)\\,((?:\\left|\\[bB]igg?l)?\()")
"""Our products have a space before a bracket; our functions have none."""
EMPTY_GROUP = re.compile(r"(?<![A-Za-z_^}])\{\}")
NEARER = r"\setlength{\arraycolsep}{2.5pt}"
UPRIGHT_E = r"\mathrm{e}^{"


def spelled(latex: str, declared: Declared) -> str:
    """Return one side of a relation as it is to be read."""
    plain = latex.replace(BOLD_ZERO, "0").replace(NEARER, "").replace(r"\uppi", r"\pi")
    plain = UPRIGHT_WORD.sub(rf"\\mathrm{{{NAME_WORD}\1}}", EMPTY_GROUP.sub("", plain))
    plain = LESS_ONE.sub(r"\\mathrm{\1minus\2}", plain)
    plain = BEFORE_BRACKET.sub(r"\\cdot \1", plain)
    if "e" in declared.names:
        plain = _called(plain)
    for unit in ("i", "j"):
        if unit in declared.names:
            plain = plain.replace(rf"\mathrm{{{unit}}}", rf"\mathrm{{{UNIT_WORD}}}")
    return BOLD_LETTER.sub(lambda found: rf"\mathrm{{{BOLD_WORD}{found[1] or found[2]}}}", plain)


def spelled_name(key: str) -> str:
    """Return a name as `spelled` would have it, for the names that are declared.

    >>> spelled_name("speed_1"), spelled_name("omega_1"), spelled_name("*A")
    ('wordspeed_1', 'omega_1', 'boldfaceA')
    """
    if key.startswith(BOLD):
        return BOLD_WORD + key.removeprefix(BOLD)
    base = re.split("[_0-9]", key, maxsplit=1)[0]
    return key if len(base) < 2 or base in GREEK else NAME_WORD + key


def restored(tree: Written) -> Written:
    """Return what was read with our own names in it."""
    return changed(tree, _own)


def _own(node: Written) -> Written | None:
    match node:
        case Symbol(name) if name == UNIT_WORD:
            return IMAGINARY
        case Symbol(name) if name.startswith((NAME_WORD, BOLD_WORD)):
            return Symbol(_own_name(name))
        case Jet(name, order, at) if name.startswith((NAME_WORD, BOLD_WORD)):
            return Jet(_own_name(name), order, None if at is None else restored(at))
    return None


def _own_name(name: str) -> str:
    if name.startswith(BOLD_WORD):
        return BOLD + name.removeprefix(BOLD_WORD)
    return name.removeprefix(NAME_WORD)


def _called(text: str) -> str:
    r"""Return a text with \exp in the place of upright e, where an e in italics is a name."""
    place = text.find(UPRIGHT_E)
    if place < 0:
        return text
    begin = place + len(UPRIGHT_E)
    depth, end = 1, begin
    while end < len(text) and depth:
        depth += (text[end] == "{") - (text[end] == "}")
        end += 1
    inside = _called(text[begin : end - 1])
    return rf"{text[:place]}\exp\left({inside}\right){_called(text[end:])}"
