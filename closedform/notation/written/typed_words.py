"""What a typed word is: a name, a function, a number with a name, or a product of these."""

from __future__ import annotations

import re
from collections.abc import Iterator, Mapping
from dataclasses import dataclass
from fractions import Fraction
from functools import cached_property

from closedform.notation.greek import LETTERS
from closedform.notation.latex.names import GREEK
from closedform.notation.written.names import Names
from closedform.notation.written.tree import (
    EULER,
    IMAGINARY,
    INFINITY,
    PI,
    Constant,
    Declared,
    Identity,
    Jet,
    Literal,
    Symbol,
)
from closedform.notation.written.typed_signs import is_letter, spelled_out

__all__ = ["FUNCTION_WORDS", "KEYWORDS", "PACKAGES", "Piece", "Words"]

FUNCTION_WORDS: Mapping[str, str] = {
    **{
        name: name
        for name in (
            *("exp", "sin", "cos", "tan", "cot", "sec", "csc", "sinh", "cosh", "tanh", "coth"),
            *("asin", "acos", "atan", "atan2", "asinh", "acosh", "atanh", "ln", "log10", "sqrt"),
            *("abs", "re", "im", "arg", "conj", "sign", "min", "max", "factorial", "step"),
            *("det", "trace", "transpose", "inverse", "adj", "diag", "norm", "rank"),
        )
    },
    **{f"arc{name}": f"a{name}" for name in ("sin", "cos", "tan", "tan2", "sinh", "cosh", "tanh")},
    **{f"ar{name}": f"a{name}" for name in ("sinh", "cosh", "tanh")},
    "Arctan": "atan",
    "arctg": "atan",
    "tg": "tan",
    "sh": "sinh",
    "ch": "cosh",
    "th": "tanh",
    "log": "ln",
    "lg": "log10",
    "Re": "re",
    "Im": "im",
    "real": "re",
    "imag": "im",
    "sgn": "sign",
    "heaviside": "step",
    "Heaviside": "step",
    "hstep": "step",
    "angle": "arg",
    "dirac": "delta",
    "Dirac": "delta",
    "DiracDelta": "delta",
    "impulse": "delta",
    "inv": "inverse",
    "expm": "exp",
    "tr": "trace",
    "Tr": "trace",
    "adjugate": "adj",
    "Exp": "exp",
    "Sin": "sin",
    "Cos": "cos",
    "Sqrt": "sqrt",
    "Abs": "abs",
    "Ln": "ln",
    "conjugate": "conj",
    "root": "sqrt",
    "blkdiag": "diag",
    "Det": "det",
    "Min": "min",
    "Max": "max",
    "unitstep": "step",
    "log_10": "log10",
}
"""Words for functions, whatever follows."""
PACKAGES = frozenset({"np", "numpy", "sp", "sympy", "math", "cmath", "scipy", "linalg"})
"""Prefixes of functions and matrices that are copied from programs."""
KEYWORDS = {
    **dict.fromkeys(
        ("for", "if", "when", "für", "falls", "wenn", "while", "where", "pour", "lorsque"), "WHEN"
    ),
    **dict.fromkeys(("otherwise", "else", "sonst", "elsewhere", "sinon"), "OTHERWISE"),
    **dict.fromkeys(("and", "und", "sowie", "et", "or", "oder", "ou"), "AND"),
    **dict.fromkeys(("approx", "approximately", "about"), "ABOUT"),
}
SHORT = frozenset({"sh", "ch", "th", "tg", "tr", "re", "im", "lg", "angle", "real", "root", "arg"})
"""Words that are functions only in front of a bracket or an argument of their own."""
STEPS = frozenset({"u", "H", "h", "theta", "Theta", "epsilon", "sigma", "eps"})
IMPULSES = frozenset({"delta"})
NUMBERS: Mapping[str, Constant] = {
    "e": EULER,
    "i": IMAGINARY,
    "j": IMAGINARY,
    "pi": PI,
    "Pi": PI,
    **dict.fromkeys(("inf", "oo", "infinity", "Infinity", "infty", "Inf"), INFINITY),
}
DOTTED = re.compile(r"(?P<stem>\w+?)_?(?P<dots>d{0,3})dot(?P<rest>_?[0-9]*)")
UNIT_MATRIX = re.compile(r"I_?(?P<size>[1-9]?)|Id_?(?P<other>[1-9]?)")


@dataclass(frozen=True, slots=True)
class Piece:
    """A part of a word and what it is: the node it stands for, or the name of a function."""

    node: Literal | Constant | Symbol | Jet | Identity | None
    function: str
    start: int
    end: int


@dataclass(frozen=True)
class Words:
    """Knows what words are, given the names that are declared."""

    declared: Declared

    @cached_property
    def names(self) -> Names:
        """The declared names, under all their spellings."""
        return Names(self.declared)

    def name(self, word: str) -> str | None:
        """Return the declared name that a word spells, or None."""
        return self.names.find(word)

    def read(self, word: str, start: int, *, bracket: bool, raised: bool) -> list[Piece] | None:
        """Return the pieces of a word that begins at `start`; None if nothing is known about it.

        `bracket` says that a bracket follows at once, `raised` that an exponent does.
        """
        whole = self._one(word, start, bracket=bracket)
        if whole is not None:
            return [whole]
        return self._apart(word, start, raised=raised)

    def undeclared(self, word: str, start: int) -> Piece:
        """Return a word as a name that was not declared."""
        text, dots = spelled_out(word)
        node = Jet(text, dots) if dots else Symbol(text)
        return Piece(node, "", start, start + len(word))

    def _one(self, word: str, start: int, *, bracket: bool) -> Piece | None:
        end = start + len(word)
        text, dots = spelled_out(word)
        name = self.name(text)
        if name is not None and (not dots or name in self.declared.varying):
            return Piece(self._declared(name, dots), "", start, end)
        if text in FUNCTION_WORDS and (text not in SHORT or bracket):
            return Piece(None, FUNCTION_WORDS[text], start, end)
        if dots and (rate := self.names.dotted(text, dots)):
            return Piece(self._declared(rate, 0), "", start, end)
        derived = DOTTED.fullmatch(text)
        if derived:
            stem = self.name(derived["stem"] + derived["rest"])
            if stem in self.declared.varying:
                return Piece(Jet(str(stem), len(derived["dots"]) + 1), "", start, end)
        if bracket and text in STEPS:
            return Piece(None, "step", start, end)
        if bracket and text in IMPULSES:
            return Piece(None, "delta", start, end)
        unit = UNIT_MATRIX.fullmatch(text)
        if unit:
            size = unit["size"] or unit["other"]
            return Piece(Identity(int(size) if size else None), "", start, end)
        node = NUMBERS.get(text)
        return Piece(node, "", start, end) if node and not dots else None

    def _declared(self, name: str, order: int) -> Symbol | Jet:
        if name in self.declared.varying:
            return Jet(name, order)
        return Symbol(name, bold=name in self.declared.matrices)

    def _apart(self, word: str, start: int, *, raised: bool) -> list[Piece] | None:
        """Return the fewest pieces that make up a word, all of them known, the longest first."""
        best: dict[int, list[Piece]] = {len(word): []}
        for at in range(len(word) - 1, -1, -1):
            for piece in self._beginnings(word, at, raised=raised):
                rest = best.get(piece.end)
                if rest is None or (piece.function and not rest):
                    continue
                if at not in best or len(rest) + 1 < len(best[at]):
                    best[at] = [piece, *rest]
        if 0 not in best:
            return None
        return [Piece(p.node, p.function, p.start + start, p.end + start) for p in best[0]]

    def _beginnings(self, word: str, at: int, *, raised: bool) -> Iterator[Piece]:
        """Yield the known pieces of a word that begin at a place, the longest first."""
        for end in range(len(word), at, -1):
            part = word[at:end]
            if not (is_letter(part[0]) or part[0].isdigit()):
                return
            after = word[end : end + 1]
            if after and not is_letter(after) and not after.isdigit():
                continue  # an index belongs to its letter
            if part.isdecimal():
                if not after.isdecimal() and self._may_be_number(word, at):
                    yield Piece(Literal(Fraction(int(part))), "", at, end)
                continue
            if after.isdecimal() and at == 0 and part not in (*FUNCTION_WORDS, "i", "j"):
                continue
            yield from self._known(part, at, end, last=end == len(word), raised=raised)

    def _may_be_number(self, word: str, at: int) -> bool:
        """Whether digits in a word may be a factor: after a function, i or j, not a name."""
        before = word[:at]
        return before in ("i", "j") or any(before.endswith(f) for f in FUNCTION_WORDS)

    def _known(self, part: str, at: int, end: int, *, last: bool, raised: bool) -> Iterator[Piece]:
        name = self.name(spelled_out(part)[0])
        if name is not None:
            yield Piece(self._declared(name, spelled_out(part)[1]), "", at, end)
        elif part in ("e", "E"):
            if last and raised and part == "e":
                yield Piece(EULER, "", at, end)
        elif part in ("i", "j", "pi", "π"):
            yield Piece(NUMBERS[spelled_out(part)[0]], "", at, end)
        elif part in FUNCTION_WORDS and len(part) > 2:
            yield Piece(None, FUNCTION_WORDS[part], at, end)
        elif part == "s" or part in GREEK or part in LETTERS:
            yield Piece(Symbol(spelled_out(part)[0]), "", at, end)
        elif part == "I" and last:
            yield Piece(Identity(), "", at, end)
        elif part in ("A", "J", "D", "N") and word_of_time(self.declared, end, last=last):
            yield Piece(Symbol(part), "", at, end)


def word_of_time(declared: Declared, end: int, *, last: bool) -> bool:
    """Whether a single capital letter may be split off: only the time can stand behind it."""
    return not last and end == 1 and len(declared.time) == 1
