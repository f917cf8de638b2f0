"""Equations that are solved for an instant: 1 - e^(-kt) = 0.9, so t_90 = ln(10)/k."""

from __future__ import annotations

from collections.abc import Iterator
from dataclasses import replace

from closedform.checking.claim import Claim, Group
from closedform.checking.recognising.left_sides import base_and_indices
from closedform.checking.standing.setting import Setting
from closedform.notation.written.tree import Evaluated, Jet, Symbol, Written, walk

__all__ = ["at_instants"]

MOVING = ("solution", "output", "equation", "identity")


def at_instants(claim: Claim, setting: Setting) -> Iterator[tuple[str, Claim]]:
    """Yield what a line claims if it is meant at an instant that it names itself.

    It has to equate a function of time with a constant, and to name the instant by a t with an
    index, as t_90 or T_1.
    """
    if claim.says not in MOVING:
        return
    members = (*claim.names, *claim.values)
    moving = [_moves(member, setting) for member in members]
    if all(moving) or not any(moving):
        return
    for other in setting.later:
        if other.line.number != claim.line.number or other is claim:
            continue
        for name in other.names:
            base, index = base_and_indices(name.name) if isinstance(name, Symbol) else ("", "")
            if isinstance(name, Symbol) and base in ("t", "T") and (index or base == "T"):
                values = tuple(_at(member, name, setting) for member in members)
                yield (
                    name.name,
                    replace(claim, says="identity", groups=(Group((), values),), subject=""),
                )


def _moves(member: Written, setting: Setting) -> bool:
    """Whether a member is a function of time."""
    facts = setting.ground.facts
    return any(
        node == Symbol(facts.time)
        or (isinstance(node, Jet) and node.at is None and node.name in facts.varying)
        for node in walk(setting.opened(member))
    )


def _at(member: Written, instant: Symbol, setting: Setting) -> Written:
    """Return a member at an instant."""
    if not _moves(member, setting):
        return member
    if isinstance(member, Jet) and member.at is None:
        return replace(member, at=instant)
    return Evaluated(setting.opened(member), setting.ground.facts.time, instant)
