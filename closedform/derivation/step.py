"""The derivation as data: ordered steps of statements, each with what it rests on.

The document prints steps; nothing is computed from here on.
"""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import dataclass, field
from typing import TYPE_CHECKING, Literal

from closedform.notation.expression import Expression, Name

if TYPE_CHECKING:  # a step is light, and the room of proofs is not
    from closedform.verification.record import Check

__all__ = [
    "IMAGINARY_UNIT",
    "LAMBDA",
    "Depth",
    "Derivation",
    "Matrix",
    "OwnLetters",
    "Side",
    "Statement",
    "Step",
    "Symbol",
]

IMAGINARY_UNIT = Name("@i")
"""The upright i, or j.  No model can name a quantity so; a state ``i`` is an italic letter."""
LAMBDA = Name("lambda")
"""The usual variable of a characteristic polynomial."""


Depth = Literal["summary", "working", "full"]
"""How much of a derivation is shown, from little to all."""


@dataclass(frozen=True, slots=True)
class Symbol:
    """A mathematical label that is no formula of its own: A, P, J, v_1, e^(At), x(t), p(lambda).

    `kind` selects how it is set (document/symbols.py has the table of kinds); `indices`
    are printed as subscripts; `argument` follows in brackets when given.  `letter` is the
    ASCII spelling of the letter where the kind has none of its own, `order` the number
    of derivatives, and `parts` are what a compound kind is made of (a and b of a +- ib).
    """

    kind: str
    indices: tuple[str, ...] = ()
    argument: Expression | None = None
    letter: str = ""
    order: int = 0
    parts: tuple[Side, ...] = ()


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
    """One step.  `kind` names the template part that words it; `facts` are what it may say.

    `depth` is the least depth of a document in which the step is printed.
    """

    kind: str
    statements: tuple[Statement, ...] = ()
    facts: Mapping[str, object] = field(default_factory=dict)
    rests_on: tuple[str, ...] = ()
    depth: Depth = "working"


@dataclass(frozen=True, slots=True)
class OwnLetters:
    """What a document calls its own quantities, so that no name of the model prints alike.

    `root` is the variable of the characteristic polynomial, `unit` the upright letter of the
    imaginary unit, `index` the letter by which factors are counted; `beside` is the quantity
    of the model that is called i, None if none is.
    """

    root: Name = LAMBDA
    unit: Literal["i", "j"] = "i"
    index: str = "i"
    beside: Name | None = None


@dataclass(frozen=True, slots=True)
class Derivation:
    """The steps in the order in which they follow from one another.

    `checks` are what was proved: about the response, and that the steps are true as printed.
    """

    title: str
    steps: tuple[Step, ...]
    checks: tuple[Check, ...] = ()
    letters: OwnLetters = OwnLetters()
