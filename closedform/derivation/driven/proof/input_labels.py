"""The calls in an equation as typed that stand for inputs: u(t), u'(t - a)."""

from __future__ import annotations

from typing import Any

from flint import acb

from closedform.derivation.driven.proof.spot import Spot
from closedform.derivation.driven.writing import Writing
from closedform.derivation.proof.evaluation import ball_at
from closedform.notation.expression import (
    Call,
    Expression,
    Name,
    rebuilt,
)
from closedform.notation.jets import jet_of

__all__ = ["with_inputs"]


def with_inputs(spot: Spot, formula: Expression, t: acb) -> Expression:
    """Put the label of an input in the place of what it is written as, at an instant."""
    names = {**spot.names, spot.model.time: t}

    def label(node: Expression) -> Expression | None:
        return _label_of(spot, node, names) if isinstance(node, Call) else None

    return rebuilt(formula, label)


def _label_of(spot: Spot, node: Call, names: dict[str, Any]) -> Name | None:
    """The label of the input that a call stands for: u(t), u'(t - a), or a formula as typed."""
    labels = Writing(spot.model).inputs
    pairs = list(zip(spot.model.inputs, labels, strict=True))
    for given, label in pairs:
        if given.formula == node:
            return label
    for given, label in pairs:
        if given.name and jet_of(node.function)[0] == given.name:
            own = given.formula
            if isinstance(own, Name):
                own = Call(own.text, Name(spot.model.time))
            if not isinstance(own, Call) or own.function != node.function:
                continue
            here, there = (acb(ball_at(c.argument, names)) for c in (own, node))
            if here.overlaps(there):
                return label
    return None
