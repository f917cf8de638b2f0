"""From balances to the state form x' = A x + B u, z = C x + D u, exactly.

Where the highest derivatives can be solved for, they are.  Otherwise the balances are the
descriptor system E z' = F z + G u, its rows reduced until those of E are independent or
zero; the others are constraints 0 = F2 z + G2 u.  If [E1; F2] is invertible the index is 1:
the constraints are solved for as many variables, and with their derivatives the rest is a
state form, in which derivatives of inputs may stand (S. L. Campbell, Singular Systems of
Differential Equations, 1980).
"""

from __future__ import annotations

from collections.abc import Iterable, Iterator, Mapping, Sequence
from dataclasses import dataclass

from sympy.polys.matrices.exceptions import DMNonInvertibleMatrixError

from closedform.algebra.elimination import Elimination, SparseRow, eliminated, solved_for
from closedform.algebra.field import FieldMatrix, Scalar
from closedform.algebra.parameter_field import ParameterField
from closedform.model.driven.balance_system import BalanceSystem
from closedform.model.driven.model import Jet, Reduction
from closedform.model.driven.reduction_errors import NoStateLeftError
from closedform.model.driven.undetermined import refuse, refuse_counts

__all__ = ["Reduced", "reduced"]


@dataclass(frozen=True)
class Reduced:
    """A state form, and what it needs.

    B and D have a column for each input, then one for the derivative of each of the inputs
    at the places `derived`.  `divisors` are elements, which must not be zero for the state
    form to follow; over numbers they are not.
    """

    reduction: Reduction
    derived: tuple[int, ...]
    divisors: tuple[Scalar, ...]


def reduced(system: BalanceSystem) -> Reduced:
    """Return the state form of a system of balances.

    Raises:  AbsentUnknownError, FewEquationsError, ManyEquationsError, NoStateLeftError,
             RedundantEquationError, ContradictoryEquationsError, SingularEquationsError, and
             HiddenConstraintError where the index is higher than 1.
    """
    refuse_counts(system)
    if not system.lower:
        raise NoStateLeftError(system.whole)
    return _of_highest(system) or _of_descriptor(system)


# --- solved for the highest derivatives ----------------------------------------------------


def _of_highest(system: BalanceSystem) -> Reduced | None:
    """Solve for the highest jets, if they can be solved for."""
    if isinstance(system.field, ParameterField):
        found = solved_for(system.field, system.rows, range(len(system.tops)))
        if found is None:
            return None
        values = {c: _moved(row, c) for c, row in found.solved.items()}
        divisors = [found.minor]
    else:
        dense = _dense(system)
        if dense is None:
            return None
        values, divisors = dense, []
    column, one = system.column, system.field.domain.one
    rates: dict[Jet, SparseRow] = {}
    for jet in system.lower:
        above = column[Jet(jet.name, jet.order + 1)]
        rates[jet] = values.get(above, {above: one})
    algebraic = {top.name: values[column[top]] for top in system.tops if not top.order}
    return _state_form(system, rates, algebraic, tuple(divisors))


def _dense(system: BalanceSystem) -> dict[int, dict[int, Scalar]] | None:
    """Each highest jet by the other columns; numbers are solved for as matrices."""
    p, width = len(system.tops), len(system.column) + len(system.inputs)
    zero = system.field.domain.zero
    full = system.field.matrix([[row.get(c, zero) for c in range(width)] for row in system.rows])
    try:
        inverse = full[:, :p].to_dense().inv()
    except DMNonInvertibleMatrixError:
        return None
    right = (-(inverse * full[:, p:].to_dense())).to_dense().to_list()
    return {k: {p + c: e for c, e in enumerate(row) if e} for k, row in enumerate(right)}


def _moved(row: SparseRow, column: int) -> dict[int, Scalar]:
    """What a column equals by a row that is solved for it."""
    return {c: -e for c, e in row.items() if c != column}


# --- with constraints ----------------------------------------------------------------------


def _of_descriptor(system: BalanceSystem) -> Reduced:
    """Solve the constraints for what is no state, and the rest for the rates of the states."""
    column = system.column
    moving = [column[top] for top in system.tops if top.order]
    dynamic = eliminated(system.field, system.rows, [moving], system.never_zero)
    algebraic = [column[top] for top in system.tops if not top.order]
    backwards = tuple(reversed(system.lower))
    wanted = [column[jet] for jet in backwards if jet in system.preferred]
    others = [column[jet] for jet in backwards if jet not in system.preferred]
    constraints = eliminated(
        system.field, dynamic.rest, [algebraic, others, wanted], system.never_zero
    )
    if constraints.rest or not all(c in constraints.solved for c in algebraic):
        refuse(system)
    tied = {c: _moved(row, c) for c, row in constraints.solved.items()}
    states = tuple(jet for jet in system.lower if column[jet] not in tied)
    if not states:
        raise NoStateLeftError(system.whole)
    solved = _rates(system, states, dynamic, tied)
    if len(solved.solved) < len(states):
        refuse(system)
    rates = {jet: _moved(solved.solved[c], c) for jet in states for c in (_rate(system, jet),)}
    fixed = {name: tied[column[Jet(name)]] for name in system.orders if column[Jet(name)] in tied}
    return _state_form(system, rates, fixed, (dynamic.minor, constraints.minor, solved.minor))


def _rate(system: BalanceSystem, jet: Jet) -> int:
    """The column of the derivative of a lower jet, whatever else it is called."""
    return len(system.column) + 2 * len(system.inputs) + system.column[jet]


def _rates(
    system: BalanceSystem,
    states: tuple[Jet, ...],
    dynamic: Elimination,
    tied: Mapping[int, SparseRow],
) -> Elimination:
    """Solve for the derivatives of the states, those of the tied variables put in."""
    column, one = system.column, system.field.domain.one
    jets = {k: jet for jet, k in column.items()}
    tops, inputs = len(system.tops), range(len(system.column), _rate(system, system.lower[0]))

    def parts(row: SparseRow) -> Iterator[tuple[int, Scalar]]:
        """The parts of a row in states, inputs, and derivatives of both."""
        for c, e in row.items():
            jet = jets.get(c)
            if jet is not None and c < tops and jet.order:
                yield from rate(Jet(jet.name, jet.order - 1), e)
            elif c in tied:
                yield from ((other, e * weight) for other, weight in tied[c].items())
            else:
                yield c, e

    def rate(jet: Jet, weight: Scalar) -> Iterator[tuple[int, Scalar]]:
        if column[jet] not in tied:
            yield _rate(system, jet), weight
            return
        for c, e in tied[column[jet]].items():
            if c in inputs:
                yield system.of_derivative(c - inputs.start), weight * e
            else:
                yield _rate(system, jets[c]), weight * e

    rows = [system.row(parts(row)) for row in dynamic.solved.values()]
    for jet in system.lower:
        above = Jet(jet.name, jet.order + 1)
        if column[above] >= tops:
            chain = [*rate(jet, one), *parts({column[above]: -one})]
            rows.append(system.row(chain))
    wanted = [_rate(system, jet) for jet in states]
    return eliminated(system.field, rows, [wanted], system.never_zero)


# --- as matrices ---------------------------------------------------------------------------


def _state_form(
    system: BalanceSystem,
    rates: Mapping[Jet, SparseRow],
    fixed: Mapping[str, SparseRow],
    divisors: tuple[Scalar, ...],
) -> Reduced:
    """The matrices of rows over the states, the inputs and the derivatives of inputs."""
    states = [system.column[jet] for jet in rates]
    first = len(system.column) + len(system.inputs)
    extra = sorted({c for row in rates.values() for c in row if c >= first})
    inputs = [*range(len(system.column), first), *extra]
    return Reduced(
        Reduction(
            jets=tuple(rates),
            matrix=_matrix(system, rates.values(), states),
            input_matrix=_matrix(system, rates.values(), inputs),
            eliminated=tuple(fixed),
            eliminated_from_states=_matrix(system, fixed.values(), states),
            eliminated_from_inputs=_matrix(system, fixed.values(), inputs),
        ),
        tuple(c - first for c in extra),
        divisors,
    )


def _matrix(
    system: BalanceSystem, rows: Iterable[SparseRow], columns: Sequence[int]
) -> FieldMatrix | None:
    """The columns of rows as a matrix, None if there are no rows or no columns."""
    zero = system.field.domain.zero
    found = [[row.get(c, zero) for c in columns] for row in rows]
    return system.field.matrix(found) if found and columns else None
