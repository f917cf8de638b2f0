"""One call from a formula that somebody wrote to its SymPy object: the entry for other programs."""

from __future__ import annotations

from collections.abc import Iterable, Mapping
from typing import Any
from typing import Literal as OneOf

from closedform.notation.written.reader import read_latex
from closedform.notation.written.sympy_form import (
    sympy_eigenvalues,
    sympy_matrix,
    sympy_of,
    sympy_value,
)
from closedform.notation.written.tree import Declared, Reading
from closedform.notation.written.typed_reader import read_typed

__all__ = ["Kind", "declared_names", "meaning_of", "reading_of"]

Kind = OneOf["expr", "equation", "matrix", "eigenvalues", "piecewise"]
"""What a formula is to be taken as."""
ROLES = ("states", "parameters", "inputs", "functions", "matrices")
NOBODY = Declared()
Names = Declared | Mapping[str, Any]


def declared_names(given: Names) -> Declared:
    """Return the declared names of a mapping of roles to names, as JSON and TOML give them.

    The keys are `states`, `parameters`, `inputs`, `functions`, `matrices` (any iterable of
    names; for matrices also a mapping of names to shapes), and `time`; each may be missing.
    A Declared is returned as it is.

    Raises TypeError for a string in the place of several names, ValueError for another key.

    >>> sorted(declared_names({"states": ["x"], "parameters": ["lamda"]}).names)
    ['lamda', 't', 'x']
    """
    if isinstance(given, Declared):
        return given
    if strange := sorted(given.keys() - {*ROLES, "time"}):
        raise ValueError(f"there is no role {strange[0]!r} of names; use {', '.join(ROLES)}, time")
    return Declared(**{role: given.get(role, ()) for role in ROLES}, time=given.get("time", "t"))


def reading_of(
    *, latex: str | None = None, text: str | None = None, declared: Names = NOBODY
) -> Reading:
    """Return the reading of a formula that is given in LaTeX, or typed as `text`.

    Raises:  NotReadError for what is not known; ValueError if not one of the two is given.
    """
    names = declared_names(declared)
    if latex is not None and text is None:
        return read_latex(latex, names)
    if text is not None and latex is None:
        return read_typed(text, names)
    raise ValueError("give the formula either as latex or as text")


def meaning_of(
    kind: Kind = "expr",
    *,
    latex: str | None = None,
    text: str | None = None,
    declared: Names = NOBODY,
) -> Any:
    r"""Return the SymPy object that a formula means, read in its likelier way.

    `expr`         one expression; of a chain, its last member
    `equation`     a relation, or a list of them: of a chain those between neighbours
    `matrix`       the matrix that stands last, multiplied out
    `eigenvalues`  a list of values, each as often as it counts, upper signs first
    `piecewise`    the Piecewise that stands last

    A declared function x of time is Function("x")(t), its derivative a Derivative, at an
    instant a Subs; every other name is a Symbol without assumptions.  Decimals are exact.

    Raises:  as `reading_of`; ValueError for another kind, and for what SymPy has no form of.

    >>> meaning_of(latex=r"\tfrac12 t\,e^{-\lambda t}", declared={"parameters": ["lamda"]})
    t*exp(-lamda*t)/2
    >>> meaning_of("eigenvalues", text="lambda1,2 = -1 ± 2i")
    [-1 + 2*I, -1 - 2*I]
    """
    names = declared_names(declared)
    reading = reading_of(latex=latex, text=text, declared=names)
    match kind:
        case "eigenvalues":
            return sympy_eigenvalues(reading, names)
        case "matrix":
            return sympy_matrix(reading, names)
        case "piecewise":
            return sympy_value(reading, names)
        case "expr" if any(statement.relations for statement in reading.statements):
            return sympy_value(reading, names)
        case "expr" | "equation":
            return sympy_of(reading, names, _shapes(declared))
    raise ValueError(f"there is no kind {kind!r} of formula")


def _shapes(given: Names) -> dict[str, tuple[int, int]]:
    """Return the shapes of matrices, as far as they are given."""
    matrices = given.get("matrices") if isinstance(given, Mapping) else None
    if not isinstance(matrices, Mapping):
        return {}
    return {name: _shape(size) for name, size in matrices.items()}


def _shape(size: int | Iterable[int]) -> tuple[int, int]:
    rows, columns = (size, size) if isinstance(size, int) else size
    return rows, columns
