"""Formulas with open names in them: what these have to be for something to vanish."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass

from closedform.algebra.elementary import Element
from closedform.checking.standing.ground import SPECTRAL, Ground
from closedform.checking.values.matrices import ExactMatrix
from closedform.checking.values.scope import Value

__all__ = ["Fit", "fit", "rank_of"]


@dataclass(frozen=True, slots=True)
class Fit:
    """Values of open names, in their order; `unique` says that no others will do."""

    values: tuple[Element, ...]
    unique: bool


def fit(residual: Value, names: Sequence[str], ground: Ground, start: Element) -> Fit | None:
    """Return the values of names for which something linear in them is zero for all t and s.

    None if there are none.  The names are constants, but those in a matrix of functions may be
    functions of time: there each entry is an equation.  Otherwise the values and derivatives
    at an instant `start`, and the values at small s, are; the result is put in and proved.
    """
    equations = _equations(residual, names, ground, start)
    weights, rest = _parts(equations, names, ground)
    augmented = ExactMatrix(
        ground.field, tuple((*row, one) for row, one in zip(weights, rest, strict=True))
    )
    kernel = augmented.kernel()
    found = next((k.entries for k in kernel if not k.entries[-1].is_zero), None)
    if found is None:
        return None
    values = tuple(entry / found[-1] for entry in found[:-1])
    put = dict(zip(names, values, strict=True))
    if not all(entry.substituted(put).is_zero for entry in _entries(residual)):
        return None
    return Fit(values, len(kernel) == 1)


def rank_of(value: Value, names: Sequence[str], ground: Ground, start: Element) -> int:
    """Return of how many of its constants a function really depends."""
    equations = _equations(value, names, ground, start)
    return ExactMatrix(ground.field, tuple(_parts(equations, names, ground)[0])).rank()


def _parts(
    equations: Sequence[Element], names: Sequence[str], ground: Ground
) -> tuple[list[tuple[Element, ...]], list[Element]]:
    """Return the coefficients of the names in expressions, and what is left without them."""
    field = ground.field
    none = dict.fromkeys(names, field.zero)
    rest = [equation.substituted(none) for equation in equations]
    weights = [
        tuple(equation.substituted({**none, name: field.one}) - one for name in names)
        for equation, one in zip(equations, rest, strict=True)
    ]
    return weights, rest


def _equations(
    residual: Value, names: Sequence[str], ground: Ground, start: Element
) -> list[Element]:
    entries = _entries(residual)
    if isinstance(residual, ExactMatrix) and residual.shape[1] > 1:
        return list(entries)
    found: list[Element] = []
    for entry in entries:
        derivative = entry
        for _ in range(max(len(names), ground.size) + 1):
            found += _at_small_s(derivative.at(start), len(names), ground)
            derivative = derivative.derivative()
            if derivative.is_zero:
                break
    return found


def _at_small_s(value: Element, count: int, ground: Ground) -> list[Element]:
    """Return a function of the spectral variable at count + 2 places that are no poles."""
    found: list[Element] = []
    for place in range(1, 4 * count + 8):
        try:
            found.append(value.substituted({SPECTRAL: ground.field.number(place)}))
        except ZeroDivisionError:
            continue
        if (found[-1] - value).is_zero or len(found) == count + 2:
            break
    return found


def _entries(value: Value) -> tuple[Element, ...]:
    return value.entries if isinstance(value, ExactMatrix) else (value,)
