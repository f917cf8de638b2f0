"""Names that the claims of a line give and use: what has to be judged before what."""

from __future__ import annotations

from collections.abc import Sequence

from closedform.checking.claim import Claim
from closedform.checking.recognising.left_sides import base_and_indices
from closedform.checking.standing.facts import Facts
from closedform.notation.written.tree import Apply, Jet, Symbol, walk

__all__ = ["EARLIER", "given_names", "in_order", "used_names"]

EARLIER = ("definition", "identity")
"""Claims that give a name to something, in general, where nothing tells the order."""


def given_names(claim: Claim, facts: Facts) -> frozenset[str]:
    """Return the names that a claim gives a meaning: those on its left, none of the model's."""
    found: set[str] = set()
    for name in claim.names:
        match name:
            case Symbol(own):
                base, index = base_and_indices(own)
                found |= {own, *(f"{base}_{part}" for part in index.split("_") if index)}
            case Jet(own, 0):
                found.add(own)
            case Apply("tan" | "sin" | "cos", (Symbol(own),)):
                found.add(own)
    return frozenset(found - facts.names)


def used_names(claim: Claim) -> frozenset[str]:
    """Return the names in the values of a claim."""
    return frozenset(
        node.name
        for value in claim.values
        for node in walk(value)
        if isinstance(node, Symbol | Jet)
    )


def in_order(claims: Sequence[Claim], facts: Facts) -> tuple[Claim, ...]:
    """Return the claims of a line, each after those that give the names it uses.

    What is told by nothing: definitions and identities first, and as they are written.
    """
    left = sorted(claims, key=lambda claim: claim.says not in EARLIER)
    found: list[Claim] = []
    while left:
        for claim in left:
            others = [other for other in left if other is not claim]
            given = frozenset().union(*(given_names(other, facts) for other in others))
            if not used_names(claim) & (given - given_names(claim, facts)):
                break
        else:
            claim = left[0]
        left = [other for other in left if other is not claim]
        found.append(claim)
    return tuple(found)
