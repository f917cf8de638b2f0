r"""Names in their ASCII spelling as mathematical symbols: ``omega_d`` is \omega_{\mathrm{d}}.

A name is a base and indices.  Indices follow underscores, and digits at the end of the
base are one too: ``k12`` is k with the index 12.  Single letters and Greek letters are
italic, longer names and letters in indices upright (ISO 80000-2: an index that is not
itself a quantity is upright).

Primes, or a last index dot, ddot, dot3, say how often something is derived with respect to
the time: ``x1''`` and ``x1_ddot`` are \ddot{x}_{1}, from the fourth time on x_{1}^{(4)}.
Dots mean the time alone (ISO 80000-2): within `derivatives_of` another variable primes are set.
"""

from __future__ import annotations

import re
from collections.abc import Iterator
from contextlib import contextmanager
from contextvars import ContextVar
from functools import lru_cache
from typing import NamedTuple

from closedform.notation.latex.box import Box, Style, plain
from closedform.notation.latex.escape import escaped

__all__ = [
    "GREEK",
    "IMAGINARY",
    "derivative_box",
    "derivatives_of",
    "dot_ending",
    "imaginary_unit",
    "is_long",
    "is_raised",
    "is_time",
    "letter_box",
    "name_box",
    "printed_key",
    "subscripted",
]

GREEK_NAMES = (
    "alpha beta gamma delta epsilon varepsilon zeta eta theta vartheta iota kappa "
    "lambda mu nu xi pi varpi rho varrho sigma varsigma tau upsilon phi varphi chi "
    "psi omega Gamma Delta Theta Lambda Xi Pi Sigma Upsilon Phi Psi Omega"
)
GREEK = {name: f"\\{name}" for name in GREEK_NAMES.split()}
"""Greek letters by name."""

OTHER_SPELLINGS = {"lamda": "lambda", "omicron": "o"}
"""`lamda` is the spelling Python users need for `lambda`; an omicron looks like an o."""

IMAGINARY = "@i"
"""The name of the imaginary unit; `imaginary_unit` says which letter is printed."""
THE_NUMBER = {"pi": r"\uppi"}
"""Names that stand for numbers, upright; the preamble of a write-up defines their commands."""
UP_TO = (
    (0.42, "i l t iota epsilon ."),
    (0.52, "0 1 2 3 4 5 6 7 8 9 c e g j o r s z I theta delta xi varsigma varepsilon zeta"),
    (0.6, "a b d f h k n p q u v x y eta gamma kappa lambda mu nu phi rho varrho tau upsilon"),
    (0.68, "J L S vartheta alpha beta chi pi sigma varphi omega Gamma Xi"),
    (0.76, "T w psi Lambda Sigma Phi Omega Pi"),
    (0.82, "A B C E F G O P Q R U V Y Z Theta Upsilon Psi"),
    (0.92, "D H K m N X Delta varpi"),
)
WIDTHS = {letter: width for width, letters in UP_TO for letter in letters.split()}
"""Letters by width, the wider of their italic and their upright form."""

WIDEST = 1.08
NAME = re.compile(
    r"(?P<base>[A-Za-z]+)(?P<digits>([0-9][A-Za-z0-9]*)?)(?P<rest>(_[A-Za-z0-9]+)*?)"
    r"(_(?P<dots>d{0,3})dot|_dot(?P<order>[1-9][0-9]?))?(?P<primes>'*)"
)
DECIMAL = re.compile(r"[0-9]+(?:\.[0-9]+)?")
"""A number in the place of a name: it keeps its digits."""
DOTS = (r"\dot", r"\ddot", r"\dddot")
"""Accents of the first derivatives with respect to the time; later ones have a number."""
TIMES = frozenset({"t", "tau", "time"})
_primes: ContextVar[bool] = ContextVar("primes", default=False)
_unit: ContextVar[str] = ContextVar("unit", default="i")


def _width(word: str) -> float:
    """Return the width of a word at text size."""
    if word in GREEK:
        return WIDTHS.get(word, WIDEST)
    return sum(WIDTHS.get(letter, WIDEST) for letter in word)


def _index(word: str) -> str:
    if word.isdigit():
        return word
    return GREEK.get(word) or rf"\mathrm{{{word}}}"


def subscripted(base: Box, indices: tuple[str, ...], style: Style) -> Box:
    """Return the piece with indices set below it, separated by commas."""
    if not indices:
        return base
    words = [word for index in indices for word in index.split("_") if word]
    width = sum(0.52 * len(w) if w.isdigit() else _width(w) for w in words) + 0.3 * (len(words) - 1)
    latex = f"{base.latex}_{{{','.join(map(_index, words))}}}"
    return Box(latex, base.width + (width + 0.08) * style.script.scale, base.height)


def letter_box(text: str, style: Style = Style.DISPLAY, *, bold: bool = False) -> Box:
    """Return one letter or word without indices, bold italic for matrices and vectors.

    A number is set as such.
    """
    if DECIMAL.fullmatch(text):
        return plain(text, _width(text), style)
    word = text.isascii() and text.isalpha()
    inner = GREEK.get(text) or (text if word and len(text) == 1 else "")
    if not inner:
        inner = rf"\mathrm{{{text}}}" if word else rf"\text{{{escaped(text)}}}"
    width = _width(text) * (1.17 if bold else 1.0)
    return plain(rf"\boldsymbol{{{inner}}}" if bold else inner, width, style)


class _Parts(NamedTuple):
    """What a name is printed as: base, indices, and the order of its derivative."""

    base: str
    indices: tuple[str, ...]
    order: int


@lru_cache(maxsize=4096)
def _parts(text: str) -> _Parts | None:
    """Return the parts of a name as they are printed; None for other text."""
    match = NAME.fullmatch(text)
    if match is None:
        return None
    words = [match["base"], match["digits"], *match["rest"].split("_")]
    base, *indices = (OTHER_SPELLINGS.get(word, word) for word in words if word)
    order = len(match["primes"]) + int(match["order"] or 0)
    if match["dots"] is not None:
        order += len(match["dots"]) + 1
    return _Parts(base, tuple(indices), order)


@lru_cache(maxsize=4096)
def printed_key(text: str) -> str:
    """Return a key that two names share exactly if they are printed alike.

    For a name it is the name's plainest spelling, an underscore before each index.

    >>> printed_key("x1"), printed_key("x_1"), printed_key("lamda"), printed_key("x1'")
    ('x_1', 'x_1', 'lambda', 'x_1_dot')
    """
    if text == IMAGINARY:
        return text
    parts = _parts(text)
    if parts is None:
        return letter_box(text).latex  # its backslash keeps it apart from every name
    return "_".join([parts.base, *parts.indices]) + dot_ending(parts.order)


def dot_ending(order: int) -> str:
    """Return what is put behind a name to name its derivative of an order.

    >>> [dot_ending(order) for order in range(5)]
    ['', '_dot', '_ddot', '_dot3', '_dot4']
    """
    return ("", "_dot", "_ddot")[order] if order < 3 else f"_dot{order}"


def is_time(variable: str) -> bool:
    """Say whether a variable goes by a name of the time: t, tau, t_1.

    >>> is_time("tau"), is_time("z")
    (True, False)
    """
    return printed_key(variable).split("_")[0] in TIMES


@contextmanager
def derivatives_of(variable: str) -> Iterator[None]:
    """Set derivatives with respect to a variable: with dots for a time, else with primes."""
    before = _primes.set(not is_time(variable))
    try:
        yield
    finally:
        _primes.reset(before)


@contextmanager
def imaginary_unit(letter: str) -> Iterator[None]:
    """Set the imaginary unit as this letter, upright: i, or j beside a current i."""
    before = _unit.set(letter)
    try:
        yield
    finally:
        _unit.reset(before)


def derivative_box(body: Box, indices: tuple[str, ...], order: int, style: Style) -> Box:
    """Return a letter with dots or primes, or with its order in brackets, and with indices."""
    if 0 < order <= len(DOTS) and not _primes.get():
        dotted = Box(f"{DOTS[order - 1]}{{{body.latex}}}", body.width, body.height)
        return subscripted(dotted, indices, style)
    box = subscripted(body, indices, style)
    if order <= len(DOTS):
        return Box(box.latex + "'" * order, box.width + 0.3 * order * style.scale, box.height)
    raised = 0.8 + 0.52 * len(str(order))
    width = box.width + raised * style.script.scale
    return Box(f"{box.latex}^{{({order})}}", width, box.height)


def is_raised(text: str) -> bool:
    """Say whether a name is printed with something above it on the right: x^{(4)}, y'."""
    parts = _parts(text)
    return parts is not None and parts.order > (0 if _primes.get() else len(DOTS))


def is_long(text: str) -> bool:
    """Say whether the name's base is set upright as a word, so that it needs space around."""
    parts = _parts(text)
    base = parts.base if parts else text
    return len(base) > 1 and base not in GREEK and base != IMAGINARY


def name_box(text: str, style: Style = Style.DISPLAY, extra: tuple[str, ...] = ()) -> Box:
    """Return a name as a symbol, with `extra` indices after its own.

    A text that is no name (it cannot come from the reader) is set upright as it stands.
    """
    if text == IMAGINARY:
        return plain(rf"\mathrm{{{_unit.get()}}}", 0.3, style)
    if text in THE_NUMBER:
        return subscripted(plain(THE_NUMBER[text], 0.6, style), extra, style)
    parts = _parts(text)
    if parts is None:
        return subscripted(letter_box(text, style), extra, style)
    indices = (*parts.indices, *filter(None, extra))
    return derivative_box(letter_box(parts.base, style), indices, parts.order, style)
