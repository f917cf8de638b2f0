"""What the names in a typed equation are: unknowns, inputs, the time, or parameters."""

from __future__ import annotations

from dataclasses import dataclass
from typing import Literal

from closedform.notation.expression import (
    Call,
    Expression,
    Name,
    Negation,
    Number,
    Power,
    Product,
    Quotient,
    Sum,
)
from closedform.notation.jets import jet_of

__all__ = ["Kind", "Roles"]

Kind = Literal["unknown", "input", "time"]
NOTHING: frozenset[Kind] = frozenset()


@dataclass(frozen=True, slots=True)
class Roles:
    """What the names in an equation are; all others are parameters."""

    unknowns: tuple[str, ...]
    inputs: frozenset[str]
    time: str

    def of(self, name: str) -> frozenset[Kind]:
        """Return the kind of a name, with primes or without; nothing for a parameter."""
        base, _ = jet_of(name)
        if base in self.unknowns:
            return frozenset({"unknown"})
        if base in self.inputs:
            return frozenset({"input"})
        return frozenset({"time"}) if base == self.time else NOTHING

    def within(self, expression: Expression) -> frozenset[Kind]:
        """Return the kinds of names in a formula; those inside u(t - 2) are part of u."""
        match expression:
            case Name(text):
                return self.of(text)
            case Call(function, argument):
                return self.of(function) or self.within(argument)
            case Negation(operand):
                return self.within(operand)
            case Sum(parts) | Product(parts):
                return NOTHING.union(*map(self.within, parts))
            case Quotient(one, other) | Power(one, other):
                return self.within(one) | self.within(other)
            case Number():
                return NOTHING

    def acts(self, expression: Expression) -> bool:
        """Whether an unknown or an input stands in a formula."""
        return bool(self.within(expression) - {"time"})
