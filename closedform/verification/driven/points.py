"""Conditions at points: that the solution meets them, and is the only one that does.

The constants that have names are put in as they are written.  That n conditions leave no other
solution is seen where they are solved for the states at the start, in ball arithmetic.
"""

from __future__ import annotations

from collections.abc import Iterator, Sequence
from functools import partial

from flint import arb

from closedform.verification.comparison import AGREED, Pair, check_of, compared
from closedform.verification.driven.grounds import Ground
from closedform.verification.driven.setting import Setting
from closedform.verification.record import Check

__all__ = ["point_check"]


def point_check(setting: Setting) -> Iterator[Check]:
    """Yield the check that the solution meets the conditions at points."""
    conditions = setting.model.conditions
    if not conditions:
        return
    item = "conditions at points, numbers"
    if not setting.grounds:
        yield Check(item, "not attempted", "no point of this case was found to put in")
        return
    if len(conditions) != setting.states:
        yield Check(item, "refuted", f"{len(conditions)} conditions for {setting.states} states")
        return
    places = {condition.text: k for k, condition in enumerate(conditions)}
    yield check_of(
        item,
        (
            compared(places, partial(_pairs, setting, ground, places), where=ground.told)
            for ground in setting.grounds
        ),
        f"the solution, with its constants as written, was put into each of {len(conditions)} "
        f"conditions: both sides agree {AGREED}",
    )


def _pairs(
    setting: Setting, ground: Ground, places: dict[str, int], names: Sequence[str]
) -> Iterator[Pair]:
    enclose, named = ground.enclose(), setting.named(ground)
    for name in names:
        condition = setting.model.conditions[places[name]]
        place = setting.interval_of(condition.at, enclose)
        whole = setting.wholes[place or 0]
        values = whole.enclosure(enclose, enclose(setting.put(condition.at)), named)
        states = values[: setting.states]
        if place is None:  # a condition speaks of the states before an impulse at the start
            blow = setting.blow(0).to_list()
            states = [x - enclose(b) for x, (b,) in zip(states, blow, strict=True)]
        weights = [enclose(setting.put(w)) for w in condition.of_states]
        total = sum((w * x for w, x in zip(weights, states, strict=True)), arb(0))
        yield total, enclose(setting.put(condition.value))
