"""What a line of a hand derivation says: the formula as written, and what it claims to be."""

from __future__ import annotations

from dataclasses import dataclass, field

from closedform.errors import Place
from closedform.notation.written.tree import Reading, Written

__all__ = ["KINDS", "Claim", "SourceLine"]

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
    "phase",
)
"""What a line can claim.  `identity` is a chain that is to hold by itself, `definition` a name
for something, `equation` one of the model's own."""


@dataclass(frozen=True, slots=True)
class SourceLine:
    """A line as it was found: one displayed formula, or one claim of a claim file.

    `number` counts from 1.  `text` is LaTeX, or typed if `typed`.  `says`, `of`, `at` and
    `where` are what the author, or a comment beside the line, states about it; empty if nothing.
    `place` is where the text begins.
    """

    number: int
    text: str
    place: Place = field(default=Place())
    typed: bool = False
    says: str = ""
    of: str = ""
    at: str = ""
    where: str = ""


@dataclass(frozen=True, slots=True)
class Claim:
    """A line that was read: `says` is one of `KINDS`, `subject` whose value is claimed.

    `subject` is a state, output or other name, with primes for derivatives (x1'), or empty.
    `value` are the members of the chain that claim the value; a name on the left is left out.
    `at` is the instant of a value, `of` the eigenvalue of an eigenvector.
    """

    line: SourceLine
    reading: Reading
    says: str
    subject: str = ""
    values: tuple[Written, ...] = ()
    of: Written | None = None
    at: Written | None = None
    approximate: bool = False
