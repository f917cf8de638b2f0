"""The state form follows from the balances, and says all that they say.

Put into a balance, x' = A x + B u and z = C x + D u leave nothing of the states, and of the
inputs nothing but what is zero for these inputs.  So what solves the state form solves the
balances.  With P(s) the matrix of the balances, s in the place of d/dt, the homogeneous
balances have as many independent solutions as det P has roots (E. L. Ince, Ordinary
Differential Equations, 1927, chapter VI).  So if det P(s) is a number other than 0 times
det(sI - A), the balances have no other solutions.
"""

from __future__ import annotations

from collections.abc import Iterator, Sequence

from closedform.algebra.domain import Comparison, ParameterDomain
from closedform.algebra.field import FieldMatrix, Scalar
from closedform.model.driven.model import Jet
from closedform.verification.driven.identities import Residual, identity_check
from closedform.verification.driven.setting import Setting
from closedform.verification.parametric.conditions import follows
from closedform.verification.record import Check

__all__ = ["reduction_checks"]

_SUBSTITUTED = "state form from the equations"
_COMPLETE = "equations and state form have as many solutions"


def reduction_checks(setting: Setting) -> Iterator[Check]:
    """Yield the two checks of a model that has balances."""
    if setting.model.balances:
        yield _substituted_check(setting)
        yield _complete_check(setting)


# --- substitution --------------------------------------------------------------------------


class _Expressed:
    """Jets by the states and by the inputs' derivatives: rows over K."""

    def __init__(self, setting: Setting) -> None:
        self.setting, self.field = setting, setting.field
        reduction = setting.model.reduction
        self.a = setting.matrix(reduction.matrix.to_list())
        self.b = self._given(reduction.input_matrix)
        self.c = self._given(reduction.eliminated_from_states)
        self.d = self._given(reduction.eliminated_from_inputs)

    def _given(self, matrix: FieldMatrix | None) -> FieldMatrix | None:
        return None if matrix is None else self.setting.matrix(matrix.to_list())

    def jet(self, jet: Jet) -> tuple[FieldMatrix, list[FieldMatrix]] | None:
        """Return the row over the states, and a row over the inputs for each derivative."""
        reduction, n = self.setting.model.reduction, self.setting.states
        m = len(self.setting.model.inputs)
        none = [self.field.zeros(1, m)] if m else []
        if jet in reduction.jets:
            unit = [[self.field.domain.convert(int(j == jet)) for j in reduction.jets]]
            return self.field.matrix(unit), none
        if not jet.order and jet.name in reduction.eliminated:
            place = reduction.eliminated.index(jet.name)
            states = self.field.zeros(1, n) if self.c is None else self._row(self.c, place)
            return states, none if self.d is None else [self._row(self.d, place)]
        below = self.jet(Jet(jet.name, jet.order - 1)) if jet.order else None
        if below is None:
            return None
        return self.derivative(*below)

    def derivative(
        self, states: FieldMatrix, inputs: Sequence[FieldMatrix]
    ) -> tuple[FieldMatrix, list[FieldMatrix]]:
        """Return the derivative of what such rows stand for."""
        m = len(self.setting.model.inputs)
        derived = [self.field.zeros(1, m), *inputs] if m else []
        if self.b is not None:
            derived[0] = states * self.b
        return states * self.a, derived

    def _row(self, matrix: FieldMatrix, place: int) -> FieldMatrix:
        return self.field.matrix([matrix.to_list()[place]])


def _substituted_check(setting: Setting) -> Check:
    expressed = _Expressed(setting)
    residuals: list[Residual] = []
    for told, of_unknowns, of_inputs in _identities(setting):
        found = _left_of(setting, expressed, of_unknowns, of_inputs)
        if isinstance(found, str):
            return Check(_SUBSTITUTED, "refuted", f"{told}: {found}")
        for k in range(setting.last + 1) if found else ():
            total = setting.nothing(1)
            for place, given in enumerate(setting.inputs[k]):
                derived = given
                for row in found:
                    total = total + derived.scaled(row.to_list()[0][place])
                    derived = derived.derivative()
            residuals.append(Residual(told, k, total))
    return identity_check(
        setting,
        _SUBSTITUTED,
        residuals,
        "x' = A x + B u and what was eliminated were put into each equation, and into what says "
        "that a state is the derivative of another: the coefficient of every state and of every "
        "input is zero",
    )


Row = tuple[Jet, int, Scalar]
"""A jet, how often it is differentiated, and its weight."""


def _identities(
    setting: Setting,
) -> Iterator[tuple[str, Sequence[Row], Sequence[tuple[int, Scalar]]]]:
    """The balances, and that a jet which is a state is the derivative of the one below."""
    one = setting.field.domain.one
    for number, balance in enumerate(setting.model.balances, start=1):
        weights = [(jet, 0, setting.put(w)) for jet, w in balance.of_unknowns]
        yield f"equation {number}", weights, balance.of_inputs
    for jet in setting.model.reduction.jets:
        if jet.order and setting.row_of(Jet(jet.name, jet.order - 1)) is not None:
            below = Jet(jet.name, jet.order - 1)
            yield f"{below.text} and {jet.text}", [(jet, 0, one), (below, 1, -one)], ()


def _left_of(
    setting: Setting,
    expressed: _Expressed,
    of_unknowns: Sequence[Row],
    of_inputs: Sequence[tuple[int, Scalar]],
) -> list[FieldMatrix] | str:
    """What is left of an identity: rows over the inputs and their derivatives, none if all zero.

    Words where a state is left, or a jet is not expressed.
    """
    field, m = setting.field, len(setting.model.inputs)
    states = field.zeros(1, setting.states)
    inputs = [field.zeros(1, m)] if m else []
    for jet, times, weight in of_unknowns:
        found = expressed.jet(jet)
        for _ in range(times):
            found = None if found is None else expressed.derivative(*found)
        if found is None:
            return f"{jet.text} was not solved for"
        states = states + found[0] * weight
        for order, row in enumerate(found[1]):
            if order == len(inputs):
                inputs.append(field.zeros(1, m))
            inputs[order] = inputs[order] + row * weight
    for place, weight in of_inputs:
        unit = [[setting.put(weight) if j == place else field.domain.zero for j in range(m)]]
        inputs[0] = inputs[0] + field.matrix(unit)
    for name, element in zip(setting.model.names, states.to_list()[0], strict=True):
        if not setting.vanishes(element):
            return f"{name} is left when the state form is put in"
    zero = all(setting.vanishes(e) for row in inputs for e in row.to_list()[0])
    return [] if zero else inputs


# --- the number of solutions ---------------------------------------------------------------


def _complete_check(setting: Setting) -> Check:
    balances = setting.model.balances
    orders: dict[str, int] = dict.fromkeys(setting.model.unknowns, 0)
    for balance in balances:
        for jet, _ in balance.of_unknowns:
            orders[jet.name] = max(orders.get(jet.name, 0), jet.order)
    if len(balances) != len(orders):
        how = f"{len(balances)} equations for {len(orders)} unknowns"
        return Check(_COMPLETE, "refuted", how)
    a = setting.matrix(setting.model.reduction.matrix.to_list())
    characteristic = setting.field.polynomial(a.charpoly())
    count = max(sum(orders.values()), setting.states) + 1
    front: Scalar | None = None
    for point in range(1, count + 1):
        s = setting.field.domain.convert(point)
        value = characteristic.eval(s)  # a polynomial over the field at one of its elements
        own = _determinant(setting, list(orders), s)
        if front is None and not setting.vanishes(value):
            front = own / value
        rest = own if front is None else own - front * value
        if not setting.vanishes(rest):
            how = "the determinant of the equations is no multiple of det(sI - A)"
            return Check(_COMPLETE, "refuted", how)
    if front is None or setting.vanishes(front):
        return Check(_COMPLETE, "refuted", "the determinant of the equations is zero")
    if not _never_zero(setting, front):
        how = f"it was not decided whether {front}, which the determinant has in front, may vanish"
        return Check(_COMPLETE, "not attempted", how)
    return Check(
        _COMPLETE,
        "proved",
        f"{len(balances)} equations for as many unknowns: with s in the place of the derivative "
        f"their determinant is a number other than 0 times det(sI - A), compared at {count} values "
        "of s, more than its degree",
    )


def _determinant(setting: Setting, names: list[str], s: Scalar) -> Scalar:
    zero = setting.field.domain.zero
    rows = []
    for balance in setting.model.balances:
        row = dict.fromkeys(names, zero)
        for jet, weight in balance.of_unknowns:
            row[jet.name] += setting.put(weight) * s**jet.order
        rows.append(list(row.values()))
    return setting.field.matrix(rows).det()


def _never_zero(setting: Setting, element: Scalar) -> bool:
    case = setting.solution.case
    if case is None:
        return bool(element)
    field, assumed = case.domain.field, setting.model.domain
    known = (*case.domain.conditions, *(() if assumed is None else assumed.conditions))
    domain = ParameterDomain(field, tuple(dict.fromkeys(known)))
    below = Comparison(field.of_polynomial(element.denom), "!=")
    above = Comparison(field.of_polynomial(element.numer), "!=")
    return all(follows(field, domain, comparison) for comparison in (above, below))
