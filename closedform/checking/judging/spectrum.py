"""Judging what is said of the matrix, its characteristic polynomial and its eigenvalues."""

from __future__ import annotations

import re
from collections.abc import Sequence
from fractions import Fraction

from flint import acb, ctx

from closedform.algebra.elementary import Element, NotElementaryError
from closedform.checking.claim import Claim, Group
from closedform.checking.errors import NotJudgedError
from closedform.checking.judging.compare import Comparison, compare
from closedform.checking.judging.held import held_against
from closedform.checking.recognising.left_sides import base_and_indices
from closedform.checking.standing.author import Entry
from closedform.checking.standing.ground import SPECTRAL, Ground
from closedform.checking.standing.setting import Finding, Setting
from closedform.checking.values.exact import exact
from closedform.checking.values.matrices import ExactMatrix
from closedform.checking.values.scope import Scope
from closedform.checking.values.signs import both_signs
from closedform.checking.values.written_back import written_back
from closedform.notation.written.multiplicity import MULTIPLES
from closedform.notation.written.tree import Jet, Listing, Symbol, Written, walk

__all__ = [
    "judge_characteristic",
    "judge_eigenvalues",
    "judge_matrix",
    "polynomial_of",
    "roots_claimed",
]

MULTIPLICITY = re.compile(
    r"(?:multiplicity|mult\.?|order|Vielfachheit)\D{0,6}(\d+)|(\d+)\s*(?:-fold|fold|times|fach)",
    re.IGNORECASE,
)
WORDS = {**MULTIPLES, "two equal": 2}


def judge_matrix(claim: Claim, setting: Setting) -> Finding:
    """Judge a claim about the matrix A."""
    return held_against(
        claim,
        setting,
        lambda ground: ground.matrix,
        lambda ground: written_back(ground.matrix),
    )


def judge_characteristic(claim: Claim, setting: Setting) -> Finding:
    """Judge a characteristic polynomial, under whatever name its variable goes.

    With "= 0" it is an equation, and any factor that is not zero may stand in front; without,
    det(A - lambda I) may be meant, and another constant factor makes it right up to scale.
    """
    sign = claim.sign**setting.ground.size

    if not claim.values and claim.equation:
        return Finding("holds", "the equation of the eigenvalues")

    def true(ground: Ground) -> Element:
        value = ground.characteristic
        return value if sign == 1 else -value

    def right(ground: Ground) -> Written:
        variable = next(iter(_variables(claim.values, setting)), "lambda")
        return written_back(true(ground), {SPECTRAL: variable})

    finding = held_against(
        claim, setting, true, right, prepare=lambda member: _in_spectral(member, setting)
    )
    if finding.passes or not finding.pairs or claim.names:
        return finding
    return _up_to_factor(claim, setting, finding)


def _in_spectral(member: Written, setting: Setting) -> Written:
    """Return a polynomial with the spectral variable in the place of the author's."""
    names = _variables((member,), setting)
    if len(names) > 1:
        raise NotJudgedError(f"it is not told which of {', '.join(names)} is the variable")
    return setting.renamed(member, names)


def polynomial_of(entry: Entry, setting: Setting, ground: Ground) -> Element | None:
    """Return the characteristic polynomial that an author stated, in the spectral variable."""
    member = _in_spectral(setting.opened(entry.value), setting)
    value = exact(member, setting.scope_of(ground))
    return value if isinstance(value, Element) else None


def _up_to_factor(claim: Claim, setting: Setting, finding: Finding) -> Finding:
    """Allow a constant in front: an equation is the same, a polynomial right up to scale."""
    ((member, _),) = finding.pairs
    ground = setting.ground_for(member)
    try:
        value = exact(member, setting.scope_of(ground))
    except (NotJudgedError, NotElementaryError):
        return finding
    if isinstance(value, ExactMatrix) or value.is_zero:
        return finding
    ratio = value / ground.characteristic
    if SPECTRAL in ratio.free_names or not ratio.is_constant:
        return finding
    if claim.equation:
        return Finding("holds")
    if ratio == ground.field.number(Fraction(-1)):
        return Finding("holds", notes=("it is det(A - lambda I)",))
    return Finding("holds up to scale", "a constant factor stands in front")


def _variables(trees: Sequence[Written], setting: Setting) -> list[str]:
    """Return the names in a polynomial that the model and the author do not explain."""
    known = setting.ground.facts.names | set(setting.author.definitions) | {"A"}
    found = {n.name for tree in trees for n in walk(tree) if isinstance(n, Symbol | Jet)}
    return sorted(found - known)


def roots_claimed(claim: Claim) -> list[tuple[tuple[Written, ...], int | None]]:
    """Return the eigenvalues that a line lists: the forms of each, and how often it counts.

    Several forms are the members of a chain.  The count is None where nothing tells it.
    """
    found: list[tuple[tuple[Written, ...], int | None]] = []
    for group in claim.groups:
        expanded = [_expanded(value) for value in group.values]
        width = max(map(len, expanded), default=0)
        expanded = [forms for forms in expanded if len(forms) == width]
        count = _multiplicity(group, width)
        found += [(forms, count) for forms in zip(*expanded, strict=True)]
    return found


def _expanded(value: Written) -> list[Written]:
    if isinstance(value, Listing):
        return [one for item in value.items for one in _expanded(item)]
    return list(both_signs(value))


def _multiplicity(group: Group, width: int) -> int | None:
    told = MULTIPLICITY.search(group.note)
    if told:
        return int(told[1] or told[2])
    for word, count in WORDS.items():
        if word in group.note.lower():
            return count
    if len(group.names) > 1:
        return len(group.names)
    if len(group.names) == 1 and isinstance(group.names[0], Symbol):
        indices = base_and_indices(group.names[0].name)[1].split("_")
        if len(indices) > 1 and all(index.isdigit() for index in indices) and width == 1:
            return len(indices)
    return None


def judge_eigenvalues(claim: Claim, setting: Setting) -> Finding:
    """Judge a list of eigenvalues, in any order.

    Every one has to be an eigenvalue, none may be counted more often than it occurs, and
    where as many are listed as there are states, each has to occur as often as it does.
    """
    listed = roots_claimed(claim)
    if not listed:
        raise NotJudgedError("no eigenvalue is listed")
    ground = setting.ground_for(*(setting.opened(f) for forms, _ in listed for f in forms))
    truth = ground.truth
    counts = [0] * len(truth.eigenvalues)
    digits: list[str] = []
    for forms, count in listed:
        at, found = _matched(forms, claim, setting)
        if found is None or not found.passes:
            reason = found.reason if found is not None else ""
            return Finding("fails", reason or "one that is listed is no eigenvalue", _right(ground))
        counts[at] += count or 1
        if found.how == "digits":
            digits.append(found.reason)
    stated = sum(counts)
    true_counts = [root.algebraic for root in truth.eigenvalues]
    if any(c > most for c, most in zip(counts, true_counts, strict=True)):
        return Finding("fails", "one is counted more often than it occurs", _right(ground))
    if stated == ground.size or all(counts) or len(claim.groups) == 1 == stated:
        notes: tuple[str, ...] = ()
        if counts != true_counts and all(counts):
            if any(count is not None for _, count in listed):
                return Finding("fails", "the multiplicities are not right", _right(ground))
            notes = ("multiplicities are not stated",)
        elif counts != true_counts:
            notes = (f"{stated} of {ground.size} are listed",)
    else:
        notes = (f"{stated} of {ground.size} are listed",)
    if digits:
        return Finding("holds to the digits shown", "; ".join(filter(None, digits)), notes=notes)
    return Finding("holds", notes=notes)


def _matched(
    forms: tuple[Written, ...], claim: Claim, setting: Setting
) -> tuple[int, Comparison | None]:
    """Return which eigenvalue all forms stand for, and how well they do."""
    opened = [setting.opened(form) for form in forms]
    own = [setting.ground_for(form) for form in opened]
    about = [_is_approximate(form, claim) for form in forms]
    best: tuple[int, Comparison | None] = (0, None)
    for at in _nearest_first(opened[0], setting.scope_of(own[0]), own[0]):
        found = [
            compare(form, g.eigenvalues[at], setting.scope_of(g), g, approximate=rounded)
            for form, g, rounded in zip(opened, own, about, strict=True)
        ]
        worst = max(found, key=lambda f: ("equal", "digits", "rounding", "different").index(f.how))
        if worst.passes:
            return at, worst
        if best[1] is None:
            best = at, worst
    return best


def _is_approximate(form: Written, claim: Claim) -> bool:
    """Whether a sign like ≈ stands before the member that lists an eigenvalue."""
    for statement in claim.statements:
        for place, member in enumerate(statement.members):
            if form in _expanded(member):
                return "≈" in statement.relations[:place]
    return claim.approximate


def _nearest_first(tree: Written, scope: Scope, ground: Ground) -> list[int]:
    """Return the places of the eigenvalues, the one nearest to a formula first."""
    with ctx.workprec(64):
        values = ground.sampled()
        try:
            element = exact(tree, scope)
        except (ArithmeticError, NotJudgedError, NotElementaryError):
            return list(range(len(ground.eigenvalues)))
        if isinstance(element, ExactMatrix):
            raise NotJudgedError("a matrix stands where an eigenvalue is wanted")
        point = element.enclosure(acb(0), values)
        distances = []
        for k in range(len(ground.eigenvalues)):
            other = ground.eigenvalues[k].enclosure(acb(0), values)
            distances.append((float(abs(point - other).mid()), k))
    return [k for _, k in sorted(distances)]


def _right(ground: Ground) -> Written | None:
    values = [
        root.value
        for root in ground.truth.eigenvalues
        for _ in range(root.algebraic)
        if root.value is not None
    ]
    return Listing(tuple(values)) if len(values) == ground.size else None
