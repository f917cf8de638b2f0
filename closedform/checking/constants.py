"""Constants of integration: which they are, and what they have to be."""

from __future__ import annotations

from collections.abc import Iterator
from dataclasses import replace

from closedform.algebra.elementary import Element
from closedform.checking.author import Author, Entry
from closedform.checking.exact import Value, exact
from closedform.checking.ground import Ground
from closedform.checking.judge_functions import constants_of, solution_value
from closedform.checking.matrices import ExactMatrix, column
from closedform.checking.setting import Setting

__all__ = ["constant_values", "is_constant_of_integration"]


def is_constant_of_integration(name: str, setting: Setting) -> bool:
    """Whether an earlier general solution of the author's has a constant of this name."""
    return any(name in names for _, names in _general(setting))


def constant_values(name: str, setting: Setting, ground: Ground) -> list[Value]:
    """Return what a constant has to be, for each general solution in which it stands.

    The general solution and its derivatives have to have at the start the values that the
    true solution has: linear equations for the constants.
    """
    found: list[Value] = []
    for entry, names in _general(setting):
        if name in names:
            solved = _solved(entry, names, setting, ground)
            if solved is not None:
                found.append(solved[names.index(name)])
    return found


def _general(setting: Setting) -> Iterator[tuple[Entry, list[str]]]:
    """Yield the author's general solutions with their constants, the latest first.

    Which constants are open in one is asked as if none had a value yet.
    """
    fresh = replace(setting, author=Author(kept=setting.author.kept))
    for entry in reversed(setting.author.entries):
        if entry.says in ("solution", "output") and entry.root is None:
            names = constants_of(entry.claim, fresh)
            if names:
                yield entry, names


def _solved(
    entry: Entry, names: list[str], setting: Setting, ground: Ground
) -> list[Element] | None:
    stretch = ground.stretches[0]
    scope = setting.scope_of(ground).with_symbols({n: ground.field.name(n) for n in names})
    value = exact(entry.value, scope)
    true = solution_value(entry.claim.subject, ground, stretch)
    rows: list[list[Element]] = []
    for mine, theirs in zip(_entries(value), _entries(true), strict=True):
        one, other = mine, theirs
        for _ in range(len(names)):
            rows.append([(one - other).at(stretch.start)])
            one, other = one.derivative(), other.derivative()
    zero = dict.fromkeys(names, ground.field.zero)
    equations, rest = [], []
    for (residual,) in rows:
        constant = residual.substituted(zero)
        weights = [
            residual.substituted({**zero, name: ground.field.one}) - constant for name in names
        ]
        equations.append(weights)
        rest.append(-constant)
    return _solution(ground, equations, rest)


def _solution(
    ground: Ground, equations: list[list[Element]], rest: list[Element]
) -> list[Element] | None:
    """Return the solution of linear equations, None if it is not unique."""
    matrix = ExactMatrix(ground.field, tuple(map(tuple, equations)))
    right = column(ground.field, rest)
    normal = matrix.transposed @ matrix
    if normal.rank() < len(equations[0]):
        return None
    found = normal.inverse() @ matrix.transposed @ right
    if not (matrix @ found - right).is_zero:
        return None
    return list(found.entries)


def _entries(value: Value) -> tuple[Element, ...]:
    return value.entries if isinstance(value, ExactMatrix) else (value,)
