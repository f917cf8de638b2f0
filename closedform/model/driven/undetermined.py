"""Why equations do not determine their unknowns, for the errors that say so.

The balances are P(d/dt) y + Q u = 0.  Whether the rank of P(s) over the rational functions
in s is full is decided at numbers: a determinant of degree N that vanishes at N + 1 of them
vanishes everywhere.
"""

from __future__ import annotations

from collections.abc import Sequence
from typing import NoReturn

from closedform.algebra.elimination import SparseRow, eliminated
from closedform.algebra.field import Scalar
from closedform.model.driven.balance_system import BalanceSystem
from closedform.model.driven.model import Jet
from closedform.model.driven.reduction_errors import (
    AbsentUnknownError,
    ContradictoryEquationsError,
    FewEquationsError,
    HiddenConstraintError,
    ManyEquationsError,
    RedundantEquationError,
    SingularEquationsError,
)
from closedform.notation.jets import found_jets

__all__ = ["refuse", "refuse_counts"]

FIRST_POINT = 1009
"""Where P(s) is tried first: small integers are roots of many polynomials."""


def refuse_counts(system: BalanceSystem) -> None:
    """Raise an error unless there are as many equations as unknowns, and none is absent."""
    equations, unknowns = len(system.balances), len(system.unknowns)
    for name in system.unknowns:
        if name not in system.orders:
            _refuse_absent(system, name)
    if equations == unknowns:
        return
    _refuse_dependent(system)
    place = system.whole
    if equations > unknowns:
        raise ManyEquationsError(place, equations, system.unknowns)
    open_ones = _open_unknowns(system)
    suspects = tuple(
        name for name in open_ones if name in system.guessed and not system.orders[name]
    )
    raise FewEquationsError(place, equations, system.unknowns, open_ones, suspects)


def _refuse_absent(system: BalanceSystem, name: str) -> NoReturn:
    """Raise the error for an unknown with no weight, in whose equation it cancels if typed."""
    for k, balance in enumerate(system.balances):
        typed = (jet for side in (balance.left, balance.right) for jet in found_jets(side))
        if any(name == found for found, _ in typed):
            raise AbsentUnknownError(system.place(k), name, balance.text)
    raise AbsentUnknownError(system.source.at("states"), name)


def refuse(system: BalanceSystem) -> NoReturn:
    """Raise the error for as many equations as unknowns that give no state form."""
    _refuse_dependent(system)
    if _is_singular(system):
        places = _dependent_rows(system, FIRST_POINT)
        raise SingularEquationsError(
            system.place(places[-1]), system.numbered(places), _open_unknowns(system)
        )
    places, variables = _hidden(system)
    raise HiddenConstraintError(system.place(places[-1]), system.numbered(places), variables)


def _refuse_dependent(system: BalanceSystem) -> None:
    """Raise an error if the unknowns of a sum of multiples of the equations cancel."""
    first = _marks(system)
    found = eliminated(system.field, _marked(system, system.rows), [range(len(system.column))])
    for row in found.rest:
        places = [c - first for c in row if c >= first]
        if system.cancels({c - len(system.column): e for c, e in row.items() if c < first}):
            last = max(places)
            others = system.numbered(k for k in places if k != last)
            equation = system.numbered([last])[0]
            raise RedundantEquationError(system.place(last), equation, others)
    for row in found.rest:
        places = [c - first for c in row if c >= first]
        left = [system.inputs[c - len(system.column)] for c in sorted(row) if c < first]
        remainder = f"0 = {left[0]}" if len(left) == 1 else f"a relation of {', '.join(left)}"
        raise ContradictoryEquationsError(
            system.place(max(places)), system.numbered(places), remainder
        )


def _marks(system: BalanceSystem) -> int:
    """The first of the columns that mark the equations of which a row is made up."""
    return len(system.column) + 2 * len(system.inputs)


def _marked(system: BalanceSystem, rows: Sequence[SparseRow]) -> list[dict[int, Scalar]]:
    one, first = system.field.domain.one, _marks(system)
    return [{**row, first + k: one} for k, row in enumerate(rows)]


def _at(system: BalanceSystem, s: int) -> list[dict[int, Scalar]]:
    """The rows of P(s): a column for each unknown."""
    places = {name: k for k, name in enumerate(system.orders)}
    powers = [system.field.domain.convert(s**k) for k in range(_degree(system) + 1)]
    return [
        system.row((places[j.name], weight * powers[j.order]) for j, weight in balance.of_unknowns)
        for balance in system.balances
    ]


def _degree(system: BalanceSystem) -> int:
    return max(system.orders.values(), default=0)


def _is_singular(system: BalanceSystem) -> bool:
    """Whether det P(s) is zero for every s."""
    unknowns = range(len(system.orders))
    most = sum(system.orders.values())
    return all(
        len(eliminated(system.field, _at(system, s), [unknowns]).solved) < len(unknowns)
        for s in range(FIRST_POINT, FIRST_POINT + most + 1)
    )


def _dependent_rows(system: BalanceSystem, s: int) -> list[int]:
    """The equations in a sum of multiples that vanishes at s."""
    first = len(system.orders)
    one = system.field.domain.one
    rows = [{**row, first + k: one} for k, row in enumerate(_at(system, s))]
    found = eliminated(system.field, rows, [range(first)])
    return sorted(c - first for c in found.rest[0])


def _open_unknowns(system: BalanceSystem) -> tuple[str, ...]:
    """The unknowns that differ among the solutions: those in a vector that P(s) takes to 0."""
    names = list(system.orders)
    found = eliminated(system.field, _at(system, FIRST_POINT), [range(len(names))])
    free = [c for c in range(len(names)) if c not in found.solved]
    moved = {c for c, row in found.solved.items() if any(f in row for f in free)}
    return tuple(name for c, name in enumerate(names) if c in free or c in moved)


def _hidden(system: BalanceSystem) -> tuple[list[int], tuple[str, ...]]:
    """The equations and the variables of a constraint whose derivative is needed.

    Constraints are dependent on the equations with derivatives in [E1; F2]; such a sum of
    constraints ties variables that the others need to be free.
    """
    column, first = system.column, _marks(system)
    moving = [column[top] for top in system.tops if top.order]
    dynamic = eliminated(system.field, _marked(system, system.rows), [moving])
    one = system.field.domain.one
    jets = {k: jet for jet, k in column.items()}
    rows: list[dict[int, Scalar]] = []
    for row in dynamic.solved.values():  # only what stands with derivatives: E1
        moved = ((jets[c], e) for c, e in row.items() if c in moving)
        rows.append({column[Jet(j.name, j.order - 1)]: e for j, e in moved})
    chain = (j for j in system.lower if column[Jet(j.name, j.order + 1)] >= len(system.tops))
    rows += [{column[jet]: one} for jet in chain]
    start = first + len(system.balances)
    constraints = [{c: e for c, e in row.items() if c < len(column)} for row in dynamic.rest]
    rows += [{**row, start + k: one} for k, row in enumerate(constraints)]
    found = eliminated(system.field, rows, [range(len(column))])
    concerned = sorted({c - start for row in found.rest for c in row if c >= start})
    marks = {c - first for k in concerned for c in dynamic.rest[k] if c >= first}
    names = {jets[c] for k in concerned for c in constraints[k]}
    ordered = sorted(names, key=lambda jet: column[jet])
    return sorted(marks), tuple(jet.text for jet in ordered)
