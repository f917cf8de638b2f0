"""The solution put into the equations as they were typed, and into the state form.

In the interior of an interval every input is a sum of waves, and the solution a sum of
columns shifted to their origins; both are exponential polynomials with coefficients in
K[lambda]/(p).  So an equation holds when its coefficients, sorted by constants, origins,
roots and powers of the time, are zero.
"""

from __future__ import annotations

from collections.abc import Iterator

from closedform.algebra.field import FieldMatrix
from closedform.model.driven.model import Balance
from closedform.verification.driven.identities import Residual, identity_check
from closedform.verification.driven.setting import Setting
from closedform.verification.driven.sums import TimedSum
from closedform.verification.record import Check

__all__ = ["balance_check", "rows_check", "rows_residuals", "state_form_check", "state_residuals"]


def balance_check(setting: Setting) -> Check:
    """The unknowns and the inputs in every interval, put into every equation as typed."""
    item = "equations as typed"
    for number, balance in enumerate(setting.model.balances, start=1):
        for jet, _ in balance.of_unknowns:
            if setting.row_of(jet) is None:
                return Check(item, "refuted", f"equation {number}: {jet.text} was not solved for")
    return identity_check(
        setting,
        item,
        _balances(setting),
        "unknowns, their derivatives and inputs were put into each equation in each interval, "
        "{count} in all, and sorted by the functions of time: every coefficient is zero",
    )


def _balances(setting: Setting) -> Iterator[Residual]:
    for k, whole in enumerate(setting.wholes):
        derivatives = [whole]
        for number, balance in enumerate(setting.model.balances, start=1):
            yield Residual(f"equation {number}", k, _put_in(setting, balance, derivatives, k))


def _put_in(setting: Setting, balance: Balance, derivatives: list[TimedSum], k: int) -> TimedSum:
    """What the left side less the right side is; `derivatives` grows as it has to."""
    total = setting.nothing(1)
    for jet, weight in balance.of_unknowns:
        found = setting.row_of(jet)
        if found is None:
            raise ValueError(f"{jet.text} was not solved for")
        row, order = found
        while len(derivatives) <= order:
            derivatives.append(derivatives[-1].derivative())
        own = derivatives[order].after(setting.selecting([row]))
        total = total + own.scaled(setting.put(weight))
    for place, weight in balance.of_inputs:
        total = total + setting.inputs[k][place].scaled(setting.put(weight))
    return total


def state_form_check(setting: Setting) -> Check:
    """The state form holds in every interval; the states are the derivatives they stand for."""

    def residuals() -> Iterator[Residual]:
        for k, whole in enumerate(setting.wholes):
            yield from state_residuals(setting, "x' = A x + B u", whole, k)
            yield from _jets(setting, whole, k)

    return identity_check(
        setting,
        "x' = A x + B u",
        residuals(),
        "put in, in each interval, and sorted by the functions of time: every coefficient is "
        "zero; and each state is the derivative of the unknown that it stands for",
    )


def state_residuals(
    setting: Setting, told: str, function: TimedSum, k: int, *, driven: bool = True
) -> Iterator[Residual]:
    """Yield x' - A x - B u of a function of the model's rows; without B u if not `driven`."""
    n, reduction = setting.states, setting.model.reduction
    own = function.after(setting.selecting(range(n)))
    rest = own.derivative() - own.after(setting.matrix(reduction.matrix.to_list()))
    if driven:
        rest = rest - setting.fed(reduction.input_matrix, n, k)
    yield Residual(told, k, rest)


def _jets(setting: Setting, whole: TimedSum, k: int) -> Iterator[Residual]:
    for place, jet in enumerate(setting.model.reduction.jets):
        found = setting.row_of(jet)
        if found is None or found[0] == place:
            continue
        row, order = found
        derived = whole.after(setting.selecting([row]))
        for _ in range(order):
            derived = derived.derivative()
        own = whole.after(setting.selecting([place]))
        yield Residual(f"{setting.model.names[place]} = {jet.text}", k, own - derived)


def rows_check(setting: Setting) -> Iterator[Check]:
    """Yield the check of what is no state: eliminated unknowns and outputs, in every interval."""
    if len(setting.model.rows) == setting.states:
        return

    def residuals() -> Iterator[Residual]:
        for k, whole in enumerate(setting.wholes):
            yield from rows_residuals(setting, whole, k)

    yield identity_check(
        setting,
        "z = C x + D u",
        residuals(),
        "eliminated unknowns and outputs are the stated combinations of states and inputs, "
        "coefficient by coefficient, in each interval",
    )


def rows_residuals(
    setting: Setting, function: TimedSum, k: int, *, driven: bool = True
) -> Iterator[Residual]:
    """Yield what each row below the states is, less its combination of states and inputs."""
    model, n = setting.model, setting.states
    states = function.after(setting.selecting(range(n)))
    for place, name in enumerate(model.rows[n:]):
        of_states, of_inputs = _combination(setting, place)
        rest = function.after(setting.selecting([n + place])) - states.after(of_states)
        if driven:
            rest = rest - setting.fed(of_inputs, 1, k)
        yield Residual(name, k, rest)


def _combination(setting: Setting, place: int) -> tuple[FieldMatrix, FieldMatrix | None]:
    """What a row below the states is of states and of inputs."""
    model = setting.model
    reduction, count = model.reduction, len(model.reduction.eliminated)
    if place >= count:
        output = model.outputs[place - count]
        fed = setting.field.matrix([list(output.of_inputs)]) if output.of_inputs else None
        return setting.matrix([output.of_states]), fed
    if reduction.eliminated_from_states is None:
        raise ValueError("eliminated unknowns have a combination of the states")
    row = setting.matrix([reduction.eliminated_from_states.to_list()[place]])
    inputs = reduction.eliminated_from_inputs
    return row, None if inputs is None else setting.field.matrix([inputs.to_list()[place]])
