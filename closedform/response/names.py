"""Names for the real numbers that a result is written with, each with its exact definition."""

from __future__ import annotations

from collections.abc import Iterable, Iterator
from dataclasses import dataclass, field
from fractions import Fraction
from typing import Literal

from flint import arb, ctx, fmpq

from closedform.algebra.field import BaseField, Polynomial
from closedform.algebra.parts import imaginary_part_is, residue_value, vanishing_parts
from closedform.algebra.roots import enclosed_roots
from closedform.notation.evaluation import enclose
from closedform.notation.expression import Expression
from closedform.notation.latex.names import printed_key

__all__ = [
    "Definition",
    "NameBook",
    "NamedConstant",
    "Radical",
    "ResiduePart",
    "RootPart",
    "constant_values",
]

Part = Literal["real", "imaginary"]


@dataclass(frozen=True)
class RootPart:
    """The real or imaginary part of a root of p.

    `which` counts the roots from 1, ordered by real and then by imaginary part.
    """

    base: BaseField
    polynomial: Polynomial
    which: int
    part: Part

    def enclosure(self) -> arb:
        """Return a ball for the number at FLINT's current precision."""
        root = enclosed_roots(self.base, self.polynomial)[self.which - 1]
        return root.real if self.part == "real" else root.imag

    def equals(self, value: Fraction) -> bool:
        """Return whether the number is a given rational one, decided exactly.

        As p'(lambda) lambda/p'(lambda) is lambda, it is decided as for a residue.
        """
        lam = self.base.polynomial([self.base.domain.one, self.base.domain.zero])
        numerator = (lam * self.polynomial.diff()).rem(self.polynomial)
        residue = ResiduePart(
            self.base, self.polynomial, self.which, numerator, Fraction(1), self.part
        )
        return residue.equals(value)


@dataclass(frozen=True)
class ResiduePart:
    """`weight` times the real or imaginary part of numerator(lambda)/p'(lambda) at a root of p."""

    base: BaseField
    polynomial: Polynomial
    which: int
    numerator: Polynomial
    weight: Fraction
    part: Part

    def __hash__(self) -> int:
        """Hash what tells most apart: large fractions take long, and there are many."""
        numerator = self.numerator
        return hash((self.which, self.part, numerator.degree(), numerator.nth(0), numerator.nth(1)))

    def enclosure(self) -> arb:
        """Return a ball for the number at FLINT's current precision."""
        value = residue_value(self.base, self.polynomial, self.which, self.numerator)
        weight = arb(fmpq(self.weight.numerator, self.weight.denominator))
        return weight * (value.real if self.part == "real" else value.imag)

    def equals(self, value: Fraction) -> bool:
        """Return whether the number is a given rational one, decided exactly."""
        part = value / self.weight
        if self.part == "imaginary":
            return imaginary_part_is(self.base, self.polynomial, self.which, self.numerator, part)
        slope = self.polynomial.diff().mul_ground(self.base.scalar(part))
        return vanishing_parts(self.base, self.polynomial, self.which, self.numerator - slope)[0]


@dataclass(frozen=True)
class Radical:
    """An irrational number written with square roots, nested or not."""

    formula: Expression

    def enclosure(self) -> arb:
        """Return a ball for the number at FLINT's current precision."""
        return enclose(self.formula, {})


Definition = RootPart | ResiduePart | Radical


@dataclass(frozen=True)
class NamedConstant:
    """A real number, its ASCII name, and what it is exactly."""

    name: str
    definition: Definition


@dataclass
class NameBook:
    """Hands out names while a response is written down; equal definitions share one name.

    `taken` are the model's own names: nothing else is given a name that prints like one.
    """

    taken: frozenset[str]
    _constants: dict[Definition, NamedConstant] = field(default_factory=dict)
    _counters: dict[str, int] = field(default_factory=dict)

    def name_of(self, stem: str, definition: Definition, *, number: int | None = None) -> str:
        """Return the name of a number, given one from `stem` when it has none yet."""
        if definition not in self._constants:
            if number is None:
                number = self._counters[stem] = self._counters.get(stem, 0) + 1
            taken = {printed_key(name) for name in self.taken}
            spelling = next(s for s in _spellings(stem, number) if printed_key(s) not in taken)
            self._constants[definition] = NamedConstant(spelling, definition)
        return self._constants[definition].name

    @classmethod
    def of(cls, taken: frozenset[str], constants: Iterable[NamedConstant]) -> NameBook:
        """Return a book in which these names are given already."""
        return cls(taken, {constant.definition: constant for constant in constants})

    def constants(self) -> tuple[NamedConstant, ...]:
        """Return everything named so far, in the order of naming."""
        return tuple(self._constants.values())


def _spellings(stem: str, number: int) -> Iterator[str]:
    """`C7`, `omega_2`; where the model uses such a name itself, `omega_r_2`, `omega_rr_2`, …"""
    joint = "" if len(stem) == 1 else "_"
    yield f"{stem}{joint}{number}"
    mark = "r"
    while True:
        yield f"{stem}_{mark}_{number}"
        mark += "r"


def constant_values(constants: tuple[NamedConstant, ...]) -> dict[str, arb]:
    """Return a ball for every constant, good to FLINT's current precision or close to it."""
    with ctx.extraprec(64):
        return {c.name: c.definition.enclosure() for c in constants}
