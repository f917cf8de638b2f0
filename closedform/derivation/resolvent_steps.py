"""The steps of the second route: partial fractions of the resolvent.

(s I - A)^(-1) = sum over the factors p of R(s)/p(s) (and of derivatives' worth of it for a
repeated factor), so that e^(At) is a sum of matrices times g, g', g'', … with g the
function whose transform is 1/p(s).
"""

from __future__ import annotations

from collections.abc import Iterator
from dataclasses import dataclass
from fractions import Fraction
from math import factorial

from closedform.algebra.exponential import ModalTerm
from closedform.algebra.field import FieldMatrix
from closedform.algebra.surds import SurdSum
from closedform.derivation.formulas import polynomial_formula, surd_matrix
from closedform.derivation.step import Matrix, Side, Statement, Step, Symbol
from closedform.notation.expression import ONE, Expression, Name, power_of
from closedform.notation.terms import weighted
from closedform.response.response import LARGEST_WRITTEN_OUT, Response

__all__ = ["expansion_of", "resolvent_steps"]


@dataclass(frozen=True)
class _Part:
    """One factor's part: its letters (empty index when it is the only one)."""

    term: ModalTerm
    index: str


def resolvent_steps(response: Response) -> Iterator[Step]:
    """Partial fractions, the functions g, and the coefficient matrices up to eight states."""
    forms, t = response.closed_forms, Name(response.model.time)
    parts = _parts(response)
    statements = [
        Statement("expansion", (Symbol("transition", argument=t), expansion_of(response)))
    ]
    for part, impulse in zip(parts, forms.impulses, strict=True):
        p = part.term.factor.p
        letters = (part.index,) if part.index else ()
        polynomial = Symbol(
            "characteristic polynomial", letter="p", indices=letters, argument=Name("s")
        )
        statements.append(
            Statement("denominator", (polynomial, polynomial_formula(response.field, p, Name("s"))))
        )
        if impulse is not None:
            statements.append(Statement("impulse response", (_g(part, 0, t), impulse)))
    if len(response.model.states) <= LARGEST_WRITTEN_OUT:
        statements += [s for part in parts for s in _matrices(response, part)]
    facts = {
        "factors": len(parts),
        "written": len(response.model.states) <= LARGEST_WRITTEN_OUT,
        "repeated": any(part.term.factor.index > 1 for part in parts),
        "degree": max(part.term.factor.degree for part in parts),
    }
    yield Step("resolvent", tuple(statements), facts, rests_on=("characteristic_polynomial",))


def expansion_of(response: Response) -> Side:
    """Return R_0 g + R_1 g' + … for every factor, with t^j/j! for repeated ones."""
    t = Name(response.model.time)
    parts: list[Side] = []
    for part in _parts(response):
        for power, residue in enumerate(part.term.residues):
            terms = [
                (_letter(part, power, k), _g(part, k, None))
                for k, matrix in enumerate(residue.coefficients)
                if not matrix.is_zero_matrix
            ]
            for letter, g in terms:
                front = _power_over_factorial(t, power)
                parts.append((letter, g) if front == ONE else (front, letter, g))
    return Symbol("sum", parts=tuple(parts))


def _power_over_factorial(t: Name, power: int) -> Expression:
    weight = SurdSum.rational(Fraction(1, factorial(power)))
    return weighted(weight, [power_of(t, power)], [])


def _parts(response: Response) -> list[_Part]:
    terms = response.exponential.terms
    return [_Part(term, "" if len(terms) == 1 else str(i)) for i, term in enumerate(terms, 1)]


def _g(part: _Part, order: int, argument: Expression | None) -> Symbol:
    indices = (part.index,) if part.index else ()
    return Symbol("scalar", letter="g", indices=indices, order=order, argument=argument)


def _letter(part: _Part, power: int, k: int) -> Symbol:
    """R_k; with several factors R_(i,k), and for t^j a further index."""
    index = ",".join(
        [
            *([part.index] if part.index else []),
            *([str(power)] if len(part.term.residues) > 1 else []),
            str(k),
        ]
    )
    return Symbol("matrix", letter="R", indices=(index,))


def _matrices(response: Response, part: _Part) -> Iterator[Statement]:
    for power, residue in enumerate(part.term.residues):
        for k, matrix in enumerate(residue.coefficients):
            if not matrix.is_zero_matrix:
                yield Statement(
                    "residue matrix", (_letter(part, power, k), _matrix(response, matrix))
                )


def _matrix(response: Response, matrix: FieldMatrix) -> Matrix:
    return surd_matrix([[response.field.surds(e) for e in row] for row in matrix.to_list()])
