"""Instants at which an author's own formula switches, whether the model does or not."""

from __future__ import annotations

from collections.abc import Iterator
from dataclasses import replace

from closedform.algebra.elementary import Element
from closedform.checking.claim import Claim
from closedform.checking.errors import UNDECIDED
from closedform.checking.standing.setting import Setting
from closedform.checking.values.exact import exact
from closedform.checking.values.written_back import written_back
from closedform.notation.written.tree import Apply, Negation, Piecewise, Range, Sum, Written, walk

__all__ = ["with_cuts"]


def with_cuts(claim: Claim, setting: Setting) -> Setting:
    """Return the setting with intervals that end where a formula of the claim switches too.

    A unit step, a condition beside the line or one that tells pieces apart is then the same all
    over an interval, and a step at a wrong instant is seen.
    """
    cuts = tuple(dict.fromkeys(_instants(claim, setting)))
    if not cuts:
        return setting
    return replace(setting, ground=replace(setting.ground, cuts=cuts))


def _instants(claim: Claim, setting: Setting) -> Iterator[Written]:
    ground = setting.ground
    scope = setting.scope_of(ground)
    for tree in _switches(claim, setting):
        try:
            value = exact(tree, scope)
        except UNDECIDED:
            continue
        if not isinstance(value, Element):
            continue
        slope = value.derivative()
        if not slope.is_zero and slope.is_constant:
            yield written_back(-value.at(ground.field.zero) / slope)


def _switches(claim: Claim, setting: Setting) -> Iterator[Written]:
    """Yield what is zero where something is switched: arguments of steps, sides of conditions."""
    for statement in claim.statements:
        for range_ in statement.conditions:
            yield from _borders(range_)
    for member in (setting.opened(value) for value in claim.values):
        for node in walk(member):
            if isinstance(node, Apply) and node.function == "step":
                yield node.arguments[0]
            elif isinstance(node, Piecewise):
                for _, ranges in node.pieces:
                    for range_ in ranges or ():
                        yield from _borders(range_)


def _borders(range_: Range) -> Iterator[Written]:
    for one, other in zip(range_.members, range_.members[1:], strict=False):
        yield Sum((one, Negation(other)))
