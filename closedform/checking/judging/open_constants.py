"""Constants of integration that nothing defines, and members that hold for some values of them."""

from __future__ import annotations

from collections.abc import Callable, Iterator, Sequence

from closedform.algebra.elementary import Element
from closedform.checking.claim import Claim
from closedform.checking.errors import NotJudgedError
from closedform.checking.judging.ansatz import Fit, fit
from closedform.checking.standing.ground import SPECTRAL, Ground
from closedform.checking.standing.setting import Finding, Setting
from closedform.checking.values.exact import exact
from closedform.checking.values.matrices import ExactMatrix
from closedform.checking.values.scope import Value
from closedform.checking.values.written_back import written_back
from closedform.notation.written.plain_form import plain_written
from closedform.notation.written.tree import Array, Power, Symbol, Written, walk

__all__ = [
    "CONSTANTS",
    "TRANSFORM_NAMES",
    "ansatz_note",
    "constants_of",
    "has_names",
    "minus",
    "open_member",
]


def constants_of(claim: Claim, setting: Setting) -> list[str]:
    """Return the names of constants of integration: those that nothing gives a meaning."""
    facts = setting.ground.facts
    opened = [setting.opened(value) for value in claim.values]
    names = {n.name for tree in opened for n in walk(tree) if isinstance(n, Symbol)}
    single = claim.says not in OF_MATRICES and not any(
        isinstance(n, Array) for tree in opened for n in walk(tree)
    )
    raised = {n.name for tree in opened for n in _exponents(tree) if isinstance(n, Symbol)}
    unknown = names - facts.names - ((raised & {"A", "J"}) if single else {"A", "P", "J"})
    if claim.says == "transform":
        unknown -= {"s", "p", SPECTRAL}
    shaped = {name for name in unknown if name.rstrip("0123456789_") in CONSTANTS}
    return sorted(unknown) if unknown and unknown == shaped else []


def _exponents(tree: Written) -> Iterator[Written]:
    """Yield what stands in the exponents of e."""
    for node in walk(tree):
        if isinstance(node, Power):
            yield from walk(node.exponent)


CONSTANTS = frozenset({"c", "C", "k", "K", "a", "A", "B", "b", "alpha", "beta", "D", "E", "F"})
"""Letters that constants of integration go by (common practice)."""
OF_MATRICES = ("exp A", "resolvent")


def ansatz_note(constants: list[str], fitted: Fit) -> str:
    """Return words for the values of its constants with which an ansatz holds."""
    values = [
        f"{n} = {plain_written(written_back(v))}"
        for n, v in zip(constants, fitted.values, strict=True)
    ]
    return f"an ansatz, which holds for {', '.join(values)}"


def minus(one: Value, other: Value) -> Value:
    """Return the difference of two numbers or of two matrices."""
    match one, other:
        case Element(), Element():
            return one - other
        case ExactMatrix(), ExactMatrix():
            return one - other
    raise NotJudgedError("a function stands where a column is wanted, or the other way round")


def has_names(tree: Written, names: Sequence[str]) -> bool:
    """Whether one of some names stands in a formula."""
    return any(isinstance(node, Symbol) and node.name in names for node in walk(tree))


def open_member(
    claim: Claim,
    setting: Setting,
    constants: Sequence[str],
    true: Callable[[Ground], Value],
    prepare: Callable[[Written], Written],
) -> Finding:
    """Judge the members with open constants: some values of these have to make them true."""
    notes: tuple[str, ...] = ()
    for member in claim.values:
        opened = setting.opened(member)
        if not has_names(opened, constants):
            continue
        opened = prepare(opened)
        ground = setting.ground_for(opened)
        scope = setting.scope_of(ground)
        scope = scope.with_symbols({c: ground.field.name(c) for c in constants})
        difference = minus(exact(opened, scope), true(ground))
        fitted = fit(difference, constants, ground, ground.stretches[0].start)
        if fitted is None:
            reason = f"no {', '.join(constants)} make it true"
            return Finding("fails", reason, written_back(true(ground), TRANSFORM_NAMES))
        notes = (ansatz_note(list(constants), fitted),)
    return Finding("holds", notes=notes)


TRANSFORM_NAMES = {SPECTRAL: "s"}
