"""Mathematics as LaTeX: the one place from which templates get it."""

from __future__ import annotations

import re

from closedform.derivation.step import Side, Statement
from closedform.document.display import RELATIONS, Display, displayed, fits
from closedform.document.symbols import side_box
from closedform.notation.latex.escape import escaped
from closedform.notation.latex.names import IMAGINARY, name_box

__all__ = [
    "Display",
    "cell",
    "decimal",
    "displayed",
    "field_latex",
    "fits",
    "inline",
    "mixed",
    "name_latex",
    "side_latex",
    "split_decimal",
]

NUMBER = r"[0-9]+(?:\.[0-9]+)?(?:[eE][-+]?[0-9]+)?"
COMPLEX = re.compile(
    rf"(?P<real>([-+\u2212]?{NUMBER})?)\s*(?P<sign>[-+\u2212±]?)\s*(?P<size>{NUMBER})\s*i"
)
FIELD = re.compile(r"Q(\(sqrt\([0-9]+\)(, ?sqrt\([0-9]+\))*\))?")
DECIMAL = re.compile(
    r"(?P<sign>[-+\u2212]?)(?P<whole>[0-9]+)(?P<part>(\.[0-9]+)?)([eE](?P<power>[-+]?[0-9]+))?"
)


def side_latex(side: Side) -> str:
    """Return a formula, symbol, matrix or product of such as LaTeX."""
    return side_box(side).latex


def name_latex(text: str) -> str:
    r"""Return a name in ASCII spelling as a symbol.

    >>> name_latex("omega_d"), name_latex("k12")
    ('\\omega_{\\mathrm{d}}', 'k_{12}')
    """
    return name_box(text).latex


def inline(item: Side | Statement | str) -> str:
    """Return mathematics within a line of text; a plain string is a name."""
    if isinstance(item, str):
        return f"${name_latex(item)}$"
    if isinstance(item, Statement):
        return "$" + f" {RELATIONS[item.relation]} ".join(map(side_latex, item.sides)) + "$"
    return f"${side_latex(item)}$"


def cell(item: Side | Statement | str, *, display: bool = False) -> str:
    """Return what stands in a cell of a table: text is escaped, the rest is mathematics.

    In a cell of its own a formula may have the size of a displayed one.
    """
    if isinstance(item, str):
        return escaped(item)
    return inline(item).replace("$", r"$\displaystyle ", 1) if display else inline(item)


def mixed(items: str | list[Side | Statement | str]) -> str:
    """Return a sentence: a text, or a list of texts and mathematics with spaces between.

    Before a text that begins with a comma, a semicolon or a colon there is none.
    """
    sentence = ""
    for item in [items] if isinstance(items, str) else items:
        close = not sentence or (isinstance(item, str) and item.startswith((",", ";", ":")))
        sentence += cell(item) if close else f" {cell(item)}"
    return sentence


def decimal(text: str) -> str:
    r"""Return a decimal as mathematics, a complex one too; a text that is none is escaped.

    >>> decimal("-1.25e-7")
    '$-1.25 \\times 10^{-7}$'
    """
    if " and " in text:  # two real eigenvalues
        return " and ".join(map(decimal, text.split(" and ")))
    if match := COMPLEX.fullmatch(text.strip()):
        real, size = (_signed(match[part]) if match[part] else "" for part in ("real", "size"))
        sign = {"+": "+", "-": "-", "\u2212": "-", "±": r"\pm"}.get(match["sign"], "")
        return f"${real} {sign} {size}{name_latex(IMAGINARY)}$".replace("$ ", "$")
    sign, whole, part = split_decimal(text)
    return escaped(text) if not whole else f"${sign}{whole}{part}$"


def _signed(text: str) -> str:
    return "".join(split_decimal(text))


def split_decimal(text: str) -> tuple[str, str, str]:
    """Return a decimal's sign, its digits before the point, and the rest as LaTeX.

    All three are empty if the text is no decimal.
    """
    match = DECIMAL.fullmatch(text.strip())
    if match is None:
        return "", "", ""
    power = rf" \times 10^{{{int(match['power'])}}}" if match["power"] else ""
    sign = "-" if match["sign"] in {"-", "\u2212"} else ""
    return sign, match["whole"], match["part"] + power


def field_latex(text: str) -> str:
    r"""Return a field of numbers as mathematics: Q(sqrt(2)) is \mathbb{Q}(\sqrt{2})."""
    if FIELD.fullmatch(text) is None:
        return escaped(text)
    roots = re.sub(r"sqrt\(([0-9]+)\)", r"\\sqrt{\1}", text[1:])
    return rf"$\mathbb{{Q}}{roots}$"
