"""That the cases of a branch are all of it, and that no two of them overlap.

The regimes of a branch are told apart by the signs of a few elements.  Each way in which these
may be negative, zero or positive is a cell of the branch: it belongs to one case, or is empty.
"""

from __future__ import annotations

from collections.abc import Iterator, Mapping
from itertools import product

from closedform.algebra.branches import Branch
from closedform.algebra.domain import Comparison, ParameterDomain
from closedform.algebra.field import Scalar
from closedform.algebra.parameter_field import ParameterField
from closedform.algebra.sign_argument import relation_values
from closedform.response.parametric.response import ParametricResponse

__all__ = ["cell_fault", "part_covered"]


def cell_fault(response: ParametricResponse, branch: Branch) -> str | None:
    """Return what is wrong with the cases of a branch, or None if each cell has one."""
    field = response.model.field
    inside = part_covered(field, branch)
    cases = [case for case in response.cases if case.branch.number == branch.number]
    conditions = {
        case.number: [c for regime in case.regimes for c in regime.conditions] for case in cases
    }
    elements = dict.fromkeys(_turned(c)[0] for found in conditions.values() for c in found)
    for cell in _cells(inside, list(elements)):
        holding = [
            number
            for number, found in conditions.items()
            if all(_sign_in(cell, c) in relation_values(c.relation) for c in found)
        ]
        if len(holding) == 1:
            continue
        part = inside.narrowed(*(_comparison(e, sign) for e, sign in cell.items()))
        if part.contradiction() is None:
            return f"{len(holding)} cases of branch {branch.number} apply where {_told(cell)}"
    return None


def part_covered(field: ParameterField, branch: Branch) -> ParameterDomain:
    """Return the part of the domain of a branch at which its exponential holds."""
    conditions = []
    for exceptional in branch.exceptional:
        if exceptional.fate != "excluded":
            polynomials = exceptional.polynomials
            whole = sum((p**2 for p in polynomials), field.domain.zero)
            apart = polynomials[0] if len(polynomials) == 1 else whole
            conditions.append(Comparison(field.substituted(apart, branch.values), "!="))
    return branch.domain.narrowed(*conditions)


def _cells(inside: ParameterDomain, elements: list[Scalar]) -> Iterator[Mapping[Scalar, int]]:
    """The ways in which the signs of the elements combine, as far as each by itself may be."""
    signs = [sorted(inside.sign_of(element).values) for element in elements]
    for chosen in product(*signs):
        yield dict(zip(elements, chosen, strict=True))


def _turned(comparison: Comparison) -> tuple[Scalar, int]:
    """An element with a positive leading coefficient, and the sign in front of it."""
    element = comparison.element
    return (element, 1) if not element or element.numer.LC > 0 else (-element, -1)


def _sign_in(cell: Mapping[Scalar, int], comparison: Comparison) -> int:
    element, turn = _turned(comparison)
    return turn * cell[element]


def _comparison(element: Scalar, sign: int) -> Comparison:
    return Comparison(-element, ">") if sign < 0 else Comparison(element, ">" if sign else "=")


def _told(cell: Mapping[Scalar, int]) -> str:
    return " and ".join(f"{e} {'<=>'[sign + 1]} 0" for e, sign in cell.items()) or "it holds"
