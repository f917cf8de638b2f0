"""Balances made of numbers, for the tests of what is done with them."""

from __future__ import annotations

from collections.abc import Mapping, Sequence
from typing import Any

from closedform.algebra.field import BaseField, Scalar
from closedform.errors import Place
from closedform.model.driven.balance_system import BalanceSystem
from closedform.model.driven.jet_rows import JetRows
from closedform.model.driven.model import Balance, Jet
from closedform.model.driven.reduction import Reduced
from closedform.model.source import Source
from closedform.notation.expression import ZERO

SOURCE = Source(Place("bench.toml"))


def jet(text: str) -> Jet:
    return Jet(text.rstrip("'"), text.count("'"))


def balance_system(
    field: BaseField,
    equations: Sequence[Mapping[str, object]],
    inputs: Sequence[str] = (),
    **settings: Any,
) -> BalanceSystem:
    """Return the system in which each mapping of jets and inputs to weights adds up to 0."""
    balances = []
    names: dict[str, None] = {}
    for equation in equations:
        unknowns, driven = [], []
        for text, number in equation.items():
            weight = field.domain.convert(number)
            if text in inputs:
                driven.append((inputs.index(text), weight))
            else:
                names[jet(text).name] = None
                unknowns.append((jet(text), weight))
        text = " + ".join(f"{weight}*{name}" for name, weight in equation.items()) + " = 0"
        balances.append(Balance(text, ZERO, ZERO, tuple(unknowns), tuple(driven)))
    known = {
        "unknowns": tuple(names),
        "successors": {
            k: inputs.index(name + "'") for k, name in enumerate(inputs) if name + "'" in inputs
        },
        "keys": tuple(f"equations[{k}]" for k in range(1, len(balances) + 1)),
        "guessed": frozenset(names),
    }
    return BalanceSystem(
        field=field,
        balances=tuple(balances),
        inputs=tuple(inputs),
        source=SOURCE,
        **{**known, **settings},
    )


def residuals(system: BalanceSystem, found: Reduced) -> list[dict[tuple[str, int], Scalar]]:
    """Return what is left of each balance when the state form is put in, over the field."""
    count = len(system.inputs)
    successors = dict(system.successors)
    successors |= {place: count + k for k, place in enumerate(found.derived)}
    rows = JetRows(system.field, found.reduction, successors)
    left = []
    for balance in system.balances:
        row = rows.combined(dict(balance.of_unknowns))
        assert row is not None, balance.text
        total = {("input", place): entry for place, entry in row.of_inputs.items()}
        for place, weight in balance.of_inputs:
            so_far = total.get(("input", place), system.field.domain.zero)
            total["input", place] = so_far + weight
        total |= {("state", place): entry for place, entry in row.of_states.items()}
        left.append({key: entry for key, entry in total.items() if entry})
    return left
