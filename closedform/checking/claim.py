"""What a line of a hand derivation says: the formula as written, and what it claims to be."""

from __future__ import annotations

from dataclasses import dataclass, field

from closedform.errors import Place
from closedform.notation.written.tree import Statement, Written

__all__ = ["KINDS", "Claim", "Group", "SourceLine"]

KINDS = (
    "matrix",
    "characteristic polynomial",
    "eigenvalues",
    "eigenvector",
    "generalized eigenvector",
    "P",
    "P inverse",
    "J",
    "real form",
    "exp J",
    "exp A",
    "solution",
    "output",
    "value",
    "particular solution",
    "homogeneous solution",
    "steady state",
    "transform",
    "transfer function",
    "resolvent",
    "natural frequency",
    "damped frequency",
    "damping ratio",
    "time constant",
    "half-life",
    "period",
    "initial value",
    "equation",
    "determinant",
    "trace",
    "identity",
    "definition",
    "amplitude",
)
"""What a line can claim.  `identity` is a chain that is to hold by itself, `definition` a name
for something, `equation` one of the model's own."""


@dataclass(frozen=True, slots=True)
class SourceLine:
    r"""A line as it was found: one displayed formula, or one claim of a claim file.

    `number` counts from 1.  `text` is LaTeX, or typed if `typed`.  `says`, `of`, `at` and
    `where` are what the author, or a comment beside the line, states about it; empty if nothing.
    `place` is where the text begins.  `label` is that of a \label, if there is one.
    `trouble` is empty, or says why the text must not be read as it stands: it uses a macro whose
    definition was not followed.  Such a line is `not read`.
    """

    number: int
    text: str
    place: Place = field(default=Place())
    typed: bool = False
    says: str = ""
    of: str = ""
    at: str = ""
    where: str = ""
    label: str = ""
    trouble: str = ""


@dataclass(frozen=True, slots=True)
class Claim:
    """One thing that a line says: `says` is one of `KINDS`, `subject` whose value is claimed.

    `subject` is a state, output or other name, with primes for derivatives (x1'), or empty;
    `names` are the names on the left of the chain, `values` the members that claim the value.
    Eigenvalues have one entry in `groups` for each statement, the others one group.
    `at` is the instant of a value, `of` the eigenvalue of an eigenvector.  `stated` says that
    the author said so in words, `approximate` that a sign like ≈ stands in it, `equation` that
    it ends in "= 0".
    """

    line: SourceLine
    statements: tuple[Statement, ...]
    says: str
    subject: str = ""
    groups: tuple[Group, ...] = ()
    of: Written | None = None
    at: Written | None = None
    stated: bool = False
    approximate: bool = False
    equation: bool = False
    sign: int = 1

    @property
    def values(self) -> tuple[Written, ...]:
        """The members that claim a value, of all groups."""
        return tuple(value for group in self.groups for value in group.values)

    def is_approximate(self, member: Written) -> bool:
        """Whether a sign like ≈ stands before a member of a chain, or somewhere to its left."""
        for statement in self.statements:
            for place, own in enumerate(statement.members):
                if own is member:
                    return "≈" in statement.relations[:place]
        return self.approximate

    @property
    def names(self) -> tuple[Written, ...]:
        """The names on the left, of all groups."""
        return tuple(name for group in self.groups for name in group.names)


@dataclass(frozen=True, slots=True)
class Group:
    """A statement taken apart: the names on its left, and the values that they are to have."""

    names: tuple[Written, ...]
    values: tuple[Written, ...]
    unit: str = ""
    note: str = ""
