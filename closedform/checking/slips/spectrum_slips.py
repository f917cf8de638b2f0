"""Slips with eigenvalues, eigenvectors, P and J."""

from __future__ import annotations

from collections.abc import Iterator
from dataclasses import replace
from fractions import Fraction
from itertools import permutations, product
from typing import TypeGuard

from closedform.algebra.elementary import Element
from closedform.checking.claim import Claim, Group
from closedform.checking.judge import judge
from closedform.checking.judge_vectors import authors_diagonal, authors_matrix
from closedform.checking.matrices import ExactMatrix, diagonal, identity
from closedform.checking.setting import Finding, Setting
from closedform.checking.slips import names
from closedform.checking.slips.making import ONE, ZERO, negated, number
from closedform.checking.slips.numbers import is_bare
from closedform.checking.slips.solving import Place, solved
from closedform.checking.slips.spots import Spot
from closedform.checking.slips.trial import Candidate, Point, Trial
from closedform.checking.verdict import Slip
from closedform.checking.written_back import written_back
from closedform.notation.written.plain_form import plain_written
from closedform.notation.written.tree import (
    Array,
    Listing,
    Literal,
    PlusMinus,
    Sum,
    Written,
    changed,
    walk,
)

__all__ = ["canonical", "eigenvectors", "listed", "root_numbers", "transformations"]

MOST_ORDERS = 24


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
        for spot in list(trial.spots()):
            if not isinstance(spot.node, Literal):
                continue
            yield from _root_number(trial, inner, spot)


def _root_number(trial: Trial, inner: Trial, spot: Spot) -> Iterator[Candidate]:
    assert isinstance(spot.node, Literal)  # noqa: S101
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
            name = names.ONE_EIGENVALUE
        where = f"{plain_written(literal)} ought to be {plain_written(right)}"
        yield Candidate(name, where, trial.changed(spot, right))


def canonical(trial: Trial) -> Iterator[Candidate]:
    """Yield J with ones above the diagonal, with one less, or another eigenvalue in it."""
    if trial.claim.says not in ("J", "real form"):
        return
    for spot in trial.spots():
        if not isinstance(spot.node, Array) or len(spot.node.rows) != len(spot.node.rows[0]):
            continue
        rows, size = spot.node.rows, len(spot.node.rows)
        places = [k for k in range(size - 1) if rows[k][k] == rows[k + 1][k + 1]]
        for chosen in product((False, True), repeat=len(places)):
            ones: dict[tuple[int, int], Written] = {
                (k, k + 1): ONE if on else ZERO for k, on in zip(places, chosen, strict=True)
            }
            more = any(chosen) and all(rows[k][k + 1] == ZERO for k in places)
            name = names.GEOMETRIC if more else names.CHAIN_ENTRY
            where = "above the diagonal"
            yield Candidate(name, where, trial.changed(spot, _with(rows, ones)))
        for k in range(size):
            for value in trial.ground.eigenvalues:
                entry = written_back(value)
                name = names.SIGN_EIGENVALUE if entry == negated(rows[k][k]) else names.ENTRY
                new = _with(rows, {(k, k): entry})
                yield Candidate(name, f"entry {k + 1, k + 1}", trial.changed(spot, new))


def _with(rows: tuple[tuple[Written, ...], ...], entries: dict[tuple[int, int], Written]) -> Array:
    return Array(
        tuple(
            tuple(entries.get((i, j), entry) for j, entry in enumerate(row))
            for i, row in enumerate(rows)
        )
    )


def eigenvectors(trial: Trial) -> Iterator[Candidate]:
    """Yield a vector with one entry solved for; the right one for a vector of something else."""
    if trial.claim.says != "eigenvector" or trial.claim.subject == "vector":
        return
    own = trial.own()
    if not isinstance(own, ExactMatrix):
        return
    vector = own if own.shape[1] == 1 else own.transposed
    ground = trial.ground
    if vector.shape != (ground.size, 1) or vector.is_zero:
        return
    for value in ground.eigenvalues:
        shifted = ground.matrix - identity(ground.field, ground.size).scaled(value)
        if trial.right is not None and (shifted @ vector).is_zero:
            yield Candidate(names.OTHER_EIGENVALUE, "all of it", trial.right)
        if trial.right is not None and (shifted.transposed @ vector).is_zero:
            yield Candidate(names.LEFT_VECTOR, "all of it", trial.right)
    for value in ground.eigenvalues:
        shifted = ground.matrix - identity(ground.field, ground.size).scaled(value)
        for i in range(ground.size):
            found = _entry(shifted @ _cleared(vector, i, 0), shifted @ _unit(vector, i, 0))
            if found is not None:
                yield from _entry_candidate(trial, i, 0, found)


def transformations(trial: Trial) -> Iterator[Candidate]:
    """Yield P with one entry solved for from A P = P J."""
    if trial.claim.says != "P":
        return
    own, ground = trial.own(), trial.ground
    if not isinstance(own, ExactMatrix) or own.shape != (ground.size, ground.size):
        return
    for form in _forms(trial):
        for i in range(ground.size):
            for j in range(ground.size):
                clear, unit = _cleared(own, i, j), _unit(own, i, j)
                found = _entry(
                    ground.matrix @ clear - clear @ form, ground.matrix @ unit - unit @ form
                )
                if found is not None:
                    yield from _entry_candidate(trial, i, j, found)


def _forms(trial: Trial) -> Iterator[ExactMatrix]:
    """Yield the J that belongs to P: the author's, else any order of the eigenvalues."""
    setting, ground = trial.setting, trial.ground
    stated = authors_matrix("J", setting, ground) or authors_diagonal(setting, ground)
    if stated is not None and stated.shape == (ground.size, ground.size):
        yield stated
        return
    form = ground.jordan
    if form is None:
        return
    entries = [form.rows[k][k] for k in range(ground.size)]
    if any(not form.rows[k][k + 1].is_zero for k in range(ground.size - 1)):
        yield form
        return
    for count, order in enumerate(permutations(entries)):
        if count >= MOST_ORDERS:
            return
        yield diagonal(ground.field, order)


def _entry(rest: ExactMatrix, slope: ExactMatrix) -> Element | None:
    """Return x with rest + x slope = 0, None if there is none."""
    found: Element | None = None
    for one, two in zip(rest.entries, slope.entries, strict=True):
        if two.is_zero:
            if not one.is_zero:
                return None
            continue
        value = -one / two
        if found is not None and not (found - value).is_zero:
            return None
        found = value
    return found


def _entry_candidate(trial: Trial, i: int, j: int, value: Element) -> Iterator[Candidate]:
    for spot in trial.spots():
        if not isinstance(spot.node, Array):
            continue
        rows = spot.node.rows
        place = (i, j)
        if len(rows) == 1 < trial.ground.size:
            place = (j, i)
        if place[0] >= len(rows) or place[1] >= len(rows[0]):
            continue
        old, new = rows[place[0]][place[1]], written_back(value)
        name = names.SIGN_ENTRY if negated(old) == new else names.ENTRY
        where = f"entry {i + 1, j + 1}: {plain_written(old)} ought to be {plain_written(new)}"
        yield Candidate(name, where, trial.changed(spot, _with(rows, {place: new})))


def _cleared(matrix: ExactMatrix, i: int, j: int) -> ExactMatrix:
    zero = matrix.field.zero
    return ExactMatrix(
        matrix.field,
        tuple(
            tuple(zero if (r, c) == (i, j) else e for c, e in enumerate(row))
            for r, row in enumerate(matrix.rows)
        ),
    )


def _unit(matrix: ExactMatrix, i: int, j: int) -> ExactMatrix:
    field = matrix.field
    return ExactMatrix(
        field,
        tuple(
            tuple(field.one if (r, c) == (i, j) else field.zero for c in range(len(row)))
            for r, row in enumerate(matrix.rows)
        ),
    )
