"""The judgement on a claim, and what its author has stated afterwards."""

from __future__ import annotations

from dataclasses import dataclass, replace

from closedform.checking.claim import Claim, Group
from closedform.checking.judging.compare import has_decimals
from closedform.checking.recognising.angles import angles_of
from closedform.checking.recognising.left_sides import base_and_indices
from closedform.checking.standing.author import Author, Entry
from closedform.checking.standing.setting import Finding
from closedform.checking.values.signs import both_signs
from closedform.notation.written.tree import (
    Jet,
    Literal,
    Negation,
    Symbol,
    Transform,
    Written,
    walk,
)

__all__ = ["Judgement", "named_by", "stated", "wrong_names"]


@dataclass(frozen=True, slots=True)
class Judgement:
    """The finding on a claim; `carried_from` is the wrong line on which a carried one rests."""

    claim: Claim
    finding: Finding
    carried_from: int | None = None


def wrong_names(claim: Claim, author: Author) -> list[str]:
    """Return the names in the values of a claim that wrong lines gave, and have a right value."""
    used = {n.name for value in claim.values for n in walk(value) if isinstance(n, Symbol)}
    return sorted(used & author.definition_roots.keys() & author.right_values.keys())


def stated(author: Author, judgement: Judgement) -> Author:
    """Return the author after a claim, with the names that it gives to things."""
    claim, finding = judgement.claim, judgement.finding
    values = tuple(author.put_in(group.values[-1]) for group in claim.groups if group.values)
    root = judgement.carried_from
    right: dict[str, Written] = {}
    wrong = wrong_names(claim, author) if claim.says == "definition" else []
    if finding.word == "fails":
        root = claim.line.number
    elif root is None and wrong:
        root = min(author.definition_roots[name] for name in wrong)
        right = dict(named_by(claim, author.mended(wrong)))
    entry = Entry(replace(claim, groups=_opened(claim, author)), values, root)
    names = dict(named_by(claim, author))
    angles = {name: a for group in claim.groups for name, a in angles_of(group, author).items()}
    names |= {name: principal for name, (principal, _) in angles.items()}
    author = replace(
        author,
        alternatives={**author.alternatives, **{n: other for n, (_, other) in angles.items()}},
    )
    if finding.right is not None and len(names) == 1:
        right = dict.fromkeys(names, finding.right)
    return author.after(entry, names, right)


def _opened(claim: Claim, author: Author) -> tuple[Group, ...]:
    return tuple(
        replace(group, values=tuple(author.put_in(v) for v in group.values))
        for group in claim.groups
    )


def named_by(claim: Claim, author: Author) -> list[tuple[str, Written]]:
    """Return what the names on the left of a claim stand for from now on.

    The first member without decimals is taken, else the first formula, else the last;
    lambda_{1,2} with plus-or-minus names two numbers.
    """
    found: list[tuple[str, Written]] = []
    for group in claim.groups:
        if not group.values:
            continue
        closed = [v for v in group.values if not any(isinstance(n, Transform) for n in walk(v))]
        closed = closed or [group.values[-1]]
        formulas = [v for v in closed if not isinstance(v, Literal | Negation)]
        value = next((v for v in closed if not has_decimals(v)), (formulas or closed[-1:])[0])
        opened = author.put_in(value)
        several = both_signs(opened)
        for name in group.names:
            if isinstance(name, Jet) and not name.order and name.at in (None, Symbol(author.time)):
                found.append((name.name, opened))
            if not isinstance(name, Symbol):
                continue
            base, index = base_and_indices(name.name)
            indices = index.split("_")
            if len(several) == 2:
                own = indices if len(indices) == 2 else ["1", "2"]
                found += [(f"{base}_{i}", v) for i, v in zip(own, several, strict=True)]
            else:
                found.append((name.name, opened))
                if claim.says == "eigenvalues" and len(indices) > 1:
                    found += [(f"{base}_{i}", opened) for i in indices]
    return found
