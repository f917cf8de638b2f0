"""What proves each statement, by what it says."""

from __future__ import annotations

from collections.abc import Callable, Iterator

from closedform.derivation.parametric.proof import exponential, model, spectrum
from closedform.derivation.parametric.proof.ground import Ground, Said
from closedform.derivation.proof.finding import Finding

__all__ = ["VARIABLES", "prover_of"]

Prover = Callable[[Ground, Said], Iterator[Finding]]


def _within(_ground: Ground, _said: Said) -> Iterator[Finding]:
    """A definition, proved where it is used."""
    yield from ()


_MODEL: dict[str, Prover] = {
    "system": model.system,
    "matrix": model.matrix,
    "initial": model.initial,
    "output": model.output_definition,
}
"""What proves the statements of the model's own step."""

_STATEMENTS: dict[str, Prover] = {
    "condition": model.comparison,
    "case condition": model.comparison,
    "sign": model.comparison,
    "restated": model.stated,
    "abbreviation": model.stated,
    "identity": model.equation,
    "sum of roots": model.equation,
    "product of roots": model.equation,
    "vanishing": model.equation,
    "definition of a branch": model.equation,
    "apart": model.none_of_all,
    "characteristic polynomial": spectrum.polynomial,
    "branch polynomial": spectrum.polynomial,
    "eigenvalue": spectrum.eigenvalue,
    "zero": spectrum.zero,
    "factor": spectrum.divisor,
    "named zeros": spectrum.named_zeros,
    "known zeros": spectrum.known_zeros,
    "amount": spectrum.amount,
    "polynomial in the square": spectrum.square,
    "product of entries": spectrum.product_of_entries,
    "block of the square": spectrum.block_of_square,
    "sum of sizes": spectrum.sum_of_sizes,
    "branch matrix": model.matrix,
    "shared form": exponential.expansion,
    "shared matrix": exponential.shared_matrix,
    "resolvent": exponential.resolvent,
    "numerator": exponential.numerator,
    "adjugate": exponential.adjugate,
    "residues": exponential.residues,
    "slope": exponential.slope,
    "expansion": exponential.expansion,
    "exp A": exponential.transition,
    "solution of state": exponential.function,
    "output": exponential.function,
    "definition": spectrum.definition,
    "substitution": _within,
    "kernel": _within,
    "residue matrix": _within,
    "functions": _within,
    "left out": _within,
    "contradicted": _within,
    "given value": _within,
    "in numbers": _within,
}
"""What proves each statement, by what it says."""

_COMPARING: frozenset[Prover] = frozenset({model.comparison, spectrum.sum_of_sizes, _within})
"""What asks for the relation of a statement; the others prove that sides are equal."""

VARIABLES = {
    "characteristic polynomial": 1,
    "branch polynomial": 1,
    "factor": 1,
    "substitution": 2,
    "polynomial in the square": 1,
    "named zeros": 1,
    "known zeros": 1,
    "amount": 1,
    "resolvent": 1,
    "numerator": 1,
    "adjugate": 1,
    "residues": 1,
}
"""How many names in a statement stand for any number."""


def prover_of(said: Said) -> Prover:
    """Return what proves a statement.  Raises ValueError if nothing does."""
    statement = said.statement
    table = _MODEL if said.step.kind == "model" else _STATEMENTS
    prover = table.get(statement.says)
    if prover is None:
        raise ValueError(f"nothing proves {statement.says!r} of the step {said.step.kind!r}")
    if statement.relation != "=" and prover not in _COMPARING:
        raise ValueError(f"{statement.says!r} is said with {statement.relation!r}")
    return prover
