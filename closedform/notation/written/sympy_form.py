"""What was written as SymPy objects, for those who use the reader as a library.

A name is a SymPy Symbol of the same name, `lambda` spelled `lamda`; a declared function of
time is an undefined Function of it, its derivative a Derivative, at an instant a Subs.
Decimals are exact rationals.  det(s*I - A) of a named A is the Symbol charpoly_A, and
det(A - s*I) charpoly_A_neg; the transform of a function x is the Symbol Lx.

Nothing here decides anything: the program's own checks do not pass through SymPy.
"""

from __future__ import annotations

import re
from typing import Any

import sympy

from closedform.notation.written.multiplicity import multiplicity_of
from closedform.notation.written.sympy_maker import Maker, Sizes
from closedform.notation.written.sympy_names import RELATIONS
from closedform.notation.written.tree import (
    Declared,
    Listing,
    PlusMinus,
    Range,
    Reading,
    Statement,
    Symbol,
    Written,
    walk,
)

__all__ = ["sympy_eigenvalues", "sympy_matrix", "sympy_of", "sympy_value"]

NOBODY = Declared()


def sympy_of(
    item: Written | Statement | Reading, declared: Declared = NOBODY, sizes: Sizes | None = None
) -> Any:
    """Return what was written as SymPy objects.

    A tree gives an expression or a matrix; with plus-or-minus in it, the list of both, upper
    signs first.  A chain of two gives a relation, a longer one the list of those between
    neighbours, unevaluated.  A reading of several statements gives one list.  `sizes` are
    shapes of named matrices; the others are n by n.

    Raises ValueError for a relation or a matrix function that SymPy has no form for.
    """
    if isinstance(item, Reading):
        found: list[Any] = []
        for statement in item.statements:
            made = sympy_of(statement, declared, sizes)
            found += made if isinstance(made, list) else [made]
        return found[0] if len(found) == 1 else found
    if isinstance(item, Statement):
        return _chain(item, declared, sizes or {})
    return _both(item, declared, sizes or {})


def sympy_value(item: Statement | Reading, declared: Declared = NOBODY) -> Any:
    """Return the value that a text claims: what stands last in its last chain."""
    last = item.statements[-1] if isinstance(item, Reading) else item
    return sympy_of(last.members[-1], declared)


def sympy_matrix(item: Statement | Reading, declared: Declared = NOBODY) -> Any:
    """Return the matrix that a text claims, the last member of its last chain, multiplied out.

    Raises ValueError if what stands there is no matrix.
    """
    value = sympy_value(item, declared)
    if isinstance(value, sympy.MatrixBase):
        return value
    if not isinstance(value, sympy.MatrixExpr):
        raise ValueError(f"{value} is no matrix")  # noqa: TRY004  it is of the text, not of a type
    return sympy.Matrix(value.doit())


def sympy_eigenvalues(item: Statement | Reading, declared: Declared = NOBODY) -> list[Any]:
    """Return the eigenvalues that a text lists, each as often as its multiplicity.

    Plus-or-minus gives the upper sign first.  The multiplicity is the number of names before
    the value (lambda_2 = lambda_3 = -2), of indices (lambda_1_2 = -2), or what a note says.
    """
    statements = item.statements if isinstance(item, Reading) else (item,)
    return [value for statement in statements for value in _listed(statement, declared)]


def _listed(statement: Statement, declared: Declared) -> list[Any]:
    members = statement.members
    value = members[-1]
    if isinstance(value, Listing):
        made = (_both(entry, declared, {}) for entry in value.items)
        return [v for entry in made for v in (entry if isinstance(entry, list) else [entry])]
    both = _both(value, declared, {})
    values = both if isinstance(both, list) else [both]
    names = [m.name for m in members[:-1] if isinstance(m, Symbol)]
    count = max(sum(map(_indices, names)) // len(values), multiplicity_of(statement.note), 1)
    return values * count


def _indices(name: str) -> int:
    """Return how many numbers a name has behind it, one at least: lambda_1_2 has two."""
    return max(1, len(re.findall(r"(?<=_)[0-9]+(?=_|$)", name)))


def _chain(statement: Statement, declared: Declared, sizes: Sizes) -> Any:
    signs = (1, -1) if any(_has_signs(m) for m in statement.members) else (1,)
    if len(statement.members) == 1:
        return _both(statement.members[0], declared, sizes)
    found = []
    for sign in signs:
        made = [Maker(declared, sizes, sign).of(m) for m in statement.members]
        if statement.relations == ("→",) and statement.conditions:
            made[0] = _limit_of(made[0], statement.conditions[0], declared)
        for left, relation, right in zip(made, statement.relations, made[1:], strict=False):
            if relation not in RELATIONS:
                raise ValueError(f"SymPy has no relation {relation}")
            pair = RELATIONS[relation](left, right, evaluate=False)
            if pair not in found:
                found.append(pair)
    return found[0] if len(found) == 1 else found


def _limit_of(value: Any, condition: Range, declared: Declared) -> Any:
    maker = Maker(declared, {}, 1)
    variable, point = map(maker.of, condition.members[:2])
    return sympy.Limit(value, variable, point, "-")


def _has_signs(node: Written) -> bool:
    return any(isinstance(part, PlusMinus) for part in walk(node))


def _both(node: Written, declared: Declared, sizes: Sizes) -> Any:
    upper = Maker(declared, sizes, 1).of(node)
    return [upper, Maker(declared, sizes, -1).of(node)] if _has_signs(node) else upper
