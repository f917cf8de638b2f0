"""Open constants of an author's formulas: which they are, and what they have to be."""

from __future__ import annotations

from collections.abc import Iterator
from dataclasses import replace

from closedform.algebra.elementary import Element
from closedform.checking.claim import Claim
from closedform.checking.errors import UNDECIDED, NotJudgedError
from closedform.checking.judging.ansatz import fit
from closedform.checking.judging.compare import compare
from closedform.checking.judging.free_solutions import free_residual
from closedform.checking.judging.open_constants import CONSTANTS, constants_of
from closedform.checking.judging.transforms import laplace
from closedform.checking.judging.true_solutions import solution_value
from closedform.checking.standing.author import Author, Entry
from closedform.checking.standing.ground import Ground
from closedform.checking.standing.setting import Setting
from closedform.checking.values.exact import exact
from closedform.checking.values.matrices import ExactMatrix
from closedform.checking.values.scope import Value
from closedform.checking.values.written_back import written_back
from closedform.notation.written.tree import Written

__all__ = [
    "constant_values",
    "constants_put_in",
    "is_constant_of_integration",
    "opens",
    "rests_on_constants",
]

OPEN = ("solution", "output", "particular solution", "transform", "exp A")
"""Claims whose open constants the truth determines."""


def is_constant_of_integration(name: str, setting: Setting) -> bool:
    """Whether an earlier line of the author's has an open constant of this name."""
    shaped = name.rstrip("0123456789_") in CONSTANTS  # saves looking through all lines
    return shaped and any(name in names for _, names in _general(setting))


def opens(claim: Claim, setting: Setting) -> bool:
    """Whether a claim is itself a formula with open constants, which it may use anew."""
    return claim.says in OPEN and bool(constants_of(claim, setting))


def constant_values(name: str, setting: Setting, ground: Ground) -> list[Value]:
    """Return what a constant has to be, for each line in which it is open."""
    found: list[Value] = []
    for entry, names in _general(setting):
        if name in names:
            solved = _solved(entry, names, setting, ground)
            if solved is not None:
                found.append(solved[names.index(name)])
    return found


def constants_put_in(setting: Setting) -> Setting:
    """Return the setting with values for the open constants that earlier lines determine."""
    found: dict[str, Written] = {}
    for entry, names in _general(setting):
        solved = _solved(entry, names, setting, setting.ground)
        for name, value in zip(names, solved or (), strict=False):
            found.setdefault(name, written_back(value))
    author = setting.author
    return replace(setting, author=replace(author, definitions={**found, **author.definitions}))


def rests_on_constants(claim: Claim, setting: Setting) -> int | None:
    """Return the wrong line on which a solution rests, with the author's constants put in.

    The author's general solution, with the values stated for its constants, and the right ones
    where none is stated, has to be what the claim says.
    """
    author, ground = setting.author, setting.ground
    for entry, names in _general(setting, wrong=True):
        roots = [author.definition_roots[n] for n in names if n in author.definition_roots]
        roots += [entry.root] if entry.root is not None else []
        if not roots or entry.claim.subject != claim.subject:
            continue
        put = setting if entry.root is not None else constants_put_in(setting)
        try:
            if _says_the_same(claim, entry, setting, put, ground):
                return min(roots)
        except UNDECIDED:
            continue
    return None


def _says_the_same(
    claim: Claim, entry: Entry, setting: Setting, put: Setting, ground: Ground
) -> bool:
    """Whether a claim is what an earlier line gives, of the same function or its transform."""
    scope = setting.scope_of(ground)
    own, other = setting.opened(claim.values[-1]), put.opened(entry.value)
    if entry.says == claim.says != "transform":
        return compare(own, exact(other, scope), scope, ground).passes
    variables = ("s", "p")
    transformed = exact(setting.renamed(other, variables), scope)
    if entry.says == claim.says:
        return compare(setting.renamed(own, variables), transformed, scope, ground).passes
    if entry.says == "transform" and claim.says in ("solution", "output"):
        value = exact(own, scope)
        if isinstance(value, Element) and isinstance(transformed, Element):
            return (laplace(value) - transformed).is_zero
    return False


def _general(setting: Setting, *, wrong: bool = False) -> Iterator[tuple[Entry, list[str]]]:
    """Yield the author's lines with open constants, and these, the latest first.

    Which constants are open in one is asked as if none had a value yet.
    """
    fresh = replace(setting, author=Author(kept=setting.author.kept, time=setting.author.time))
    for entry in reversed(setting.author.entries):
        if entry.says in OPEN and entry.values and (wrong or entry.root is None):
            names = constants_of(entry.claim, fresh)
            if names:
                yield entry, names


def _solved(
    entry: Entry, names: list[str], setting: Setting, ground: Ground
) -> tuple[Element, ...] | None:
    """Return the only values of open constants with which a line holds, None without such."""
    try:
        residual = _residual(entry, names, setting, ground)
        found = fit(residual, names, ground, ground.stretches[0].start)
    except UNDECIDED:
        return None
    return found.values if found is not None and found.unique else None


def _residual(entry: Entry, names: list[str], setting: Setting, ground: Ground) -> Value:
    """Return what has to vanish for all t, or all s, with the right constants."""
    scope = setting.scope_of(ground).with_symbols({n: ground.field.name(n) for n in names})
    if entry.says == "transform":
        value = exact(setting.renamed(entry.value, ("s", "p")), scope)
        true: Value = solution_value(entry.claim.subject, ground, ground.stretches[0])
        true = true.mapped(laplace) if isinstance(true, ExactMatrix) else laplace(true)
    else:
        value = exact(entry.value, scope)
        if entry.says == "exp A":
            true = ground.transition
        else:
            true = solution_value(entry.claim.subject, ground, ground.stretches[0])
    if isinstance(value, ExactMatrix) and isinstance(true, ExactMatrix):
        difference: Value = value - true
    elif isinstance(value, Element) and isinstance(true, Element):
        difference = value - true
    else:
        raise NotJudgedError("a function stands where a column is wanted")
    return free_residual(difference, ground) if entry.says == "particular solution" else difference
