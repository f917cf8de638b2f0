"""Conditions on the parameters that stand beside a formula, or tell its pieces apart."""

from __future__ import annotations

from collections.abc import Iterator, Sequence

from closedform.checking.cases import Grounds
from closedform.checking.claim import Claim
from closedform.checking.recognising.order import holds_in
from closedform.checking.standing.author import Author
from closedform.checking.standing.ground import Ground
from closedform.checking.standing.setting import Setting
from closedform.notation.written.tree import Jet, Piecewise, Range, Symbol, Written, walk

__all__ = ["grounds_meant", "is_in_pieces"]


def grounds_meant(
    claims: Sequence[Claim], ground: Ground, author: Author, grounds: Grounds
) -> tuple[Ground, ...]:
    """Return the grounds of the cases for which a line is said.

    That is the case at hand if it agrees with the conditions beside the line; else those cases
    of the model that do, none if there is none.
    """
    ranges = [r for claim in claims for s in claim.statements for r in s.conditions]
    ranges = [r for r in ranges if _is_of_parameters(r, author, ground)]
    if not ranges or _agrees(ranges, ground, author):
        return (ground,)
    return tuple(other for other in grounds.all() if _agrees(ranges, other, author))


def is_in_pieces(claims: Sequence[Claim], author: Author, ground: Ground) -> bool:
    """Whether a line has a formula by pieces that parameters tell apart."""
    pieces = [
        range_
        for claim in claims
        for value in claim.values
        for node in walk(value)
        if isinstance(node, Piecewise)
        for _, ranges in node.pieces
        for range_ in ranges or ()
    ]
    return any(_is_of_parameters(range_, author, ground) for range_ in pieces)


def _agrees(ranges: Sequence[Range], ground: Ground, author: Author) -> bool:
    """Whether no condition is false in a case."""
    setting = Setting(ground, author)
    return all(holds_in(range_, setting) is not False for range_ in ranges)


def _is_of_parameters(range_: Range, author: Author, ground: Ground) -> bool:
    names = {name for member in range_.members for name in _names(author.put_in(member))}
    return bool(names) and names <= ground.facts.parameters


def _names(tree: Written) -> Iterator[str]:
    for node in walk(tree):
        if isinstance(node, Symbol | Jet):
            yield node.name
