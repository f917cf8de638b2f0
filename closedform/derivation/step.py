"""The derivation as data: ordered steps of statements, each with what it rests on.

The document prints steps; nothing is computed from here on.
"""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import dataclass, field

from closedform.notation.expression import Expression

__all__ = ["Derivation", "Matrix", "Side", "Statement", "Step", "Symbol"]


@dataclass(frozen=True, slots=True)
class Symbol:
    """A mathematical label that is no formula of its own: A, P, J, v_1, e^(At), x(t), p(lambda).

    `kind` selects how it is set (document/latex knows the kinds); `indices` are printed
    as subscripts; `argument` follows in brackets when given.
    """

    kind: str
    indices: tuple[str, ...] = ()
    argument: Expression | None = None


@dataclass(frozen=True, slots=True)
class Matrix:
    """A matrix of formulas, with an optional scalar `front` printed before the brackets."""

    rows: tuple[tuple[Expression, ...], ...]
    front: Expression | None = None


Side = Expression | Symbol | Matrix | tuple["Side", ...]
"""One side of a relation; a tuple is a juxtaposed product (P e^(Jt) P^(-1))."""


@dataclass(frozen=True, slots=True)
class Statement:
    """A chain of sides joined by `relation`.  `says` uses the words of a claim:
    matrix, characteristic polynomial, eigenvalues, eigenvector, P, J, exp A, solution …"""

    says: str
    sides: tuple[Side, ...]
    relation: str = "="


@dataclass(frozen=True, slots=True)
class Step:
    """One step.  `kind` names the template part that words it; `facts` are what it may say."""

    kind: str
    statements: tuple[Statement, ...] = ()
    facts: Mapping[str, object] = field(default_factory=dict)
    rests_on: tuple[str, ...] = ()


@dataclass(frozen=True, slots=True)
class Derivation:
    """The steps in the order in which they follow from one another."""

    title: str
    steps: tuple[Step, ...]
