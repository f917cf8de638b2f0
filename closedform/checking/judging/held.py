"""Judging the members of a claim against one true value."""

from __future__ import annotations

from collections.abc import Callable
from dataclasses import replace
from fractions import Fraction
from typing import TypeGuard

from closedform.checking.claim import Claim
from closedform.checking.digits import DigitsMatch
from closedform.checking.errors import NotJudgedError, UnknownNameError
from closedform.checking.judging.compare import Comparison, compare
from closedform.checking.judging.transforms import laplace
from closedform.checking.standing.ground import Ground
from closedform.checking.standing.setting import Finding, Setting
from closedform.checking.values.matrices import ExactMatrix
from closedform.checking.values.scope import Value
from closedform.notation.written.tree import (
    Apply,
    Jet,
    Literal,
    Negation,
    Power,
    Symbol,
    Transform,
    Written,
    changed,
    walk,
)

__all__ = ["held_against", "place_text"]


def held_against(
    claim: Claim,
    setting: Setting,
    true: Callable[[Ground], Value],
    right: Callable[[Ground], Written | None] = lambda _: None,
    *,
    prepare: Callable[[Written], Written] = lambda member: member,
    values: tuple[Written, ...] | None = None,
) -> Finding:
    """Return the finding on a claim all of whose members ought to have one true value.

    `true` and `right` give that value and its formula on a ground; `prepare` changes a member
    before it is judged.  A general member, as P e^(Jt) P^-1 where no P was stated or the inverse
    transform of X(s), is left out if another member remains.

    Raises:  NotJudgedError if another member, or none, can be judged.
    """
    skipped: list[NotJudgedError] = []
    passed: list[Comparison] = []
    for value in claim.values if values is None else values:
        opened = prepare(setting.opened(value))
        ground = setting.ground_for(opened)
        scope = setting.scope_of(ground)
        truth = true(ground)
        if _is_spelled_out(opened) and len(ground.stretches) == 1:
            opened, truth = _in_s(opened, truth, setting)
        try:
            about = claim.is_approximate(value)
            found = compare(opened, truth, scope, ground, approximate=about)
        except NotJudgedError as error:
            if not _is_general(value, error):
                raise
            skipped.append(error)
            continue
        if not found.passes:
            return Finding(
                "fails",
                failure_text(found),
                corrected(opened, found.match) or right(ground),
                entries=found.wrong,
                pairs=((opened, truth),),
            )
        passed.append(found)
    if not passed:
        raise skipped[0] if skipped else NotJudgedError("it has no value")
    notes = tuple(f"a member is not judged: {error}" for error in skipped)
    if any(found.how == "digits" for found in passed):
        told = next(found.reason for found in passed if found.how == "digits")
        return Finding("holds to the digits shown", told, notes=notes)
    return Finding("holds", notes=notes)


GENERAL = frozenset({"P", "J", "T", "V", "S", "Q", "M", "U", "X", "D", "Lambda"})
"""Names that a general line uses for the matrices of a decomposition, stated or not."""


def _is_spelled_out(member: Written) -> TypeGuard[Transform]:
    """Whether something is an inverse transform of a formula, not of X(s)."""
    return (
        isinstance(member, Transform)
        and member.back
        and not any(isinstance(node, Jet) for node in walk(member.body))
    )


def _in_s(member: Transform, truth: Value, setting: Setting) -> tuple[Written, Value]:
    """Return what stands behind an inverse transform, and the transform of the true function."""
    names = {node.name for node in walk(member.body) if isinstance(node, Symbol)}
    body = setting.renamed(member.body, names - setting.ground.facts.names - {"A"})
    if isinstance(truth, ExactMatrix):
        return body, truth.mapped(laplace)
    return body, laplace(truth)


def _is_general(member: Written, error: NotJudgedError) -> bool:
    """Whether a member only tells by which way the next one was found."""
    if isinstance(error, UnknownNameError):
        return error.name in GENERAL and any(map(_is_matrix_part, walk(member)))
    return any(isinstance(node, Transform) for node in walk(member))


def _is_matrix_part(node: Written) -> bool:
    """Whether a node shows that letters beside it are matrices: P^-1, a transpose."""
    match node:
        case Apply("inverse" | "transpose" | "diag"):
            return True
        case Power(Symbol(name), Negation(Literal(value=one))) if one == 1:
            return name in GENERAL
    return False


def corrected(member: Written, match: DigitsMatch | None) -> Written | None:
    """Return a formula of the right form with the right digits in it, None if it has none.

    Where the numbers are far from those printed, only a single number is given so: in a
    function they may be others than the author meant.
    """
    if match is None or not match.judged:
        return None
    if match.kind != "rounding" and any(isinstance(node, Symbol) for node in walk(member)):
        return None
    right = {
        (found.literal.start, found.literal.end): found
        for found in match.wrong
        if found.literal.start >= 0
    }
    if len(right) != len(match.wrong):
        return None

    def change(node: Written) -> Written | None:
        if isinstance(node, Negation) and isinstance(node.operand, Literal):
            inside = change(node.operand)
            return inside.operand if isinstance(inside, Negation) else None
        found = right.get((node.start, node.end)) if isinstance(node, Literal) else None
        if found is None or not isinstance(node, Literal):
            return None
        value = Fraction(found.correct)
        new = replace(node, value=abs(value))
        return Negation(new) if value < 0 else new

    return changed(member, change)


def failure_text(found: Comparison) -> str:
    """Return in words how a member differs."""
    if found.how == "rounding":
        return f"the form is right, digits are not: {found.reason}"
    where = place_text(found.wrong)
    return ": ".join(part for part in (where, found.reason) if part)


def place_text(entries: tuple[tuple[int, int], ...]) -> str:
    """Return in words which entries of a matrix are wrong; nothing for a single number."""
    if not entries or entries == ((1, 1),):
        return ""
    shown = ", ".join(f"({i}, {j})" for i, j in entries[:4])
    more = f" and {len(entries) - 4} more" if len(entries) > 4 else ""
    word = "entry" if len(entries) == 1 else "entries"
    return f"{word} {shown}{more} differ{'s' if len(entries) == 1 else ''}"
