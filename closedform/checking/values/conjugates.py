"""Conjugates of eigenvalues, as people write them: with a bar above the letter, or a star."""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import replace

from closedform.notation.written.tree import Apply, Statement, Symbol, Written, changed

__all__ = ["with_conjugates", "with_names"]

LETTERS = ("lambda", "s", "r", "mu")


def with_conjugates(statement: Statement) -> Statement:
    """Return a chain such as lambda_2 = bar lambda_1 = -1 - 2 i with the conjugate of lambda_1.

    The first member stays a name.
    """
    first, *rest = statement.members
    return replace(statement, members=(first, *(changed(member, _conjugate) for member in rest)))


def _conjugate(node: Written) -> Written | None:
    if not isinstance(node, Symbol):
        return None
    for letter in LETTERS:
        if node.name == f"{letter}bar" or node.name.startswith(f"{letter}bar_"):
            return Apply("conj", (Symbol(letter + node.name.removeprefix(f"{letter}bar")),))
        if node.name.startswith(letter) and node.name.endswith("_star"):
            return Apply("conj", (Symbol(node.name.removesuffix("_star")),))
    return None


def with_names(known: Mapping[Symbol, Written], member: Written) -> Written:
    """Return a member with the values of names that earlier chains of its line give."""
    return changed(member, lambda node: known.get(node) if isinstance(node, Symbol) else None)
