"""Functions that follow from an earlier wrong one by an equation, a balance or a transform."""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import dataclass

from closedform.algebra.elementary import Element
from closedform.checking.claim import Claim
from closedform.checking.judging.derived import value_of_entry
from closedform.checking.judging.transforms import laplace
from closedform.checking.standing.author import Entry
from closedform.checking.standing.ground import SPECTRAL, Ground
from closedform.checking.standing.setting import Setting
from closedform.checking.values.matrices import ExactMatrix, identity
from closedform.notation.written.tree import Symbol, Written, walk

__all__ = ["by_equation", "by_limit", "by_transform", "with_wrong_column"]


@dataclass(frozen=True)
class Functions:
    """The states as the author has them, right or wrong; `roots` are the lines of wrong ones."""

    values: tuple[Element, ...]
    roots: Mapping[int, int]


def by_equation(claim: Claim, setting: Setting, ground: Ground) -> int | None:
    """Return the root of a solution that satisfies an equation of the model with earlier ones.

    That is one of x' = A x + B u in which a wrong function stands, or a balance w x = const
    with w A = 0.
    """
    value = setting.value(claim.values[-1], ground)
    states = ground.truth.states
    if claim.subject not in states or not isinstance(value, Element):
        return None
    if len(ground.stretches) != 1 or ground.initial is None:
        return None
    place = states.index(claim.subject)
    known = _functions(setting, ground, place, value)
    if known is None or not known.roots:
        return None
    start = ground.stretches[0].start
    drive = ground.drive(ground.stretches[0])
    for row, entries in enumerate(ground.matrix.rows):
        used = [root for k, root in known.roots.items() if not entries[k].is_zero or k == row]
        if not used or (entries[place].is_zero and row != place):
            continue
        rest = known.values[row].derivative() - (drive[row] if drive else ground.field.zero)
        for entry, function in zip(entries, known.values, strict=True):
            rest = rest - entry * function
        begins = row != place or value.at(start) == ground.initial.rows[place][0]
        if rest.is_zero and begins:
            return min(used)
    return None if drive else _by_balance(known, place, ground)


def _by_balance(known: Functions, place: int, ground: Ground) -> int | None:
    assert ground.initial is not None  # noqa: S101  asked for before
    for weights in ground.matrix.transposed.kernel():
        used = [root for k, root in known.roots.items() if not weights.rows[k][0].is_zero]
        if not used or weights.rows[place][0].is_zero:
            continue
        total = ground.field.zero
        for k, function in enumerate(known.values):
            total = total + weights.rows[k][0] * (function - ground.initial.rows[k][0])
        if total.is_zero:
            return min(used)
    return None


def _functions(setting: Setting, ground: Ground, place: int, value: Element) -> Functions | None:
    """Return the author's functions for all states, true ones for those not stated."""
    values: list[Element] = []
    roots: dict[int, int] = {}
    for k, state in enumerate(ground.truth.states):
        entry = setting.author.last("solution", state)
        own = _element(entry, setting, ground) if entry is not None else None
        if k == place:
            own = value
        elif own is not None and entry is not None and entry.root is not None:
            roots[k] = entry.root
        true = ground.function(state, ground.stretches[0])
        if own is None and true is None:
            return None
        values.append(own if own is not None else true or value)
    return Functions(tuple(values), roots)


def _element(entry: Entry, setting: Setting, ground: Ground) -> Element | None:
    value = value_of_entry(entry, setting, ground)
    return value if isinstance(value, Element) else None


def by_limit(claim: Claim, setting: Setting, ground: Ground) -> int | None:
    """Return the root of a solution that begins rightly and tends to a wrong steady state."""
    value = setting.value(claim.values[-1], ground)
    if not isinstance(value, Element) or claim.subject not in ground.truth.states:
        return None
    place, limit = ground.truth.states.index(claim.subject), value.limit()
    if limit is None or ground.initial is None:
        return None
    begins = value.at(ground.stretches[0].start) == ground.initial.rows[place][0]
    for entry in setting.author.all("steady state", claim.subject):
        if entry.root is not None and begins and _element(entry, setting, ground) == limit:
            return entry.root
    return None


def by_transform(claim: Claim, setting: Setting, ground: Ground) -> int | None:
    """Return the root of a solution, or a transform, that is that of an earlier wrong one."""
    if claim.says == "transform":
        own = _in_spectral(claim.values[-1], setting, ground)
    else:
        value = setting.value(claim.values[-1], ground)
        own = laplace(value) if isinstance(value, Element) else None
    if own is None:
        return None
    for entry in setting.author.all("transform", claim.subject):
        if entry.root is not None and _in_spectral(entry.value, setting, ground) == own:
            return entry.root
    if claim.says == "transform":
        for entry in setting.author.all("solution", claim.subject):
            function = _element(entry, setting, ground) if entry.root is not None else None
            if function is not None and laplace(function) == own:
                return entry.root
    return None


def _in_spectral(tree: Written, setting: Setting, ground: Ground) -> Element | None:
    opened = setting.opened(tree)
    names = {n.name for n in walk(opened) if isinstance(n, Symbol)} - ground.facts.names
    if len(names) != 1:
        return None
    value = setting.value(setting.renamed(opened, names), ground)
    return value if isinstance(value, Element) and SPECTRAL in value.free_names else None


def with_wrong_column(claim: Claim, setting: Setting, ground: Ground) -> int | None:
    """Return the root of a P that has a wrong vector of the author's among right ones."""
    value = setting.value(claim.values[-1], ground)
    if not isinstance(value, ExactMatrix) or value.shape != ground.matrix.shape:
        return None
    wrong = [
        (vector if vector.shape[1] == 1 else vector.transposed, entry.root)
        for says in ("eigenvector", "generalized eigenvector")
        for entry in setting.author.all(says)
        if entry.root is not None
        and isinstance(vector := setting.value(entry.value, ground), ExactMatrix)
    ]
    roots: list[int] = []
    for column in value.columns if wrong else ():
        found = [root for vector, root in wrong if vector == column]
        if not found and not _in_some_chain(column, ground):
            return None
        roots += found
    return min(roots, default=None)


def _in_some_chain(vector: ExactMatrix, ground: Ground) -> bool:
    """Whether some power of A - lambda I sends a vector to zero."""
    unit = identity(ground.field, ground.size)
    return any(
        ((ground.matrix - unit.scaled(value)).power(ground.size) @ vector).is_zero
        for value in ground.eigenvalues
    )
