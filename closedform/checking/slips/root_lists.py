"""Slips in lists of eigenvalues: signs, numbers, how often one counts."""

from __future__ import annotations

from collections.abc import Iterator
from dataclasses import replace
from fractions import Fraction
from typing import TypeGuard

from closedform.checking.claim import Claim, Group
from closedform.checking.judging.judge import judge
from closedform.checking.slips import names
from closedform.checking.slips.digit_slips import digit_slip
from closedform.checking.slips.making import negated, number, times
from closedform.checking.slips.numbers import is_bare
from closedform.checking.slips.solving import Place, solved
from closedform.checking.slips.spots import Spot
from closedform.checking.slips.trial import Candidate, Point, Trial
from closedform.checking.standing.setting import Finding, Setting
from closedform.checking.verdict import Slip
from closedform.notation.written.plain_form import plain_written
from closedform.notation.written.tree import (
    IMAGINARY,
    Listing,
    Literal,
    PlusMinus,
    Sum,
    Written,
    changed,
    walk,
)

__all__ = ["listed", "root_numbers"]


def listed(claim: Claim, finding: Finding, setting: Setting) -> Slip | None:
    """Return the slip in a list of eigenvalues that is wrong as a whole: signs, or counting."""
    values = claim.values
    turned = [negated(value) for value in values]
    tried = [(names.SIGN_EIGENVALUE, "every eigenvalue", tuple(turned))]
    if len(values) == 2 and all(isinstance(v, Sum) for v in values):
        for k in range(2):
            both = tuple(_term_turned(v, k) for v in values if isinstance(v, Sum))
            tried.append((names.SIGN_EIGENVALUE, "both eigenvalues", both))
    for name, where, new in tried:
        if len(values) > 1 and _passes(claim, new, setting):
            return Slip(name, where, Listing(new))
    for k in range(len(values)) if len(values) > 1 else ():
        new = tuple(turned[i] if i == k else v for i, v in enumerate(values))
        if len(claim.groups) == len(values) and _passes_fully(claim, new, setting):
            return Slip(names.SIGN_EIGENVALUE, f"eigenvalue {k + 1}", Listing(new))
    together = _same_number(claim, setting)
    if together is not None:
        return together
    if finding.right is not None and isinstance(finding.right, Listing):
        single = all(_alone(claim, k, setting) for k in range(len(claim.groups)))
        if single and _passes(claim, finding.right.items, setting):
            roots = setting.ground.truth.eigenvalues
            defective = any(root.algebraic > root.geometric for root in roots)
            name = names.GEOMETRIC if defective else names.MULTIPLICITY
            return Slip(name, "how often each counts", finding.right)
    return None


def _same_number(claim: Claim, setting: Setting) -> Slip | None:
    """Return the slip in a number that stands in several eigenvalues, as in a pair."""
    wrong = [k for k in range(len(claim.groups)) if not _alone(claim, k, setting)]
    if len(wrong) < 2:
        return None
    several = [{n for v in claim.groups[k].values for n in walk(v) if _is_count(n)} for k in wrong]
    common = sorted(set.intersection(*several), key=lambda n: n.value)
    for literal in common:
        for share in (Fraction(1, 2), Fraction(2), Fraction(1, 4), Fraction(4)):
            right = number(literal.value * share)
            groups = list(claim.groups)
            for k in wrong:
                values = tuple(_replaced(v, literal, right) for v in groups[k].values)
                groups[k] = replace(groups[k], values=values)
            if judge(replace(claim, groups=tuple(groups)), setting).passes:
                where = f"{plain_written(literal)} ought to be {plain_written(right)}"
                items = tuple(group.values[-1] for group in groups)
                return Slip(names.LIST_FACTOR, where, Listing(items))
    for share in (Fraction(1, 2), Fraction(2)):
        groups = list(claim.groups)
        for k in wrong:
            values = tuple(times(number(share), v) for v in groups[k].values)
            groups[k] = replace(groups[k], values=values)
        if judge(replace(claim, groups=tuple(groups)), setting).passes:
            items = tuple(group.values[-1] for group in groups)
            return Slip(names.LIST_FACTOR, "every one", Listing(items))
    return None


def _is_count(node: Written) -> TypeGuard[Literal]:
    return isinstance(node, Literal)


def _replaced(tree: Written, old: Literal, new: Written) -> Written:
    return changed(tree, lambda n: new if n == old else None)


def _term_turned(tree: Sum, at: int) -> Written:
    return Sum(tuple(negated(t) if k == at else t for k, t in enumerate(tree.terms)))


def _passes(claim: Claim, values: tuple[Written, ...], setting: Setting) -> bool:
    groups = tuple(Group((), (value,)) for value in values)
    return judge(replace(claim, groups=groups), setting).passes


def _passes_fully(claim: Claim, values: tuple[Written, ...], setting: Setting) -> bool:
    """Whether the eigenvalues are right, with the names and counts that the author gives."""
    groups = tuple(replace(g, values=(v,)) for g, v in zip(claim.groups, values, strict=True))
    return judge(replace(claim, groups=groups), setting).passes


def _alone(claim: Claim, at: int, setting: Setting) -> bool:
    group = replace(claim.groups[at], names=(), note="")
    return judge(replace(claim, groups=(group,)), setting).passes


def root_numbers(trial: Trial) -> Iterator[Candidate]:
    """Yield the formula of an eigenvalue with another number in one place."""
    if not trial.roots:
        return
    first = changed(trial.tree, lambda n: n.operand if isinstance(n, PlusMinus) else None)
    for root in trial.roots:
        point = Point(trial.names, (root,))
        inner = replace(trial, tree=first, points=(point,), roots=())
        for spot in trial.spots():
            if isinstance(spot.node, Literal):
                yield from _root_number(trial, inner, spot)
            elif spot.node == IMAGINARY:
                yield from _root_factor(trial, inner, spot)


def _root_factor(trial: Trial, inner: Trial, spot: Spot) -> Iterator[Candidate]:
    """Yield the formula with a factor before the imaginary unit."""

    def tree(new: Written) -> Written:
        whole = trial.changed(spot, times(new, spot.node))
        return changed(whole, lambda n: n.operand if isinstance(n, PlusMinus) else None)

    for one in solved(inner, Place("term", "", Fraction(1), tree)):
        where = f"a factor {plain_written(one.written)} is missing"
        new = trial.changed(spot, times(one.written, spot.node))
        yield Candidate(names.LIST_FACTOR, where, new)


def _root_number(trial: Trial, inner: Trial, spot: Spot) -> Iterator[Candidate]:
    assert isinstance(spot.node, Literal)  # noqa: S101  asked for before
    literal = spot.node

    def tree(new: Written) -> Written:
        whole = trial.changed(spot, new)
        return changed(whole, lambda n: n.operand if isinstance(n, PlusMinus) else None)

    place = Place("number", "", literal.value, tree, literal)
    for one in solved(inner, place):
        right = one.written
        twice = isinstance(right, Literal) and right.value / literal.value in (2, 4)
        half = isinstance(right, Literal) and literal.value / right.value in (2, 4)
        name = names.LIST_FACTOR if twice or half else names.ONE_NUMBER
        if is_bare(trial.tree):
            name = digit_slip(literal, right) or names.ONE_EIGENVALUE
        where = f"{plain_written(literal)} ought to be {plain_written(right)}"
        yield Candidate(name, where, trial.changed(spot, right))
