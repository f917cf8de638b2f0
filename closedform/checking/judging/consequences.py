"""What follows from the author's own earlier lines: so that one slip is reported once."""

from __future__ import annotations

from collections.abc import Callable, Iterator

from closedform.algebra.elementary import Element
from closedform.checking.claim import Claim
from closedform.checking.errors import UNDECIDED
from closedform.checking.judging.by_definitions import (
    by_definitions,
    by_functions,
    roots_of_polynomial,
    vector_of_eigenvalue,
)
from closedform.checking.judging.by_matrices import (
    block_exponentials,
    canonical_forms,
    inverses,
    polynomials,
    transformations,
    transitions,
)
from closedform.checking.judging.by_solutions import solutions, steady_values, values_at
from closedform.checking.judging.compare import compare
from closedform.checking.judging.derived import Derived
from closedform.checking.judging.following import (
    by_equation,
    by_limit,
    by_transform,
    with_wrong_column,
)
from closedform.checking.standing.ground import Ground
from closedform.checking.standing.setting import Setting
from closedform.checking.values.scope import Value

__all__ = ["carried_from"]

Rule = Callable[[Claim, Setting, Ground], int | None]
MOST = 24
"""So many ways of working a line out from earlier ones are tried."""


def carried_from(claim: Claim, setting: Setting) -> int | None:
    """Return the number of the wrong line from which a failing line follows, or None.

    The line has to be what the author's earlier lines give, one of them wrong.
    """
    if not claim.values or all(entry.root is None for entry in setting.author.entries):
        return None
    opened = setting.opened(claim.values[-1])
    ground = setting.ground_for(opened)
    if claim.at is not None and len(ground.stretches) > 1:
        ground = _at_instant(claim, setting, ground)
    scope = setting.scope_of(ground)
    tried = 0
    for derived in _rooted(claim, setting, ground):
        tried += 1
        if tried > MOST:
            break
        try:
            found = compare(opened, derived.value, scope, ground, approximate=claim.approximate)
        except UNDECIDED:
            continue
        if found.passes:
            return derived.root
    return _special(claim, setting, ground)


def _at_instant(claim: Claim, setting: Setting, ground: Ground) -> Ground:
    """Return the ground on the interval in which the instant of a value lies."""
    assert claim.at is not None  # noqa: S101  asked for before
    at = setting.value(claim.at, ground)
    for stretch in reversed(ground.stretches):
        if isinstance(at, Element) and (at - stretch.start).sign() in (0, 1):
            return ground.within(stretch)
    return ground


def _rooted(claim: Claim, setting: Setting, ground: Ground) -> Iterator[Derived[Value]]:
    """Yield the values for a claim that rest on a wrong line; what cannot be worked out, not."""
    ways = {
        "exp A": transitions,
        "exp J": block_exponentials,
        "P inverse": inverses,
        "P": transformations,
        "J": canonical_forms,
    }
    found: Iterator[Derived[Value]]
    if claim.says in ways:
        found = ways[claim.says](setting, ground)
    elif claim.says in ("solution", "output"):
        found = solutions(claim.subject, setting, ground)
    elif claim.says in ("value", "initial value") and claim.at is not None:
        found = values_at(claim, setting, ground)
    elif claim.says == "steady state":
        found = steady_values(claim, setting, ground)
    elif claim.says == "characteristic polynomial":
        found = polynomials(setting, ground)
    else:
        found = iter(())
    while True:
        try:
            derived = next(found)
        except StopIteration:
            return
        except UNDECIDED:
            return
        if derived.root is not None:
            yield derived


def _special(claim: Claim, setting: Setting, ground: Ground) -> int | None:
    """Return the root for claims that are judged by a property, not by one value."""
    try:
        match claim.says:
            case "eigenvalues":
                return roots_of_polynomial(claim, setting, ground)
            case "eigenvector" | "generalized eigenvector":
                return vector_of_eigenvalue(claim, setting, ground)
            case "P":
                return with_wrong_column(claim, setting, ground)
            case "transform":
                return by_transform(claim, setting, ground)
            case "solution":
                for rule in (by_transform, by_equation, by_limit):
                    root = _tried(rule, claim, setting, ground)
                    if root is not None:
                        return root
        return by_functions(claim, setting, ground) or by_definitions(claim, setting, ground)
    except UNDECIDED:
        return None


def _tried(rule: Rule, claim: Claim, setting: Setting, ground: Ground) -> int | None:
    try:
        return rule(claim, setting, ground)
    except UNDECIDED:
        return None
