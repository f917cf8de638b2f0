"""The steps about a matrix A, retold of the stacked matrix: A with a hat, and x with a hat."""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import replace
from typing import Any

from closedform.derivation.step import Statement, Step, Symbol

__all__ = ["of_the_stacked"]

_OF_A = frozenset(
    {"matrix", "transition", "determinant", "shifted", "resolvent", "adjugate", "exponential"}
)


def of_the_stacked(step: Step) -> Step:
    """Return the step with the letters A and x in hats, wherever they stand."""
    statements = tuple(_retold(statement) for statement in step.statements)
    facts: Mapping[str, object] = {key: _retold(item) for key, item in step.facts.items()}
    return replace(step, statements=statements, facts=facts)


def _retold(item: Any) -> Any:
    if isinstance(item, Statement):
        return replace(item, sides=tuple(map(_retold, item.sides)))
    if isinstance(item, Symbol):
        return _hatted(item)
    if isinstance(item, Mapping):
        return {key: _retold(value) for key, value in item.items()}
    if isinstance(item, tuple):
        return tuple(map(_retold, item))
    if isinstance(item, list):
        return list(map(_retold, item))
    return item


def _hatted(symbol: Symbol) -> Symbol:
    symbol = replace(symbol, parts=tuple(map(_retold, symbol.parts)))
    if symbol.kind in _OF_A and symbol.letter in ("A", "") and _means_a(symbol):
        return replace(symbol, letter="A_hat")
    if symbol.kind == "matrix" and symbol.letter == "R" and symbol.indices:
        return replace(symbol, letter="Q")  # R without indices reads the inputs from w
    if symbol.kind in ("vector", "derivative") and symbol.letter in ("x", ""):
        return replace(symbol, letter="x_hat")
    return symbol


def _means_a(symbol: Symbol) -> bool:
    """A symbol without a letter has that of its kind: J for an exponential, A for the others."""
    return symbol.letter == "A" or symbol.kind != "exponential"
