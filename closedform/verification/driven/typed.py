"""The equations as they were typed: their two sides evaluated, against their weights.

An equation is a sum of weighted unknowns, derivatives and inputs; that is what the solution is
put into.  That the sum is what was typed is seen from the formula trees, with numbers in the
place of the unknowns, as many sets of them as there are unknowns, and one more.
"""

from __future__ import annotations

from collections.abc import Iterable, Iterator, Mapping, Sequence
from dataclasses import replace
from fractions import Fraction
from functools import partial

from flint import arb

from closedform.algebra.enclosure import ball_of
from closedform.model.driven.model import Balance, Jet
from closedform.notation.expression import Call, Expression, Name
from closedform.notation.jets import found_jets
from closedform.verification.comparison import AGREED, Finding, Pair, check_of, compared
from closedform.verification.driven.declared import input_value, moment_at
from closedform.verification.driven.grounds import Ground
from closedform.verification.driven.setting import Setting
from closedform.verification.driven.trees import Moment, taylor
from closedform.verification.record import Check

__all__ = ["typed_check"]

_ITEM = "equations as read"


def typed_check(setting: Setting) -> Iterator[Check]:
    """Yield the check that the weights of each equation are those of its two sides as typed."""
    balances = {f"equation {n}": b for n, b in enumerate(setting.model.balances, start=1)}
    if not balances or not setting.grounds:
        return
    findings = (
        _finding(setting, ground, k, balances)
        for ground in setting.grounds
        for k in range(setting.last + 1)
    )
    agreed = (
        "with several sets of values in the place of the unknowns and their derivatives, the two "
        f"sides of each of {len(balances)} equations as typed differ by the sum of its weighted "
        f"unknowns and inputs {AGREED}"
    )
    try:
        yield check_of(_ITEM, findings, agreed)
    except (KeyError, ValueError) as error:  # a formula that has no value here
        yield Check(_ITEM, "not attempted", f"a side of an equation was not evaluated: {error}")


def _finding(setting: Setting, ground: Ground, k: int, balances: Mapping[str, Balance]) -> Finding:
    jets = _jets(setting, balances.values())
    for turn in range(len(jets) + 1):
        # all ones in the first set, then one unknown after the other is moved
        values = {jet: Fraction(1 + (n + 2) * (n + 1 == turn)) for n, jet in enumerate(jets)}
        evaluate = partial(_pairs, setting, ground, k, balances, values)
        found = compared(balances, evaluate, where=f"{ground.told} in interval {k + 1}")
        if found.outcome != "enclosed":
            return found
    return Finding("enclosed")


def _jets(setting: Setting, balances: Iterable[Balance]) -> list[Jet]:
    """Every unknown and derivative of one that stands in an equation, or has a weight."""
    found: dict[Jet, None] = {}
    for balance in balances:
        found |= dict.fromkeys(jet for jet, _ in balance.of_unknowns)
        for side in (balance.left, balance.right):
            named = (Jet(name, order) for name, order in found_jets(side))
            found |= dict.fromkeys(jet for jet in named if jet.name in setting.model.unknowns)
    return list(found)


def _pairs(
    setting: Setting,
    ground: Ground,
    k: int,
    balances: Mapping[str, Balance],
    values: Mapping[Jet, Fraction],
    names: Sequence[str],
) -> Iterator[Pair]:
    enclose = ground.enclose()
    t = setting.inside(k, enclose)[0]
    moment = moment_at(setting, ground, t)
    named = {jet.text: ball_of(value) for jet, value in values.items()}
    moment = replace(moment, known={**moment.known, **named})
    inputs = [
        input_value(setting, place, k, t, enclose) for place in range(len(setting.model.inputs))
    ]
    moment = replace(moment, given=partial(_of_input, setting, inputs, moment))
    for name in names:
        balance = balances[name]
        sides = taylor(balance.left, moment)[0] - taylor(balance.right, moment)[0]
        total = arb(0)
        for jet, weight in balance.of_unknowns:
            total += enclose(setting.put(weight)) * ball_of(values[jet])
        for place, weight in balance.of_inputs:
            total += enclose(setting.put(weight)) * inputs[place]
        yield sides, total


def _of_input(
    setting: Setting, inputs: Sequence[arb], moment: Moment, node: Expression
) -> arb | None:
    """The value of a node that stands for a declared input, now or at another instant."""
    if not isinstance(node, Name | Call):
        return None
    for value, given in zip(inputs, setting.model.inputs, strict=True):
        if not given.name:
            continue
        if given.formula == node:
            return value
        match node, given.formula:
            case Call(own, argument), Call(name, other) if own == name:
                if taylor(argument, moment)[0].overlaps(taylor(other, moment)[0]):
                    return value
            case _:
                pass
    return None
