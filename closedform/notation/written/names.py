"""What a name stands for: a declared one first, then what it customarily means."""

from __future__ import annotations

import re
from functools import cached_property

from closedform.notation.written.tree import (
    EULER,
    IMAGINARY,
    PI,
    Constant,
    Declared,
    Identity,
    Jet,
    Symbol,
    Written,
)

__all__ = ["CONSTANTS", "GREEK", "STEPS", "Names"]

GREEK = frozenset(
    [
        "alpha",
        "beta",
        "gamma",
        "delta",
        "epsilon",
        "varepsilon",
        "zeta",
        "eta",
        "theta",
        "vartheta",
        "iota",
        "kappa",
        "varkappa",
        "lambda",
        "mu",
        "nu",
        "xi",
        "omicron",
        "pi",
        "varpi",
        "rho",
        "varrho",
        "sigma",
        "varsigma",
        "tau",
        "upsilon",
        "phi",
        "varphi",
        "chi",
        "psi",
        "omega",
        "Gamma",
        "Delta",
        "Theta",
        "Lambda",
        "Xi",
        "Pi",
        "Sigma",
        "Upsilon",
        "Phi",
        "Psi",
        "Omega",
        "digamma",
        "ell",
        "hbar",
        "nabla",
    ]
)
"""Names of letters; the variants of Greek letters are letters of their own."""

STEPS = frozenset({"u", "H", "theta", "Theta", "sigma", "epsilon", "varepsilon", "1"})
"""What the unit step is called where the name is not declared."""

CONSTANTS = {"e": EULER, "i": IMAGINARY, "j": IMAGINARY, "pi": PI}
_VARIANT = re.compile(r"var(?=epsilon|theta|kappa|pi|rho|sigma|phi)")
_INFINITY = re.compile(r"(?<=_)(infinity|infty|oo)$")


class Names:
    """The declared names of a text, found under the spellings that people use for one name."""

    def __init__(self, declared: Declared) -> None:
        self.declared = declared
        self.time = declared.time

    def find(self, spelling: str, *, bold: bool = False) -> str | None:
        """Return the declared name that a flattened spelling means, as it was declared.

        k12, k_{12} and k_12 are one name, and so are lambda and lamda; a bold x is `xvec`
        if that is declared, else x.  Of two declared names that differ only so, each is
        found under its own spelling.
        """
        if bold and (vector := self.find(spelling + "vec")):
            return vector
        for known, key in zip(self._spellings, _keys(spelling), strict=True):
            if key in known:
                return known[key]
        return None

    def dotted(self, spelling: str, order: int, *, bold: bool = False) -> str | None:
        """Return the declared name that a name with dots on it is: mdot, Vdot_in.

        Dots on a declared function of time are derivatives.
        """
        base = self.find(spelling, bold=bold)
        if base is not None and self.varies(base):
            return None
        stem, low, below = spelling.partition("_")
        found = self.find(f"{stem}{'d' * (order - 1)}dot{low}{below}")
        return None if found is None or self.varies(found) else found

    def operand(self, spelling: str, *, bold: bool = False, order: int = 0) -> Written:
        """Return the symbol or function of time of a name, or the constant it customarily is.

        `order` is how often it is differentiated, by dots or primes.
        """
        name = self.find(spelling, bold=bold)
        if name is None:
            if order:
                return Jet(spelling, order)
            return self.constant(spelling) or Symbol(spelling, bold)
        if name in self.declared.varying or order:
            return Jet(name, order)
        return Symbol(name, bold)

    def constant(self, spelling: str) -> Constant | None:
        """Return e, i or pi if that is what a name means that is not declared."""
        return CONSTANTS.get(spelling) if self.find(spelling) is None else None

    def identity(self, spelling: str, *, bold: bool = False) -> Identity | None:
        """Return the unit matrix of the names I, I_2 and I_n, if they are not declared.

        A bold E is one too.
        """
        form = re.fullmatch(r"[IE](?:_([2-9]|[1-9][0-9]|n|N))?", spelling)
        if spelling.startswith("E") and not bold:
            return None
        if form is None or self.find(spelling) is not None:
            return None
        return Identity(int(form[1])) if form[1] and form[1].isdecimal() else Identity()

    def varies(self, name: str) -> bool:
        """Tell whether a declared name is a function of time."""
        return name in self.declared.varying

    def longest(self, run: str, *, least: int = 2) -> str:
        """Return the longest beginning of a run of letters and digits that is a declared name."""
        for length in range(min(len(run), self._longest), least - 1, -1):
            if self.find(run[:length]) is not None:
                return run[:length]
        return ""

    @cached_property
    def _longest(self) -> int:
        return max(map(len, self.declared.names), default=1)

    @cached_property
    def _spellings(self) -> tuple[dict[str, str], ...]:
        """Declared names by spelling: as it stands, then without what people leave out."""
        found: tuple[dict[str, str], ...] = ({}, {}, {})
        for known, level in zip(found, range(len(found)), strict=True):
            twice = set()
            for name in sorted(self.declared.names):
                key = _keys(name)[level]
                twice |= {key} & known.keys()
                known[key] = name
            if level:
                for key in twice:
                    del known[key]
        return found


def _keys(spelling: str) -> tuple[str, str, str]:
    """Return a spelling as it stands, without underscores, and without letter variants."""
    bare = _INFINITY.sub("inf", spelling).replace("_", "").replace("lamda", "lambda")
    return spelling, bare, _VARIANT.sub("", bare)
